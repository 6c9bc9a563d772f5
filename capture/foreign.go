package capture

import (
	"bytes"
	"fmt"
	"unicode"
	"unicode/utf8"
)

// headBytes is how much of a file is looked at to tell what it is.
const headBytes = 512

// checkHead returns an error that says what the file is, unless head, its first bytes, begins a
// RIFF, RF64 or BW64 file of form WAVE.
func (s *source) checkHead(head []byte) error {
	if s.sizeBytes <= 0 {
		return s.bad(-1, hintAgain, "the file is empty")
	}
	if len(head) >= 12 && isRIFF(head) {
		if string(head[8:12]) == "WAVE" {
			return nil
		}
		return s.bad(8, hintExport, "a RIFF file of form %q (%s), not WAVE", head[8:12], formName(head[8:12]))
	}
	if what := foreignKind(head); what != "" {
		return s.bad(0, hintExport, "this is %s, not WAV", what)
	}
	if isText(head) {
		return s.bad(0, "name the recording itself, a PCM WAV file", "this is text, not WAV")
	}
	if len(head) < 12 {
		return s.bad(-1, hintAgain, "the file is only %d bytes long, too short for a WAV header", s.sizeBytes)
	}
	if len(bytes.Trim(head, "\x00")) == 0 {
		return s.bad(0, hintAgain, "zeros stand where the WAV header should be")
	}
	return s.bad(0, hintExport, "the file begins with % x, not with RIFF: not WAV", head[:4])
}

func isRIFF(head []byte) bool {
	id := string(head[:4])
	return id == "RIFF" || id == "RF64" || id == "BW64"
}

func formName(form []byte) string {
	switch string(form) {
	case "AVI ":
		return "AVI video"
	case "RMID":
		return "MIDI"
	case "WEBP":
		return "a WebP picture"
	case "ACON":
		return "an animated cursor"
	case "sfbk":
		return "a sound font"
	}
	return "no recording"
}

// foreignMagic lists the first bytes of what is found under the name .wav without being one. The
// marks are common knowledge, from memory, without a source.
var foreignMagic = []struct {
	at    int
	magic string
	what  string
}{
	{0, "RIFX", "big-endian WAV (RIFX)"},
	{0, "FFIR", "big-endian WAV with swapped bytes (FFIR)"},
	{0, "fLaC", "FLAC"},
	{8, "AIFF", "AIFF"},
	{8, "AIFC", "AIFF-C"},
	{0, "riff\x2e\x91\xcf\x11", "Wave64 (W64)"},
	{0, "OggS", "Ogg (Vorbis, Opus or FLAC)"},
	{0, "ID3", "MP3 with an ID3 tag"},
	{0, "caff", "CAF"},
	{4, "ftyp", "MP4 (AAC or ALAC)"},
	{0, ".snd", "AU"},
	{0, "wvpk", "WavPack"},
	{0, "MAC ", "Monkey's Audio"},
	{0, "TTA1", "True Audio"},
	{0, "DSD ", "DSF (one-bit audio)"},
	{0, "FRM8", "DSDIFF (one-bit audio)"},
	{0, "#!AMR", "AMR"},
	{0, "Creative Voice File", "VOC"},
	{0, "NIST_1A", "NIST Sphere"},
	{0, "MThd", "MIDI"},
	{0, "\x30\x26\xb2\x75\x8e\x66\xcf\x11", "Windows Media (WMA)"},
	{0, "\x1a\x45\xdf\xa3", "Matroska or WebM"},
	{0, "PK\x03\x04", "a ZIP archive"},
	{0, "\x1f\x8b", "a gzip archive"},
	{0, "%PDF", "a PDF"},
	{0, "\x89PNG", "a PNG picture"},
}

// foreignKind names the kind of file that head begins, or returns "".
func foreignKind(head []byte) string {
	for _, m := range foreignMagic {
		if len(head) >= m.at && bytes.HasPrefix(head[m.at:], []byte(m.magic)) {
			return m.what
		}
	}
	if isUTF16(head) {
		return "text (UTF-16)"
	}
	return mpegKind(head)
}

// mpegKind tells an MPEG audio frame header, four bytes without a magic number, by the values that
// are not allowed in it.
func mpegKind(head []byte) string {
	if len(head) < 4 || head[0] != 0xFF || head[1]&0xE0 != 0xE0 {
		return ""
	}
	version, layer := head[1]>>3&3, head[1]>>1&3
	bitRate, rate := head[2]>>4, head[2]>>2&3
	switch {
	case head[1]&0xF6 == 0xF0:
		return "AAC (ADTS)"
	case version == 1, layer == 0, bitRate == 0, bitRate == 15, rate == 3:
		return ""
	}
	return fmt.Sprintf("MP%d", 4-layer)
}

func isUTF16(head []byte) bool {
	if len(head) < 4 {
		return false
	}
	return head[0] == 0xFF && head[1] == 0xFE && head[3] == 0 ||
		head[0] == 0xFE && head[1] == 0xFF && head[2] == 0
}

// isText reports whether head holds nothing but UTF-8 text; a character cut off at its end is
// forgiven.
func isText(head []byte) bool {
	for len(head) > 0 {
		r, n := utf8.DecodeRune(head)
		if r == utf8.RuneError && n == 1 {
			return !utf8.FullRune(head)
		}
		if !unicode.IsPrint(r) && !unicode.IsSpace(r) && r != '\uFEFF' {
			return false
		}
		head = head[n:]
	}
	return true
}
