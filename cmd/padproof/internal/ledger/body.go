package ledger

import (
	"bytes"
	"crypto/sha256"
	"encoding/hex"
	"encoding/json"
	"fmt"
	"strings"
	"time"
)

// recordSchema names the form of a body.
const recordSchema = "padproof.record.1"

// timeForm is how times stand in a body.
const timeForm = "2006-01-02T15:04:05.000000Z"

// A body is the JSON object that is stored and hashed. The order of its fields is
// part of the form.
type body struct {
	Schema    string            `json:"schema"`
	Station   string            `json:"station"`
	Sequence  int64             `json:"sequence"`
	Previous  string            `json:"previous"`
	Time      string            `json:"time"`
	Kind      string            `json:"kind"`
	Verdict   string            `json:"verdict"`
	Unit      string            `json:"unit"`
	Lot       string            `json:"lot"`
	Drawing   Drawing           `json:"drawing"`
	Operator  string            `json:"operator"`
	Tool      string            `json:"tool"`
	Simulated bool              `json:"simulated"`
	Options   map[string]string `json:"options"`
	Files     []File            `json:"files"`
	Answer    json.RawMessage   `json:"answer"`
}

// encode returns the body of a record that stands after the one given.
func encode(r Record, after Receipt) ([]byte, Receipt, error) {
	b := body{
		Schema: recordSchema, Station: r.Station, Sequence: after.Sequence + 1, Previous: after.Hash,
		Time: r.Time.Format(timeForm), Kind: r.Kind, Verdict: r.Verdict, Unit: r.Unit, Lot: r.Lot,
		Drawing: r.Drawing, Operator: r.Operator, Tool: r.Tool, Simulated: r.Simulated,
		Options: r.Options, Files: r.Files, Answer: r.Answer,
	}
	if b.Options == nil {
		b.Options = map[string]string{}
	}
	if b.Files == nil {
		b.Files = []File{}
	}
	var text bytes.Buffer
	encoder := json.NewEncoder(&text)
	encoder.SetEscapeHTML(false)
	if err := encoder.Encode(b); err != nil {
		return nil, Receipt{}, refused("the record cannot be written as JSON: %v", err)
	}
	bytes := bytes.TrimSuffix(text.Bytes(), []byte("\n"))
	return bytes, Receipt{Station: r.Station, Sequence: b.Sequence, Hash: hashOf(bytes)}, nil
}

// decode reads a body.
func decode(text []byte) (Entry, error) {
	var b body
	if err := json.Unmarshal(text, &b); err != nil {
		return Entry{}, err
	}
	if !strings.HasPrefix(b.Schema, "padproof.record.") {
		return Entry{}, fmt.Errorf("its schema is %q", b.Schema)
	}
	at, err := time.Parse(timeForm, b.Time)
	if err != nil {
		return Entry{}, fmt.Errorf("its time is %q", b.Time)
	}
	return Entry{
		Receipt:  Receipt{Station: b.Station, Sequence: b.Sequence, Hash: hashOf(text)},
		Previous: b.Previous,
		Record: Record{Station: b.Station, Time: at, Kind: b.Kind, Verdict: b.Verdict, Unit: b.Unit, Lot: b.Lot,
			Drawing: b.Drawing, Operator: b.Operator, Tool: b.Tool, Simulated: b.Simulated,
			Options: b.Options, Files: b.Files, Answer: b.Answer},
		Body: text,
	}, nil
}

// An Entry is a record as it stands in a ledger. Body holds the bytes that the
// hash is made of.
type Entry struct {
	Receipt
	Previous string // the hash of the record before, "" for a station's first
	Record   Record
	Body     []byte
}

func hashOf(text []byte) string {
	sum := sha256.Sum256(text)
	return hex.EncodeToString(sum[:])
}
