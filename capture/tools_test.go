package capture

import (
	"bytes"
	"fmt"
	"os"
	"os/exec"
	"path/filepath"
	"slices"
	"strings"
	"testing"
)

// needTool skips a test where a program is not installed.
func needTool(t *testing.T, name string) {
	t.Helper()
	if _, err := exec.LookPath(name); err != nil {
		t.Skip(name + " not installed")
	}
}

func runTool(t *testing.T, dir, name string, args ...string) []byte {
	t.Helper()
	cmd := exec.Command(name, args...)
	cmd.Dir = dir
	var out, complaint bytes.Buffer
	cmd.Stdout, cmd.Stderr = &out, &complaint
	if err := cmd.Run(); err != nil {
		t.Fatalf("%s %s: %v\n%s", name, strings.Join(args, " "), err, &complaint)
	}
	return out.Bytes()
}

const toolFrames = 4801

// reference is a take of two channels whose samples every format but that of 8 bits holds exactly.
func reference(t *testing.T, dir string) []float64 {
	t.Helper()
	samples := interleaved(toolFrames, 2, 16)
	if err := os.WriteFile(filepath.Join(dir, "in.wav"),
		riffFile(plainFmt(1, 2, 48000, 16), padded("data", sampleBlock(t, toolFrames, 2, 16, 16, false))), 0o666); err != nil {
		t.Fatal(err)
	}
	return samples
}

// checkToolTake opens what a tool wrote. Sixteen bits made into eight may be off by one step.
func checkToolTake(t *testing.T, path string, samples []float64, bits int, encoding string) *Take {
	t.Helper()
	take, err := Open(path)
	if err != nil {
		t.Fatal(err)
	}
	t.Cleanup(func() { take.Close() })
	f := take.Facts()
	if f.RateHz != 48000 || f.Channels != 2 || f.Frames != toolFrames || f.Bits != bits || f.Encoding != encoding {
		t.Errorf("Facts() = %+v, want 48000 Hz, 2 channels, %d frames, %s of %d bits", f, toolFrames, encoding, bits)
	}
	tol := 0.0
	if bits == 8 {
		tol = 1.0 / 128
	}
	for c := range 2 {
		got := readAll(t, take.Channel(c+1))
		if len(got) != toolFrames {
			t.Fatalf("%d samples, want %d", len(got), toolFrames)
		}
		for i, v := range got {
			if want := samples[2*i+c]; v < want-tol || v > want+tol {
				t.Fatalf("channel %d frame %d = %v, want %v ± %g", c+1, i, v, want, tol)
			}
		}
	}
	if got, err := take.SHA256(); err != nil {
		t.Error(err)
	} else if b, _ := os.ReadFile(path); got != sumOf(b) {
		t.Errorf("SHA256() = %s, want %s", got, sumOf(b))
	}
	return take
}

func TestReadsWhatSoxWrites(t *testing.T) {
	needTool(t, "sox")
	dir := t.TempDir()
	samples := reference(t, dir)
	for _, c := range []struct {
		encoding, args string
		bits           int
	}{
		{"integer", "-b 8 -e unsigned-integer", 8}, {"integer", "-b 16", 16}, {"integer", "-b 24", 24}, {"integer", "-b 32", 32},
		{"float", "-b 32 -e floating-point", 32}, {"float", "-b 64 -e floating-point", 64},
		{"integer", "-b 24 -t wavpcm", 24},
	} {
		t.Run(c.args, func(t *testing.T) {
			args := append([]string{"-D", "in.wav"}, strings.Fields(c.args)...)
			runTool(t, dir, "sox", append(args, "out.wav")...)
			wantProblem(t, checkToolTake(t, filepath.Join(dir, "out.wav"), samples, c.bits, c.encoding).Facts(), "", 0)
		})
	}
	t.Run("to a pipe", func(t *testing.T) {
		// From bare samples on a pipe sox cannot know the length beforehand, nor go back to write it.
		for _, bits := range []int{16, 24} {
			cmd := exec.Command("sox", strings.Fields(fmt.Sprintf("-D -t raw -r 48000 -c 2 -e signed -b 16 - -b %d -t wav -", bits))...)
			cmd.Stdin = bytes.NewReader(sampleBlock(t, toolFrames, 2, 16, 16, false))
			out, err := cmd.Output()
			if err != nil {
				t.Fatal(err)
			}
			path := filepath.Join(dir, fmt.Sprint("pipe", bits, ".wav"))
			if err := os.WriteFile(path, out, 0o666); err != nil {
				t.Fatal(err)
			}
			wantProblem(t, checkToolTake(t, path, samples, bits, "integer").Facts(), NotClosed, toolFrames/48000.0)
		}
	})
}

