package capture

import (
	"fmt"
	"os"
	"path/filepath"
	"testing"
)

// BenchmarkReadAt streams ten seconds at 96 kHz from a file, one channel, in blocks of 4096. Bytes
// are those of the file; ns/sample is per sample delivered.
func BenchmarkReadAt(b *testing.B) {
	for _, c := range []struct {
		name string
		f    Format
	}{
		{"24-bit-mono", Format{Channels: 1, Bits: 24}},
		{"24-bit-stereo", Format{Channels: 2, Bits: 24}},
		{"16-bit-mono", Format{Channels: 1, Bits: 16}},
		{"16-bit-stereo", Format{Channels: 2, Bits: 16}},
		{"32-bit-stereo", Format{Channels: 2, Bits: 32}},
		{"float-32-stereo", Format{Channels: 2, Bits: 32, Float: true}},
		{"24-bit-8-channels", Format{Channels: 8, Bits: 24}},
	} {
		for _, hashing := range []bool{false, true} {
			b.Run(fmt.Sprintf("%s/hash=%t", c.name, hashing), func(b *testing.B) {
				benchmarkReadAt(b, c.f, hashing)
			})
		}
	}
}

func benchmarkReadAt(b *testing.B, f Format, hashing bool) {
	const frames = 960000
	path := filepath.Join(b.TempDir(), "take.wav")
	f.RateHz = 96000
	w, err := Create(path, f)
	if err != nil {
		b.Fatal(err)
	}
	block := make([]float64, frames/100*f.Channels)
	for i := range block {
		block[i] = place(i, 0)
	}
	for range 100 {
		if err := w.Write(block); err != nil {
			b.Fatal(err)
		}
	}
	if err := w.Close(); err != nil {
		b.Fatal(err)
	}
	info, err := os.Stat(path)
	if err != nil {
		b.Fatal(err)
	}
	dst := make([]float64, 4096)
	pass := func(take *Take) {
		ch := take.Channel(1)
		for at := int64(0); at < frames; at += int64(len(dst)) {
			if _, err := ch.ReadAt(dst, at); err != nil {
				b.Fatal(err)
			}
		}
	}
	open := func() *Take {
		take, err := Open(path)
		if err != nil {
			b.Fatal(err)
		}
		return take
	}
	hashed := open() // a second pass over the same take has nothing left to hash
	defer hashed.Close()
	pass(hashed)
	b.SetBytes(info.Size())
	b.ReportAllocs()
	for b.Loop() {
		if !hashing {
			pass(hashed)
			continue
		}
		take := open()
		pass(take)
		if _, err := take.SHA256(); err != nil {
			b.Fatal(err)
		}
		take.Close()
	}
	b.ReportMetric(float64(b.Elapsed().Nanoseconds())/float64(b.N)/frames, "ns/sample")
}
