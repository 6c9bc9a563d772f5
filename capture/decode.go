package capture

import (
	"encoding/binary"
	"math"
)

// A decodeFunc converts one sample of each frame in b to [-1, 1). A frame is frameBytes long, the
// sample lies sampleAt bytes into it, and b holds at least len(dst) frames.
type decodeFunc func(dst []float64, b []byte, sampleAt, frameBytes int)

// The value of the lowest bit. Samples of 16 and 24 bits are first moved to the top of 32.
const (
	unit8  = 1.0 / (1 << 7)
	unit32 = 1.0 / (1 << 31)
)

// decoder picks the loop for a format. One and two channels of 24 bits have loops of their own: they
// are met most, and take half the time of the general one.
func decoder(f waveFormat) decodeFunc {
	switch {
	case f.float && f.widthBytes == 4:
		return decodeFloat32
	case f.float:
		return decodeFloat64
	case f.widthBytes == 1:
		return decode8
	case f.widthBytes == 2:
		return decode16
	case f.widthBytes == 4:
		return decode32
	case f.channels == 1:
		return decode24Mono
	case f.channels == 2:
		return decode24Stereo
	}
	return decode24
}

func decode8(dst []float64, b []byte, sampleAt, frameBytes int) {
	for i := range dst {
		dst[i] = float64(int(b[sampleAt])-128) * unit8
		sampleAt += frameBytes
	}
}

func decode16(dst []float64, b []byte, sampleAt, frameBytes int) {
	for i := range dst {
		dst[i] = float64(int32(uint32(binary.LittleEndian.Uint16(b[sampleAt:]))<<16)) * unit32
		sampleAt += frameBytes
	}
}

func decode24(dst []float64, b []byte, sampleAt, frameBytes int) {
	for i := range dst {
		s := b[sampleAt : sampleAt+3 : sampleAt+3]
		dst[i] = float64(int32(uint32(s[0])<<8|uint32(s[1])<<16|uint32(s[2])<<24)) * unit32
		sampleAt += frameBytes
	}
}

func decode32(dst []float64, b []byte, sampleAt, frameBytes int) {
	for i := range dst {
		dst[i] = float64(int32(binary.LittleEndian.Uint32(b[sampleAt:]))) * unit32
		sampleAt += frameBytes
	}
}

func decodeFloat32(dst []float64, b []byte, sampleAt, frameBytes int) {
	for i := range dst {
		dst[i] = float64(math.Float32frombits(binary.LittleEndian.Uint32(b[sampleAt:])))
		sampleAt += frameBytes
	}
}

func decodeFloat64(dst []float64, b []byte, sampleAt, frameBytes int) {
	for i := range dst {
		dst[i] = math.Float64frombits(binary.LittleEndian.Uint64(b[sampleAt:]))
		sampleAt += frameBytes
	}
}

// decode24Mono reads each sample as a word of four bytes, whose last is the first of the next sample
// and shifted out. The end, where there is none, is left to the plain loop.
func decode24Mono(dst []float64, b []byte, _, _ int) {
	le := binary.LittleEndian
	for len(dst) >= 8 && len(b) >= 25 {
		dst[0] = float64(int32(le.Uint32(b)<<8)) * unit32
		dst[1] = float64(int32(le.Uint32(b[3:])<<8)) * unit32
		dst[2] = float64(int32(le.Uint32(b[6:])<<8)) * unit32
		dst[3] = float64(int32(le.Uint32(b[9:])<<8)) * unit32
		dst[4] = float64(int32(le.Uint32(b[12:])<<8)) * unit32
		dst[5] = float64(int32(le.Uint32(b[15:])<<8)) * unit32
		dst[6] = float64(int32(le.Uint32(b[18:])<<8)) * unit32
		dst[7] = float64(int32(le.Uint32(b[21:])<<8)) * unit32
		dst, b = dst[8:], b[24:]
	}
	decode24(dst, b, 0, 3)
}

// decode24Stereo does the same for either side of two channels.
func decode24Stereo(dst []float64, b []byte, sampleAt, _ int) {
	le := binary.LittleEndian
	b = b[sampleAt:]
	for len(dst) >= 8 && len(b) >= 48 {
		dst[0] = float64(int32(le.Uint32(b)<<8)) * unit32
		dst[1] = float64(int32(le.Uint32(b[6:])<<8)) * unit32
		dst[2] = float64(int32(le.Uint32(b[12:])<<8)) * unit32
		dst[3] = float64(int32(le.Uint32(b[18:])<<8)) * unit32
		dst[4] = float64(int32(le.Uint32(b[24:])<<8)) * unit32
		dst[5] = float64(int32(le.Uint32(b[30:])<<8)) * unit32
		dst[6] = float64(int32(le.Uint32(b[36:])<<8)) * unit32
		dst[7] = float64(int32(le.Uint32(b[42:])<<8)) * unit32
		dst, b = dst[8:], b[48:]
	}
	decode24(dst, b, 0, 6)
}
