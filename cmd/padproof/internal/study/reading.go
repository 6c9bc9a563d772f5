package study

import (
	"padproof/compare"
)

// Data are the readings of a study.
type Data struct {
	Name      string // the folder or the file
	Figure    string // what was read
	Unit      string // of the figure; "" where not known
	Readings  []Reading
	Limit     compare.Limit
	Simulated bool
	Warnings  []string
}

// A Reading is one of a study.
type Reading struct {
	Operator, Unit, Repeat string
	Value                  float64
}
