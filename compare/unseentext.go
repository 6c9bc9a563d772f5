package compare

import (
	"fmt"
	"math"
	"strconv"
	"strings"

	"padproof/compare/network"
)

// Name is the part, or the two parts, as in "R2" or "R1 and R3".
func (u Unseen) Name() string { return strings.Join(u.Refs, " and ") }

// Text says why the bench hardly sees the part, and what would show it.
func (u Unseen) Text() string {
	var b strings.Builder
	loss := fmt.Sprintf("%s to %s dB", tenths(u.ServiceLowDB), tenths(u.ServiceHighDB))
	if u.ServiceHighDB-u.ServiceLowDB < 0.05 {
		loss = tenths(u.ServiceLowDB) + " dB"
	}
	if len(u.Refs) == 2 {
		fmt.Fprintf(&b, "swapped, this bench would read the same within %.2g dB%s, but the loss in service might be %s.", u.WithinDB, u.alsoRead(), loss)
	} else {
		fmt.Fprintf(&b, "anything from %s to %s would read the same here within %.2g dB%s, but the loss in service might be %s.",
			partValue(u.Kind, u.LowValue), partValue(u.Kind, u.HighValue), u.WithinDB, u.alsoRead(), loss)
	}
	if u.Broken && u.Read > 0 {
		return b.String() + " Each breaks the limit: put in what the drawing says, and record again."
	}
	if r := u.Reading; r.PinA != "" {
		fmt.Fprintf(&b, " To settle it, unplug the unit (power, phantom and signal off) and read %s; a sound unit reads %s, one that may break the limit %s.",
			r.How(), partValue(network.Resistor, r.GoodOhms), u.wrongOhms())
	}
	if ends := u.ends(); ends != "" {
		fmt.Fprintf(&b, " Or record both takes again with %s on the bench, and say so in rig.toml.", ends)
	}
	return b.String()
}

// wrongOhms is what the reading gives where the limit breaks.
func (u Unseen) wrongOhms() string {
	ohms := func(v float64) string { return partValue(network.Resistor, v) }
	one := func(v float64, or string) string {
		if len(u.Refs) == 2 || v == 0 || math.IsInf(v, 1) {
			return ohms(v) // two parts swapped read what they read
		}
		return ohms(v) + or
	}
	below, above := one(u.BelowOhms, " or less"), one(u.AboveOhms, " or more")
	switch {
	case math.IsNaN(u.BelowOhms):
		return above
	case math.IsNaN(u.AboveOhms):
		return below
	}
	return below + ", or " + above
}

// alsoRead says that ohmmeter readings were taken and did not settle it.
func (u Unseen) alsoRead() string {
	if u.Read == 0 {
		return ""
	}
	return " and fit the ohmmeter readings taken"
}

// ends names the source and the load that would show the part.
func (u Unseen) ends() string {
	source, load := "a source of "+partValue(network.Resistor, u.SourceOhms), "a load of "+partValue(network.Resistor, u.LoadOhms)
	switch {
	case math.IsInf(u.LoadOhms, 0) || math.IsNaN(u.SourceOhms) && math.IsNaN(u.LoadOhms):
		return ""
	case math.IsNaN(u.SourceOhms):
		return load
	case math.IsNaN(u.LoadOhms):
		return source
	}
	return source + " and " + load
}

// How says which pins to put the meter on, and which to join.
func (r OhmReading) How() string {
	text := r.PinA + " to " + r.PinB
	if r.Joined != [2]string{} {
		text += ", " + r.Joined[0] + " joined to " + r.Joined[1]
	}
	return text
}

func tenths(db float64) string {
	if math.IsInf(db, 1) {
		return "endless"
	}
	return strconv.FormatFloat(db, 'f', 1, 64)
}

// partValue prints a value with three digits and its unit.
func partValue(kind network.Kind, v float64) string { return valueTo(kind, v, 3) }

// valueTo prints a value with so many digits and its unit.
func valueTo(kind network.Kind, v float64, digits int) string {
	unit := map[network.Kind]string{network.Capacitor: "F", network.Inductor: "H"}[kind]
	if unit == "" {
		unit = "Ω"
	}
	if math.IsInf(v, 1) {
		return map[bool]string{true: "open", false: "without end"}[unit == "Ω"]
	}
	if v == 0 {
		return "0 " + unit
	}
	for _, p := range []struct {
		scale float64
		name  string
	}{{1e6, "M"}, {1e3, "k"}, {1, ""}, {1e-3, "m"}, {1e-6, "µ"}, {1e-9, "n"}, {1e-12, "p"}} {
		if v >= p.scale*(1-0.5*math.Pow10(-digits)) || p.name == "p" {
			return strconv.FormatFloat(v/p.scale, 'g', digits, 64) + " " + p.name + unit
		}
	}
	return ""
}
