package network

import (
	"math"
	"slices"
	"testing"
)

// The values of E24 and E96 as IEC 60063:2015 lists them (the table as printed on resistor data
// sheets), E96 by its first, last and those where a rounding might slip.
func TestPreferredValues(t *testing.T) {
	wantE24 := []float64{10, 11, 12, 13, 15, 16, 18, 20, 22, 24, 27, 30, 33, 36, 39, 43, 47, 51, 56, 62, 68, 75, 82, 91, 100}
	if got := E24.Values(10, 100); !slices.Equal(got, wantE24) {
		t.Errorf("E24 from 10 to 100 = %v, want %v", got, wantE24)
	}
	e96 := E96.Values(100, 999)
	if len(e96) != 96 {
		t.Errorf("E96 has %d values a decade, want 96", len(e96))
	}
	for _, want := range []float64{100, 102, 105, 107, 143, 154, 243, 332, 348, 475, 499, 619, 750, 887, 953, 976} {
		if !slices.Contains(e96, want) {
			t.Errorf("E96 lacks %g", want)
		}
	}
	for _, want := range []float64{0.47, 4700, 4.7e6} {
		if !slices.Contains(E24.Values(0.1, 1e7), want) {
			t.Errorf("E24 from 0.1 to 10 M lacks %g, to the last digit", want)
		}
	}
	for _, odd := range [][2]float64{{0, 10}, {-1, 10}, {math.NaN(), 10}, {1, math.Inf(1)}, {1, math.NaN()}, {100, 10}} {
		if got := E24.Values(odd[0], odd[1]); len(got) > 0 {
			t.Errorf("E24 from %g to %g = %v, want none", odd[0], odd[1], got)
		}
	}
}

// A resistor across the output of an L pad lies beside its shunt.
func TestAdded(t *testing.T) {
	e := Ends{SourceOhms: 100, Drive: DriveUnbalanced, LoadOhms: 10000, Sense: SenseUnbalanced}
	l := mustNew(t, "L", ohms(680, 180)...)
	added, err := l.Added(Part{Ref: "R9", Value: 1500, A: "out.hot", B: "screen"})
	if err != nil {
		t.Fatal(err)
	}
	want := mustNew(t, "L", ohms(680, 180*1500.0/1680)...).LossDB(e, 997)
	if got := added.LossDB(e, 997); !near(got, want, 1e-9) {
		t.Errorf("LossDB = %.9f, want %.9f", got, want)
	}
	if len(l.Parts()) != 2 {
		t.Errorf("the drawing has %d parts now, want 2 as before", len(l.Parts()))
	}
	for _, bad := range []Part{
		{Ref: "R1", Value: 10, A: "out.hot", B: "screen"},
		{Ref: "R9", Value: 10, A: "out.hot", B: "nowhere"},
		{Ref: "R9", Value: -10, A: "out.hot", B: "screen"},
	} {
		if c, err := l.Added(bad); err == nil || c != nil {
			t.Errorf("Added(%+v) = %v, %v, want an error", bad, c, err)
		}
	}
}
