package rigcheck

import (
	"fmt"
	"math"
	"path/filepath"
	"slices"
	"strings"
	"time"

	"padproof/cmd/padproof/internal/proof"
	"padproof/cmd/padproof/internal/result"
	"padproof/cmd/padproof/internal/sheet"
	"padproof/cmd/padproof/internal/unit"
	"padproof/compare"
)

// A Reading is one measurement of the reference pad.
type Reading struct {
	At       time.Time
	LossDB   float64 // on the bench; NaN where the pad could not be read
	StdUDB   float64 // of the reading by itself
	FreqHz   float64 // judged at; NaN where not read
	Void     string  // why the takes prove nothing; "" where they do
	Through  string  // SHA-256 of the take through the pad
	Operator string
	Record   string // STATION/SEQUENCE; "" where it is in no ledger
}

// Belongs is an error where a folder does not bear the reference pad's name, nor
// the one above it: it is likely another unit's.
func Belongs(u *unit.Unit, rig *sheet.Rig) error {
	serial := rig.Reference.Serial
	full, err := filepath.Abs(u.Folder)
	if err != nil || strings.EqualFold(filepath.Base(full), serial) || strings.EqualFold(filepath.Base(filepath.Dir(full)), serial) {
		return err
	}
	return &result.Error{File: u.Folder, Text: fmt.Sprintf("is not the folder of the reference pad, which is %s", serial),
		Hint: fmt.Sprintf("put its takes into a folder %s, or into one inside that; or write another serial under [reference] in %s", serial, rig.File)}
}

// Measure measures the reference pad of a bench as check measures a unit of which
// the mark says what this bench should read.
func Measure(u *unit.Unit, rig *sheet.Rig, known *Known, o proof.Options) (*result.Answer, error) {
	of := *u
	of.PadFile = "" // the known loss stands for the drawing
	o.Mark = &proof.Mark{LossDB: known.lossDB(math.NaN()), OnThisBench: true}
	a, err := proof.Check(&of, o)
	if err != nil {
		return nil, err
	}
	a.Unit, a.Pad = rig.Reference.Serial, "reference pad "+rig.Reference.Serial
	a.WithoutDrawing = []result.Likelihood{}
	return a, nil
}

// ReadingOf takes the reading out of an answer that [Measure] made.
func ReadingOf(a *result.Answer, at time.Time) Reading {
	r := Reading{At: at, LossDB: math.NaN(), FreqHz: math.NaN()}
	for _, c := range a.Checks {
		if c.Name == "loss" {
			r.LossDB = float64(c.Measured)
			if c.AtHz != nil {
				r.FreqHz = float64(*c.AtHz)
			}
		}
	}
	var sum float64
	for _, t := range a.Budget {
		if t.Check == "loss" {
			sum += math.Pow(float64(t.StandardU*t.Sensitivity), 2)
		}
	}
	r.StdUDB = math.Sqrt(sum)
	r.Void = voidOf(a.Captures)
	for _, c := range a.Captures {
		if c.Role == unit.After || c.Role == unit.Both {
			r.Through = c.SHA256
		}
	}
	switch {
	case r.Void != "":
		r.LossDB = math.NaN()
	case math.IsNaN(r.LossDB) || math.IsInf(r.LossDB, 0):
		r.LossDB, r.Void = math.NaN(), "before and after hold no tone of one frequency"
	}
	return r
}

// lossRoles are the takes that a loss stands on.
var lossRoles = []string{unit.Before, unit.After, unit.BeforeAgain, unit.AfterAgain, unit.Both}

// voidOf names the problems of the takes that take a loss's ground away.
func voidOf(captures []result.Capture) string {
	var names []string
	for _, c := range captures {
		for _, p := range c.Problems {
			text := fmt.Sprintf("%s is %s", c.Role, p.Problem)
			if slices.Contains(lossRoles, c.Role) && compare.Voids(p.Problem, "loss") && !slices.Contains(names, text) {
				names = append(names, text)
			}
		}
	}
	return strings.Join(names, ", ")
}
