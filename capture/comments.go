package capture

import (
	"encoding/binary"
	"strings"
	"unicode"

	"github.com/go-audio/wav"
)

// Bounds on what is kept of a file's comments, so that opening a file stays cheap whatever is in it.
const (
	maxComments     = 64
	maxCommentBytes = 4096
	maxCommentInput = 64 << 10 // bytes read in search of comments, in one file
)

// comments gathers the text that a file says about itself.
type comments struct {
	texts     []string
	leftBytes int64 // that may still be read
}

func newComments() comments { return comments{leftBytes: maxCommentInput} }

// read returns the first bytes of chunk c, at most limitBytes and what is left to spend.
func (m *comments) read(s *source, c *chunk, limitBytes int64) ([]byte, error) {
	n := min(c.lengthBytes, s.sizeBytes-c.body, limitBytes, m.leftBytes)
	if n <= 0 || len(m.texts) >= maxComments {
		return nil, nil
	}
	m.leftBytes -= n
	b := make([]byte, n)
	return b, s.fill(b, c.body)
}

// readInfo takes every text of a LIST chunk of kind INFO. The library's own reader trusts the sizes
// in the chunk with its memory, so it is not used.
func (m *comments) readInfo(s *source, c *chunk) error {
	b, err := m.read(s, c, maxCommentInput)
	if err != nil || len(b) < 4 || string(b[:4]) != string(wav.CIDInfo) {
		return err
	}
	for b = b[4:]; len(b) >= 8; {
		n := int(min(binary.LittleEndian.Uint32(b[4:]), uint32(len(b)-8)))
		m.add(b[8 : 8+n])
		b = b[8+n:]
		if n%2 == 1 && len(b) > 0 && !(len(b) >= 4 && knownChunk([4]byte(b))) {
			b = b[1:]
		}
	}
	return nil
}

// descriptionBytes is the length of the description, the first field of a bext chunk (EBU Tech 3285).
const descriptionBytes = 256

func (m *comments) readDescription(s *source, c *chunk) error {
	b, err := m.read(s, c, descriptionBytes)
	if err != nil {
		return err
	}
	m.add(b)
	return nil
}

// add keeps a text up to its first NUL. Bytes that are no UTF-8 become question marks, control
// characters other than tab and line feed become spaces: the text may end up on a terminal.
func (m *comments) add(b []byte) {
	text, _, _ := strings.Cut(string(b[:min(len(b), maxCommentBytes)]), "\x00")
	text = strings.ToValidUTF8(text, "?")
	text = strings.TrimSpace(strings.Map(func(r rune) rune {
		if unicode.IsControl(r) && r != '\t' && r != '\n' {
			return ' '
		}
		return r
	}, text))
	if text != "" && len(m.texts) < maxComments {
		m.texts = append(m.texts, text)
	}
}
