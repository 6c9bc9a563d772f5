package capture

import (
	"bytes"
	"encoding/binary"
	"io"
	"math/rand/v2"
	"runtime"
	"testing"
	"time"
)

// soundFiles are small files that can be read, of each kind of header.
func soundFiles(t testing.TB) [][]byte {
	t.Helper()
	info := padded("LIST", join("INFO", padded("ICMT", []byte("SIMULATED\x00")), padded("ISFT", []byte("odd"))))
	bext := padded("bext", append([]byte("Saltmarsh bench"), make([]byte, 587)...))
	block := func(channels, container, bits int, float bool) []byte {
		return padded("data", sampleBlock(t, 40, channels, container, bits, float))
	}
	return [][]byte{
		smallMono(100),
		riffFile(plainFmt(1, 2, 96000, 24), info, block(2, 24, 24, false)),
		riffFile(bext, plainFmt(1, 1, 8000, 8), block(1, 8, 8, false), info),
		riffFile(extensibleFmt(1, 2, 48000, 32, 24), block(2, 32, 24, false)),
		riffFile(padded("JUNK", []byte("abc")), extensibleFmt(3, 3, 192000, 64, 64), block(3, 64, 64, true), bext),
		rf64File("RF64", 240, join("axml", u64(6)), plainFmt(1, 2, 48000, 24), rawChunk("axml", 0xFFFFFFFF, []byte("abcdef")),
			rawChunk("data", 0xFFFFFFFF, sampleBlock(t, 40, 2, 24, 24, false)), info),
		riffFile(plainFmt(1, 1, 48000, 16), rawChunk("data", 0, sampleBlock(t, 40, 1, 16, 16, false))),
		riffFile(plainFmt(1, 1, 48000, 16), rawChunk("data", 500, sampleBlock(t, 40, 1, 16, 16, false))),
	}
}

// mutate changes a file here and there: bytes, sizes, order, length.
func mutate(rng *rand.Rand, file []byte) []byte {
	b := bytes.Clone(file)
	for range 1 + rng.IntN(4) {
		if len(b) < 8 {
			return b
		}
		at := rng.IntN(min(len(b)-4, 160))
		switch rng.IntN(8) {
		case 0:
			b[at] = byte(rng.IntN(256))
		case 1:
			b[at] ^= 1 << rng.IntN(8)
		case 2:
			extreme := []uint32{0, 1, 2, 0x7FFFFFFF, 0x80000000, 0xFFFFFFFE, 0xFFFFFFFF, uint32(len(b)), uint32(rng.IntN(len(b)))}
			binary.LittleEndian.PutUint32(b[at:], extreme[rng.IntN(len(extreme))])
		case 3:
			binary.LittleEndian.PutUint16(b[at:], uint16(rng.IntN(1<<16)))
		case 4:
			b = b[:rng.IntN(len(b))]
		case 5:
			piece := b[at:min(len(b), at+rng.IntN(40))]
			b = join(b[:at], piece, b[at:])
		case 6:
			b = append(b[:at], b[min(len(b), at+rng.IntN(12)):]...)
		case 7:
			ids := []string{"RIFF", "RF64", "fmt ", "data", "LIST", "ds64", "bext", "JUNK", "\x00\x00\x00\x00"}
			copy(b[at:], ids[rng.IntN(len(ids))])
		}
	}
	return b
}

// tryFile opens and reads a file that may hold anything, and checks what holds for all of them.
func tryFile(t testing.TB, file []byte) (opened bool) {
	t.Helper()
	take, err := openBytes(file)
	if err != nil {
		if take != nil {
			t.Fatalf("NewTake returned a take with the error %v", err)
		}
		return false
	}
	f := take.Facts()
	if f.Channels < 1 || f.Channels > 64 || f.RateHz < 8000 || f.RateHz > 384000 || f.Frames < 1 || f.Bits < 8 || f.Bits > 64 ||
		f.Frames*int64(f.Channels) > int64(len(file)) || f.Seconds != float64(f.Frames)/float64(f.RateHz) || len(f.Comments) > maxComments {
		t.Fatalf("Facts() = %+v of %d bytes", f, len(file))
	}
	var dst [64]float64
	for c := 1; c <= f.Channels; c++ {
		ch := take.Channel(c)
		for _, frame := range []int64{0, max(0, f.Frames-int64(len(dst)))} {
			n, err := ch.ReadAt(dst[:], frame)
			if want := min(int64(len(dst)), f.Frames); int64(n) != want || err != nil {
				t.Fatalf("ReadAt(%d) = %d, %v, want %d", frame, n, err, want)
			}
			if f.Encoding == "integer" {
				for _, v := range dst[:n] {
					if !(v >= -1 && v < 1) {
						t.Fatalf("sample %v outside [-1, 1)", v)
					}
				}
			}
		}
		if n, err := ch.ReadAt(dst[:], f.Frames); n != 0 || err != io.EOF {
			t.Fatalf("ReadAt at the end = %d, %v, want 0, EOF", n, err)
		}
	}
	if got, err := take.SHA256(); got != sumOf(file) || err != nil {
		t.Fatalf("SHA256() = %s, %v, want %s", got, err, sumOf(file))
	}
	return true
}

