package sheet

import (
	"errors"
	"math"
	"math/rand/v2"
	"os"
	"strings"
	"testing"
	"time"
	"unicode"
)

// examples are sound sheets to start from.
func exampleSheets(t testing.TB) (pads, rigs [][]byte) {
	t.Helper()
	for _, name := range []string{"saltmarsh", "bench"} {
		for _, kind := range []string{"pad", "rig"} {
			data, err := os.ReadFile("testdata/" + name + "_" + kind + ".toml")
			if err != nil {
				t.Fatal(err)
			}
			if kind == "pad" {
				pads = append(pads, data)
			} else {
				rigs = append(rigs, data)
			}
		}
	}
	return pads, rigs
}

// checkPad holds what is true of any answer: an error that names the file, or a
// pad whose figures are numbers.
func checkPad(t *testing.T, data []byte) {
	t.Helper()
	p, err := ParsePad("pad.toml", data)
	if err != nil {
		checkError(t, data, err, p == nil)
		return
	}
	for _, part := range p.Parts {
		if !(part.Value >= 0) || math.IsInf(part.Value, 0) || !(part.TolFrac >= 0 && part.TolFrac < 1) || part.Line < 1 || part.Kind == "" {
			t.Fatalf("part %+v out of\n%s", part, data)
		}
	}
	checkFigure(t, data, p.Limits.LossPlusMinusDB, p.Limits.LossNominalDB, p.Limits.HumMaxDBu, &p.Limits.ResponseFromHz, &p.Limits.ResponseToHz)
	if p.Service != nil {
		checkFigure(t, data, p.Service.SourceOhms, p.Service.LoadOhms, p.Service.CablePF)
	}
}

func checkOhms(t *testing.T, data []byte) {
	t.Helper()
	o, err := ParseOhmsSheet("ohms.toml", data)
	if err != nil {
		checkError(t, data, err, o == nil)
		return
	}
	for _, r := range o.Readings {
		if !(r.Ohms >= 0) || r.Line < 1 || r.Pins[0] == "" || r.Pins[1] == "" || r.Pins[0] == r.Pins[1] {
			t.Fatalf("reading %+v out of\n%s", r, data)
		}
	}
	checkFigure(t, data, o.MeterTolFrac, o.MeterPlusOhms)
}

func checkRig(t *testing.T, data []byte) {
	t.Helper()
	r, err := ParseRig("rig.toml", data)
	if err != nil {
		checkError(t, data, err, r == nil)
		return
	}
	c := r.Calibration
	checkFigure(t, data, &r.TemperatureC, &r.Output.SourceOhms, &r.Output.TolFrac, &r.Input.LoadOhms, &r.Input.TolFrac,
		&r.Input.CablePF, &r.Input.CableHalfPF, c.FullScaleDBu, c.NoiseFullScaleDBu, &c.UncertaintyDB, &c.LinearityDB, &c.PadPlugOhms)
}

func checkFigure(t *testing.T, data []byte, figures ...*float64) {
	t.Helper()
	for i, x := range figures {
		if x != nil && (math.IsNaN(*x) || math.IsInf(*x, 0)) {
			t.Fatalf("figure %d is %v out of\n%s", i, *x, data)
		}
	}
}

// lineless are the faults that no line has.
var lineless = []string{"the sheet is empty", "network is missing", "readings is missing", "larger than a sheet"}

func checkError(t *testing.T, data []byte, err error, nothing bool) {
	t.Helper()
	var e *Error
	if !errors.As(err, &e) || e.File == "" || e.Text == "" || e.Hint == "" || !nothing {
		t.Fatalf("%#v (nothing beside: %v) out of\n%q", err, nothing, data)
	}
	if most := strings.Count(string(data), "\n") + 1; e.Line > most {
		t.Fatalf("%v: the sheet has %d lines\n%q", err, most, data)
	}
	if strings.ContainsFunc(e.Text+e.Hint, unicode.IsControl) {
		t.Fatalf("control character in %q, hint %q, out of\n%q", e.Text, e.Hint, data)
	}
	for _, text := range lineless {
		if strings.Contains(e.Text, text) {
			return
		}
	}
	if e.Line < 1 {
		t.Fatalf("%v has no line, out of\n%q", err, data)
	}
}

