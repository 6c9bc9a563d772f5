package capture

import (
	"errors"
	"fmt"
	"io"
)

// A source is the file under a take: bytes at any position.
type source struct {
	name      string
	r         io.ReaderAt
	sizeBytes int64
}

// fill reads len(b) bytes from position off, all of them or an error.
func (s *source) fill(b []byte, off int64) error {
	n, err := s.r.ReadAt(b, off)
	if n == len(b) {
		return nil
	}
	if err == nil || errors.Is(err, io.EOF) {
		err = fmt.Errorf("the file became shorter while it was read: %w", io.ErrUnexpectedEOF)
	}
	return fmt.Errorf("%s: byte %d: %w", s.name, off+int64(n), err)
}

// bad makes a FormatError about byte off.
func (s *source) bad(off int64, hint, format string, args ...any) error {
	return &FormatError{Name: s.name, Offset: off, Text: fmt.Sprintf(format, args...), Hint: hint}
}