func TestReadsWhatFfmpegWrites(t *testing.T) {
	needTool(t, "ffmpeg")
	dir := t.TempDir()
	samples := reference(t, dir)
	quiet := []string{"-v", "error", "-nostdin", "-y", "-i", "in.wav"}
	for _, c := range []struct {
		codec, encoding string
		bits            int
	}{
		{"pcm_u8", "integer", 8}, {"pcm_s16le", "integer", 16}, {"pcm_s24le", "integer", 24}, {"pcm_s32le", "integer", 32},
		{"pcm_f32le", "float", 32}, {"pcm_f64le", "float", 64},
	} {
		for _, rf64 := range []string{"never", "auto", "always"} {
			t.Run(c.codec+"/rf64 "+rf64, func(t *testing.T) {
				out := fmt.Sprintf("%s-%s.wav", c.codec, rf64)
				args := slices.Concat(quiet, []string{"-c:a", c.codec, "-rf64", rf64, "-metadata", "comment=Saltmarsh", out})
				runTool(t, dir, "ffmpeg", args...)
				f := checkToolTake(t, filepath.Join(dir, out), samples, c.bits, c.encoding).Facts()
				wantProblem(t, f, "", 0)
				if !slices.Contains(f.Comments, "Saltmarsh") {
					t.Errorf("Comments = %q, want Saltmarsh among them", f.Comments)
				}
			})
		}
	}
	t.Run("bext", func(t *testing.T) {
		args := slices.Concat(quiet, []string{"-write_bext", "1", "-metadata", "description=Saltmarsh bench", "bext.wav"})
		runTool(t, dir, "ffmpeg", args...)
		f := checkToolTake(t, filepath.Join(dir, "bext.wav"), samples, 16, "integer").Facts()
		if !slices.Contains(f.Comments, "Saltmarsh bench") {
			t.Errorf("Comments = %q, want the description among them", f.Comments)
		}
	})
	t.Run("to a pipe", func(t *testing.T) {
		out := runTool(t, dir, "ffmpeg", slices.Concat(quiet, []string{"-c:a", "pcm_s24le", "-f", "wav", "-"})...)
		path := filepath.Join(dir, "pipe.wav")
		if err := os.WriteFile(path, out, 0o666); err != nil {
			t.Fatal(err)
		}
		wantProblem(t, checkToolTake(t, path, samples, 24, "integer").Facts(), NotClosed, toolFrames/48000.0)
	})
}

func TestReadsWhatLibsndfileWrites(t *testing.T) {
	needTool(t, "sndfile-convert")
	dir := t.TempDir()
	samples := reference(t, dir)
	for _, container := range []string{"wav", "wavex", "rf64"} {
		for _, c := range []struct {
			option, encoding string
			bits             int
		}{
			{"-pcmu8", "integer", 8}, {"-pcm16", "integer", 16}, {"-pcm24", "integer", 24}, {"-pcm32", "integer", 32},
			{"-float32", "float", 32}, {"-float64", "float", 64},
		} {
			t.Run(container+c.option, func(t *testing.T) {
				out := "out" + c.option + "." + container
				runTool(t, dir, "sndfile-convert", c.option, "in.wav", out)
				wantProblem(t, checkToolTake(t, filepath.Join(dir, out), samples, c.bits, c.encoding).Facts(), "", 0)
			})
		}
	}
}

