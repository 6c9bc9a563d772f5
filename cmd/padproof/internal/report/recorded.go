package report

import (
	"fmt"
	"io"

	"padproof/cmd/padproof/internal/result"
)

// RecordedText says where an answer stands in the ledger.
func RecordedText(w io.Writer, r *result.Recorded) error {
	_, err := fmt.Fprintf(w, "\nRecorded as %s/%d, hash %s\n", clean(r.Station), r.Sequence, r.Hash)
	return err
}
