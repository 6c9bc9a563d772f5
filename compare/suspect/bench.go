package suspect

import (
	"math"
	"slices"

	"padproof/compare/network"
)

// A search holds what all hypotheses are scored against.
type search struct {
	e      Evidence
	ends   network.Ends
	freqs  []float64 // of the bench, each once
	toneAt int       // of freqs; -1 without one
	rows   []row     // measured ones first
	known  int       // how many of rows are measured, not bounds
	parts  int       // of the drawing
	params int       // parts, then the ends
	meters []Ohms    // readings in rows
	noise  *noiseScale

	straightLegs []float64 // dB of hot over cold straight through per relative change of each end; nil where it is not off
}

// The doubtful figures after those of the parts.
const (
	sourceParam = iota
	loadParam
	cableParam
	hotLoadParam
	coldLoadParam
	endParams
)

// A row is one figure that was measured, or bounded.
type row struct {
	kind     rowKind
	at       int // of freqs, or of meters
	ref      int // response: the tone
	observed float64
	variance float64 // its own
	bound    int     // 0 measured, 1 it is observed or more, -1 or less
}

type rowKind int

const (
	lossRow rowKind = iota
	responseRow
	legsRow
	phaseRow
	ohmsRow
	deadRow // at: 0 hot, 1 cold
)

// mostLossDB stands for a loss of which nothing was said but that nothing came through.
const mostLossDB = 60

func newSearch(e Evidence) *search {
	s := &search{e: e, ends: e.Rig.Ends, toneAt: -1, parts: len(e.Circuit.Parts())}
	s.params = s.parts + endParams
	if e.ToneHz > 0 {
		s.toneAt = s.freq(e.ToneHz)
	} else if len(e.Loss) > 0 {
		s.toneAt = s.freq(nearest1k(e.Loss))
	}
	for _, p := range e.Loss {
		s.point(lossRow, p)
	}
	for _, p := range e.Response {
		if s.toneAt >= 0 {
			s.point(responseRow, p)
		}
	}
	s.legs()
	for _, o := range e.Ohms {
		s.meter(o)
	}
	slices.SortStableFunc(s.rows, func(a, b row) int { return a.bound*a.bound - b.bound*b.bound })
	for s.known < len(s.rows) && s.rows[s.known].bound == 0 {
		s.known++
	}
	s.noise = newNoiseScale(e.Noise)
	return s
}

func nearest1k(points []Point) float64 {
	best := points[0].FreqHz
	for _, p := range points {
		if math.Abs(math.Log(p.FreqHz/1000)) < math.Abs(math.Log(best/1000)) {
			best = p.FreqHz
		}
	}
	return best
}

// freq is the place of a frequency among all.
func (s *search) freq(hz float64) int {
	if i := slices.Index(s.freqs, hz); i >= 0 {
		return i
	}
	s.freqs = append(s.freqs, hz)
	return len(s.freqs) - 1
}

func (s *search) point(kind rowKind, p Point) {
	if !(p.FreqHz >= 0) || math.IsInf(p.FreqHz, 1) || math.IsNaN(p.LossDB) || math.IsInf(p.LossDB, -1) {
		return
	}
	r := row{kind: kind, at: s.freq(p.FreqHz), ref: s.toneAt, observed: p.LossDB, variance: variance(p.StdUDB, leastStdUDB)}
	if kind == responseRow && r.at == r.ref {
		return // nil by definition
	}
	if p.AtLeast || math.IsInf(p.LossDB, 1) {
		r.bound = 1
		r.observed = math.Min(r.observed, 2*mostLossDB)
		if math.IsInf(p.LossDB, 1) {
			r.observed = mostLossDB
		}
	}
	s.rows = append(s.rows, r)
}

// Least standard uncertainties: no model and no connector holds better.
const (
	leastStdUDB  = 0.002
	leastStdUDeg = 1.0
)

func variance(stdU, least float64) float64 {
	if !(stdU > least) {
		stdU = least
	}
	if stdU > 1e3 {
		stdU = 1e3
	}
	return stdU * stdU
}

// serviceEnds are those of the service, or the bench's.
func (s *search) serviceEnds() network.Ends {
	if s.e.Service == (network.Ends{}) {
		return s.ends
	}
	return s.e.Service
}

// stated are the standard uncertainties of the ends, relative.
func (s *search) stated() [endParams]float64 {
	frac := func(tol float64) float64 {
		if !(tol > 0) {
			return 0
		}
		return math.Min(tol, 1) / math.Sqrt(3)
	}
	r := s.e.Rig
	var u [endParams]float64
	u[sourceParam], u[loadParam] = frac(r.SourceTolFrac), frac(r.LoadTolFrac)
	u[hotLoadParam], u[coldLoadParam] = u[loadParam], u[loadParam]
	if r.Ends.CableFarads > 0 {
		u[cableParam] = frac(r.CableTolFarads / r.Ends.CableFarads)
	}
	return u
}
