package lotstat

import (
	"errors"
	"fmt"
	"slices"
)

// cells are the readings of a study, by operator, unit and repeat.
type cells [][][]float64

func (c cells) operators() int { return len(c) }
func (c cells) units() int     { return len(c[0]) }
func (c cells) repeats() int   { return len(c[0][0]) }

// crossed sorts readings into cells and refuses a study that is not balanced.
func crossed(readings []StudyReading) (cells, error) {
	var operators, units []string
	byCell := make(map[[2]string][]float64)
	for i, r := range readings {
		if !finite(r.Value) {
			return nil, fmt.Errorf("reading %d, operator %s, unit %s, is %g: measure it again", i+1, r.Operator, r.Unit, r.Value)
		}
		if !slices.Contains(operators, r.Operator) {
			operators = append(operators, r.Operator)
		}
		if !slices.Contains(units, r.Unit) {
			units = append(units, r.Unit)
		}
		key := [2]string{r.Operator, r.Unit}
		byCell[key] = append(byCell[key], r.Value)
	}
	if len(operators) < 2 || len(units) < 2 {
		return nil, fmt.Errorf("a study needs two operators and two units or more, have %d and %d", len(operators), len(units))
	}
	return squared(byCell, operators, units)
}

// squared lays cells out, all of the size that most of them have.
func squared(byCell map[[2]string][]float64, operators, units []string) (cells, error) {
	repeats := usualSize(byCell)
	all := make(cells, len(operators))
	for i, operator := range operators {
		for _, unit := range units {
			cell := byCell[[2]string{operator, unit}]
			if len(cell) != repeats {
				return nil, fmt.Errorf("operator %s has %s of unit %s, where %d are usual: a study needs as many of each unit by each operator",
					operator, counted(len(cell), "reading"), unit, repeats)
			}
			all[i] = append(all[i], cell)
		}
	}
	if repeats < 2 {
		return nil, errors.New("a study needs two readings or more of each unit by each operator, have one")
	}
	return all, nil
}

// usualSize is the commonest number of readings in a cell, of several the larger.
func usualSize(byCell map[[2]string][]float64) int {
	times := make(map[int]int)
	for _, cell := range byCell {
		times[len(cell)]++
	}
	usual := 0
	for size, n := range times {
		if n > times[usual] || (n == times[usual] && size > usual) {
			usual = size
		}
	}
	return usual
}

// counted is "no reading", "1 reading", "2 readings".
func counted(n int, what string) string {
	switch n {
	case 0:
		return "no " + what
	case 1:
		return "1 " + what
	}
	return fmt.Sprintf("%d %ss", n, what)
}
