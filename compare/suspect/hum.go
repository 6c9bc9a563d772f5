package suspect

import (
	"math"

	"padproof/compare/network"
)

// Chances that hum stands out over the rig's own, and what standing out means. *Common practice, no
// source.*
const (
	humWithLoose = 0.6 // with a leg that hangs, or lies on screen
	humElse      = 0.1
	humOverDB    = 6
)

// humSeen tells whether the unit hums beyond the rig; ok is false where that is not known.
func (h *Hum) humSeen() (seen, ok bool) {
	if h == nil || math.IsNaN(h.RigDBu) {
		return false, false
	}
	if math.IsNaN(h.UnitDBu) {
		return false, true
	}
	doubt := h.UDB
	if !(doubt >= 0) {
		doubt = 0
	}
	over := h.UnitDBu - h.RigDBu
	switch {
	case over >= humOverDB+doubt:
		return true, true
	case over <= humOverDB-doubt:
		return false, true
	}
	return false, false
}

// score is the logarithm of the likelihood of the hum.
func (h *Hum) score(loose bool) float64 {
	seen, ok := h.humSeen()
	if !ok {
		return 0
	}
	p := humElse
	if loose {
		p = humWithLoose
	}
	if !seen {
		p = 1 - p
	}
	return math.Log(p)
}

// loose tells whether a fault leaves a pin of the output hanging, or unbalances the line: a leg open
// or down to screen, or no current from an output pin to its input pin where the drawing has one.
func (f Fault) loose(drawn, wrong *network.Circuit) bool {
	if f.End != NoEnd {
		return false
	}
	switch f.Form {
	case network.LegOpen, network.LegToScreen:
		return true
	case network.PartDrifted, network.PartIs, network.LegsCrossed, network.EndsSwapped:
		return false
	}
	for _, leg := range []string{".hot", ".cold"} {
		if !math.IsInf(drawn.Ohms("in"+leg, "out"+leg), 1) && math.IsInf(wrong.Ohms("in"+leg, "out"+leg), 1) {
			return true
		}
	}
	return false
}
