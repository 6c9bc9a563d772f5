package generic

import (
	"fmt"
	"math"
	"strings"

	"padproof/compare"
)

// measure says what would show whether the fault is there.
func (l *line) measure() string {
	switch l.best().check {
	case byTurning:
		return "turn the pad round and record after once more"
	case byPolarity:
		return "record the test signal, which shows polarity"
	case bySource:
		return "record before-loaded, which measures the source, and see output.source_ohms in rig.toml"
	case byLoad:
		return "see input.load_ohms in rig.toml, and what else loads the output"
	case byMark:
		return "look for an impedance on the pad or in its papers, and give it with the mark"
	case byKind:
		return "see which parts are in it, and give them as a drawing"
	case byLooking:
		return "see that the pad is in circuit, and not switched out"
	}
	text := l.ohms()
	if l.best().check == byLegs {
		text += "; or record legs"
	}
	return text
}

// plainFactor is a change of a reading that no meter and no tolerance can hide: beyond it the simpler
// of two readings serves better.
const plainFactor = 10

// ohms names the ohmmeter reading that shows the fault best. Where none shows all of those that no loss
// tells apart, each gets its own.
func (l *line) ohms() string {
	reading, change := bestReading(l.faults())
	if change >= math.Log(2) || len(l.joined) == 0 {
		return readingText(reading, l.faults())
	}
	alone := line{networks: l.networks}
	texts := []string{alone.ohms()}
	for _, other := range l.joined {
		texts = append(texts, other.ohms())
	}
	return strings.Join(texts, "; and ")
}

// bestReading is the one whose change, as a logarithm, is largest where it is smallest; of those that are plain
// the first of [compare.Readings].
func bestReading(faults []hypothesis) (best compare.OhmReading, most float64) {
	most = -1
	for _, r := range compare.Readings(faults[0].sound) {
		least := math.Log(plainFactor)
		for _, h := range faults {
			least = math.Min(least, compare.ReadingChange(r.On(h.sound), r.On(h.faulty)))
		}
		if least > most {
			best, most = r, least
		}
	}
	return best, most
}

// readingText says what a reading gives sound and with each of the faults.
func readingText(r compare.OhmReading, faults []hypothesis) string {
	var sound, faulty []float64
	for _, h := range faults {
		sound, faulty = append(sound, r.On(h.sound)), append(faulty, r.On(h.faulty))
	}
	text := fmt.Sprintf("with an ohmmeter %s: %s sound, %s with the fault", r.How(), ohmsRange(sound), ohmsRange(faulty))
	if other := otherLeg(r, faults[0].sound.Balanced()); other != "" {
		text += "; then " + other
	}
	return text
}

// otherLeg is the reading on the other leg of a balanced pad, where the fault may as well be; "" where
// the reading takes in both.
func otherLeg(r compare.OhmReading, balanced bool) string {
	legToLeg := strings.HasSuffix(r.PinA, ".hot") && strings.HasSuffix(r.PinB, ".cold")
	if !balanced || r.Joined != [2]string{} || legToLeg {
		return ""
	}
	mirror := strings.NewReplacer(".hot", ".cold", ".cold", ".hot")
	return mirror.Replace(r.PinA) + " to " + mirror.Replace(r.PinB)
}

// ohmsRange prints readings, lowest to highest.
func ohmsRange(all []float64) string {
	low, high := math.Inf(1), math.Inf(-1)
	for _, v := range all {
		low, high = math.Min(low, v), math.Max(high, v)
	}
	if ohmsText(low) == ohmsText(high) {
		return ohmsText(low)
	}
	return ohmsText(low) + " to " + ohmsText(high)
}

// ohmsText prints a reading with two digits.
func ohmsText(v float64) string {
	switch {
	case math.IsInf(v, 1) || v > 1e8:
		return "open"
	case v < 0.05:
		return "0 Ω"
	case v >= 995e3:
		return fmt.Sprintf("%.2g MΩ", v/1e6)
	case v >= 995:
		return fmt.Sprintf("%.2g kΩ", v/1e3)
	case v >= 99.5:
		return fmt.Sprintf("%.0f Ω", 10*math.Round(v/10))
	}
	return fmt.Sprintf("%.2g Ω", v)
}
