package capture

import (
	"fmt"
	"io"
)

// readBytes is how much of a file is read at once; larger reads gain nothing and leave the cache.
const readBytes = 64 << 10

// A Channel is one channel of a take, for one goroutine at a time.
type Channel struct {
	take      *Take
	number    int
	buf       []byte // made at the first read
	held      []byte // the part of buf that holds whole frames of the file
	heldFrame int64  // the first frame in held
	next      int64  // the frame after those last read: a read from here on is one of a row
}

// Channel returns channel n, counted from 1. Of a number that the take does not have, the channel has
// no frames and reading it is an error. Each call returns a channel with a buffer of its own.
func (t *Take) Channel(n int) *Channel { return &Channel{take: t, number: n} }

func (c *Channel) exists() bool { return c.number >= 1 && c.number <= c.take.format.channels }

// RateHz returns the sample rate.
func (c *Channel) RateHz() float64 { return float64(c.take.format.rateHz) }

// Frames returns the number of samples in the channel.
func (c *Channel) Frames() int64 {
	if !c.exists() {
		return 0
	}
	return c.take.frames
}

// ReadAt fills dst with samples from the given frame on and returns how many there were: fewer than
// len(dst) only where the take ends. At or past its end that is 0 with [io.EOF]. It allocates nothing
// after the first call. Reads one after another are served from one read of 64 KiB; a read elsewhere
// takes only what it needs.
func (c *Channel) ReadAt(dst []float64, frame int64) (int, error) {
	t := c.take
	if !c.exists() {
		return 0, fmt.Errorf("%s: no channel %d among %d", t.name, c.number, t.format.channels)
	}
	if frame < 0 {
		return 0, fmt.Errorf("%s: read before the start, at frame %d", t.name, frame)
	}
	if frame >= t.frames && len(dst) > 0 {
		return 0, io.EOF
	}
	dst = dst[:min(int64(len(dst)), max(0, t.frames-frame))]
	sampleAt := (c.number - 1) * t.format.widthBytes
	n := 0
	for n < len(dst) {
		b, err := c.hold(frame+int64(n), len(dst)-n)
		if err != nil {
			return n, err
		}
		k := min(len(b)/t.format.frameBytes, len(dst)-n)
		t.decode(dst[n:n+k], b, sampleAt, t.format.frameBytes)
		n += k
		c.next = frame + int64(n)
	}
	return n, nil
}

// hold returns the bytes of one or more whole frames from the given one on, read from the file where
// they are not held already. want is how many are needed.
func (c *Channel) hold(frame int64, want int) ([]byte, error) {
	t := c.take
	frameBytes := int64(t.format.frameBytes)
	if skip := (frame - c.heldFrame) * frameBytes; skip >= 0 && skip < int64(len(c.held)) {
		return c.held[skip:], nil
	}
	if c.buf == nil {
		c.buf = make([]byte, readBytes)
	}
	count := readBytes / frameBytes
	if frame != c.next {
		count = min(count, int64(want))
	}
	count = min(count, t.frames-frame)
	b := c.buf[:count*frameBytes]
	off := t.dataAt + frame*frameBytes
	c.held = nil
	if err := t.fill(b, off); err != nil {
		return nil, err
	}
	t.hash.feed(b, off)
	c.held, c.heldFrame = b, frame
	return b, nil
}
