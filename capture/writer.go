package capture

import (
	"errors"
	"fmt"
	"io/fs"
	"os"
	"strings"
	"unicode"
	"unicode/utf8"
)

// A Format says how a take is written.
type Format struct {
	RateHz     int    // 8000 to 384000
	Channels   int    // 1 to 64
	Bits       int    // 8, 16, 24 or 32; with Float 32 or 64
	Float      bool   // floats instead of integers
	Extensible bool   // an extensible header instead of a plain one
	Comment    string // kept in the file as its LIST INFO comment; up to 4000 bytes of text
	Frames     int64  // how many frames will come; 0 where that is not known
}

// A Writer writes a take. What it writes lies beside the target under another name until Close, so
// that nobody ever sees half a file. It is for one goroutine.
type Writer struct {
	format   Format
	path     string
	file     *os.File // nil after Close and Abort
	room64   bool     // the header has room for 64-bit sizes
	headLen  int64    // bytes before the first sample
	riffMax  int64    // largest file with 32-bit sizes
	frames   int64
	encode   encodeFunc
	buf      []byte
	firstErr error
}

// riffMax stays under the sizes just below 4 GiB that some programs use as placeholders.
const riffMax = 1<<32 - 1<<14

// maxWrittenComment leaves what Open keeps of a comment some room.
const maxWrittenComment = 4000

// Create begins a take at path. A file already there stays until Close replaces it.
//
// A take that may pass 4 GiB gets room in its header to become RF64 (EBU Tech 3306) when it does.
// Format.Frames, where it is known and the take stays smaller, saves those 36 bytes.
func Create(path string, f Format) (*Writer, error) {
	if err := f.check(); err != nil {
		return nil, fmt.Errorf("%s: %w", path, err)
	}
	if info, err := os.Stat(path); err == nil && info.IsDir() {
		return nil, fmt.Errorf("%s: this is a folder", path)
	}
	w := &Writer{format: f, path: path, riffMax: riffMax, encode: encoder(f)}
	w.headLen = int64(len(f.header(0, true, false)))
	w.room64 = f.Frames == 0 || w.fileBytes(f.Frames) > w.riffMax
	head := f.header(0, w.room64, false)
	w.headLen = int64(len(head))
	w.buf = make([]byte, 0, readBytes)
	var err error
	if w.file, err = createBeside(path); err != nil {
		return nil, plainPathError(path, err)
	}
	if _, err := w.file.Write(head); err != nil {
		w.Abort()
		return nil, plainPathError(path, err)
	}
	return w, nil
}

func (f *Format) check() error {
	switch {
	case f.Channels < 1 || f.Channels > maxChannels:
		return fmt.Errorf("cannot write %d channels; 1 to %d can be", f.Channels, maxChannels)
	case f.RateHz < minRateHz || f.RateHz > maxRateHz:
		return fmt.Errorf("cannot write a sample rate of %d Hz; %d to %d Hz can be", f.RateHz, minRateHz, maxRateHz)
	case f.Float && f.Bits != 32 && f.Bits != 64:
		return fmt.Errorf("cannot write float samples of %d bits; 32 and 64 can be", f.Bits)
	case !f.Float && f.Bits != 8 && f.Bits != 16 && f.Bits != 24 && f.Bits != 32:
		return fmt.Errorf("cannot write integer samples of %d bits; 8, 16, 24 and 32 can be", f.Bits)
	case len(f.Comment) > maxWrittenComment:
		return fmt.Errorf("cannot write a comment of %d bytes; up to %d can be", len(f.Comment), maxWrittenComment)
	case !utf8.ValidString(f.Comment) || strings.ContainsFunc(f.Comment, isForbiddenInComment):
		return errors.New("cannot write a comment that is not plain text")
	case f.Frames < 0:
		return fmt.Errorf("cannot write %d frames", f.Frames)
	}
	return nil
}

func isForbiddenInComment(r rune) bool { return unicode.IsControl(r) && r != '\t' && r != '\n' }

