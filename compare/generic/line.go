package generic

import (
	"math"
	"slices"
	"sort"
	"strings"
)

// A line is what is said of one fault, over all pads that might have it.
type line struct {
	texts    []string
	weight   float64
	networks map[string]hypothesis // the likeliest of each kind of pad
	joined   []*line               // that no loss tells apart from this one
}

// faults are the likeliest of each kind of pad, those of joined lines too.
func (l *line) faults() []hypothesis {
	var all []hypothesis
	for _, name := range l.names() {
		all = append(all, l.networks[name])
	}
	for _, other := range l.joined {
		all = append(all, other.faults()...)
	}
	return all
}

func (l *line) best() hypothesis {
	var best hypothesis
	for _, name := range l.names() {
		if h := l.networks[name]; h.weight >= best.weight {
			best = h
		}
	}
	return best
}

func (l *line) names() []string {
	var names []string
	for name := range l.networks {
		names = append(names, name)
	}
	sort.Strings(names)
	return names
}

// lines gathers hypotheses by their words, and those that no loss could tell apart, and keeps the
// likeliest.
func (c Case) lines(all []hypothesis) []Likelihood {
	total := c.noneDensity()
	by := map[string]*line{}
	var order []*line
	for _, h := range all {
		total += h.weight
		if h.weight == 0 {
			continue
		}
		l := by[h.text]
		if l == nil {
			l = &line{texts: []string{h.text}, networks: map[string]hypothesis{}}
			by[h.text] = l
			order = append(order, l)
		}
		l.weight += h.weight
		const moreThanRounding = 1.001 // of two legs alike the hot one, listed first, stands
		if name := h.networkName(); h.weight > moreThanRounding*l.networks[name].weight {
			l.networks[name] = h
		}
	}
	for _, l := range order {
		l.keepLikely()
	}
	order = joined(order)
	sort.SliceStable(order, func(i, j int) bool { return order[i].weight > order[j].weight })
	var shown []Likelihood
	for _, l := range order[:min(len(order), mostLines)] {
		if share := l.weight / total; share >= leastLikelihood {
			shown = append(shown, l.likelihood(share))
		}
	}
	return shown
}

func (h hypothesis) networkName() string {
	if h.sound == nil {
		return ""
	}
	return h.sound.Name()
}

// keepLikely drops the kinds of pad that have less than a tenth of the weight of the likeliest.
func (l *line) keepLikely() {
	best := l.best().weight
	for name, h := range l.networks {
		if h.weight < best/10 {
			delete(l.networks, name)
		}
	}
}

// joined puts those lines into one whose faults are one to any loss: the same pads, the same readings.
func joined(all []*line) []*line {
	var kept []*line
	for _, l := range all {
		i := slices.IndexFunc(kept, func(k *line) bool { return k.same(l) })
		if i < 0 {
			kept = append(kept, l)
			continue
		}
		kept[i].texts = append(kept[i].texts, l.texts...)
		kept[i].weight += l.weight
		kept[i].joined = append(kept[i].joined, l)
	}
	return kept
}

func (l *line) same(other *line) bool {
	const alikeDB = 0.01
	if len(l.networks) != len(other.networks) {
		return false
	}
	for name, h := range l.networks {
		o, ok := other.networks[name]
		if !ok || !h.soldered() || !o.soldered() || !(math.Abs(h.readsDB-o.readsDB) < alikeDB || h.readsDB == o.readsDB) {
			return false
		}
	}
	return true
}

// soldered reports whether it is one fault in the pad itself, which one reading would show.
func (h hypothesis) soldered() bool {
	return h.amount == "" && (h.check == byOhms || h.check == byLegs) && h.faulty != h.sound
}

func (l *line) likelihood(share float64) Likelihood {
	best := l.best()
	out := Likelihood{
		Fault: strings.Join(l.texts, " or "), Networks: []string{}, WouldReadDB: best.readsDB,
		LowDB: math.Inf(1), HighDB: math.Inf(-1), Likelihood: share, Measure: l.measure(),
	}
	if best.amount != "" {
		out.Fault += ", " + best.amount
	}
	for _, name := range l.names() {
		if name != "" {
			out.Networks = append(out.Networks, name)
		}
		h := l.networks[name]
		out.LowDB, out.HighDB = math.Min(out.LowDB, h.readsDB), math.Max(out.HighDB, h.readsDB)
	}
	return out
}
