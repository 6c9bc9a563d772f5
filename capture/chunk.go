package capture

import (
	"bytes"
	"encoding/binary"
	"math"

	"github.com/go-audio/riff"
)

// maxChunks is how many chunk headers are looked at: a WAV has a dozen, junk may have millions.
const maxChunks = 1024

// noSize32 stands in a 32-bit size field where the ds64 chunk has the size, or nobody.
const noSize32 = math.MaxUint32

// A chunk is one chunk's place in the file.
type chunk struct {
	id          [4]byte
	at          int64 // of the header
	body        int64 // of the payload
	size32      uint32
	lengthBytes int64 // of the payload, without the pad byte; may reach past the end of the file
}

func (c *chunk) end() int64 { return c.body + c.lengthBytes }

// A chunkReader reads chunk headers. The library's parser takes the headers apart, from eight bytes
// that were read beforehand: by itself it overlooks an error in the second half of a header, rounds a
// size of 0xFFFFFFFF up to 0, and reads through every payload it skips.
type chunkReader struct {
	*source
	eight   bytes.Reader
	parser  *riff.Parser
	left    int // headers that may still be read
	sizes64 sizes64
}

func newChunkReader(s *source) *chunkReader {
	c := &chunkReader{source: s, left: maxChunks}
	c.parser = riff.New(&c.eight)
	return c
}

// chunkAt reads the header at off, where at least eight bytes must be left.
func (r *chunkReader) chunkAt(off int64) (chunk, error) {
	r.left--
	var b [8]byte
	if err := r.fill(b[:], off); err != nil {
		return chunk{}, err
	}
	r.eight.Reset(b[:])
	id, size32, err := r.parser.IDnSize()
	if err != nil {
		return chunk{}, err
	}
	c := chunk{id: id, at: off, body: off + 8, size32: size32, lengthBytes: int64(size32)}
	if size32 == noSize32 || size32 == 0 && id == riff.DataFormatID {
		if n, ok := r.sizes64.of(id); ok {
			c.lengthBytes = min(n, math.MaxInt64/2)
		}
	}
	return c, nil
}

// more reports whether another header can be read at off.
func (r *chunkReader) more(off int64) bool {
	return r.left > 0 && r.sizeBytes-off >= 8
}

// after returns where the chunk behind c begins: at its end, or one pad byte further where its
// length is odd. Some writers forget the pad byte; then the name of the next chunk shows it.
func (r *chunkReader) after(c *chunk) (int64, error) {
	end := c.end()
	if c.lengthBytes%2 == 0 || end >= r.sizeBytes {
		return end, nil
	}
	var b [5]byte
	peek := b[:min(5, r.sizeBytes-end)]
	if err := r.fill(peek, end); err != nil {
		return 0, err
	}
	unpadded, padded := [4]byte(b[:4]), [4]byte(b[1:])
	switch {
	case knownChunk(padded):
		return end + 1, nil
	case knownChunk(unpadded):
		return end, nil
	case b[0] != 0 && isChunkName(unpadded) && !isChunkName(padded):
		return end, nil
	}
	return end + 1, nil
}

// closedBehind reports whether whole chunks, none at all included, fill the file from off to its end.
func (r *chunkReader) closedBehind(off int64) (bool, error) {
	for r.more(off) {
		c, err := r.chunkAt(off)
		if err != nil {
			return false, err
		}
		if !isChunkName(c.id) {
			return false, nil
		}
		if off, err = r.after(&c); err != nil {
			return false, err
		}
	}
	return off == r.sizeBytes, nil
}

// isChunkName reports whether id is four printable ASCII characters, as every chunk's is.
func isChunkName(id [4]byte) bool {
	for _, b := range id {
		if b < ' ' || b > '~' {
			return false
		}
	}
	return true
}

// knownChunk reports whether id is a chunk often met in WAV files.
func knownChunk(id [4]byte) bool {
	switch string(id[:]) {
	case "fmt ", "data", "LIST", "bext", "fact", "JUNK", "junk", "PAD ", "FLLR", "ds64", "iXML", "axml",
		"cue ", "smpl", "inst", "id3 ", "ID3 ", "PEAK", "DISP", "cart", "chna", "acid", "_PMX", "umid",
		"ICMT", "ISFT", "INAM", "IART", "ICRD", "ICOP", "IENG", "IGNR", "ISBJ", "ISRC", "IPRD", "ITCH":
		return true
	}
	return false
}

// sizes64 is what a ds64 chunk says: the true sizes of chunks that hold 0xFFFFFFFF in their own
// headers (EBU Tech 3306, ITU-R BS.2088-1).
type sizes64 struct {
	data  int64
	valid bool
	table map[[4]byte]int64
}

// maxSizes64 is how many table entries of a ds64 chunk are read; one a chunk over 4 GiB is in use.
const maxSizes64 = 64

// readSizes64 takes in the ds64 chunk c; one that is too short is passed over.
func (r *chunkReader) readSizes64(c *chunk) error {
	have := min(c.lengthBytes, r.sizeBytes-c.body, 28+12*maxSizes64)
	if have < 24 {
		return nil
	}
	b := make([]byte, have)
	if err := r.fill(b, c.body); err != nil {
		return err
	}
	le := binary.LittleEndian
	r.sizes64 = sizes64{data: size63(le.Uint64(b[8:])), valid: true, table: map[[4]byte]int64{}}
	if have < 28 {
		return nil
	}
	count := le.Uint32(b[24:])
	for b = b[28:]; count > 0 && len(b) >= 12; count, b = count-1, b[12:] {
		r.sizes64.table[[4]byte(b)] = size63(le.Uint64(b[4:]))
	}
	return nil
}

func (s *sizes64) of(id [4]byte) (int64, bool) {
	if id == riff.DataFormatID {
		return s.data, s.valid
	}
	n, ok := s.table[id]
	return n, ok
}

// size63 turns an unsigned size into a signed one; what does not fit becomes the largest.
func size63(n uint64) int64 { return int64(min(n, math.MaxInt64)) }
