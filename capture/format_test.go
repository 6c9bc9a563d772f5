package capture

import (
	"fmt"
	"math"
	"slices"
	"testing"
)

func TestReadsEveryFormat(t *testing.T) {
	type layout struct {
		name                 string
		tag, container, bits int
		extensible           bool
	}
	var layouts []layout
	for _, bits := range []int{8, 12, 16, 20, 24, 32} {
		container := (bits + 7) / 8 * 8
		layouts = append(layouts, layout{fmt.Sprintf("%d plain", bits), 1, container, bits, false})
	}
	for _, bits := range []int{32, 64} {
		layouts = append(layouts, layout{fmt.Sprintf("float %d plain", bits), 3, bits, bits, false},
			layout{fmt.Sprintf("float %d extensible", bits), 3, bits, bits, true})
	}
	for _, w := range [][2]int{{8, 8}, {16, 16}, {24, 24}, {32, 32}, {24, 20}, {32, 20}, {32, 24}, {16, 12}} {
		layouts = append(layouts, layout{fmt.Sprintf("%d in %d extensible", w[1], w[0]), 1, w[0], w[1], true})
	}
	const frames = 23 // odd, so that the loops of eight have a rest
	for _, l := range layouts {
		for _, channels := range []int{1, 2, 3, 8, 64} {
			for _, rateHz := range []int{8000, 44100, 384000} {
				t.Run(fmt.Sprintf("%s/%d channels/%d Hz", l.name, channels, rateHz), func(t *testing.T) {
					header := plainFmt(l.tag, channels, rateHz, l.bits)
					if l.extensible {
						header = extensibleFmt(l.tag, channels, rateHz, l.container, l.bits)
					}
					float := l.tag == 3
					file := riffFile(header, padded("data", sampleBlock(t, frames, channels, l.container, l.bits, float)))
					take := mustOpen(t, file)
					f := take.Facts()
					encoding, significant := "integer", l.bits
					if float {
						encoding, significant = "float", 24
					}
					if f.RateHz != rateHz || f.Channels != channels || f.Bits != l.bits || f.Encoding != encoding || f.Frames != frames ||
						f.Bytes != int64(len(file)) || f.Seconds != frames/float64(rateHz) || len(f.Problems) != 0 {
						t.Errorf("Facts() = %+v", f)
					}
					for c := range channels {
						ch := take.Channel(c + 1)
						if ch.RateHz() != float64(rateHz) || ch.Frames() != frames {
							t.Errorf("channel has %g Hz and %d frames", ch.RateHz(), ch.Frames())
						}
						got := readAll(t, ch)
						for i, v := range got {
							if want := testSample(i, c, significant); v != want {
								t.Fatalf("channel %d frame %d = %v, want %v", c+1, i, v, want)
							}
						}
						if len(got) != frames {
							t.Errorf("channel %d has %d samples, want %d", c+1, len(got), frames)
						}
					}
				})
			}
		}
	}
}

// TestEveryCode24 puts every code of 24 bits through the two fast loops.
func TestEveryCode24(t *testing.T) {
	const step = 1 << 16
	b := make([]byte, 6*step)
	dst := make([]float64, step)
	for base := 0; base < 1<<24; base += step {
		mono := b[:3*step]
		for i := range step {
			v := base + i
			mono[3*i], mono[3*i+1], mono[3*i+2] = byte(v), byte(v>>8), byte(v>>16)
		}
		decode24Mono(dst, mono, 0, 3)
		check := func(where string, bytes []byte, at, frame int) {
			for i, got := range dst {
				if want := littleEndian24(bytes[i*frame+at:]); got != want {
					t.Fatalf("%s: code %#x = %v, want %v", where, base+i, got, want)
				}
			}
		}
		check("mono", mono, 0, 3)
		if base%(step*16) != 0 {
			continue
		}
		for side := range 2 {
			for i := range step {
				v := base + i*251
				at := 6*i + 3*side
				b[at], b[at+1], b[at+2] = byte(v), byte(v>>8), byte(v>>16)
				other := 6*i + 3*(1-side)
				b[other], b[other+1], b[other+2] = 0xFF, 0x80, byte(i) // must not leak in
			}
			decode24Stereo(dst, b, 3*side, 6)
			check(fmt.Sprintf("stereo side %d", side), b, 3*side, 6)
		}
	}
}

func TestFloatsPassAsTheyAre(t *testing.T) {
	values := []float64{math.NaN(), math.Inf(1), math.Inf(-1), 1.5, -2, 0, math.Copysign(0, -1)}
	for _, bits := range []int{32, 64} {
		var data []byte
		for _, v := range values {
			data = append(data, sampleBytes(t, v, bits, bits, true)...)
		}
		got := readAll(t, mustOpen(t, riffFile(plainFmt(3, 1, 48000, bits), padded("data", data))).Channel(1))
		for i, v := range values {
			if math.Float64bits(got[i]) != math.Float64bits(v) && !(math.IsNaN(v) && math.IsNaN(got[i])) {
				t.Errorf("float %d: sample %d = %v, want %v", bits, i, got[i], v)
			}
		}
	}
}

func TestOddHeadersThatAreAccepted(t *testing.T) {
	data := padded("data", sampleBlock(t, 5, 1, 24, 24, false))
	fields := fmtFields(1, 1, 48000, 3, 24)
	ambisonic := join(fmtFields(0xFFFE, 1, 48000, 3, 24), u16(22), u16(24), u32(0), u16(1),
		"\x00\x00\x21\x07\xD3\x11\x86\x44\xC8\xC1\xCA\x00\x00\x00")
	wrongBytesPerSec := slices.Clone(fields)
	copy(wrongBytesPerSec[8:], u32(1))
	for _, c := range []struct {
		name   string
		header []byte
	}{
		{"extra size 0", padded("fmt ", join(fields, u16(0)))},
		{"odd length", padded("fmt ", join(fields, "\x00\x00\x07"))},
		{"long", padded("fmt ", join(fields, make([]byte, 500)))},
		{"valid bits 0", extensibleFmt(1, 1, 48000, 24, 0)},
		{"ambisonic sub-format", padded("fmt ", ambisonic)},
		{"bytes per second wrong", padded("fmt ", wrongBytesPerSec)},
	} {
		t.Run(c.name, func(t *testing.T) {
			take := mustOpen(t, riffFile(c.header, data))
			if f := take.Facts(); f.Bits != 24 || f.Frames != 5 {
				t.Errorf("Facts() = %+v, want 24 bits, 5 frames", f)
			}
			if got, want := readAll(t, take.Channel(1))[4], testSample(4, 0, 24); got != want {
				t.Errorf("sample 4 = %v, want %v", got, want)
			}
		})
	}
}