// createBeside makes a new file next to path; remains of an earlier, killed run are left alone.
func createBeside(path string) (*os.File, error) {
	const tries = 1000
	var err error
	for i := range tries {
		var f *os.File
		f, err = os.OpenFile(fmt.Sprintf("%s.part%d", path, i), os.O_WRONLY|os.O_CREATE|os.O_EXCL, 0o666)
		if err == nil || !errors.Is(err, fs.ErrExist) {
			return f, err
		}
	}
	return nil, err
}

// fileBytes is the length of the whole file with so many frames.
func (w *Writer) fileBytes(frames int64) int64 {
	data := frames * int64(w.format.frameBytes())
	return w.headLen + data + data%2
}

// Write appends frames, the samples of each in channel order. Integer samples are rounded to the
// nearest code and clamped to [-1, 1); nothing is dithered. A NaN or an infinity among them is an
// error; into float samples they go as they are. After an error the take can only be aborted.
func (w *Writer) Write(frames []float64) error {
	if w.firstErr == nil {
		w.firstErr = w.write(frames)
	}
	return w.firstErr
}

func (w *Writer) write(frames []float64) error {
	channels := w.format.Channels
	if w.file == nil {
		return fmt.Errorf("%s: %w", w.path, fs.ErrClosed)
	}
	if len(frames)%channels != 0 {
		return fmt.Errorf("%s: %d samples make no whole frames of %d channels", w.path, len(frames), channels)
	}
	count := int64(len(frames) / channels)
	if !w.room64 && w.fileBytes(w.frames+count) > w.riffMax {
		return fmt.Errorf("%s: grows over 4 GiB, though only %d frames were announced", w.path, w.format.Frames)
	}
	most := readBytes / w.format.frameBytes() * channels
	for len(frames) > 0 {
		part := frames[:min(len(frames), most)]
		frames = frames[len(part):]
		b, err := w.encode(w.buf[:0], part)
		if err != nil {
			return fmt.Errorf("%s: near frame %d: %w", w.path, w.frames, err)
		}
		if _, err := w.file.Write(b); err != nil {
			return plainPathError(w.path, err)
		}
		w.frames += int64(len(part) / channels)
	}
	return nil
}

// Close completes the take and puts it in place. Where that fails, or nothing was written, or a Write
// failed, it returns the error and leaves nothing behind.
func (w *Writer) Close() error {
	if w.file == nil {
		return fmt.Errorf("%s: %w", w.path, fs.ErrClosed)
	}
	err := w.firstErr
	if err == nil && w.frames == 0 {
		err = fmt.Errorf("%s: no samples were written", w.path)
	}
	if err == nil {
		err = w.complete()
	}
	if err != nil {
		w.Abort()
		return err
	}
	part := w.file.Name()
	err = w.file.Close()
	w.file = nil
	if err == nil {
		err = os.Rename(part, w.path)
	}
	if err != nil {
		os.Remove(part)
		return plainPathError(w.path, err)
	}
	return nil
}

// complete writes the pad byte and the sizes.
func (w *Writer) complete() error {
	if data := w.frames * int64(w.format.frameBytes()); data%2 == 1 {
		if _, err := w.file.Write([]byte{0}); err != nil {
			return plainPathError(w.path, err)
		}
	}
	big := w.fileBytes(w.frames) > w.riffMax
	if _, err := w.file.WriteAt(w.format.header(w.frames, w.room64, big), 0); err != nil {
		return plainPathError(w.path, err)
	}
	if err := w.file.Sync(); err != nil {
		return plainPathError(w.path, err)
	}
	return nil
}

// Abort gives the take up and removes what was written. After Close it does nothing, so it may be
// deferred.
func (w *Writer) Abort() error {
	if w.file == nil {
		return nil
	}
	part := w.file.Name()
	w.file.Close()
	w.file = nil
	if err := os.Remove(part); err != nil {
		return plainPathError(part, err)
	}
	return nil
}