// TestNamesWhatToolsWrite has real files of the kinds that cannot be read.
func TestNamesWhatToolsWrite(t *testing.T) {
	for _, c := range []struct{ tool, args, text string }{
		{"sndfile-convert", "-ulaw in.wav out.wav", "µ-law"},
		{"sndfile-convert", "-alaw in.wav out.wav", "A-law"},
		{"sndfile-convert", "-ima-adpcm in.wav out.wav", "ADPCM (IMA)"},
		{"sndfile-convert", "-ms-adpcm in.wav out.wav", "ADPCM (Microsoft)"},
		{"sndfile-convert", "in.wav out.aiff", "AIFF"},
		{"sndfile-convert", "in.wav out.w64", "Wave64"},
		{"sndfile-convert", "in.wav out.caf", "CAF"},
		{"sndfile-convert", "-endian=big in.wav out.wav", "RIFX"},
		{"ffmpeg", "-v error -nostdin -i in.wav out.flac", "FLAC"},
		{"ffmpeg", "-v error -nostdin -i in.wav -f ogg -c:a flac out.ogg", "Ogg"},
		{"ffmpeg", "-v error -nostdin -i in.wav -f adts out.aac", "AAC"},
		{"ffmpeg", "-v error -nostdin -i in.wav -f mp2 out.mp2", "MP2"},
		{"ffmpeg", "-v error -nostdin -i in.wav -f aiff out.aiff", "AIFF"},
	} {
		t.Run(c.tool+" "+c.text, func(t *testing.T) {
			needTool(t, c.tool)
			dir := t.TempDir()
			reference(t, dir)
			args := strings.Fields(c.args)
			runTool(t, dir, c.tool, args...)
			take, err := Open(filepath.Join(dir, args[len(args)-1]))
			if take != nil || err == nil || !strings.Contains(err.Error(), c.text) {
				t.Errorf("Open = %v, %v, want an error with %q", take, err, c.text)
			}
		})
	}
}

// TestToolsReadWrittenTakes has others turn our takes into bare samples: those of two channels as
// RF64, the rest as they come.
func TestToolsReadWrittenTakes(t *testing.T) {
	for _, f := range everyWrittenFormat() {
		if f.Channels == 64 {
			continue // more than some of these tools take
		}
		t.Run(f.String(), func(t *testing.T) {
			dir := t.TempDir()
			f.Comment = "SIMULATED"
			w, err := Create(filepath.Join(dir, "take.wav"), f)
			if err != nil {
				t.Fatal(err)
			}
			tools := rawReaders(f)
			if f.Channels == 2 {
				w.riffMax = 100
				tools = tools[:1]
			}
			if err := w.Write(interleaved(501, f.Channels, f.significantBits())); err != nil {
				t.Fatal(err)
			}
			if err := w.Close(); err != nil {
				t.Fatal(err)
			}
			want := sampleBlock(t, 501, f.Channels, f.Bits, f.Bits, f.Float)
			for _, tool := range tools {
				t.Run(tool[0], func(t *testing.T) {
					needTool(t, tool[0])
					if got := runTool(t, dir, tool[0], tool[1:]...); !bytes.Equal(got, want) {
						t.Errorf("%d bytes, want %d, or some differ", len(got), len(want))
					}
				})
			}
		})
	}
}

// rawReaders are the commands that print a take's samples in its own format. Sox knows no RF64 and
// works in integers of 32 bits, which wider floats do not survive.
func rawReaders(f Format) [][]string {
	code := map[bool]string{false: fmt.Sprintf("s%dle", f.Bits), true: fmt.Sprintf("f%dle", f.Bits)}[f.Float]
	if f.Bits == 8 {
		code = "u8"
	}
	all := [][]string{{"ffmpeg", "-v", "error", "-nostdin", "-i", "take.wav", "-f", code, "-c:a", "pcm_" + code, "-"}}
	if f.Float {
		return all
	}
	kind := "signed-integer"
	if f.Bits == 8 {
		kind = "unsigned-integer"
	}
	return append(all, []string{"sox", "-D", "take.wav", "-t", "raw", "-e", kind, "-b", fmt.Sprint(f.Bits), "-"})
}
