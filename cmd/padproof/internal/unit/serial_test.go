package unit

import (
	"math/rand/v2"
	"slices"
	"strings"
	"testing"
)

func TestCompareSerials(t *testing.T) {
	want := []string{"", "1a", "007", "7", "9", "10", "10a", "0417", "417", "99999999999999999999", "100000000000000000000", "SM-9", "sm-10", "SM-10b", "SM-10b2", "sm-11", "Ö1"}
	for range 50 {
		got := slices.Clone(want)
		rand.New(rand.NewPCG(1, 2)).Shuffle(len(got), func(i, j int) { got[i], got[j] = got[j], got[i] })
		slices.SortFunc(got, CompareSerials)
		if !slices.Equal(got, want) {
			t.Fatalf("serials in order %q, want %q", got, want)
		}
	}
}

// The order is one: of any three the first is before the last, and two are alike
// only where they are the same.
func TestCompareSerialsIsAnOrder(t *testing.T) {
	rng := rand.New(rand.NewPCG(3, 4))
	serial := func() string {
		var b strings.Builder
		for range rng.IntN(5) {
			b.WriteByte("01a9-B"[rng.IntN(6)])
		}
		return b.String()
	}
	for range 20000 {
		a, b, c := serial(), serial(), serial()
		if CompareSerials(a, b) != -CompareSerials(b, a) || (CompareSerials(a, b) == 0) != (a == b) {
			t.Fatalf("%q and %q: %d and %d", a, b, CompareSerials(a, b), CompareSerials(b, a))
		}
		if CompareSerials(a, b) < 0 && CompareSerials(b, c) < 0 && CompareSerials(a, c) >= 0 {
			t.Fatalf("%q before %q before %q, and %q not before %q", a, b, c, a, c)
		}
	}
}
