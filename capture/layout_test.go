package capture

import (
	"bytes"
	"io"
	"slices"
	"testing"
)

func TestChunksInAnyOrder(t *testing.T) {
	format := plainFmt(1, 1, 48000, 16)
	data := padded("data", sampleBlock(t, 7, 1, 16, 16, false))
	odd := padded("JUNK", []byte("odd"))
	oddNoPad := rawChunk("note", 3, []byte("odd"))
	info := padded("LIST", join("INFO", padded("ICMT", []byte("first take\x00")), padded("INAM", []byte("0417\x00"))))
	infoNoPad := padded("LIST", join("INFO", rawChunk("ICMT", 11, []byte("first take\x00")), rawChunk("INAM", 5, []byte("0417\x00"))))
	bext := padded("bext", append([]byte("Saltmarsh bench"), make([]byte, 587)...))
	cue := padded("cue ", make([]byte, 28))
	for _, c := range []struct {
		name     string
		chunks   [][]byte
		comments []string
	}{
		{"plain", [][]byte{format, data}, nil},
		{"before fmt", [][]byte{bext, odd, format, data}, []string{"Saltmarsh bench"}},
		{"between", [][]byte{format, odd, info, data}, []string{"first take", "0417"}},
		{"behind", [][]byte{format, data, cue, info, bext}, []string{"first take", "0417", "Saltmarsh bench"}},
		{"fmt behind data", [][]byte{odd, data, format}, nil},
		{"pad byte missing", [][]byte{oddNoPad, format, oddNoPad, data}, nil},
		{"pad byte missing before unusual chunk", [][]byte{oddNoPad, rawChunk("zzzz", 4, []byte("\x01\x02\x03\x04")), format, data}, nil},
		{"pad byte missing before a chunk whose length is a letter", [][]byte{oddNoPad, extensibleFmt(1, 1, 48000, 16, 16), data}, nil},
		{"pad byte before unusual chunk", [][]byte{odd, padded("zzzz", []byte("1234")), format, data}, nil},
		{"pad byte missing in list", [][]byte{infoNoPad, format, data}, []string{"first take", "0417"}},
		{"pad byte not zero", [][]byte{join(oddNoPad, "\xAA"), format, data}, nil},
		{"pad byte a letter", [][]byte{join(oddNoPad, "f"), format, data}, nil},
		{"two of each", [][]byte{format, data, plainFmt(1, 2, 8000, 8), padded("data", make([]byte, 8))}, nil},
		{"list of another kind", [][]byte{padded("LIST", []byte("adtlxxxx")), format, data}, nil},
		{"empty data before the data", [][]byte{format, padded("data", nil), data}, nil},
		{"stray bytes behind", [][]byte{format, data, []byte("\x00\x01\x02\x03\x04\x05\x06\x07\x08")}, nil},
		{"chunk cut off behind", [][]byte{format, data, rawChunk("id3 ", 5000, []byte("abc"))}, nil},
	} {
		t.Run(c.name, func(t *testing.T) {
			take := mustOpen(t, riffFile(c.chunks...))
			f := take.Facts()
			if f.Frames != 7 || f.RateHz != 48000 || !slices.Equal(f.Comments, c.comments) {
				t.Errorf("Facts() = %+v, want 7 frames and comments %q", f, c.comments)
			}
			wantProblem(t, f, "", 0)
			if got, want := readAll(t, take.Channel(1))[4], testSample(4, 0, 16); got != want {
				t.Errorf("sample 4 = %v, want %v", got, want)
			}
		})
	}
}

func TestLengthThatDoesNotHold(t *testing.T) {
	format := plainFmt(1, 1, 8000, 16)
	audio := sampleBlock(t, 4000, 1, 16, 16, false) // half a second
	file := func(size int64, behind ...[]byte) []byte {
		return riffFile(append([][]byte{format, rawChunk("data", size, audio)}, behind...)...)
	}
	info := padded("LIST", join("INFO", padded("ICMT", []byte("x\x00"))))
	for _, c := range []struct {
		name    string
		file    []byte
		frames  int64
		problem string
	}{
		{"size 0", file(0), 4000, NotClosed},
		{"size 0 and RIFF size 0", append([]byte("RIFF\x00\x00\x00\x00"), file(0)[8:]...), 4000, NotClosed},
		{"size 0xFFFFFFFF", file(0xFFFFFFFF), 4000, NotClosed},
		{"size of a pipe, 2 GiB", file(0x7FFFF000), 4000, NotClosed},
		{"size of a pipe, 2 GiB, whole frames", file(0x7FFFEFFF), 4000, NotClosed},
		{"size of a pipe, 4 GiB", file(0xFFFFF000), 4000, NotClosed},
		{"cut", file(16000), 4000, CutShort},
		{"cut by a byte", file(8001), 4000, CutShort},
		{"whole", file(8000), 4000, ""},
		{"part of a frame", file(7999, []byte{0}, info), 3999, ""},
		{"odd and no pad byte at the end", file(7999)[:len(file(0))-1], 3999, ""},
	} {
		t.Run(c.name, func(t *testing.T) {
			take := mustOpen(t, c.file)
			f := take.Facts()
			if f.Frames != c.frames {
				t.Errorf("Frames = %d, want %d", f.Frames, c.frames)
			}
			wantProblem(t, f, c.problem, float64(c.frames)/8000)
			if got := readAll(t, take.Channel(1)); int64(len(got)) != c.frames || got[3] != testSample(3, 0, 16) {
				t.Errorf("%d samples, the fourth %v; want %d and %v", len(got), got[3], c.frames, testSample(3, 0, 16))
			}
		})
	}
	cut := mustOpen(t, file(16000)).Facts().Problems[0].Text
	if want := "the header tells of 1.00 s, the file ends after 0.50 s; " + hintAgain; cut != want {
		t.Errorf("cut-short says %q, want %q", cut, want)
	}
}

