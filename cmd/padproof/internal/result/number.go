package result

import (
	"encoding/json"
	"math"
)

// Number is a figure that may be missing. Missing (NaN) and infinite values are
// null in JSON; null reads back as NaN.
type Number float64

// Missing is the Number that stands for no figure.
var Missing = Number(math.NaN())

// OK reports whether the figure is there and finite.
func (n Number) OK() bool {
	return !math.IsNaN(float64(n)) && !math.IsInf(float64(n), 0)
}

// MarshalJSON writes the figure, or null where there is none.
func (n Number) MarshalJSON() ([]byte, error) {
	if !n.OK() {
		return []byte("null"), nil
	}
	return json.Marshal(float64(n))
}

// UnmarshalJSON reads a figure; null becomes NaN.
func (n *Number) UnmarshalJSON(text []byte) error {
	if string(text) == "null" {
		*n = Missing
		return nil
	}
	return json.Unmarshal(text, (*float64)(n))
}

// NumberOf is a figure for a field that may be left out.
func NumberOf(v float64) *Number {
	n := Number(v)
	return &n
}
