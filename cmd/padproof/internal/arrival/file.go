package arrival

import (
	"bytes"
	"errors"
	"io"
	"io/fs"
	"time"

	"padproof/capture"
)

// A file is one take or sheet that is watched.
type file struct {
	role  string // of a take, or the name of the sheet
	sheet bool
	size  int64
	time  time.Time
	since time.Time // unchanged since, by our clock
	gone  bool
	err   error // why it could not be asked for

	looked bool // whether its end and its header were looked at, as they are now
	whole  bool // and what they showed
}

// refresh asks for size and time.
func (f *file) refresh(fsys FS, path string, now time.Time) {
	info, err := fsys.Stat(path)
	f.gone, f.err = errors.Is(err, fs.ErrNotExist), nil
	switch {
	case f.gone:
	case err != nil:
		f.err = err
	case f.since.IsZero() || info.Size() != f.size || !info.ModTime().Equal(f.time):
		f.size, f.time, f.since, f.looked = info.Size(), info.ModTime(), now, false
	}
}

// settled reports whether the file's writer is done.
func (f *file) settled(o *Options, path string, now time.Time) bool {
	quiet := now.Sub(f.since)
	switch {
	case f.err != nil || quiet < o.Settle:
		return false
	case f.sheet || quiet >= o.Patience:
		return true
	}
	if !f.looked {
		f.looked, f.whole = true, looksWhole(o.FS, path, f.size)
	}
	return f.whole
}

// looksWhole reports whether a WAV's header and its end are those of a file that
// is complete. One that cannot be opened may be held by its writer.
func looksWhole(fsys FS, path string, size int64) bool {
	in, err := fsys.Open(path)
	if err != nil {
		return false
	}
	defer func() { _ = in.Close() }()
	take, err := capture.NewTake(path, in, size)
	if err != nil {
		return false
	}
	defer func() { _ = take.Close() }()
	return len(take.Facts().Problems) == 0 && !endsInZeros(in, size)
}

// endsInZeros reports whether the last 4 KiB are all zero bytes: no recording of
// anything real ends so, its converter's noise is in the way.
func endsInZeros(in io.ReaderAt, size int64) bool {
	end := make([]byte, min(4096, size/2))
	if n, err := in.ReadAt(end, size-int64(len(end))); n < len(end) && err != nil {
		return true
	}
	return len(bytes.Trim(end, "\x00")) == 0
}
