package capture

import (
	"bytes"
	"encoding/csv"
	"errors"
	"fmt"
	"io/fs"
	"math"
	"os"
	"path/filepath"
	"slices"
	"strconv"
	"strings"
	"testing"

	"github.com/go-audio/wav"
)

// interleaved is a block of test samples that so many bits hold exactly.
func interleaved(frames, channels, bits int) []float64 {
	var all []float64
	for f := range frames {
		for c := range channels {
			all = append(all, testSample(f, c, bits))
		}
	}
	return all
}

func (f Format) significantBits() int {
	if f.Float {
		return 24
	}
	return f.Bits
}

func writeTake(t testing.TB, path string, f Format, samples []float64) {
	t.Helper()
	w, err := Create(path, f)
	if err != nil {
		t.Fatal(err)
	}
	defer w.Abort()
	for len(samples) > 0 { // in pieces of whole frames
		n := min(len(samples), 700*f.Channels)
		if err := w.Write(samples[:n]); err != nil {
			t.Fatal(err)
		}
		samples = samples[n:]
	}
	if err := w.Close(); err != nil {
		t.Fatal(err)
	}
}

func everyWrittenFormat() []Format {
	var all []Format
	for _, bits := range []int{8, 16, 24, 32, -32, -64} {
		for _, channels := range []int{1, 2, 3, 64} {
			for _, extensible := range []bool{false, true} {
				all = append(all, Format{RateHz: 48000, Channels: channels, Bits: max(bits, -bits), Float: bits < 0, Extensible: extensible})
			}
		}
	}
	return all
}

func (f Format) String() string {
	kind := map[bool]string{false: "PCM", true: "float"}[f.Float]
	if f.Extensible {
		kind += " extensible"
	}
	return fmt.Sprintf("%s %d bits %d channels", kind, f.Bits, f.Channels)
}

func TestWriteReadRoundTrip(t *testing.T) {
	dir := t.TempDir()
	const frames = 1501 // an odd number, for the pad byte
	for i, f := range everyWrittenFormat() {
		t.Run(f.String(), func(t *testing.T) {
			f.Comment = strings.Repeat("SIMULATED", i%3)
			f.Frames = int64(i % 2 * frames)
			path := filepath.Join(dir, fmt.Sprint(i, ".wav"))
			bits := f.significantBits()
			writeTake(t, path, f, interleaved(frames, f.Channels, bits))
			take, err := Open(path)
			if err != nil {
				t.Fatal(err)
			}
			defer take.Close()
			got := take.Facts()
			if got.RateHz != 48000 || got.Channels != f.Channels || got.Bits != f.Bits || got.Frames != frames ||
				(got.Encoding == "float") != f.Float || len(got.Problems) > 0 || strings.Join(got.Comments, "|") != f.Comment {
				t.Errorf("Facts() = %+v, want those of %v", got, f)
			}
			for _, c := range []int{0, f.Channels - 1} {
				for i, v := range readAll(t, take.Channel(c+1)) {
					if v != testSample(i, c, bits) {
						t.Fatalf("channel %d frame %d = %v, want %v", c+1, i, v, testSample(i, c, bits))
					}
				}
			}
		})
	}
}

func TestWriteRounds(t *testing.T) {
	const q = 1.0 / (1 << 15)
	for _, c := range []struct{ in, want float64 }{
		{0.49 * q, 0}, {0.51 * q, q}, {-0.51 * q, -q}, {1.25 * q, q},
		{1, 1 - q}, {5, 1 - q}, {1 - 0.4*q, 1 - q}, {-1, -1}, {-1.5, -1}, {math.MaxFloat64, 1 - q}, {-math.MaxFloat64, -1},
	} {
		path := filepath.Join(t.TempDir(), "a.wav")
		writeTake(t, path, Format{RateHz: 8000, Channels: 1, Bits: 16}, []float64{c.in})
		take, err := Open(path)
		if err != nil {
			t.Fatal(err)
		}
		if got := readAll(t, take.Channel(1))[0]; got != c.want {
			t.Errorf("%v was written as %v, want %v", c.in, got, c.want)
		}
		take.Close()
	}
}