// rf64File is a file after EBU Tech 3306: ds64 first, 0xFFFFFFFF in the 32-bit fields.
func rf64File(id string, dataBytes uint64, table []byte, chunks ...[]byte) []byte {
	ds64 := padded("ds64", join(u64(1<<40), u64(dataBytes), u64(dataBytes/2), u32(int64(len(table)/12)), table))
	b := join(id, u32(0xFFFFFFFF), "WAVE", ds64)
	for _, c := range chunks {
		b = append(b, c...)
	}
	return b
}

func TestSizesOf64Bits(t *testing.T) {
	format := plainFmt(1, 1, 8000, 16)
	audio := sampleBlock(t, 4000, 1, 16, 16, false)
	info := padded("LIST", join("INFO", padded("ICMT", []byte("end\x00"))))
	data := rawChunk("data", 0xFFFFFFFF, audio)
	long := rawChunk("axml", 0xFFFFFFFF, []byte("abcdef"))
	for _, c := range []struct {
		name    string
		file    []byte
		problem string
		comment bool
	}{
		{"RF64", rf64File("RF64", 8000, nil, format, data, info), "", true},
		{"BW64", rf64File("BW64", 8000, nil, format, data, info), "", true},
		{"a long chunk of the table", rf64File("RF64", 8000, join("axml", u64(6)), format, long, data, info), "", true},
		{"size in the data chunk stands", rf64File("RF64", 77, nil, format, rawChunk("data", 8000, audio), info), "", true},
		{"size 0 in the data chunk", rf64File("RF64", 8000, nil, format, rawChunk("data", 0, audio), info), "", true},
		{"not closed, 0", rf64File("RF64", 0, nil, format, data), NotClosed, false},
		{"not closed, all ones", rf64File("RF64", 1<<64-1, nil, format, data), NotClosed, false},
		{"not closed, no ds64", join("RF64", u32(0xFFFFFFFF), "WAVE", format, data), NotClosed, false},
		{"cut short", rf64File("RF64", 8002, nil, format, data), CutShort, false},
		{"cut short over 4 GiB", rf64File("RF64", 5<<30, nil, format, data), CutShort, false},
		{"RIFF with ds64", rf64File("RIFF", 8000, nil, format, data, info), "", true},
		{"ds64 too short", join("RF64", u32(0xFFFFFFFF), "WAVE", padded("ds64", make([]byte, 16)), format, data), NotClosed, false},
	} {
		t.Run(c.name, func(t *testing.T) {
			f := mustOpen(t, c.file).Facts()
			if f.Frames != 4000 || (len(f.Comments) == 1) != c.comment {
				t.Errorf("Facts() = %+v, want 4000 frames, comment %v", f, c.comment)
			}
			wantProblem(t, f, c.problem, 0.5)
		})
	}
}

// A hugeFile has a header, then samples that tell their place, then a tail; nothing of it is stored.
type hugeFile struct {
	head, tail []byte
	sizeBytes  int64
}

func (h hugeFile) ReadAt(b []byte, off int64) (int, error) {
	for i := range b {
		at := off + int64(i)
		tailAt := h.sizeBytes - int64(len(h.tail))
		switch {
		case at >= h.sizeBytes:
			return i, io.EOF
		case at < int64(len(h.head)):
			b[i] = h.head[at]
		case at >= tailAt:
			b[i] = h.tail[at-tailAt]
		default:
			b[i] = placeByte(at - int64(len(h.head)))
		}
	}
	return len(b), nil
}

func placeByte(at int64) byte { return byte((at/3*2654435761 + at%3) >> 13) }

