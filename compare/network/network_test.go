package network

import (
	"math"
	"testing"
)

// ohms makes resistors R1, R2 ... of 1 % for a named network.
func ohms(values ...float64) []Part {
	var parts []Part
	for i, v := range values {
		parts = append(parts, Part{Ref: "R" + string(rune('1'+i)), Value: v, TolFrac: 0.01})
	}
	return parts
}

// at is a part with nodes.
func at(ref string, kind Kind, value float64, a, b string) Part {
	return Part{Ref: ref, Kind: kind, Value: value, TolFrac: 0.05, A: a, B: b}
}

func mustNew(tb testing.TB, name string, parts ...Part) *Circuit {
	tb.Helper()
	c, err := New(name, parts)
	if err != nil {
		tb.Fatalf("New(%q) failed: %v", name, err)
	}
	return c
}

// saltmarsh returns one pad of each named network.
func saltmarsh(tb testing.TB, name string) *Circuit {
	tb.Helper()
	values := map[string][]float64{
		"L":         {680, 150},
		"U":         {560, 560, 330},
		"T":         {330, 300, 390},
		"H":         {150, 160, 150, 140, 430},
		"pi":        {1100, 820, 1200},
		"O":         {1100, 430, 390, 1200},
		"bridged-T": {600, 560, 1300, 270},
	}
	return mustNew(tb, name, ohms(values[name]...)...)
}

// near reports whether got is want within tol, both +Inf counting as equal.
func near(got, want, tol float64) bool {
	return got == want || math.Abs(got-want) <= tol
}
