package capture

import (
	"bytes"
	"crypto/sha256"
	"encoding/hex"
	"io"
	"math/rand/v2"
	"sync"
	"testing"
)

// hashedFile has chunks before and behind the samples, so that neither end of the data is an end of
// the file.
func hashedFile(t testing.TB, frames int) []byte {
	t.Helper()
	var b []byte
	for i := range frames {
		b = append(b, sampleBytes(t, place(i, 0), 24, 24, false)...)
		b = append(b, sampleBytes(t, place(i, 1), 24, 24, false)...)
	}
	return riffFile(padded("JUNK", make([]byte, 999)), plainFmt(1, 2, 48000, 24), padded("data", b),
		padded("LIST", join("INFO", padded("ICMT", []byte("behind")))))
}

func sumOf(b []byte) string {
	s := sha256.Sum256(b)
	return hex.EncodeToString(s[:])
}

// TestSHA256AnyReads holds for any pattern of reads: whatever was read before, the sum is that of the
// file.
func TestSHA256AnyReads(t *testing.T) {
	const frames = 40000
	file := hashedFile(t, frames)
	want := sumOf(file)
	rng := rand.New(rand.NewPCG(2, 3))
	dst := make([]float64, 30000)
	for round := range 150 {
		take := mustOpen(t, file)
		channels := []*Channel{take.Channel(1), take.Channel(2), take.Channel(1)}
		next := make([]int64, len(channels))
		for range rng.IntN(40) {
			i := rng.IntN(len(channels))
			switch rng.IntN(4) {
			case 0:
				next[i] = rng.Int64N(frames)
			case 1:
				next[i] = rng.Int64N(12000)
			}
			n, err := channels[i].ReadAt(dst[:1+rng.IntN(len(dst))], next[i])
			if err != nil && err != io.EOF {
				t.Fatal(err)
			}
			next[i] += int64(n)
			if rng.IntN(60) == 0 {
				if got, err := take.SHA256(); got != want || err != nil {
					t.Fatalf("round %d: SHA256() in between = %s, %v, want %s", round, got, err, want)
				}
			}
		}
		for range 2 {
			if got, err := take.SHA256(); got != want || err != nil {
				t.Fatalf("round %d: SHA256() = %s, %v, want %s", round, got, err, want)
			}
		}
	}
}

func TestSHA256ReadsOnlyWhatIsLeft(t *testing.T) {
	file := hashedFile(t, 40000)
	counter := &countingFile{Reader: bytes.NewReader(file)}
	take, err := NewTake("before.wav", counter, int64(len(file)))
	if err != nil {
		t.Fatal(err)
	}
	// A sparse look first: it must not keep the pass from counting.
	dst := make([]float64, 2000)
	for frame := int64(0); frame < 38000; frame += 9000 {
		if _, err := take.Channel(2).ReadAt(dst, frame); err != nil {
			t.Fatal(err)
		}
	}
	readAll(t, take.Channel(1))
	counter.bytes = 0
	if got, err := take.SHA256(); got != sumOf(file) || err != nil {
		t.Errorf("SHA256() = %s, %v, want %s", got, err, sumOf(file))
	}
	if behind := int64(8 + 4 + 8 + 6); counter.bytes != behind {
		t.Errorf("SHA256 read %d bytes after a whole pass, want the %d behind the samples", counter.bytes, behind)
	}
}

// TestTwoChannelsAtOnce is of most use under the race detector.
func TestTwoChannelsAtOnce(t *testing.T) {
	const frames = 60000
	file := hashedFile(t, frames)
	for range 10 {
		counter := &countingFile{Reader: bytes.NewReader(file)}
		take, err := NewTake("before.wav", onlyReaderAt{counter.Reader}, int64(len(file)))
		if err != nil {
			t.Fatal(err)
		}
		var all sync.WaitGroup
		for c := range 2 {
			all.Go(func() {
				dst := make([]float64, 3000)
				ch := take.Channel(c + 1)
				for frame := int64(0); frame < frames; frame += int64(len(dst)) {
					if _, err := ch.ReadAt(dst, frame); err != nil {
						t.Error(err)
						return
					}
					if dst[7] != place(int(frame)+7, c) {
						t.Errorf("channel %d frame %d = %v, want %v", c+1, frame+7, dst[7], place(int(frame)+7, c))
						return
					}
				}
			})
		}
		all.Go(func() {
			if got, err := take.SHA256(); got != sumOf(file) || err != nil {
				t.Errorf("SHA256() at the same time = %s, %v, want %s", got, err, sumOf(file))
			}
		})
		all.Wait()
		if got, err := take.SHA256(); got != sumOf(file) || err != nil {
			t.Errorf("SHA256() = %s, %v, want %s", got, err, sumOf(file))
		}
	}
}

type onlyReaderAt struct{ io.ReaderAt }
