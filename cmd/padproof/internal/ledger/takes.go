package ledger

import (
	"encoding/json"
	"slices"
	"strings"
)

// TakesOf is a fingerprint of the takes that an answer stands on: the SHA-256 of
// one line "role hash" for each, sorted; "" where it names none. Two answers with
// one fingerprint were made of the same recordings: by [Filter].Takes a caller
// finds whether these recordings are in the ledger already.
func TakesOf(answer json.RawMessage) string {
	var a struct {
		Captures []struct{ Role, SHA256 string } `json:"captures"`
	}
	if json.Unmarshal(answer, &a) != nil || len(a.Captures) == 0 {
		return ""
	}
	var lines []string
	for _, c := range a.Captures {
		lines = append(lines, c.Role+" "+c.SHA256+"\n")
	}
	slices.Sort(lines)
	return hashOf([]byte(strings.Join(slices.Compact(lines), "")))
}
