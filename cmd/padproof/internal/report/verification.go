package report

import (
	"io"

	"padproof/cmd/padproof/internal/ledger"
)

// VerificationText writes what was found of a ledger's chains. withHeads says that
// heads kept elsewhere were looked for.
func VerificationText(w io.Writer, v *ledger.Verification, withHeads bool) error {
	p := &page{w: w}
	if len(v.Faults) == 0 {
		p.line("SOUND   %s records of %s, none altered, missing, moved or doubled", grouped(v.Records), stations(len(v.Heads)))
	} else {
		p.line("NOT SOUND   %s records of %s", grouped(v.Records), stations(len(v.Heads)))
		for _, f := range v.Faults {
			p.item("  "+f.Fault+": ", f.Text)
		}
	}
	p.heading("Heads")
	for _, h := range v.Heads {
		p.line("  %s:%s", clean(h.String()), h.Hash)
	}
	if !withHeads {
		p.item("  ", "A chain whose end was cut off shows only against a head kept elsewhere: verify --head.")
	}
	return p.err
}

func stations(n int) string {
	if n == 1 {
		return "1 station"
	}
	return grouped(int64(n)) + " stations"
}
