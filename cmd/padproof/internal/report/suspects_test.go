package report

import (
	"strings"
	"testing"

	"padproof/cmd/padproof/internal/result"
)

// A take that holds nothing may be a cable left out as well as a shorted part: text and page say so,
// and say nothing of two things wrong.
func TestNothingCameThrough(t *testing.T) {
	none := result.Number(0.53)
	a := &result.Answer{Verdict: "UNPROVEN", Unit: "0417", Unexplained: &none, Suspects: []result.Suspect{{
		Fault: "R3 short", Parts: []string{"R3"}, Weight: 0.47, Predicted: map[string]result.Number{"loss_db": result.Missing},
		Confirm: result.Confirm{Pins: []string{}, Joined: []string{}, GoodOhms: result.Missing, FaultOhms: result.Missing, How: "read it"},
	}}}
	var text, page strings.Builder
	if err := AnswerText(&text, a, false); err != nil {
		t.Fatal(err)
	}
	if err := Page(&page, a, PageInfo{}); err != nil {
		t.Fatal(err)
	}
	for what, got := range map[string]string{"text": text.String(), "page": page.String()} {
		got = strings.Join(strings.Fields(got), " ")
		if !strings.Contains(got, "A cable left out") || !strings.Contains(got, "Most likely wrong") || strings.Contains(got, "Two things") {
			t.Errorf("%s does not say that nothing came through:\n%s", what, got)
		}
	}
}
