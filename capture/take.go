package capture

import (
	"errors"
	"fmt"
	"io"
	"io/fs"
	"os"
	"slices"
)

// A Take is an open WAV file. Close it after use.
type Take struct {
	source
	format    waveFormat
	dataAt    int64
	frames    int64
	decode    decodeFunc
	facts     Facts
	hash      fileHash
	closeFile func() error
}

// Facts is what a file says of itself.
type Facts struct {
	Name     string // as opened
	RateHz   int    // 8000 to 384000
	Channels int    // 1 to 64
	Bits     int    // that count in each sample; the container may be wider
	Encoding string // "integer" or "float"
	Frames   int64  // at least 1; part of a frame at the end is dropped
	Bytes    int64  // of the whole file
	Seconds  float64
	Comments []string  // each text of LIST INFO and the bext description, in the file's order
	Problems []Problem // what is wrong with the file though it can be read
}

// A Problem is something wrong with a take that does not keep it from being read.
type Problem struct {
	Problem string  // NotClosed or CutShort
	AtSec   float64 // where it shows, from the start of the take
	Text    string  // what was seen, and what to do
}

// The problems that a file itself can show.
const (
	NotClosed = "not-closed" // the recorder never wrote the length: all up to the end of the file is taken
	CutShort  = "cut-short"  // the file ends before the length that its header tells
)

// Open opens the WAV file at path. What is there but is no WAV that can be read, a folder and an
// empty file included, gives a *[FormatError]; a file that cannot be opened gives the system's error
// (errors.Is finds [fs.ErrNotExist]). Only regular files are opened.
func Open(path string) (*Take, error) {
	info, err := os.Stat(path)
	if err != nil {
		return nil, plainPathError(path, err)
	}
	if info.IsDir() {
		return nil, &FormatError{path, -1, "this is a folder, not a WAV file", "name a WAV file in it"}
	}
	if !info.Mode().IsRegular() {
		return nil, &FormatError{path, -1, "this is no regular file", "save the take as a file first"}
	}
	f, err := os.Open(path)
	if err != nil {
		return nil, plainPathError(path, err)
	}
	if info, err = f.Stat(); err != nil {
		f.Close()
		return nil, plainPathError(path, err)
	}
	t, err := NewTake(path, f, info.Size())
	if err != nil {
		f.Close()
		return nil, err
	}
	t.closeFile = f.Close
	return t, nil
}

// plainPathError leaves the system call's name out of err.
func plainPathError(path string, err error) error {
	if pe := (*fs.PathError)(nil); errors.As(err, &pe) {
		err = pe.Err
	}
	return fmt.Errorf("%s: %w", path, err)
}

// NewTake opens a WAV file that r holds in sizeBytes bytes; name is for messages. Close does not
// close r.
func NewTake(name string, r io.ReaderAt, sizeBytes int64) (*Take, error) {
	t := &Take{source: source{name, r, sizeBytes}}
	head := make([]byte, max(0, min(headBytes, sizeBytes)))
	if err := t.fill(head, 0); err != nil {
		return nil, err
	}
	if err := t.checkHead(head); err != nil {
		return nil, err
	}
	l, err := readLayout(&t.source)
	if err != nil {
		return nil, err
	}
	t.format, t.dataAt = l.format, l.dataAt
	t.frames = l.dataBytes / int64(l.format.frameBytes)
	t.decode = decoder(l.format)
	t.hash.init(&t.source, l.dataAt)
	t.facts = factsOf(l, t.frames)
	return t, nil
}

func factsOf(l *layout, frames int64) Facts {
	f := Facts{
		Name: l.name, RateHz: l.format.rateHz, Channels: l.format.channels, Bits: l.format.bits,
		Encoding: "integer", Frames: frames, Bytes: l.sizeBytes,
		Seconds:  float64(frames) / float64(l.format.rateHz),
		Comments: l.texts,
	}
	if l.format.float {
		f.Encoding = "float"
	}
	if l.notClosed {
		f.Problems = append(f.Problems, Problem{NotClosed, f.Seconds, fmt.Sprintf(
			"the recorder never wrote the length; all %.2f s up to the end of the file are used; "+
				"check that the end is there, and stop the recorder before it is switched off", f.Seconds)})
	}
	if l.cutShort {
		promisedSec := float64(l.promised/int64(l.format.frameBytes)) / float64(l.format.rateHz)
		f.Problems = append(f.Problems, Problem{CutShort, f.Seconds, fmt.Sprintf(
			"the header tells of %.2f s, the file ends after %.2f s; %s", promisedSec, f.Seconds, hintAgain)})
	}
	return f
}

// Facts returns what the file says of itself; the slices in it are the caller's.
func (t *Take) Facts() Facts {
	f := t.facts
	f.Comments = slices.Clone(f.Comments)
	f.Problems = slices.Clone(f.Problems)
	return f
}

// Close closes the file. Channels of the take cannot be read any more.
func (t *Take) Close() error {
	if t.closeFile == nil {
		return nil
	}
	return t.closeFile()
}
