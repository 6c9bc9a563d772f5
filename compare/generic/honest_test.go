package generic

import (
	"math"
	"math/rand/v2"
	"strings"
	"testing"

	"padproof/compare"
	"padproof/compare/network"
)

// Units with a fault drawn from the kinds of fault, parts within 5 %, the mark rounded to a whole decibel and
// the rig anywhere in its tolerance: what is said is true about as often as its likelihood says.
// The faults are drawn one each from the single faults of the pad, not by the priors: leg faults and part
// faults by their number, sources and loads left out.
func TestLikelihoodsAreHonest(t *testing.T) {
	const units = 150
	rng := rand.New(rand.NewPCG(3, 5))
	within := func(tol float64) float64 { return 1 + tol*(2*rng.Float64()-1) }
	rig := compare.Rig{Ends: network.Ends{SourceOhms: 100, LoadOhms: 10000}, SourceTolFrac: 0.1, LoadTolFrac: 0.05}
	said, hits, strong, strongHits := 0.0, 0, 0, 0
	for range units {
		designDB := 6 + 20*rng.Float64()
		pads := Pads(Case{MarkDB: designDB, Ohms: 600, Rig: rig, FreqHz: 997})
		sound := pads[rng.IntN(len(pads))].Circuit
		var faults []network.Fault
		for _, p := range sound.Parts() {
			for _, form := range []network.FaultForm{network.PartOpen, network.PartShort, network.PartTimesTen, network.PartTenth} {
				faults = append(faults, network.Fault{Form: form, Ref: p.Ref})
			}
		}
		for _, f := range sound.LegFaults() {
			if f.Form == network.LegOpen || f.Form == network.LegToScreen {
				faults = append(faults, f)
			}
		}
		fault := faults[rng.IntN(len(faults))]
		unit := sound
		for _, p := range unit.Parts() {
			unit = unit.With(p.Ref, p.Value*within(PartTolFrac))
		}
		actual := rig.Ends
		actual.SourceOhms *= within(rig.SourceTolFrac)
		actual.LoadOhms *= within(rig.LoadTolFrac)
		c := Case{MarkDB: math.Round(designDB), Ohms: 600, Rig: rig, FreqHz: 997, StdUDB: 0.02}
		c.LossDB = fault.Apply(unit).LossDB(actual, 997)
		if math.IsInf(c.LossDB, 1) {
			c.LossDB, c.AtLeast = 80, true
		}
		for _, l := range Likelihoods(c) {
			right := strings.Contains(" or "+l.Fault+" or ", " or "+faultWords(sound, fault)+" or ")
			said += l.Likelihood
			if right {
				hits++
			}
			if l.Likelihood >= 0.6 {
				strong++
				if right {
					strongHits++
				}
			}
		}
	}
	t.Logf("said %.1f, true %d; of %d said with 0.6 or more %d true", said, hits, strong, strongHits)
	if float64(hits) < 0.75*said || strongHits < strong*8/10 {
		t.Errorf("likelihoods add up to %.1f, %d are true; of %d with 0.6 or more %d: want three quarters, and eight tenths", said, hits, strong, strongHits)
	}
}

// faultWords are the words that a fault goes by here.
func faultWords(c *network.Circuit, f network.Fault) string {
	if f.Ref == "" {
		return legText(f)
	}
	return roleOf(c.Name(), f.Ref) + " " + map[network.FaultForm]string{
		network.PartOpen: "open", network.PartShort: "short", network.PartTimesTen: "of ten times its value", network.PartTenth: "of a tenth of its value",
	}[f.Form]
}

// Every kind of fault has the same weight beforehand, whatever the number of parts or legs that can have
// it: with a reading that says next to nothing their weights are equal.
func TestKindsCountAlike(t *testing.T) {
	c := Case{MarkDB: 10, Ohms: 600, LossDB: 20, FreqHz: 997, StdUDB: 1e6, Rig: compare.Rig{Ends: network.Ends{SourceOhms: 100, LoadOhms: 10000}}}
	by := map[string]float64{}
	for _, h := range c.hypotheses(Pads(c)[:1]) {
		for _, words := range []string{"of ten times its value", "legs crossed", "a leg down to screen", "the load is not as stated"} {
			if strings.Contains(h.text, words) {
				by[words] += h.weight
			}
		}
	}
	for words, weight := range by {
		if want := by["legs crossed"]; !(math.Abs(weight-want) <= 1e-6*want) || len(by) != 4 {
			t.Errorf("%q weighs %g, want %g as a kind of one member", words, weight, want)
		}
	}
}
