package network

import (
	"encoding/csv"
	"math"
	"os"
	"strings"
	"testing"
)

// rowsOf reads a table of published or computed values; each row by column name.
func rowsOf(t *testing.T, path string) []map[string]string {
	t.Helper()
	f, err := os.Open(path)
	if err != nil {
		t.Fatal(err)
	}
	defer f.Close()
	all, err := csv.NewReader(f).ReadAll()
	if err != nil {
		t.Fatal(err)
	}
	var rows []map[string]string
	for _, cells := range all[1:] {
		row := map[string]string{}
		for i, name := range all[0] {
			row[name] = cells[i]
		}
		rows = append(rows, row)
	}
	return rows
}

// unbalancedEnds is what coaxial and textbook pads stand between.
func unbalancedEnds(sourceOhms, loadOhms float64) Ends {
	return Ends{SourceOhms: sourceOhms, LoadOhms: loadOhms, Drive: DriveUnbalanced, Sense: SenseUnbalanced}
}

// The arms are the handbook formulas of matched pads, written with nine digits
// (pads_matched_computed.csv; each row was checked there by chain matrices).
func TestMatchedPads(t *testing.T) {
	const tolDB, tolFrac = 3e-7, 2e-8 // nine digits of each arm
	for _, row := range rowsOf(t, "testdata/pads_matched_computed.csv") {
		v := func(column string) float64 { return number(t, row[column]) }
		r0, nominalDB := v("r0_ohm"), v("loss_db")
		ts, tp, ps, pp := v("t_series_each"), v("t_shunt"), v("pi_series"), v("pi_shunt_each")
		hs, os := v("h_series_each_of_4"), v("o_series_each_of_2")
		for _, pad := range []struct {
			network string
			arms    []float64
		}{
			{"T", []float64{ts, ts, tp}},
			{"pi", []float64{pp, ps, pp}},
			{"bridged-T", []float64{r0, r0, v("bridged_t_bridge"), v("bridged_t_shunt")}},
			{"H", []float64{hs, hs, hs, hs, v("h_shunt")}},
			{"O", []float64{v("o_shunt_each"), os, os, v("o_shunt_each")}},
		} {
			c := mustNew(t, pad.network, ohms(pad.arms...)...)
			ends := []Ends{unbalancedEnds(r0, r0)}
			if c.Balanced() {
				ends = []Ends{
					{SourceOhms: r0, LoadOhms: r0},
					{SourceOhms: r0, LoadOhms: r0, Drive: DriveFloating, Sense: SenseFloating},
					{SourceOhms: r0, LoadOhms: r0, Sense: SenseFloating},
				}
			}
			for _, e := range ends {
				if got := c.LossDB(e, 997); !near(got, nominalDB, tolDB) {
					t.Errorf("%s of %g dB, %g Ω, %v: LossDB = %.9f, want %g ± %g", pad.network, nominalDB, r0, e, got, nominalDB, tolDB)
				}
				if got := real(c.InputImpedance(e, 997)); !near(got, r0, tolFrac*r0) {
					t.Errorf("%s of %g dB, %g Ω, %v: InputImpedance = %.9f, want %g", pad.network, nominalDB, r0, e, got, r0)
				}
				if got := real(c.OutputImpedance(e, 997)); !near(got, r0, tolFrac*r0) {
					t.Errorf("%s of %g dB, %g Ω, %v: OutputImpedance = %.9f, want %g", pad.network, nominalDB, r0, e, got, r0)
				}
			}
		}
	}
}

// Handbook table of minimum-loss pads as in "Reference Data for Radio Engineers"
// (pads_minimum_loss.csv). The matched loss that handbooks print is not the insertion
// loss: they differ by the mismatch of the direct connection.
func TestMinimumLossPads(t *testing.T) {
	for _, row := range rowsOf(t, "testdata/pads_minimum_loss.csv") {
		v := func(column string) float64 { return number(t, row[column]) }
		high, low := v("z_high_ohm"), v("z_low_ohm")
		e := unbalancedEnds(high, low)
		mismatchDB := 10 * math.Log10((high+low)*(high+low)/(4*high*low))
		exact := mustNew(t, "L", ohms(v("series_exact"), v("shunt_exact"))...)
		if got, want := exact.LossDB(e, 997), v("insertion_loss_db_exact"); !near(got, want, 1e-5) {
			t.Errorf("%g to %g Ω: LossDB = %.6f, want %.6f", high, low, got, want)
		}
		if got := real(exact.InputImpedance(e, 997)); !near(got, high, 1e-6*high) {
			t.Errorf("%g to %g Ω: InputImpedance = %.6f, want %g", high, low, got, high)
		}
		if got := real(exact.OutputImpedance(e, 997)); !near(got, low, 1e-6*low) {
			t.Errorf("%g to %g Ω: OutputImpedance = %.6f, want %g", high, low, got, low)
		}
		printed := mustNew(t, "L", ohms(v("series_published"), v("shunt_published"))...)
		if got, want := printed.LossDB(e, 997)+mismatchDB, v("loss_db_published"); !near(got, want, 0.06) {
			t.Errorf("%g to %g Ω as printed: matched loss = %.3f, want %.2f ± 0.06", high, low, got, want)
		}
	}
}

