package network

import (
	"errors"
	"math"
	"strings"
	"testing"
)

func TestParseFault(t *testing.T) {
	c := mustNew(t, "L", append(ohms(680, 150),
		at("C1", Capacitor, 220e-12, "in.hot", "out.hot"),
		at("L1", Inductor, 10e-3, "in.hot", "out.hot"))...)
	for _, tc := range []struct {
		text  string
		want  Fault
		again string // how it is written back, where otherwise
	}{
		{"R2 open", Fault{Form: PartOpen, Ref: "R2"}, ""},
		{"R2 short", Fault{Form: PartShort, Ref: "R2"}, ""},
		{"R2 x10", Fault{Form: PartTimesTen, Ref: "R2"}, ""},
		{"R2 /10", Fault{Form: PartTenth, Ref: "R2"}, ""},
		{"R2 is 360", Fault{Form: PartIs, Ref: "R2", Value: 360}, ""},
		{"R2 is 4R7", Fault{Form: PartIs, Ref: "R2", Value: 4.7}, ""},
		{"R2 is R47", Fault{Form: PartIs, Ref: "R2", Value: 0.47}, "R2 is 0R47"},
		{"R2 is 1k5", Fault{Form: PartIs, Ref: "R2", Value: 1500}, ""},
		{"R2 is 2M2", Fault{Form: PartIs, Ref: "R2", Value: 2.2e6}, ""},
		{"R2 is 10k", Fault{Form: PartIs, Ref: "R2", Value: 10e3}, ""},
		{"R2 is 0", Fault{Form: PartIs, Ref: "R2"}, ""},
		{"R2 is 1.5 kΩ", Fault{Form: PartIs, Ref: "R2", Value: 1500}, "R2 is 1k5"},
		{"R2 is 365.7 ohms", Fault{Form: PartIs, Ref: "R2", Value: 365.7}, "R2 is 365R7"},
		{"R2 is 2260", Fault{Form: PartIs, Ref: "R2", Value: 2260}, "R2 is 2k26"},
		{"C1 is 2n2", Fault{Form: PartIs, Ref: "C1", Kind: Capacitor, Value: 2.2e-9}, ""},
		{"C1 is 0.1 µF", Fault{Form: PartIs, Ref: "C1", Kind: Capacitor, Value: 0.1e-6}, "C1 is 100n"},
		{"L1 is 4m7", Fault{Form: PartIs, Ref: "L1", Kind: Inductor, Value: 4.7e-3}, ""},
		{"L1 is 1 H", Fault{Form: PartIs, Ref: "L1", Kind: Inductor, Value: 1}, "L1 is 1000m"},
		{"R1 and R2 swapped", Fault{Form: PartsSwapped, Ref: "R1", Other: "R2"}, ""},
		{"R1 drifted +12 %", Fault{Form: PartDrifted, Ref: "R1", Value: 0.12}, ""},
		{"R1 drifted -5 %", Fault{Form: PartDrifted, Ref: "R1", Value: -0.05}, ""},
		{"R1 drifted −5 %", Fault{Form: PartDrifted, Ref: "R1", Value: -0.05}, "R1 drifted -5 %"},
		{"R1 drifted +7.25%", Fault{Form: PartDrifted, Ref: "R1", Value: 0.0725}, "R1 drifted +7.25 %"},
		{"  R1   open ", Fault{Form: PartOpen, Ref: "R1"}, "R1 open"},
	} {
		got, err := ParseFault(c, tc.text)
		if err != nil || got != tc.want {
			t.Errorf("ParseFault(%q) = %+v, %v, want %+v", tc.text, got, err, tc.want)
			continue
		}
		again := tc.again
		if again == "" {
			again = tc.text
		}
		if got.String() != again {
			t.Errorf("ParseFault(%q).String() = %q, want %q", tc.text, got.String(), again)
		}
		if back, err := ParseFault(c, got.String()); err != nil || back != got {
			t.Errorf("ParseFault(%q) = %+v, %v, want %+v", got.String(), back, err, got)
		}
	}
}

