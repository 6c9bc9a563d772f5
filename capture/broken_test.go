package capture

import (
	"errors"
	"io/fs"
	"os"
	"path/filepath"
	"slices"
	"strings"
	"testing"
)

type brokenFile struct {
	name   string
	file   []byte
	offset int64
	text   string
}

// brokenFiles are files that cannot be read, each with what the error must say; they also seed the
// mutations.
func brokenFiles() []brokenFile {
	audio := padded("data", make([]byte, 48))
	wave := func(fields []byte) []byte { return riffFile(padded("fmt ", fields), audio) }
	tag := func(n int) []byte { return wave(fmtFields(n, 1, 8000, 1, 8)) }
	extensible := func(change func([]byte)) []byte {
		b := extensibleFmt(1, 2, 48000, 32, 24)
		change(b[8:])
		return riffFile(b, audio)
	}
	good := plainFmt(1, 1, 48000, 16)
	manyChunks := slices.Repeat(padded("JUNK", nil), 3000)
	return []brokenFile{
		{"µ-law", tag(7), 20, "format tag 7 is µ-law, not PCM"},
		{"A-law", tag(6), 20, "format tag 6 is A-law, not PCM"},
		{"ADPCM", tag(2), 20, "format tag 2 is ADPCM (Microsoft), not PCM"},
		{"IMA ADPCM", tag(17), 20, "format tag 17 is ADPCM (IMA), not PCM"},
		{"GSM", tag(0x31), 20, "format tag 49 is GSM 6.10, not PCM"},
		{"MP3 in WAV", tag(85), 20, "format tag 85 is MP3 in WAV, not PCM"},
		{"unknown tag", tag(0x1234), 20, "format tag 4660 is an unknown coding, not PCM"},
		{"µ-law extensible", extensible(func(b []byte) { b[24] = 7 }), 44, "format tag 7 is µ-law"},
		{"foreign sub-format", extensible(func(b []byte) { b[39] = 0 }), 44, "sub-format 01 00 00"},
		{"valid bits too many", extensible(func(b []byte) { b[18] = 33 }), 38, "33 valid bits in a container of 32"},
		{"valid bits too few", extensible(func(b []byte) { b[18] = 7 }), 38, "7 valid bits"},
		{"extensible too short", riffFile(padded("fmt ", fmtFields(0xFFFE, 1, 48000, 2, 16)), audio), 20, "the extensible fmt chunk holds 16 bytes, it needs 40"},
		{"no channels", wave(fmtFields(1, 0, 48000, 2, 16)), 22, "0 channels"},
		{"65 channels", wave(fmtFields(1, 65, 48000, 130, 16)), 22, "65 channels"},
		{"rate 0", wave(fmtFields(1, 1, 0, 2, 16)), 24, "a sample rate of 0 Hz"},
		{"rate too low", wave(fmtFields(1, 1, 7999, 2, 16)), 24, "7999 Hz"},
		{"rate too high", wave(fmtFields(1, 1, 384001, 2, 16)), 24, "384001 Hz"},
		{"bits 0", wave(fmtFields(1, 1, 48000, 2, 0)), 34, "integer samples of 0 bits"},
		{"bits 64 integer", wave(fmtFields(1, 1, 48000, 8, 64)), 34, "integer samples of 64 bits"},
		{"float 16", wave(fmtFields(3, 1, 48000, 2, 16)), 34, "float samples of 16 bits"},
		{"frame of 0 bytes", wave(fmtFields(1, 1, 48000, 0, 16)), 32, "0 bytes a frame, where 1 of 16 bits make 2"},
		{"frame too short", wave(fmtFields(1, 2, 48000, 3, 16)), 32, "3 bytes a frame, where 2 of 16 bits make 4"},
		{"plain 24 in 32", wave(fmtFields(1, 1, 48000, 4, 24)), 32, "4 bytes a frame, where 1 of 24 bits make 3"},
		{"fmt too short", riffFile(padded("fmt ", make([]byte, 14)), audio), 20, "the fmt chunk holds 14 bytes, it needs at least 16"},
		{"fmt cut off", riffFile(good)[:30], 20, "the fmt chunk holds 10 bytes, it needs at least 16"},
		{"no fmt", riffFile(audio), 68, "the file ends without a fmt chunk"},
		{"no data", riffFile(good), 36, "the file ends without a data chunk"},
		{"header only", riffFile(), 12, "the file ends without a fmt chunk"},
		{"empty data", riffFile(good, padded("data", nil)), 36, "the data chunk is empty"},
		{"empty data, more behind", riffFile(good, padded("data", nil), padded("LIST", []byte("INFO"))), 36, "the data chunk is empty"},
		{"data cut off at once", riffFile(good, rawChunk("data", 500, nil)), 44, "the file ends before the first sample is complete"},
		{"data unclosed and nothing there", riffFile(good, rawChunk("data", 0xFFFFFFFF, nil)), 44, "before the first sample"},
		{"half a sample", riffFile(good, rawChunk("data", 500, []byte{1})), 44, "before the first sample"},
		{"chunk too long", riffFile(good, rawChunk("JUNK", 1<<31, nil), audio), 36, `no data chunk before chunk "JUNK", which claims 2147483648 bytes`},
		{"first chunk too long", riffFile(rawChunk("LIST", 4000, nil), good, audio), 12, `no fmt chunk before chunk "LIST"`},
		{"no chunk where one should be", riffFile(good, make([]byte, 16), audio), 36, "no data chunk before this place"},
		{"chunks without end", riffFile(manyChunks, good, audio), 12, "no fmt chunk among the first 1024 chunks"},
		{"empty", nil, -1, "the file is empty"},
		{"short", []byte("RIFF\x10\x00"), -1, "only 6 bytes long"},
		{"zeros", make([]byte, 4096), 0, "zeros stand where the WAV header should be"},
		{"noise", []byte("\x81\x92\xa3\xb4\xc5\xd6\xe7\xf8\x01\x02\x03\x04\x05"), 0, "begins with 81 92 a3 b4, not with RIFF"},
		{"RIFX", join("RIFX", u32(36), "WAVE", good, audio), 0, "big-endian WAV (RIFX)"},
		{"AVI", join("RIFF", u32(36), "AVI ", make([]byte, 40)), 8, `a RIFF file of form "AVI " (AVI video), not WAVE`},
		{"MIDI in RIFF", join("RIFF", u32(36), "RMID", make([]byte, 40)), 8, "MIDI"},
		{"strange RIFF", join("RIFF", u32(36), "abcd", make([]byte, 40)), 8, "no recording"},
		{"FLAC", join("fLaC", make([]byte, 40)), 0, "this is FLAC"},
		{"AIFF", join("FORM\x00\x00\x10\x00AIFF", make([]byte, 40)), 0, "this is AIFF,"},
		{"AIFC", join("FORM\x00\x00\x10\x00AIFC", make([]byte, 40)), 0, "this is AIFF-C,"},
		{"W64", join("riff\x2e\x91\xcf\x11\xa5\xd6\x28\xdb\x04\xc1\x00\x00", make([]byte, 40)), 0, "Wave64"},
		{"Ogg", join("OggS", make([]byte, 40)), 0, "this is Ogg"},
		{"MP3 with tag", join("ID3\x04\x00", make([]byte, 40)), 0, "MP3 with an ID3 tag"},
		{"MP3", join("\xff\xfb\x90\x64", make([]byte, 40)), 0, "this is MP3"},
		{"MP2", join("\xff\xfd\x84\x04", make([]byte, 40)), 0, "this is MP2"},
		{"AAC", join("\xff\xf1\x50\x80", make([]byte, 40)), 0, "AAC"},
		{"CAF", join("caff\x00\x01", make([]byte, 40)), 0, "this is CAF"},
		{"MP4", join("\x00\x00\x00\x20ftypM4A ", make([]byte, 40)), 0, "MP4"},
		{"AU", join(".snd\x00\x00\x00\x18", make([]byte, 40)), 0, "this is AU"},
		{"text", []byte("before.wav: see the other folder\n"), 0, "this is text"},
		{"short text", []byte("hi\n"), 0, "this is text"},
		{"text cut inside a letter", []byte("aµ")[:2], 0, "this is text"},
		{"UTF-16 text", []byte("\xff\xfeh\x00i\x00 \x00t\x00h\x00e\x00r\x00e\x00"), 0, "text (UTF-16)"},
		{"page", []byte("<!doctype html>\n<p>not found"), 0, "this is text"},
	}
}

