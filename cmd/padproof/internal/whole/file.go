// Package whole writes files all or not at all: what is being written lies beside
// the target under another name until it is complete, so that nobody ever sees
// half a file, and a failed or interrupted write leaves what was there before.
//
//	err := whole.Write(ctx, "report.html", func(w io.Writer) error { ... })
package whole

import (
	"bufio"
	"context"
	"errors"
	"fmt"
	"io"
	"io/fs"
	"os"
)

// Write makes the file at path from what fill writes, in the place of a file that
// is there. Where fill fails, a write fails or ctx ends before all is written, it
// returns that error and leaves nothing behind.
func Write(ctx context.Context, path string, fill func(w io.Writer) error) error {
	part, err := beside(path)
	if err != nil {
		return atPath(path, err)
	}
	there := false
	defer func() {
		if !there { // fill may have panicked, too
			_ = os.Remove(part.Name())
		}
	}()
	if err = complete(ctx, part, fill); err == nil {
		err = os.Rename(part.Name(), path)
	}
	there = err == nil
	return atPath(path, err)
}

// complete fills and closes the file.
func complete(ctx context.Context, part *os.File, fill func(w io.Writer) error) error {
	defer part.Close() // once more does no harm
	out := bufio.NewWriter(until{ctx, part})
	err := fill(out)
	if err == nil {
		err = out.Flush()
	}
	if err == nil {
		err = part.Sync()
	}
	if closed := part.Close(); err == nil {
		err = closed
	}
	return err
}

// until writes as long as its context lasts.
type until struct {
	ctx context.Context
	w   io.Writer
}

func (u until) Write(b []byte) (int, error) {
	if err := u.ctx.Err(); err != nil {
		return 0, err
	}
	return u.w.Write(b)
}

// beside makes a new file next to path; remains of a killed run are left alone.
func beside(path string) (*os.File, error) {
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

// atPath names the file that was asked for in an error about the one beside it; nil
// stays nil.
func atPath(path string, err error) error {
	var inPath *fs.PathError
	if errors.As(err, &inPath) {
		return &fs.PathError{Op: inPath.Op, Path: path, Err: inPath.Err}
	}
	var inLink *os.LinkError
	if errors.As(err, &inLink) {
		return &fs.PathError{Op: inLink.Op, Path: path, Err: inLink.Err}
	}
	return err
}