func TestParseFaultRefuses(t *testing.T) {
	c := mustNew(t, "L", append(ohms(680, 150), at("C1", Capacitor, 220e-12, "in.hot", "out.hot"))...)
	for _, tc := range []struct{ text, in, hint string }{
		{"", "no fault", "R1 open; R1 short; R1 x10; R1 /10; R1 is 680; R1 drifted +12 %; R1 and C1 swapped"},
		{"R1", "no fault", "R1 open"},
		{"R1 melted", `"R1 melted"`, "R1 open"},
		{"R1 open now", "no fault", "R1 open"},
		{"R1 and R2", "no fault", "R1 open"},
		{"leg open at in", "no fault", "R1 open"},
		{"R3 open", `no part "R3"`, "R1, R2, C1"},
		{"R1 and R9 swapped", `no part "R9"`, "R1, R2, C1"},
		{"R1 and R1 swapped", "itself", "two parts"},
		{"R1 is", "no fault", "R1 is 680"},
		{"R1 is lost", "no value of a resistor", "4R7"},
		{"R1 is -5", "no value of a resistor", "4R7"},
		{"R1 is 4k.7", "no value of a resistor", "4R7"},
		{"R1 is 4.7k7", "no value of a resistor", "4R7"},
		{"R1 is k", "no value of a resistor", "4R7"},
		{"R1 is 47n", "no value of a resistor", "4R7"},
		{"R1 is 10m", "no value of a resistor", "4R7"},
		{"R1 is " + strings.Repeat("9", 400), "no value of a resistor", "4R7"},
		{"C1 is 220", "no value of a capacitor", "220p"},
		{"C1 is 0p", "no value of a capacitor", "220p"},
		{"C1 is 220pH", "no value of a capacitor", "220p"},
		{"R1 drifted 12 %", "no drift", "+12 %"},
		{"R1 drifted +12", "no drift", "+12 %"},
		{"R1 drifted -100 %", "drifts by", "R1 short"},
	} {
		_, err := ParseFault(c, tc.text)
		var e *Error
		if !errors.As(err, &e) || !strings.Contains(e.Text, tc.in) || !strings.Contains(e.Hint, tc.hint) {
			t.Errorf("ParseFault(%q) = %#v, want an Error with %q and hint %q", tc.text, err, tc.in, tc.hint)
		}
	}
}

// An unloaded L pad on a stiff source loses 1 + R1/R2 (the divider, common practice).
func TestFaultApply(t *testing.T) {
	e := Ends{SourceOhms: minEndOhms, Drive: DriveUnbalanced, LoadOhms: math.Inf(1), Sense: SenseUnbalanced}
	c := mustNew(t, "L", ohms(680, 150)...)
	for _, tc := range []struct {
		text   string
		r1, r2 float64
	}{
		{"R2 open", 680, inf},
		{"R2 x10", 680, 1500},
		{"R1 /10", 68, 150},
		{"R1 short", 0, 150},
		{"R1 is 4k7", 4700, 150},
		{"R1 drifted +12 %", 761.6, 150},
		{"R2 drifted -5 %", 680, 142.5},
		{"R1 and R2 swapped", 150, 680},
	} {
		f, err := ParseFault(c, tc.text)
		if err != nil {
			t.Fatalf("ParseFault(%q) failed: %v", tc.text, err)
		}
		want := 20 * math.Log10(1+tc.r1/tc.r2)
		const tol = 1e-4 // dB; the source is 1 mΩ, not 0
		if got := f.Apply(c).LossDB(e, 997); !near(got, want, tol) {
			t.Errorf("loss with %q = %.6f dB, want %.6f ± %g", tc.text, got, want, tol)
		}
	}
	if got := c.LossDB(e, 997); !near(got, 20*math.Log10(1+680.0/150), 1e-4) {
		t.Errorf("the sound pad changed: %v dB", got)
	}
	for _, text := range []string{"R1 open", "R2 short"} {
		f, _ := ParseFault(c, text)
		if got := f.Apply(c).LossDB(e, 997); got != inf {
			t.Errorf("loss with %q = %v dB, want +Inf", text, got)
		}
	}
}

// An open capacitor is none and a short one is a link; a coil is like a resistor.
func TestFaultOfReactances(t *testing.T) {
	c := mustNew(t, "L", append(ohms(680, 150),
		at("C1", Capacitor, 1e-6, "in.hot", "out.hot"), at("L1", Inductor, 10e-3, "out.hot", "screen"))...)
	for text, want := range map[string]float64{"C1 open": 0, "C1 short": inf, "L1 open": inf, "L1 short": 0} {
		f, err := ParseFault(c, text)
		if err != nil {
			t.Fatalf("ParseFault(%q) failed: %v", text, err)
		}
		if p, _ := f.Apply(c).Part(f.Ref); p.Value != want {
			t.Errorf("%q leaves %s = %v, want %v", text, f.Ref, p.Value, want)
		}
	}
}
