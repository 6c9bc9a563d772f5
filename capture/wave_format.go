package capture

import (
	"bytes"
	"encoding/binary"
	"fmt"

	"github.com/go-audio/riff"
)

// What is read and written; the rates are those of recorders and interfaces.
const (
	minRateHz   = 8000
	maxRateHz   = 384000
	maxChannels = 64
)

// Format tags of the `fmt ` chunk.
const (
	tagPCM        = 1
	tagFloat      = 3
	tagExtensible = 0xFFFE
)

// Lengths of the `fmt ` payload.
const (
	plainFmtBytes      = 16
	extensibleFmtBytes = 40
)

// Tails of the sub-format GUID, whose first two bytes are the plain tag: the usual one, and the one
// that marks the same samples as ambisonic B-format (the latter from memory).
const (
	subFormatTail          = "\x00\x00\x00\x00\x10\x00\x80\x00\x00\xAA\x00\x38\x9B\x71"
	subFormatTailAmbisonic = "\x00\x00\x21\x07\xD3\x11\x86\x44\xC8\xC1\xCA\x00\x00\x00"
)

// A waveFormat is what the `fmt ` chunk says of the samples.
type waveFormat struct {
	rateHz     int
	channels   int
	bits       int // that count; the rest of the container is filled from below
	widthBytes int // of one sample in the file
	frameBytes int
	float      bool
}

// readFormat reads the `fmt ` payload of lengthBytes at position body.
func (s *source) readFormat(body, lengthBytes int64) (waveFormat, error) {
	var f waveFormat
	if lengthBytes < plainFmtBytes || s.sizeBytes-body < plainFmtBytes {
		have := max(0, min(lengthBytes, s.sizeBytes-body))
		return f, s.bad(body, hintExport, "the fmt chunk holds %d bytes, it needs at least %d", have, plainFmtBytes)
	}
	var payload [extensibleFmtBytes]byte
	have := payload[:min(extensibleFmtBytes, lengthBytes, s.sizeBytes-body)]
	if err := s.fill(have, body); err != nil {
		return f, err
	}
	var p riff.Parser
	c := riff.Chunk{ID: riff.FmtID, Size: plainFmtBytes, R: bytes.NewReader(have[:plainFmtBytes])}
	if err := c.DecodeWavHeader(&p); err != nil {
		return f, fmt.Errorf("%s: byte %d: %w", s.name, body, err)
	}
	f.rateHz, f.channels = int(p.SampleRate), int(p.NumChannels)
	f.bits, f.frameBytes = int(p.BitsPerSample), int(p.BlockAlign)
	f.widthBytes = (f.bits + 7) / 8

	tag, tagAt := int(p.WavAudioFormat), body
	if tag == tagExtensible {
		if len(have) < extensibleFmtBytes {
			return f, s.bad(body, hintExport, "the extensible fmt chunk holds %d bytes, it needs %d", len(have), extensibleFmtBytes)
		}
		tail := string(have[26:])
		if tail != subFormatTail && tail != subFormatTailAmbisonic {
			return f, s.bad(body+24, hintExport, "sub-format % x is not PCM", have[24:])
		}
		tag, tagAt = int(binary.LittleEndian.Uint16(have[24:])), body+24
	}
	if tag != tagPCM && tag != tagFloat {
		return f, s.bad(tagAt, hintExport, "format tag %d is %s, not PCM", tag, tagName(tag))
	}
	f.float = tag == tagFloat
	if err := f.check(s, body); err != nil {
		return f, err
	}
	if p.WavAudioFormat == tagExtensible && !f.float {
		return f.withValidBits(s, body, int(binary.LittleEndian.Uint16(have[18:])))
	}
	return f, nil
}

// check finds what in f cannot be; body is where the chunk's payload lies.
func (f *waveFormat) check(s *source, body int64) error {
	switch {
	case f.channels < 1 || f.channels > maxChannels:
		return s.bad(body+2, hintExport, "%d channels; 1 to %d can be read", f.channels, maxChannels)
	case f.rateHz < minRateHz || f.rateHz > maxRateHz:
		return s.bad(body+4, hintExport, "a sample rate of %d Hz; %d to %d Hz can be read", f.rateHz, minRateHz, maxRateHz)
	case f.float && f.bits != 32 && f.bits != 64:
		return s.bad(body+14, hintExport, "float samples of %d bits; 32 and 64 can be read", f.bits)
	case !f.float && (f.bits < 8 || f.bits > 32):
		return s.bad(body+14, hintExport, "integer samples of %d bits; 8 to 32 can be read", f.bits)
	case f.frameBytes != f.channels*f.widthBytes:
		return s.bad(body+12, hintExport, "%d bytes a frame, where %d of %d bits make %d",
			f.frameBytes, f.channels, f.bits, f.channels*f.widthBytes)
	}
	return nil
}

// withValidBits takes in the count of valid bits from an extensible header; some writers leave it 0.
func (f waveFormat) withValidBits(s *source, body int64, valid int) (waveFormat, error) {
	if valid == 0 {
		return f, nil
	}
	if valid < 8 || valid > 8*f.widthBytes {
		return f, s.bad(body+18, hintExport, "%d valid bits in a container of %d", valid, 8*f.widthBytes)
	}
	f.bits = valid
	return f, nil
}

// tagName names the coding behind a format tag. The list is from memory, after the registered tags.
func tagName(tag int) string {
	switch tag {
	case 0x02:
		return "ADPCM (Microsoft)"
	case 0x06:
		return "A-law"
	case 0x07:
		return "µ-law"
	case 0x08, 0x2001:
		return "DTS"
	case 0x10:
		return "ADPCM (OKI)"
	case 0x11:
		return "ADPCM (IMA)"
	case 0x14, 0x40, 0x45, 0x64:
		return "ADPCM (G.721, G.723 or G.726)"
	case 0x31:
		return "GSM 6.10"
	case 0x50:
		return "MPEG audio in WAV"
	case 0x55:
		return "MP3 in WAV"
	case 0x92, 0x2000:
		return "AC-3"
	case 0xFF, 0xA106, 0x1600, 0x1610:
		return "AAC"
	case 0x160, 0x161, 0x162, 0x163:
		return "Windows Media Audio"
	case 0x674F, 0x6750, 0x6751, 0x676F, 0x6770, 0x6771:
		return "Vorbis in WAV"
	case 0xF1AC:
		return "FLAC in WAV"
	}
	return "an unknown coding"
}
