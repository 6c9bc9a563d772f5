package capture

import (
	"github.com/go-audio/riff"
	"github.com/go-audio/wav"
)

var (
	ds64ID = [4]byte{'d', 's', '6', '4'}
	bextID = [4]byte{'b', 'e', 'x', 't'}
)

// A layout is where everything of a file lies, gathered chunk by chunk.
type layout struct {
	*chunkReader
	format    waveFormat
	hasFormat bool
	dataAt    int64 // of the first sample
	dataBytes int64 // that are in the file, part of a frame at the end included
	hasData   bool
	emptyAt   int64 // of a data chunk with nothing in it; 0 for none
	promised  int64 // bytes of data that the header tells of, where the file is cut short
	notClosed bool
	cutShort  bool
	overrun   *chunk // one that claims to reach past the end of the file
	strayAt   int64  // where a chunk's name should stand and does not; 0 for none
	comments
}

// readLayout walks the chunks of a file whose first 12 bytes are known to be sound.
func readLayout(s *source) (*layout, error) {
	l := &layout{chunkReader: newChunkReader(s), comments: newComments()}
	if err := l.walk(); err != nil {
		return nil, err
	}
	if !l.hasFormat || !l.hasData {
		return nil, l.missing()
	}
	if l.dataBytes < int64(l.format.frameBytes) {
		return nil, s.bad(l.dataAt, hintAgain, "the file ends before the first sample is complete")
	}
	return l, nil
}

func (l *layout) walk() error {
	off := int64(12)
	for l.more(off) {
		c, err := l.chunkAt(off)
		if err != nil {
			return err
		}
		if !isChunkName(c.id) {
			l.strayAt = off
			return nil
		}
		if err := l.visit(&c); err != nil {
			return err
		}
		if c.end() > l.sizeBytes {
			l.overrun = &c
			return nil
		}
		if off, err = l.after(&c); err != nil {
			return err
		}
	}
	return nil
}

func (l *layout) visit(c *chunk) (err error) {
	switch c.id {
	case ds64ID:
		if !l.sizes64.valid {
			err = l.readSizes64(c)
		}
	case riff.FmtID:
		if !l.hasFormat {
			l.format, err = l.readFormat(c.body, c.lengthBytes)
			l.hasFormat = true
		}
	case riff.DataFormatID:
		if !l.hasData {
			err = l.placeData(c)
		}
	case wav.CIDList:
		err = l.readInfo(l.source, c)
	case bextID:
		err = l.readDescription(l.source, c)
	}
	return err
}

// placeData settles how much of the data chunk c is there, and mends its length where the header
// does not hold.
func (l *layout) placeData(c *chunk) error {
	room := l.sizeBytes - c.body
	if c.lengthBytes == 0 {
		closed, err := l.closedBehind(c.body)
		if err != nil {
			return err
		}
		if closed {
			l.emptyAt = c.at
			return nil
		}
	}
	switch {
	case c.lengthBytes == 0, c.lengthBytes > maxPromise, !l.sizes64.valid && isPlaceholder(c.size32, room):
		l.notClosed = true
		c.lengthBytes = room
	case c.lengthBytes > room:
		l.cutShort = true
		l.promised = c.lengthBytes
		c.lengthBytes = room
	}
	l.dataAt, l.dataBytes, l.hasData = c.body, c.lengthBytes, true
	return nil
}

// maxPromise bounds what a ds64 chunk can mean: no file system holds more, so it is a placeholder.
const maxPromise = 1 << 60

// isPlaceholder reports whether a 32-bit size was never filled in, with so many bytes left in the
// file. 0xFFFFFFFF never is a length: with its header such a file would be over 4 GiB. Besides that,
// programs that write to a pipe leave sizes just under 2 or 4 GiB, rounded down to whole frames (seen
// in their output).
func isPlaceholder(size32 uint32, roomBytes int64) bool {
	const slack = 0x2000
	if size32 == noSize32 {
		return true
	}
	return int64(size32) > roomBytes && (size32 >= noSize32-slack || size32 >= 1<<31-slack && size32 < 1<<31)
}

// missing says what the file lacks and why the search for it ended.
func (l *layout) missing() error {
	lacks, hint := "fmt", hintExport
	if l.hasFormat {
		lacks, hint = "data", hintAgain
	}
	switch {
	case l.emptyAt > 0 && l.hasFormat:
		return l.bad(l.emptyAt, hintAgain, "the data chunk is empty: the take holds no samples")
	case l.overrun != nil:
		c := l.overrun
		return l.bad(c.at, hint, "no %s chunk before chunk %q, which claims %d bytes and runs past the end of the file",
			lacks, c.id[:], c.lengthBytes)
	case l.strayAt > 0:
		return l.bad(l.strayAt, hint, "no %s chunk before this place, where no chunk begins", lacks)
	case l.left <= 0:
		return l.bad(12, hint, "no %s chunk among the first %d chunks", lacks, maxChunks)
	}
	return l.bad(l.sizeBytes, hint, "the file ends without a %s chunk", lacks)
}
