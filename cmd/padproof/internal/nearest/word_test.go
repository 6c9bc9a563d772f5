package nearest

import (
	"strings"
	"testing"
)

var roles = []string{"before", "after", "before-again", "after-again", "legs", "both"}

func TestWord(t *testing.T) {
	for _, c := range []struct {
		word, want string
		edits      int
	}{
		{"before", "before", 0},
		{"BEFORE", "before", 0},
		{"befor", "before", 1},
		{"beofre", "before", 1}, // two neighbours swapped are one edit
		{"aftr", "after", 1},
		{"Before Again", "before-again", 0},
		{"before_again", "before-again", 0},
		{"leg", "legs", 1},
		{"", "legs", 4},
	} {
		got, edits := Word(c.word, roles)
		if got != c.want || edits != c.edits {
			t.Errorf("Word(%q) = %q, %d, want %q, %d", c.word, got, edits, c.want, c.edits)
		}
	}
	if got, edits := Word("x", nil); got != "" || edits != -1 {
		t.Errorf("Word with nothing known = %q, %d, want \"\", -1", got, edits)
	}
}

// An edit count is a distance: nil only for the same word, the same both ways,
// and never over the longer word's length.
func TestDistanceProperties(t *testing.T) {
	words := append([]string{"", "a", "ab", "ba", "µ", "Ωhm"}, roles...)
	for _, a := range words {
		for _, b := range words {
			n := distance(a, b)
			if n != distance(b, a) {
				t.Errorf("distance(%q, %q) = %d, other way %d", a, b, n, distance(b, a))
			}
			if (n == 0) != (a == b) {
				t.Errorf("distance(%q, %q) = %d", a, b, n)
			}
			if most := max(len([]rune(a)), len([]rune(b))); n > most {
				t.Errorf("distance(%q, %q) = %d, want at most %d", a, b, n, most)
			}
		}
	}
}

func TestSlip(t *testing.T) {
	keys := []string{"loss_plus_minus_db", "loss_nominal_db", "source_ohms", "U", "pi"}
	for _, c := range []struct {
		word, want string
		ok         bool
	}{
		{"loss_plus_minus", "loss_plus_minus_db", true},
		{"loss-plus-minus-db", "loss_plus_minus_db", true},
		{"sourc_ohm", "source_ohms", true},
		{"source", "source_ohms", true},
		{"u", "U", true},
		{"PI", "pi", true},
		{"X", "", false},
		{"colour", "", false},
		{strings.Repeat("loss", 5000), "", false},
	} {
		got, ok := Slip(c.word, keys)
		if ok != c.ok || (ok && got != c.want) {
			t.Errorf("Slip(%.20q) = %q, %v, want %q, %v", c.word, got, ok, c.want, c.ok)
		}
	}
}