func TestWriteNotFinite(t *testing.T) {
	for _, v := range []float64{math.NaN(), math.Inf(1), math.Inf(-1), math.MaxFloat64} {
		for _, f := range []Format{{Bits: 8}, {Bits: 16}, {Bits: 24}, {Bits: 32}, {Bits: 32, Float: true}, {Bits: 64, Float: true}} {
			f.RateHz, f.Channels = 48000, 1
			finite := !math.IsNaN(v) && !math.IsInf(v, 0)
			fails := !f.Float && !finite || f.Float && f.Bits == 32 && finite
			path := filepath.Join(t.TempDir(), "a.wav")
			w, err := Create(path, f)
			if err != nil {
				t.Fatal(err)
			}
			if err := w.Write([]float64{0, v}); (err != nil) != fails {
				t.Errorf("%v: Write(%v): %v, want an error: %v", f, v, err, fails)
			}
			if err := w.Close(); (err != nil) != fails {
				t.Errorf("%v: Close after Write(%v): %v, want an error: %v", f, v, err, fails)
			}
			if _, err := os.Stat(path); (err != nil) != fails {
				t.Errorf("%v: after Write(%v) the file: %v", f, v, err)
			}
		}
	}
}

// TestHeaderFollowsPublishedLayout looks up each field of a written header in the table.
func TestHeaderFollowsPublishedLayout(t *testing.T) {
	f := Format{RateHz: 96000, Channels: 2, Bits: 24, Extensible: true, Frames: 5}
	path := filepath.Join(t.TempDir(), "a.wav")
	writeTake(t, path, f, make([]float64, 10))
	file, err := os.ReadFile(path)
	if err != nil {
		t.Fatal(err)
	}
	table, err := os.Open("testdata/wav_format.csv")
	if err != nil {
		t.Fatal(err)
	}
	defer table.Close()
	rows, err := csv.NewReader(table).ReadAll()
	if err != nil {
		t.Fatal(err)
	}
	tail := "\x00\x00\x00\x00\x10\x00\x80\x00\x00\xAA\x00\x38\x9B\x71"
	want := map[string][]byte{
		"RIFF header 0": []byte("RIFF"), "RIFF header 4": u32(int64(len(file) - 8)), "RIFF header 8": []byte("WAVE"),
		"fmt payload 0": u16(0xFFFE), "fmt payload 2": u16(2), "fmt payload 4": u32(96000), "fmt payload 8": u32(96000 * 6),
		"fmt payload 12": u16(6), "fmt payload 14": u16(24), "fmt payload 16": u16(22),
		"fmt extensible 18": u16(24), "fmt extensible 20": u32(3), "fmt extensible 24": join(u16(1), tail),
		"sub-format tail 26": []byte(tail),
	}
	if string(file[12:20]) != "fmt \x28\x00\x00\x00" {
		t.Fatalf("the first chunk begins with %q, want fmt of 40 bytes", file[12:20])
	}
	seen := 0
	for _, row := range rows {
		offset, err := strconv.Atoi(row[1])
		field, ok := want[row[0]+" "+row[1]]
		if err != nil || !ok {
			continue
		}
		seen++
		if row[0] != "RIFF header" {
			offset += 20 // of the first chunk's payload
		}
		if got := file[offset : offset+len(field)]; !bytes.Equal(got, field) {
			t.Errorf("%s at %d is % x, want % x", row[4], offset, got, field)
		}
	}
	if seen != len(want) {
		t.Errorf("%d fields found in the table, want %d", seen, len(want))
	}
	if got := string(file[60:80]); got != "fact\x04\x00\x00\x00\x05\x00\x00\x00data\x1e\x00\x00\x00" {
		t.Errorf("behind fmt stands %q, want fact with 5 frames, data of 30 bytes", got)
	}
}

func TestPlainHeaderIs44Bytes(t *testing.T) {
	path := filepath.Join(t.TempDir(), "a.wav")
	writeTake(t, path, Format{RateHz: 8000, Channels: 1, Bits: 8, Frames: 3}, []float64{0, 0.5, -1})
	got, err := os.ReadFile(path)
	want := riffFile(plainFmt(1, 1, 8000, 8), padded("data", []byte{128, 192, 0}))
	if err != nil || !bytes.Equal(got, want) {
		t.Errorf("file is % x, %v, want % x", got, err, want)
	}
}

func TestCommentStandsBeforeData(t *testing.T) {
	path := filepath.Join(t.TempDir(), "a.wav")
	writeTake(t, path, Format{RateHz: 8000, Channels: 1, Bits: 32, Float: true, Comment: "even"}, []float64{0.25})
	got, err := os.ReadFile(path)
	want := riffFile(padded("JUNK", make([]byte, 28)), padded("fmt ", join(fmtFields(3, 1, 8000, 4, 32), u16(0))), padded("fact", u32(1)),
		padded("LIST", join("INFO", padded("ICMT", []byte("even\x00")))), padded("data", []byte("\x00\x00\x80\x3e")))
	if err != nil || !bytes.Equal(got, want) {
		t.Errorf("file is %q, %v, want %q", got, err, want)
	}
}