func TestMutatedHeaders(t *testing.T) {
	const count = 10000
	files := soundFiles(t)
	for _, c := range brokenFiles() {
		if len(c.file) < 4096 {
			files = append(files, c.file)
		}
	}
	rng := rand.New(rand.NewPCG(20, 26))
	opened := 0
	for i := range count {
		file := mutate(rng, files[i%len(files)])
		if i%2 == 0 {
			file = mutate(rng, files[i/2%8]) // the sound ones more often
		}
		start := time.Now()
		if tryFile(t, file) {
			opened++
		}
		if took := time.Since(start); took > time.Second {
			t.Fatalf("mutation %d took %v: % x", i, took, file[:min(len(file), 200)])
		}
	}
	if opened < count/20 || opened > count*19/20 {
		t.Errorf("%d of %d mutations could be read; a share that small or large tests little", opened, count)
	}
}

// TestOpenAllocatesLittle bounds what opening takes, for files that ask for much.
func TestOpenAllocatesLittle(t *testing.T) {
	format, data := plainFmt(1, 1, 48000, 16), padded("data", make([]byte, 4))
	hostile := map[string][]byte{
		"huge list":       riffFile(rawChunk("LIST", 0xFFFFFFF0, []byte("INFOICMT\xff\xff\xff\x7f"))),
		"huge entry":      riffFile(padded("LIST", []byte("INFOICMT\xff\xff\xff\xff")), format, data),
		"huge fmt":        riffFile(rawChunk("fmt ", 0xFFFFFFF0, make([]byte, 40))),
		"huge bext":       riffFile(rawChunk("bext", 0xFFFFFFF0, make([]byte, 40))),
		"huge ds64 table": join("RF64", u32(0xFFFFFFFF), "WAVE", rawChunk("ds64", 0xFFFFFFF0, join(make([]byte, 24), u32(0xFFFFFFFF)))),
		"huge data":       riffFile(format, rawChunk("data", 0xFFFFFFF0, make([]byte, 40))),
		"empty chunks":    riffFile(bytes.Repeat(padded("JUNK", nil), 100000), format, data),
		"empty lists":     riffFile(bytes.Repeat(padded("LIST", []byte("INFO")), 100000), format, data),
		"many ds64":       join("RF64", u32(0xFFFFFFFF), "WAVE", bytes.Repeat(padded("ds64", make([]byte, 28)), 50000)),
		"empty data":      riffFile(format, bytes.Repeat(padded("data", nil), 100000)),
		"text":            bytes.Repeat([]byte("text "), 100000),
	}
	for _, f := range soundFiles(t) {
		hostile[string(f[:40])] = f
	}
	for name, file := range hostile {
		var before, after runtime.MemStats
		runtime.ReadMemStats(&before)
		start := time.Now()
		openBytes(file)
		took := time.Since(start)
		runtime.ReadMemStats(&after)
		// Chunk headers take some short-lived words each; nothing grows with what a header claims.
		if got, limit := after.TotalAlloc-before.TotalAlloc, uint64(4*len(file)+16<<10); got > limit {
			t.Errorf("%q: opening %d bytes allocates %d, want at most %d", name, len(file), got, limit)
		}
		if took > time.Second {
			t.Errorf("%q: opening took %v", name, took)
		}
	}
}

func FuzzOpen(f *testing.F) {
	for _, file := range soundFiles(f) {
		f.Add(file)
	}
	for _, c := range brokenFiles() {
		if len(c.file) < 4096 {
			f.Add(c.file)
		}
	}
	f.Fuzz(func(t *testing.T, file []byte) { tryFile(t, file) })
}
