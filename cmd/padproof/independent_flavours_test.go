package main_test

import (
	"crypto/sha256"
	"encoding/hex"
	"os"
	"os/exec"
	"path/filepath"
	"strings"
	"testing"
)

// testFlavours: one unit saved in every flavour of WAV gives one loss.
func testFlavours(t *testing.T, b *simBench) {
	units := b.make(t, "flavours")
	named := map[string]simOutcome{}
	for _, o := range units {
		named[o.Unit] = o
	}
	plain, float := named["pcm24"], named["float32"]
	for _, tool := range converters {
		if _, err := exec.LookPath(tool.program); err != nil {
			t.Logf("%s is not installed: its flavours are left out", tool.program)
			continue
		}
		for name, args := range tool.flavours {
			o := plain
			// sndfile-convert raises whole numbers to full scale when it
			// turns them into floats, each take for itself: give it floats.
			if tool.program == "sndfile-convert" && strings.Contains(name, "float") {
				o = float
			}
			o.folder = convertUnit(t, o.folder, tool, args)
			o.Unit = tool.program + " " + name
			o.TolDB = 0.01
			if strings.HasPrefix(name, "8-bit") {
				o.TolDB = 0.15
			}
			units = append(units, o)
		}
	}
	b.checkAll(t, units)
	var errorsDB, errors8 []float64
	for _, o := range units {
		e := o.benchErrorDB()
		if o.TolDB > 0.1 {
			errors8 = append(errors8, e)
		} else {
			errorsDB = append(errorsDB, e)
		}
		if !(e <= o.TolDB.f()) {
			t.Errorf("%s: bench loss = %.4f, want %.4f ± %g: %s", o.Unit, o.loss.Bench.Measured, o.RecordedDB, o.TolDB, o.says())
		}
		for _, c := range o.answer.Captures {
			if want := fileSHA256(t, filepath.Join(o.folder, c.Role+".wav")); c.SHA256 != want {
				t.Errorf("%s: sha256 of %s = %s, want %s", o.Unit, c.Role, c.SHA256, want)
			}
		}
	}
	t.Logf("bench loss: worst |error| %.5f dB over %d flavours, %.4f dB over %d of 8 bit",
		worst(errorsDB), len(errorsDB), worst(errors8), len(errors8))
}

// A converter is a program that writes WAV; each flavour is its arguments,
// with IN and OUT for the files. OUT may be the word - alone: standard output.
type converter struct {
	program  string
	flavours map[string][]string
}

var converters = []converter{
	{"sox", map[string][]string{
		"8-bit":         {"IN", "-b", "8", "-e", "unsigned-integer", "OUT.wav"},
		"16-bit":        {"IN", "-b", "16", "OUT.wav"},
		"24-bit":        {"IN", "-b", "24", "OUT.wav"},
		"32-bit":        {"IN", "-b", "32", "-e", "signed-integer", "OUT.wav"},
		"float 32":      {"IN", "-b", "32", "-e", "floating-point", "OUT.wav"},
		"float 64":      {"IN", "-b", "64", "-e", "floating-point", "OUT.wav"},
		"plain 24-bit":  {"IN", "-t", "wavpcm", "-b", "24", "OUT.wav"},
		"piped":         {"IN", "-t", "wav", "-"},
		"in channel 3":  {"IN", "OUT.wav", "remix", "0", "0", "1", "0"},
		"both channels": {"IN", "OUT.wav", "remix", "1", "1"},
		"comment":       {"IN", "--comment", "line test, third take", "OUT.wav"},
	}},
	{"ffmpeg", map[string][]string{
		"8-bit":        {"-v", "error", "-i", "IN", "-c:a", "pcm_u8", "OUT.wav"},
		"16-bit":       {"-v", "error", "-i", "IN", "-c:a", "pcm_s16le", "OUT.wav"},
		"24-bit":       {"-v", "error", "-i", "IN", "-c:a", "pcm_s24le", "OUT.wav"},
		"32-bit":       {"-v", "error", "-i", "IN", "-c:a", "pcm_s32le", "OUT.wav"},
		"float 32":     {"-v", "error", "-i", "IN", "-c:a", "pcm_f32le", "OUT.wav"},
		"float 64":     {"-v", "error", "-i", "IN", "-c:a", "pcm_f64le", "OUT.wav"},
		"RF64":         {"-v", "error", "-i", "IN", "-c:a", "pcm_s24le", "-rf64", "always", "OUT.wav"},
		"RF64 float":   {"-v", "error", "-i", "IN", "-c:a", "pcm_f32le", "-rf64", "always", "OUT.wav"},
		"bext":         {"-v", "error", "-i", "IN", "-c:a", "pcm_s24le", "-write_bext", "1", "-metadata", "description=line test", "OUT.wav"},
		"piped":        {"-v", "error", "-i", "IN", "-c:a", "pcm_s24le", "-f", "wav", "-"},
		"in channel 4": {"-v", "error", "-i", "IN", "-af", "pan=6c|c3=c0", "-c:a", "pcm_s24le", "OUT.wav"},
	}},
	{"sndfile-convert", map[string][]string{
		"8-bit":             {"-pcmu8", "IN", "OUT.wav"},
		"16-bit":            {"-pcm16", "IN", "OUT.wav"},
		"24-bit":            {"-pcm24", "IN", "OUT.wav"},
		"32-bit":            {"-pcm32", "IN", "OUT.wav"},
		"float 32":          {"-float32", "IN", "OUT.wav"},
		"float 64":          {"-float64", "IN", "OUT.wav"},
		"8-bit extensible":  {"-pcmu8", "IN", "OUT.wavex"},
		"extensible 24-bit": {"-pcm24", "IN", "OUT.wavex"},
		"extensible float":  {"-float32", "IN", "OUT.wavex"},
		"RF64 24-bit":       {"-pcm24", "IN", "OUT.rf64"},
		"RF64 float":        {"-float32", "IN", "OUT.rf64"},
	}},
}

// convertUnit is a copy of a unit's folder, its takes passed through a converter.
func convertUnit(t *testing.T, from string, tool converter, args []string) string {
	t.Helper()
	to := t.TempDir()
	for _, name := range []string{"pad.toml", "rig.toml"} {
		text, err := os.ReadFile(filepath.Join(from, name))
		if err == nil {
			err = os.WriteFile(filepath.Join(to, name), text, 0o666)
		}
		if err != nil {
			t.Fatal(err)
		}
	}
	for _, role := range []string{"before", "after"} {
		wav := filepath.Join(to, role+".wav")
		written := wav
		var words []string
		for _, a := range args {
			switch {
			case a == "IN":
				a = filepath.Join(from, role+".wav")
			case strings.HasPrefix(a, "OUT"):
				a = filepath.Join(to, role) + strings.TrimPrefix(a, "OUT")
				written = a
			}
			words = append(words, a)
		}
		cmd := exec.Command(tool.program, words...)
		var said strings.Builder
		cmd.Stderr = &said
		out, err := cmd.Output()
		if err != nil {
			t.Fatalf("%s %q: %v\n%s", tool.program, words, err, said.String())
		}
		switch {
		case words[len(words)-1] == "-":
			err = os.WriteFile(wav, out, 0o666)
		case written != wav:
			err = os.Rename(written, wav)
		}
		if err != nil {
			t.Fatal(err)
		}
	}
	return to
}

func fileSHA256(t *testing.T, path string) string {
	t.Helper()
	data, err := os.ReadFile(path)
	if err != nil {
		t.Fatal(err)
	}
	sum := sha256.Sum256(data)
	return hex.EncodeToString(sum[:])
}