func TestFilesOver4GiB(t *testing.T) {
	const frames = int64(3) << 30
	const dataBytes = 3 * frames // 9 GiB
	info := padded("LIST", join("INFO", padded("ICMT", []byte("far out\x00"))))
	format := plainFmt(1, 1, 96000, 24)
	ds64 := padded("ds64", join(u64(uint64(dataBytes)+100), u64(uint64(dataBytes)), u64(uint64(frames)), u32(0)))
	for _, c := range []struct {
		name    string
		head    []byte
		tail    []byte
		problem string
	}{
		{"RF64", join("RF64", u32(0xFFFFFFFF), "WAVE", ds64, format, rawChunk("data", 0xFFFFFFFF, nil)), info, ""},
		{"RIFF that outgrew its sizes", join("RIFF", u32(0xFFFFFFFF), "WAVE", format, rawChunk("data", 0xFFFFFFFF, nil)), nil, NotClosed},
	} {
		t.Run(c.name, func(t *testing.T) {
			h := hugeFile{c.head, c.tail, int64(len(c.head)) + dataBytes + int64(len(c.tail))}
			take, err := NewTake("before.wav", h, h.sizeBytes)
			if err != nil {
				t.Fatal(err)
			}
			f := take.Facts()
			if f.Frames != frames || f.Seconds != float64(frames)/96000 || (len(f.Comments) == 1) != (c.tail != nil) {
				t.Errorf("Facts() = %+v", f)
			}
			wantProblem(t, f, c.problem, float64(frames)/96000)
			ch := take.Channel(1)
			dst := make([]float64, 100)
			for _, frame := range []int64{0, 1<<32/3 - 50, 1<<31 - 50, frames - 100, frames - 7} {
				n, err := ch.ReadAt(dst, frame)
				if want := min(100, frames-frame); int64(n) != want || err != nil {
					t.Fatalf("ReadAt(%d) = %d, %v, want %d", frame, n, err, want)
				}
				for i, got := range dst[:n] {
					at := 3 * (frame + int64(i))
					want := littleEndian24([]byte{placeByte(at), placeByte(at + 1), placeByte(at + 2)})
					if got != want {
						t.Fatalf("frame %d = %v, want %v", frame+int64(i), got, want)
					}
				}
			}
			if n, err := ch.ReadAt(dst, frames); n != 0 || err != io.EOF {
				t.Errorf("ReadAt at the end = %d, %v, want 0, EOF", n, err)
			}
		})
	}
}

func TestCommentsAreBoundedAndSafeToPrint(t *testing.T) {
	format, data := plainFmt(1, 1, 48000, 16), padded("data", make([]byte, 4))
	texts := func(chunks ...[]byte) []string {
		return mustOpen(t, riffFile(append(chunks, format, data)...)).Facts().Comments
	}
	list := func(parts ...any) []byte { return padded("LIST", join(append([]any{"INFO"}, parts...)...)) }

	got := texts(list(padded("ICMT", []byte("one\x1b[2Jtwo\r\nthree\xff\x00rest\x00"))))
	if want := []string{"one [2Jtwo \nthree?"}; !slices.Equal(got, want) {
		t.Errorf("Comments = %q, want %q", got, want)
	}
	if got := texts(list(rawChunk("ICMT", 0xFFFFFFFF, []byte("text")))); !slices.Equal(got, []string{"text"}) {
		t.Errorf("Comments with a hostile size = %q, want text", got)
	}
	if got := texts(list(padded("ICMT", []byte(" \x00")), "ICM")); len(got) != 0 {
		t.Errorf("Comments = %q, want none", got)
	}
	var many []byte
	for range 500 {
		many = append(many, padded("ICMT", []byte("again"))...)
	}
	if got := texts(list(many)); len(got) != maxComments {
		t.Errorf("%d comments kept, want %d", len(got), maxComments)
	}
	if got := texts(list(padded("ICMT", make([]byte, 300)), padded("ICMT", slices.Repeat([]byte("a"), 50000)))); len(got) != 1 || len(got[0]) != maxCommentBytes {
		t.Errorf("%d comments kept, want one of %d bytes", len(got), maxCommentBytes)
	}
}

func TestCommentsCostLittleReading(t *testing.T) {
	blank := padded("LIST", join("INFO", padded("ICMT", make([]byte, 60000))))
	file := riffFile(bytes.Repeat(blank, 100), plainFmt(1, 1, 48000, 16), padded("data", make([]byte, 4)))
	counter := &countingFile{Reader: bytes.NewReader(file)}
	if _, err := NewTake("before.wav", counter, int64(len(file))); err != nil {
		t.Fatal(err)
	}
	if counter.bytes > 70000 {
		t.Errorf("opening read %d bytes of 6 MB of comments, want at most 70000", counter.bytes)
	}
}
