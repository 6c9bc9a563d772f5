package network

import (
	"math"
	"strings"
	"testing"
)

func TestEndFaults(t *testing.T) {
	stated := Ends{SourceOhms: 100, LoadOhms: 10000, CableFarads: 3e-10, Drive: DriveFloating}
	for _, tt := range []struct {
		text, words  string
		source, load float64
	}{
		{"source not as stated", "", 200, 10000},
		{"load  not as stated", "load not as stated", 100, 5000},
		{"source is 300", "", 300, 10000},
		{"load is 1k5", "", 100, 1500},
		{"load is 600 Ω", "load is 600", 100, 600},
		{"source is 0", "", 0, 10000},
	} {
		if tt.words == "" {
			tt.words = tt.text
		}
		f, ok, err := ParseEndFault(tt.text)
		want := stated
		want.SourceOhms, want.LoadOhms = tt.source, tt.load
		if got := f.Apply(stated); !ok || err != nil || f.String() != tt.words || got != want {
			t.Errorf("%q: %q, %v, %v, ends %+v, want %q and %+v", tt.text, f, ok, err, got, tt.words, want)
		}
		again, _, _ := ParseEndFault(f.String())
		if again.Apply(stated) != want {
			t.Errorf("%q does not read back as it was", f)
		}
	}
	for _, text := range []string{"", "source", "load off", "source not as", "R1 is 300", "sauce not as stated", "load drifted +5 %"} {
		if _, ok, err := ParseEndFault(text); ok || err != nil {
			t.Errorf("%q is taken for a fault of the bench (%v)", text, err)
		}
	}
	for text, says := range map[string]string{"source is much": "no value", "load is 0": "takes everything", "load is -3": "no value"} {
		if _, ok, err := ParseEndFault(text); !ok || err == nil || !strings.Contains(err.Error(), says) {
			t.Errorf("%q: %v, %v, want an error with %q", text, ok, err, says)
		}
	}
	if err := (EndFault{Load: true, Ohms: math.NaN()}).Apply(stated).Check(); err != nil {
		t.Error(err)
	}
}