// Ten pads between unequal impedances, by chain matrices
// (pads_insertion_loss_computed.csv, seven or eight digits).
func TestInsertionLossTable(t *testing.T) {
	pads := map[string]*Circuit{
		"T 20 dB 600":         mustNew(t, "T", ohms(5400.0/11, 5400.0/11, 4000.0/33)...),
		"pi 20 dB 600":        mustNew(t, "pi", ohms(2200.0/3, 2970, 2200.0/3)...),
		"U pad 2x680 + 150":   mustNew(t, "U", ohms(680, 680, 150)...),
		"U pad 2x675 + 150":   mustNew(t, "U", ohms(675, 675, 150)...),
		"T 300/450/300":       mustNew(t, "T", ohms(300, 300, 450)...),
		"min loss 600 to 150": mustNew(t, "L", ohms(math.Sqrt(600*450), 150*math.Sqrt(600.0/450))...),
		"min loss 75 to 50":   mustNew(t, "L", ohms(math.Sqrt(75*25), 50*math.Sqrt(75.0/25))...),
	}
	for _, row := range rowsOf(t, "testdata/pads_insertion_loss_computed.csv") {
		v := func(column string) float64 { return number(t, row[column]) }
		name, _, _ := strings.Cut(row["case"], ",")
		c := pads[name]
		if c == nil {
			t.Errorf("no pad for the case %q", row["case"])
			continue
		}
		e := Ends{SourceOhms: v("r_source"), LoadOhms: v("r_load")}
		if c.Unbalanced() {
			e.Drive, e.Sense = DriveUnbalanced, SenseUnbalanced
		}
		if got, want := c.LossDB(e, 997), v("insertion_loss_db"); !near(got, want, 1e-6) {
			t.Errorf("%s: LossDB = %.7f, want %.6f", row["case"], got, want)
		}
		if got, want := real(c.InputImpedance(e, 997)), v("zin_ohm"); !near(got, want, 1e-7*want) {
			t.Errorf("%s: InputImpedance = %.6f, want %.6f", row["case"], got, want)
		}
		if got, want := real(c.OutputImpedance(e, 997)), v("zout_ohm"); !near(got, want, 1e-7*want) {
			t.Errorf("%s: OutputImpedance = %.6f, want %.6f", row["case"], got, want)
		}
	}
}

// The image impedance of a port is √(Zopen·Zshort), as the books have it.
func imageOhms(c *Circuit, in, out string) float64 {
	return math.Sqrt(c.Ohms(in, "screen") * c.Ohms(in, "screen", [2]string{out, "screen"}))
}

// iterativeOhms is the load that makes the input read the same.
func iterativeOhms(c *Circuit) float64 {
	ohms := 600.0
	for range 200 {
		ohms = real(c.InputImpedance(unbalancedEnds(600, ohms), 997))
	}
	return ohms
}