func TestBrokenFiles(t *testing.T) {
	for _, c := range brokenFiles() {
		t.Run(c.name, func(t *testing.T) {
			take, err := openBytes(c.file)
			if take != nil || err == nil {
				t.Fatalf("NewTake = %v, %v, want an error", take, err)
			}
			wantFormatError(t, err, c.offset, c.text)
		})
	}
}

func TestFormatErrorPrints(t *testing.T) {
	_, err := openBytes(riffFile(padded("fmt ", fmtFields(85, 1, 44100, 1, 0)), padded("data", make([]byte, 8))))
	if got, want := err.Error(), "before.wav: byte 20: format tag 85 is MP3 in WAV, not PCM"; got != want {
		t.Errorf("Error() = %q, want %q", got, want)
	}
	if got, want := err.(*FormatError).Hint, "export the take again as 16- or 24-bit PCM WAV"; got != want {
		t.Errorf("Hint = %q, want %q", got, want)
	}
	_, err = openBytes(nil)
	if got, want := err.Error(), "before.wav: the file is empty"; got != want {
		t.Errorf("Error() = %q, want %q", got, want)
	}
}

func TestOpenFiles(t *testing.T) {
	dir := t.TempDir()
	path := filepath.Join(dir, "before.wav")
	if err := os.WriteFile(path, smallMono(100), 0o666); err != nil {
		t.Fatal(err)
	}
	take, err := Open(path)
	if err != nil {
		t.Fatal(err)
	}
	if f := take.Facts(); f.Name != path || f.Frames != 100 {
		t.Errorf("Facts() = %+v, want name %s and 100 frames", f, path)
	}
	if err := take.Close(); err != nil {
		t.Errorf("Close: %v", err)
	}
	if _, err := take.Channel(1).ReadAt(make([]float64, 5), 0); !errors.Is(err, fs.ErrClosed) {
		t.Errorf("ReadAt after Close: %v, want it closed", err)
	}

	_, err = Open(dir)
	if fe := (*FormatError)(nil); !errors.As(err, &fe) || !strings.Contains(fe.Text, "folder") || fe.Hint == "" {
		t.Errorf("Open(folder): %v, want a FormatError about a folder", err)
	}
	missing := filepath.Join(dir, "after.wav")
	_, err = Open(missing)
	if !errors.Is(err, fs.ErrNotExist) || !strings.HasPrefix(err.Error(), missing+": ") {
		t.Errorf("Open(missing): %v, want ErrNotExist with the name in front", err)
	}
	empty := filepath.Join(dir, "empty.wav")
	if err := os.WriteFile(empty, nil, 0o666); err != nil {
		t.Fatal(err)
	}
	if _, err = Open(empty); err == nil || !strings.Contains(err.Error(), "empty") {
		t.Errorf("Open(empty): %v, want it empty", err)
	}
	if _, err = Open(os.DevNull); err == nil {
		t.Errorf("Open(%s) succeeded", os.DevNull)
	}
}
