package capture

import (
	"bytes"
	"encoding/binary"
	"errors"
	"io"
	"math"
	"strings"
	"testing"
)

// The builders below lay WAV files out byte by byte, from the layouts in testdata/wav_format.csv and
// with nothing of the package, so that a mistake shared by reader and writer shows.

func u16(v int) []byte   { return []byte{byte(v), byte(v >> 8)} }
func u32(v int64) []byte { return append(u16(int(v&0xFFFF)), u16(int(v>>16&0xFFFF))...) }
func u64(v uint64) []byte {
	return append(u32(int64(v&0xFFFFFFFF)), u32(int64(v>>32))...)
}

func join(parts ...any) []byte {
	var b []byte
	for _, p := range parts {
		switch p := p.(type) {
		case string:
			b = append(b, p...)
		case []byte:
			b = append(b, p...)
		}
	}
	return b
}

// rawChunk writes a chunk header with the size given, whatever the payload.
func rawChunk(id string, size int64, payload []byte) []byte { return join(id, u32(size), payload) }

func padded(id string, payload []byte) []byte {
	b := rawChunk(id, int64(len(payload)), payload)
	if len(payload)%2 == 1 {
		b = append(b, 0)
	}
	return b
}

func riffFile(chunks ...[]byte) []byte {
	body := bytes.Join(chunks, nil)
	return join("RIFF", u32(int64(4+len(body))), "WAVE", body)
}

func fmtFields(tag, channels, rateHz, frameBytes, bits int) []byte {
	return join(u16(tag), u16(channels), u32(int64(rateHz)), u32(int64(rateHz*frameBytes)), u16(frameBytes), u16(bits))
}

func plainFmt(tag, channels, rateHz, bits int) []byte {
	return padded("fmt ", fmtFields(tag, channels, rateHz, channels*((bits+7)/8), bits))
}

func extensibleFmt(tag, channels, rateHz, containerBits, validBits int) []byte {
	return padded("fmt ", join(fmtFields(0xFFFE, channels, rateHz, channels*containerBits/8, containerBits),
		u16(22), u16(validBits), u32(0), u16(tag), "\x00\x00\x00\x00\x10\x00\x80\x00\x00\xAA\x00\x38\x9B\x71"))
}

// sampleBytes codes one value in [-1, 1) so that it can be read back exactly: bits of them at the
// top of a container.
func sampleBytes(t testing.TB, v float64, containerBits, bits int, float bool) []byte {
	t.Helper()
	switch {
	case float && bits == 32:
		return u32(int64(math.Float32bits(float32(v))))
	case float:
		return u64(math.Float64bits(v))
	}
	x := v * math.Pow(2, float64(bits-1))
	if x != math.Trunc(x) {
		t.Fatalf("%g is no value of %d bits", v, bits)
	}
	n := int64(x) << (containerBits - bits)
	if containerBits == 8 {
		n += 128
	}
	return u64(uint64(n))[:containerBits/8]
}

// testSample is a value of so many bits for one sample, both extremes among them.
func testSample(frame, channel, bits int) float64 {
	if bits > 32 {
		bits = 32
	}
	full := int64(1) << (bits - 1)
	switch frame {
	case 0:
		return -1
	case 1:
		return float64(full-1) / float64(full)
	case 2:
		return 1 / float64(full)
	case 3:
		return -1 / float64(full)
	}
	x := (int64(frame)*2654435761 + int64(channel)*40503*65537 + 12345) % (2 * full)
	return float64(x-full) / float64(full)
}

func sampleBlock(t testing.TB, frames, channels, containerBits, bits int, float bool) []byte {
	t.Helper()
	var b []byte
	significant := bits
	if float {
		significant = 24
	}
	for f := range frames {
		for c := range channels {
			b = append(b, sampleBytes(t, testSample(f, c, significant), containerBits, bits, float)...)
		}
	}
	return b
}

// smallMono is a sound file of 16 bits, mono, 48 kHz.
func smallMono(frames int) []byte {
	var b []byte
	for i := range frames {
		b = append(b, u16((i*257+3)&0xFFFF)...)
	}
	return riffFile(plainFmt(1, 1, 48000, 16), padded("data", b))
}

func openBytes(b []byte) (*Take, error) {
	return NewTake("before.wav", bytes.NewReader(b), int64(len(b)))
}

func mustOpen(t testing.TB, b []byte) *Take {
	t.Helper()
	take, err := openBytes(b)
	if err != nil {
		t.Fatalf("NewTake: %v", err)
	}
	return take
}

// readAll reads a channel from start to end in blocks of an odd length.
func readAll(t testing.TB, c *Channel) []float64 {
	t.Helper()
	var all []float64
	block := make([]float64, 1021)
	for {
		n, err := c.ReadAt(block, int64(len(all)))
		if err == io.EOF {
			return all
		}
		if err != nil {
			t.Fatalf("ReadAt: %v", err)
		}
		all = append(all, block[:n]...)
	}
}

func wantFormatError(t testing.TB, err error, offset int64, text string) {
	t.Helper()
	var fe *FormatError
	if !errors.As(err, &fe) {
		t.Fatalf("error is %v, want a FormatError with %q", err, text)
	}
	if fe.Offset != offset || !strings.Contains(fe.Text, text) {
		t.Errorf("error is %q at byte %d, want %q at byte %d", fe.Text, fe.Offset, text, offset)
	}
	if fe.Name != "before.wav" || fe.Hint == "" {
		t.Errorf("error has name %q and hint %q, want before.wav and some hint", fe.Name, fe.Hint)
	}
}

func wantProblem(t testing.TB, f Facts, problem string, atSec float64) {
	t.Helper()
	if problem == "" {
		if len(f.Problems) > 0 {
			t.Errorf("Problems = %v, want none", f.Problems)
		}
		return
	}
	if len(f.Problems) != 1 || f.Problems[0].Problem != problem || f.Problems[0].AtSec != atSec || f.Problems[0].Text == "" {
		t.Errorf("Problems = %v, want %s at %g s", f.Problems, problem, atSec)
	}
}

// littleEndian24 is the plain way to read a 24-bit sample, to check the fast ones against.
func littleEndian24(b []byte) float64 {
	v := int32(binary.LittleEndian.Uint32([]byte{0, b[0], b[1], b[2]}))
	return float64(v>>8) / (1 << 23)
}