// TestOutgrowsRIFF writes past the limit of 32-bit sizes, which is lowered for that.
func TestOutgrowsRIFF(t *testing.T) {
	dir := t.TempDir()
	for _, extensible := range []bool{false, true} {
		path := filepath.Join(dir, fmt.Sprint(extensible, ".wav"))
		w, err := Create(path, Format{RateHz: 48000, Channels: 1, Bits: 24, Extensible: extensible, Comment: "long"})
		if err != nil {
			t.Fatal(err)
		}
		w.riffMax = 1000
		if err := w.Write(interleaved(501, 1, 24)); err != nil {
			t.Fatal(err)
		}
		if err := w.Close(); err != nil {
			t.Fatal(err)
		}
		file, err := os.ReadFile(path)
		if err != nil {
			t.Fatal(err)
		}
		ds64 := join("RF64", u32(0xFFFFFFFF), "WAVE", "ds64", u32(28), u64(uint64(len(file)-8)), u64(1503), u64(501), u32(0))
		if !bytes.HasPrefix(file, ds64) || !bytes.Contains(file, []byte("data\xff\xff\xff\xff")) {
			t.Errorf("file begins with %q, want %q", file[:80], ds64)
		}
		take, err := Open(path)
		if err != nil {
			t.Fatal(err)
		}
		if f := take.Facts(); f.Frames != 501 || len(f.Problems) > 0 || !slices.Equal(f.Comments, []string{"long"}) {
			t.Errorf("Facts() = %+v, want 501 frames", f)
		}
		if got, want := readAll(t, take.Channel(1)), interleaved(501, 1, 24); !slices.Equal(got, want) {
			t.Error("samples differ")
		}
		take.Close()
	}
	w, err := Create(filepath.Join(dir, "announced.wav"), Format{RateHz: 48000, Channels: 1, Bits: 24, Frames: 10})
	if err != nil {
		t.Fatal(err)
	}
	w.riffMax = 1000
	if err := w.Write(make([]float64, 501)); err == nil || !strings.Contains(err.Error(), "only 10 frames were announced") {
		t.Errorf("Write beyond what was announced: %v, want an error", err)
	}
	w.Abort()
	if w, err = Create(filepath.Join(dir, "announced.wav"), Format{RateHz: 48000, Channels: 1, Bits: 24, Frames: 2e9}); err != nil {
		t.Fatal(err)
	}
	if !w.room64 {
		t.Error("no room for 64-bit sizes in a take of 6 GB")
	}
	w.Abort()
}

func listing(t *testing.T, dir string) (names []string) {
	t.Helper()
	entries, err := os.ReadDir(dir)
	if err != nil {
		t.Fatal(err)
	}
	for _, e := range entries {
		names = append(names, e.Name())
	}
	return names
}

func TestNothingHalfWritten(t *testing.T) {
	dir := t.TempDir()
	path := filepath.Join(dir, "after.wav")
	f := Format{RateHz: 48000, Channels: 2, Bits: 16}
	create := func() *Writer {
		t.Helper()
		w, err := Create(path, f)
		if err != nil {
			t.Fatal(err)
		}
		if err := w.Write([]float64{0.5, -0.5}); err != nil {
			t.Fatal(err)
		}
		return w
	}
	w := create()
	if names := listing(t, dir); len(names) != 1 || strings.HasSuffix(names[0], ".wav") {
		t.Errorf("while writing the folder holds %q, want one file that is no .wav", names)
	}
	if err := w.Abort(); err != nil {
		t.Errorf("Abort: %v", err)
	}
	if names := listing(t, dir); len(names) != 0 {
		t.Errorf("after Abort the folder holds %q", names)
	}
	if err := w.Write([]float64{0, 0}); !errors.Is(err, fs.ErrClosed) {
		t.Errorf("Write after Abort: %v, want it closed", err)
	}
	if err := w.Close(); !errors.Is(err, fs.ErrClosed) {
		t.Errorf("Close after Abort: %v, want it closed", err)
	}

	w, other := create(), create() // two at once on one target
	if err := w.Close(); err != nil {
		t.Errorf("Close: %v", err)
	}
	if err := w.Abort(); err != nil {
		t.Errorf("Abort after Close: %v", err)
	}
	other.Abort()
	before, err := os.ReadFile(path)
	if err != nil {
		t.Fatal(err)
	}
	w = create()
	if err := w.Write([]float64{1}); err == nil || !strings.Contains(err.Error(), "no whole frames") {
		t.Errorf("Write of half a frame: %v, want an error", err)
	}
	if err := w.Close(); err == nil {
		t.Error("Close after a failed Write succeeded")
	}
	if w, err = Create(path, f); err != nil {
		t.Fatal(err)
	}
	if err := w.Close(); err == nil || !strings.Contains(err.Error(), "no samples") {
		t.Errorf("Close with nothing written: %v, want an error", err)
	}
	after, err := os.ReadFile(path)
	if err != nil || !bytes.Equal(before, after) {
		t.Errorf("the old file was touched: %v", err)
	}
	if names := listing(t, dir); !slices.Equal(names, []string{"after.wav"}) {
		t.Errorf("the folder holds %q, want after.wav alone", names)
	}
}

