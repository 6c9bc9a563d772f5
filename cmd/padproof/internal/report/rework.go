package report

import (
	"fmt"
	"strings"

	"padproof/cmd/padproof/internal/result"
)

// rework says what would bring the loss in.
func rework(p *page, a *result.Answer) {
	if len(a.Rework) == 0 {
		return
	}
	p.heading("What should bring the loss in; one of")
	for _, r := range a.Rework {
		p.item("  - ", r.Text)
	}
	p.item("  ", result.SolderCaution)
}

// withoutDrawing says what might be wrong with a pad that is known by its mark alone.
func withoutDrawing(p *page, a *result.Answer) {
	if len(a.WithoutDrawing) == 0 {
		return
	}
	p.heading("What might be wrong; no drawing was given, so these are likelihoods and no findings")
	for _, l := range a.WithoutDrawing {
		kinds := ""
		if len(l.Networks) > 0 {
			kinds = " (" + strings.Join(l.Networks, ", ") + ")"
		}
		p.item("  - ", fmt.Sprintf("%s%s: would read %s here; likelihood %s; to tell: %s", l.Fault, kinds, wouldRead(l), fixed(l.Likelihood, 2), l.Measure))
	}
	p.item("  ", result.SolderCaution)
}

func wouldRead(l result.Likelihood) string {
	low, high := fixed(l.WouldReadLowDB, 1), fixed(l.WouldReadHighDB, 1)
	switch {
	case !l.WouldReadDB.OK():
		return "nothing"
	case !l.WouldReadLowDB.OK() || !l.WouldReadHighDB.OK() || low == high:
		return fixed(l.WouldReadDB, 1) + " dB"
	}
	return low + " to " + high + " dB"
}