// mutate changes a sheet in one to four places.
func mutate(rnd *rand.Rand, data []byte) []byte {
	out := append([]byte{}, data...)
	for range 1 + rnd.IntN(4) {
		if len(out) == 0 {
			break
		}
		at := rnd.IntN(len(out))
		to := min(len(out), at+rnd.IntN(30))
		switch rnd.IntN(6) {
		case 0: // a byte changed
			out[at] = byte(rnd.IntN(256))
		case 1: // a stretch lost
			out = append(out[:at:at], out[to:]...)
		case 2: // a stretch twice
			out = append(out[:to:to], out[at:]...)
		case 3: // cut short
			out = out[:at]
		case 4: // a sign of TOML or of a value put in
			signs := []string{"[", "]", "{", "}", "\"", "'", "=", ".", ",", "\n", "\r", "#", "-", "nan", "inf", "1e999", "[[", "\"\"\"", "0", "µ", "\\u001b", "\x00"}
			out = append(out[:at:at], append([]byte(signs[rnd.IntN(len(signs))]), out[at:]...)...)
		case 5: // a bit turned
			out[at] ^= 1 << rnd.IntN(8)
		}
	}
	return out
}

// Thousands of spoilt sheets: no panic, an answer or an error with file and
// line, quickly.
func TestMutatedSheets(t *testing.T) {
	pads, rigs := exampleSheets(t)
	rnd := rand.New(rand.NewPCG(2, 0x5a17))
	for range 5000 {
		checkPad(t, mutate(rnd, pads[rnd.IntN(len(pads))]))
		checkRig(t, mutate(rnd, rigs[rnd.IntN(len(rigs))]))
		checkOhms(t, mutate(rnd, []byte(soundOhms)))
	}
}

// The worst that 64 KiB can hold ends soon; larger is not parsed at all.
func TestHostileSheetsEndSoon(t *testing.T) {
	many := func(format string) string {
		var b strings.Builder
		for i := 0; b.Len() < maxBytes-2*len(format); i++ {
			b.WriteString(strings.ReplaceAll(format, "#", string(rune('a'+i%26))+strings.Repeat(string(rune('a'+i/26%26)), 1+i/676)[:1]+string(rune('a'+i/676%26))+string(rune('a'+i/17576%26))))
		}
		return b.String()
	}
	for name, text := range map[string]string{
		"keys":          many("#=1\n"),
		"sections":      many("[#.b]\n"),
		"dotted":        strings.Repeat("a.", maxBytes/2-4) + "a=1",
		"lists":         "parts=" + strings.Repeat("[", maxBytes-10),
		"inline tables": strings.Repeat("a={", maxBytes/3-4),
		"empty parts":   "network='U'\nparts=[" + strings.Repeat("{},", maxBytes/3-20) + "]",
		"long text":     "name='" + strings.Repeat("x", maxBytes-20) + "'",
		"long key":      "[" + strings.Repeat("x", maxBytes/2) + "]\n" + strings.Repeat("a=1\n", 2000),
		"long value":    "network='custom'\nparts=[{ref='R1',between=['a','b'],value='" + strings.Repeat("9", maxBytes-100) + "'}]",
		"over the cap":  strings.Repeat("a=1\n", 1<<20),
	} {
		start := time.Now()
		checkPad(t, []byte(text))
		checkRig(t, []byte(text))
		if took := time.Since(start); took > 5*time.Second {
			t.Errorf("%s (%d bytes) took %v, want under 5 s", name, len(text), took)
		} else {
			t.Logf("%s: %d bytes, %v", name, len(text), took)
		}
	}
}

func FuzzPad(f *testing.F) {
	pads, rigs := exampleSheets(f)
	for _, data := range append(pads, rigs...) {
		f.Add(data)
	}
	f.Fuzz(checkPad)
}

func FuzzRig(f *testing.F) {
	pads, rigs := exampleSheets(f)
	for _, data := range append(rigs, pads...) {
		f.Add(data)
	}
	f.Fuzz(checkRig)
}

func FuzzOhms(f *testing.F) {
	f.Add([]byte(soundOhms))
	f.Fuzz(checkOhms)
}