func TestCreateRefuses(t *testing.T) {
	dir := t.TempDir()
	good := Format{RateHz: 48000, Channels: 1, Bits: 24}
	for _, c := range []struct {
		text   string
		change func(*Format)
	}{
		{"0 channels", func(f *Format) { f.Channels = 0 }},
		{"65 channels", func(f *Format) { f.Channels = 65 }},
		{"7999 Hz", func(f *Format) { f.RateHz = 7999 }},
		{"384001 Hz", func(f *Format) { f.RateHz = 384001 }},
		{"integer samples of 20 bits", func(f *Format) { f.Bits = 20 }},
		{"integer samples of 64 bits", func(f *Format) { f.Bits = 64 }},
		{"float samples of 24 bits", func(f *Format) { f.Float = true }},
		{"comment of 4001 bytes", func(f *Format) { f.Comment = strings.Repeat("a", 4001) }},
		{"not plain text", func(f *Format) { f.Comment = "a\x00b" }},
		{"not plain text", func(f *Format) { f.Comment = "a\xff" }},
		{"-1 frames", func(f *Format) { f.Frames = -1 }},
	} {
		f := good
		c.change(&f)
		w, err := Create(filepath.Join(dir, "a.wav"), f)
		if w != nil || err == nil || !strings.Contains(err.Error(), c.text) {
			t.Errorf("Create(%+v) = %v, %v, want an error with %q", f, w, err, c.text)
		}
	}
	if _, err := Create(dir, good); err == nil || !strings.Contains(err.Error(), "folder") {
		t.Errorf("Create(folder): %v, want an error", err)
	}
	if _, err := Create(filepath.Join(dir, "none", "a.wav"), good); !errors.Is(err, fs.ErrNotExist) {
		t.Errorf("Create in a missing folder: %v, want ErrNotExist", err)
	}
	if names := listing(t, dir); len(names) != 0 {
		t.Errorf("the folder holds %q, want nothing", names)
	}
}

// TestLibraryReadsWrittenTakes reads plain PCM takes with the WAV library's own sample decoder.
func TestLibraryReadsWrittenTakes(t *testing.T) {
	dir := t.TempDir()
	for _, bits := range []int{8, 16, 24, 32} {
		path := filepath.Join(dir, fmt.Sprint(bits, ".wav"))
		writeTake(t, path, Format{RateHz: 44100, Channels: 2, Bits: bits, Comment: "SIMULATED"}, interleaved(100, 2, bits))
		file, err := os.Open(path)
		if err != nil {
			t.Fatal(err)
		}
		d := wav.NewDecoder(file)
		buf, err := d.FullPCMBuffer()
		if err != nil {
			t.Fatal(err)
		}
		file.Close()
		if d.Metadata == nil || d.Metadata.Comments != "SIMULATED" || d.SampleRate != 44100 || len(buf.Data) != 200 {
			t.Errorf("%d bits: %d samples, metadata %+v", bits, len(buf.Data), d.Metadata)
		}
		for i, v := range buf.Data {
			want := int(testSample(i/2, i%2, bits) * math.Pow(2, float64(bits-1)))
			if bits == 8 {
				want += 128
			}
			if v != want {
				t.Fatalf("%d bits: sample %d = %d, want %d", bits, i, v, want)
			}
		}
	}
}
