package capture

import (
	"encoding/binary"
	"errors"
	"math"
)

// An encodeFunc appends samples to b as they stand in the file.
type encodeFunc func(b []byte, samples []float64) ([]byte, error)

var (
	errNotFinite = errors.New("a sample is not a finite number, which integers cannot hold")
	errTooLarge  = errors.New("a sample is too large for a float of 32 bits")
)

func encoder(f Format) encodeFunc {
	switch {
	case f.Float && f.Bits == 32:
		return encodeFloat32
	case f.Float:
		return encodeFloat64
	case f.Bits == 8:
		return encode8
	case f.Bits == 16:
		return encode16
	case f.Bits == 24:
		return encode24
	}
	return encode32
}

// code rounds a sample to the nearest integer code, full scale being fullScale, and clamps it. NaN
// comes out as NaN, and so does an infinity.
func code(sample, fullScale float64) float64 {
	if sample-sample != 0 {
		return math.NaN()
	}
	return min(max(math.RoundToEven(sample*fullScale), -fullScale), fullScale-1)
}

func encode8(b []byte, samples []float64) ([]byte, error) {
	for _, s := range samples {
		x := code(s, 1<<7)
		if x != x {
			return nil, errNotFinite
		}
		b = append(b, byte(int(x)+128))
	}
	return b, nil
}

func encode16(b []byte, samples []float64) ([]byte, error) {
	for _, s := range samples {
		x := code(s, 1<<15)
		if x != x {
			return nil, errNotFinite
		}
		b = binary.LittleEndian.AppendUint16(b, uint16(int16(x)))
	}
	return b, nil
}

func encode24(b []byte, samples []float64) ([]byte, error) {
	for _, s := range samples {
		x := code(s, 1<<23)
		if x != x {
			return nil, errNotFinite
		}
		v := uint32(int32(x))
		b = append(b, byte(v), byte(v>>8), byte(v>>16))
	}
	return b, nil
}

func encode32(b []byte, samples []float64) ([]byte, error) {
	for _, s := range samples {
		x := code(s, 1<<31)
		if x != x {
			return nil, errNotFinite
		}
		b = binary.LittleEndian.AppendUint32(b, uint32(int32(x)))
	}
	return b, nil
}

func encodeFloat32(b []byte, samples []float64) ([]byte, error) {
	for _, s := range samples {
		f := float32(s)
		if math.IsInf(float64(f), 0) && !math.IsInf(s, 0) {
			return nil, errTooLarge
		}
		b = binary.LittleEndian.AppendUint32(b, math.Float32bits(f))
	}
	return b, nil
}

func encodeFloat64(b []byte, samples []float64) ([]byte, error) {
	for _, s := range samples {
		b = binary.LittleEndian.AppendUint64(b, math.Float64bits(s))
	}
	return b, nil
}
