package report

import (
	"math"
	"strings"
	"testing"

	"padproof/cmd/padproof/internal/result"
)

// A figure carries two digits of its doubt, and a small doubt does not look like
// none.
func TestFiguresCarryTheirDoubt(t *testing.T) {
	tests := []struct {
		measured, u           result.Number
		wantFigure, wantDoubt string
	}{
		{13.98765, 0.0912, "13.988", "0.091"},
		{13.98765, 0.912, "13.99", "0.91"},
		{13.98765, 2.41, "14.0", "2.4"},
		{13.98765, 0.00049, "13.988", "<0.001"},
		{-0.0001, 0.12, "0.00", "0.12"},
		{result.Missing, 0.12, "-", "0.12"},
		{result.Number(math.Inf(1)), result.Missing, "-", "-"},
	}
	for _, tt := range tests {
		places := decimals(tt.u)
		if got := fixed(tt.measured, places); got != tt.wantFigure {
			t.Errorf("fixed(%v) at U %v = %q, want %q", tt.measured, tt.u, got, tt.wantFigure)
		}
		if got := doubt(tt.u, places); got != tt.wantDoubt {
			t.Errorf("doubt(%v) = %q, want %q", tt.u, got, tt.wantDoubt)
		}
	}
}

func TestNamesCannotDriveTheTerminal(t *testing.T) {
	var b strings.Builder
	a := &result.Answer{Verdict: "PASS", Unit: "\x1b[31m0417\u202e", Pad: "line\npad", Notes: []string{strings.Repeat("wörd ", 60)}}
	if err := AnswerText(&b, a, true); err != nil {
		t.Fatal(err)
	}
	if text := b.String(); strings.ContainsAny(text, "\x1b\u202e") {
		t.Errorf("control marks reach the terminal: %q", text)
	}
	for _, line := range strings.Split(b.String(), "\n") {
		if n := len([]rune(line)); n > lineWidth {
			t.Errorf("line of %d characters, want at most %d: %q", n, lineWidth, line)
		}
	}
}
