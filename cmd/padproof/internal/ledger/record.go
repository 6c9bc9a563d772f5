package ledger

import (
	"encoding/json"
	"fmt"
	"strings"
	"time"
	"unicode"
	"unicode/utf8"

	"padproof/cmd/padproof/internal/result"
)

// What a record is of.
const (
	UnitCheck = "check"
	RigCheck  = "rigcheck"
)

// A Record is one check, as it is kept.
type Record struct {
	Station   string    // which bench; needed
	Time      time.Time // zero: when it is written
	Kind      string    // [UnitCheck] or [RigCheck]; "": [UnitCheck]
	Verdict   string    // PASS, FAIL or UNPROVEN
	Unit      string    // the serial number, "" where not known
	Lot       string    // "" where none
	Drawing   Drawing
	Operator  string            // "" where not given
	Tool      string            // the version of padproof
	Simulated bool              // a take says that it is SIMULATED
	Options   map[string]string // what the command line added to the sheets
	Files     []File            // the sheets as used
	Answer    json.RawMessage   // the whole answer
}

// A Drawing is named by the pad's name and by what its sheet said.
type Drawing struct {
	Name   string `json:"name"`
	SHA256 string `json:"sha256"`
}

// A File is a sheet as it was used. Text is "" for a file that is no text.
type File struct {
	Role   string `json:"role"` // pad, rig
	File   string `json:"file"`
	SHA256 string `json:"sha256"`
	Text   string `json:"text"`
}

// A Receipt says where a record stands. The hash of a station's newest record is
// its head.
type Receipt struct {
	Station  string `json:"station"`
	Sequence int64  `json:"sequence"`
	Hash     string `json:"hash"` // SHA-256, 64 hexadecimal digits
}

// String is STATION/SEQUENCE.
func (r Receipt) String() string { return fmt.Sprintf("%s/%d", r.Station, r.Sequence) }

// FromAnswer makes the record of an answer. Station, and what the answer does not
// know, are left to the caller.
func FromAnswer(a *result.Answer) (Record, error) {
	text, err := json.Marshal(a)
	if err != nil {
		return Record{}, fmt.Errorf("the answer cannot be kept: %w", err)
	}
	return Record{Kind: UnitCheck, Verdict: a.Verdict, Unit: a.Unit, Drawing: Drawing{Name: a.Pad},
		Simulated: a.Simulated, Answer: text}, nil
}

// AddFile adds a sheet; that of role pad also names the drawing.
func (r *Record) AddFile(role, name string, text []byte) {
	f := File{Role: role, File: name, SHA256: hashOf(text), Text: string(text)}
	r.Files = append(r.Files, f)
	if role == "pad" {
		r.Drawing.SHA256 = f.SHA256
	}
}

// longestName bounds the names by which records are found, in bytes.
const longestName = 200

// ready returns the record as it can be kept: names are valid UTF-8 without
// control characters, the time is UTC to the microsecond.
func (r Record) ready(now time.Time) (Record, error) {
	if r.Kind == "" {
		r.Kind = UnitCheck
	}
	if r.Time.IsZero() {
		r.Time = now
	}
	r.Time = r.Time.UTC().Truncate(time.Microsecond)
	for _, name := range []struct {
		what string
		text *string
	}{
		{"station", &r.Station}, {"unit", &r.Unit}, {"lot", &r.Lot}, {"drawing", &r.Drawing.Name},
		{"operator", &r.Operator}, {"tool", &r.Tool},
	} {
		*name.text = plain(*name.text)
		if len(*name.text) > longestName {
			return r, refused("the %s's name is %d bytes long; a ledger keeps %d", name.what, len(*name.text), longestName)
		}
	}
	switch {
	case r.Station == "":
		return r, refused("a record needs a station")
	case r.Kind != UnitCheck && r.Kind != RigCheck:
		return r, refused("%q is no kind of record; there are %s and %s", r.Kind, UnitCheck, RigCheck)
	case r.Verdict != "PASS" && r.Verdict != "FAIL" && r.Verdict != "UNPROVEN":
		return r, refused("%q is no verdict that a record can have", r.Verdict)
	case r.Time.Year() < 1970 || r.Time.Year() > 9999:
		return r, refused("the time %v is none that a record can have", r.Time)
	case !json.Valid(r.Answer):
		return r, refused("the answer is not JSON")
	}
	return r, nil
}

// plain is a name in valid UTF-8 with each control character made a blank.
func plain(name string) string {
	name = strings.ToValidUTF8(name, string(utf8.RuneError))
	return strings.TrimSpace(strings.Map(func(r rune) rune {
		if unicode.IsControl(r) {
			return ' '
		}
		return r
	}, name))
}
