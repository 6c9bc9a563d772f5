package capture

import (
	"bytes"
	"errors"
	"fmt"
	"io"
	"math/rand/v2"
	"strings"
	"testing"
)

// place is the sample of 24 bits that tells its channel and frame.
func place(frame, channel int) float64 {
	return float64((frame*37+channel*4099)%(1<<24)-(1<<23)) / (1 << 23)
}

func placeFile(t testing.TB, frames, channels int) []byte {
	t.Helper()
	var b []byte
	for f := range frames {
		for c := range channels {
			b = append(b, sampleBytes(t, place(f, c), 24, 24, false)...)
		}
	}
	return riffFile(plainFmt(1, channels, 96000, 24), padded("data", b))
}

func TestReadAtAnywhere(t *testing.T) {
	for _, channels := range []int{1, 2, 5} {
		t.Run(fmt.Sprintf("%d channels", channels), func(t *testing.T) {
			const frames = 70000 // several buffers
			take := mustOpen(t, placeFile(t, frames, channels))
			rng := rand.New(rand.NewPCG(1, uint64(channels)))
			dst := make([]float64, 40000)
			next := 0
			c := rng.IntN(channels)
			ch := take.Channel(c + 1)
			for range 300 {
				n := rng.IntN([]int{2, 100, 5000, len(dst) + 1}[rng.IntN(4)])
				at := next
				if rng.IntN(2) == 0 {
					at = rng.IntN(frames + 10)
				}
				got, err := ch.ReadAt(dst[:n], int64(at))
				want := max(0, min(n, frames-at))
				if got != want || (err == io.EOF) != (at >= frames && n > 0) || err != nil && err != io.EOF {
					t.Fatalf("ReadAt(%d samples, %d) = %d, %v, want %d", n, at, got, err, want)
				}
				for i, v := range dst[:got] {
					if v != place(at+i, c) {
						t.Fatalf("frame %d = %v, want %v", at+i, v, place(at+i, c))
					}
				}
				next = at + got
			}
		})
	}
}

func TestReadAtOddRequests(t *testing.T) {
	take := mustOpen(t, placeFile(t, 10, 2))
	ch := take.Channel(2)
	dst := make([]float64, 4)
	if n, err := ch.ReadAt(dst, -1); n != 0 || err == nil || err == io.EOF {
		t.Errorf("ReadAt(-1) = %d, %v, want an error", n, err)
	}
	if n, err := ch.ReadAt(nil, 3); n != 0 || err != nil {
		t.Errorf("ReadAt(nothing) = %d, %v, want 0, nil", n, err)
	}
	if n, err := ch.ReadAt(nil, 1<<62); n != 0 || err != nil {
		t.Errorf("ReadAt(nothing, far out) = %d, %v, want 0, nil", n, err)
	}
	if n, err := ch.ReadAt(dst, 8); n != 2 || err != nil {
		t.Errorf("ReadAt(8) = %d, %v, want 2, nil", n, err)
	}
	if n, err := ch.ReadAt(dst, 1<<62); n != 0 || err != io.EOF {
		t.Errorf("ReadAt(far out) = %d, %v, want 0, EOF", n, err)
	}
	for _, number := range []int{-1, 0, 3} {
		none := take.Channel(number)
		if n, err := none.ReadAt(dst, 0); n != 0 || err == nil || !strings.Contains(err.Error(), "no channel") {
			t.Errorf("Channel(%d).ReadAt = %d, %v, want an error", number, n, err)
		}
		if none.Frames() != 0 {
			t.Errorf("Channel(%d).Frames() = %d, want 0", number, none.Frames())
		}
	}
}

// A shrinkingFile loses its end after it was opened.
type shrinkingFile struct {
	*bytes.Reader
	limit int64
}

func (s *shrinkingFile) ReadAt(b []byte, off int64) (int, error) {
	if off >= s.limit {
		return 0, io.EOF
	}
	n, err := s.Reader.ReadAt(b[:min(int64(len(b)), s.limit-off)], off)
	if n < len(b) && err == nil {
		err = io.EOF
	}
	return n, err
}

func TestFileThatShrinksIsNoEOF(t *testing.T) {
	file := placeFile(t, 1000, 1)
	s := &shrinkingFile{bytes.NewReader(file), int64(len(file))}
	take, err := NewTake("before.wav", s, s.limit)
	if err != nil {
		t.Fatal(err)
	}
	ch := take.Channel(1)
	dst := make([]float64, 100)
	if n, err := ch.ReadAt(dst, 300); n != 100 || err != nil {
		t.Errorf("ReadAt = %d, %v, want 100", n, err)
	}
	s.limit /= 2
	if n, err := ch.ReadAt(dst, 470); n != 0 || !errors.Is(err, io.ErrUnexpectedEOF) {
		t.Errorf("ReadAt = %d, %v, want 0, ErrUnexpectedEOF", n, err)
	}
	// What the failed read left in the buffer must not pass for what was held before.
	if n, err := ch.ReadAt(dst, 300); n != 100 || err != nil || dst[5] != place(305, 0) {
		t.Errorf("ReadAt afterwards = %d, %v, sample %v, want 100 and %v", n, err, dst[5], place(305, 0))
	}
	if _, err := take.SHA256(); !errors.Is(err, io.ErrUnexpectedEOF) {
		t.Errorf("SHA256: %v, want ErrUnexpectedEOF", err)
	}
}

func TestReadAtAllocatesNothing(t *testing.T) {
	take := mustOpen(t, placeFile(t, 70000, 2))
	ch := take.Channel(1)
	dst := make([]float64, 4096)
	frame := int64(0)
	allocs := testing.AllocsPerRun(100, func() {
		if _, err := ch.ReadAt(dst, frame%60000); err != nil {
			t.Fatal(err)
		}
		frame += 7777
	})
	if allocs != 0 {
		t.Errorf("ReadAt allocates %v times a call, want 0", allocs)
	}
}

// A countingFile counts reads and bytes.
type countingFile struct {
	*bytes.Reader
	reads, bytes int64
}

func (c *countingFile) ReadAt(b []byte, off int64) (int, error) {
	n, err := c.Reader.ReadAt(b, off)
	c.reads++
	c.bytes += int64(n)
	return n, err
}

func TestSmallReadsInARowShareOneRead(t *testing.T) {
	file := placeFile(t, 60000, 1)
	counter := &countingFile{Reader: bytes.NewReader(file)}
	take, err := NewTake("before.wav", counter, int64(len(file)))
	if err != nil {
		t.Fatal(err)
	}
	counter.reads, counter.bytes = 0, 0
	ch := take.Channel(1)
	dst := make([]float64, 100)
	for frame := int64(0); frame < 60000; frame += 100 {
		if _, err := ch.ReadAt(dst, frame); err != nil {
			t.Fatal(err)
		}
	}
	if counter.reads > 5 { // three blocks and the header for the hash
		t.Errorf("%d reads for 180000 bytes in a row, want at most 5", counter.reads)
	}
	counter.reads, counter.bytes = 0, 0
	for _, frame := range []int64{50000, 5000, 30000} {
		if _, err := ch.ReadAt(dst, frame); err != nil {
			t.Fatal(err)
		}
	}
	if counter.bytes != 2*300 { // the first of them is still held
		t.Errorf("two sparse reads took %d bytes, want 600", counter.bytes)
	}
}