// Worked examples: Bird, Electrical Circuit Theory and Technology, 2nd ed. 2003, ch. 41;
// Roddy and Coolen, Electronic Communications, 4th ed.; Pozar, Microwave Engineering,
// Example 4.4 (pads_published_examples.csv). Rows with the quantity R give the arms of a
// design and no reading; they are the formulas of TestMatchedPads.
func TestPublishedExamples(t *testing.T) {
	tee := func(in, out, shunt float64) *Circuit { return mustNew(t, "T", ohms(in, out, shunt)...) }
	pi := func(in, series, out float64) *Circuit { return mustNew(t, "pi", ohms(in, series, out)...) }
	ell := func(series, shunt float64) *Circuit { return mustNew(t, "L", ohms(series, shunt)...) }
	image := func(c *Circuit) float64 { return imageOhms(c, "in.hot", "out.hot") }
	loss := func(c *Circuit, source, load float64) float64 { return c.LossDB(unbalancedEnds(source, load), 997) }
	turned := func(c *Circuit) *Circuit { return c.Swapped("R1", "R2") }
	turnedPi := func(c *Circuit) *Circuit { return c.Swapped("R1", "R3") }
	pozar, r353 := tee(8.56, 8.56, 141.8), math.Sqrt(125000)
	got := map[string]float64{
		"bird_41_5a R0":                                     image(tee(8, 8, 21)),
		"bird_41_5b R0":                                     image(tee(10, 10, 15)),
		"bird_41_5c R0":                                     image(tee(200, 200, 56.25)),
		"bird_41_6 R0":                                      image(pi(1000, 500, 1000)),
		"bird_41_6 attenuation":                             loss(pi(1000, 500, 1000), math.Sqrt(200000), math.Sqrt(200000)),
		"bird_41_7T Zin open":                               tee(15, 15, 10).Ohms("in.hot", "screen"),
		"bird_41_7T Zin short":                              tee(15, 15, 10).Ohms("in.hot", "screen", [2]string{"out.hot", "screen"}),
		"bird_41_7T R0":                                     image(tee(15, 15, 10)),
		"bird_41_7P Zin open":                               pi(5, 15, 5).Ohms("in.hot", "screen"),
		"bird_41_7P Zin short":                              pi(5, 15, 5).Ohms("in.hot", "screen", [2]string{"out.hot", "in.cold"}),
		"bird_41_7P R0":                                     image(pi(5, 15, 5)),
		"bird_41_10 R0":                                     image(tee(300, 300, 450)),
		"bird_41_10 insertion loss":                         loss(tee(300, 300, 450), 600, 600),
		"bird_41_11a insertion loss":                        loss(ell(1000, 2000), 500, 2000),
		"bird_41_11b insertion loss":                        loss(ell(2000, 1000), 500, 2000),
		"bird_41_12 R0":                                     image(pi(500, 1000, 500)),
		"bird_41_12 insertion loss":                         loss(pi(500, 1000, 500), r353, r353),
		"bird_41_13 image Z a":                              image(tee(200, 300, 100)),
		"bird_41_13 image Z b":                              imageOhms(tee(200, 300, 100), "out.hot", "in.hot"),
		"bird_41_13 iterative Z a":                          iterativeOhms(tee(200, 300, 100)),
		"bird_41_13 iterative Z b":                          iterativeOhms(turned(tee(200, 300, 100))),
		"bird_41_14 image Z a":                              image(pi(1000, 3000, 2000)),
		"bird_41_14 image Z b":                              imageOhms(pi(1000, 3000, 2000), "out.hot", "in.hot"),
		"bird_41_14 iterative Z a":                          iterativeOhms(pi(1000, 3000, 2000)),
		"bird_41_14 iterative Z b":                          iterativeOhms(turnedPi(pi(1000, 3000, 2000))),
		"bird_41_15 matched (transducer) loss 10 log P1/P2": loss(ell(math.Sqrt(200000), math.Sqrt(12500)), 500, 100) + 10*math.Log10(360000.0/200000),
		"bird_41_15 insertion loss":                         loss(ell(math.Sqrt(200000), math.Sqrt(12500)), 500, 100),
		// Ten ohms to fifty: the shunt stands at the low side, a pi without its far shunt.
		"roddy_1.2.5 insertion loss": loss(pi(math.Sqrt(125), math.Sqrt(2000), math.Inf(1)), 10, 50),
		// The exact figure of this row is the voltage ratio of the ports, S21/(1 + S11);
		// S21 itself is 0.7076947.
		"pozar_4.4 S21 magnitude": sizeOf(loss(pozar, 50, 50)) / (1 + reflection(real(pozar.InputImpedance(unbalancedEnds(50, 50), 997)), 50)),
		"pozar_4.4 S11 magnitude": reflection(real(pozar.InputImpedance(unbalancedEnds(50, 50), 997)), 50),
	}
	used := 0
	for _, row := range rowsOf(t, "testdata/pads_published_examples.csv") {
		if row["quantity"] == "R" {
			continue
		}
		key := row["example"] + " " + row["quantity"]
		have, ok := got[key]
		if !ok {
			t.Errorf("no test for the example %q", key)
			continue
		}
		used++
		printed, exact, tol := number(t, row["published"]), number(t, row["exact_computed"]), number(t, row["test_tolerance"])
		if !near(have, printed, tol) || !near(have, exact, 1e-5*math.Max(exact, 0.01)) {
			t.Errorf("%s = %.8g, want %g ± %g as printed and %.9g exactly", key, have, printed, tol, exact)
		}
	}
	if used != len(got) {
		t.Errorf("%d of %d examples are in the table", used, len(got))
	}
}

// reflection is the size of the reflection of ohms at a line of r0.
func reflection(ohms, r0 float64) float64 { return math.Abs(ohms-r0) / (ohms + r0) }

// The feed of IEC 61938:2018, P48 (phantom_iec61938.csv).
func TestPhantomFeed(t *testing.T) {
	for _, row := range rowsOf(t, "testdata/phantom_iec61938.csv") {
		if row["type"] != "P48" {
			continue
		}
		if got := number(t, row["voltage_v"]); got != PhantomVolts {
			t.Errorf("PhantomVolts = %d, want %g", PhantomVolts, got)
		}
		if got := number(t, row["feed_resistor_each_ohm"]); got != PhantomFeedOhms {
			t.Errorf("PhantomFeedOhms = %d, want %g", PhantomFeedOhms, got)
		}
		return
	}
	t.Error("the table has no P48")
}
