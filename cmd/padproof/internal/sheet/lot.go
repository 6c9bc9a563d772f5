package sheet

import (
	"fmt"
	"maps"
	"slices"
	"strconv"
	"strings"
)

// Lot is a lot.toml: what a folder of units is called, and, where one set of
// takes holds a unit in each channel, which unit stands in which channel.
type Lot struct {
	File     string         // as it was given to [ReadLot]
	Name     string         // "" if left out
	Operator string         // "" if left out
	Channels map[int]string // the serial of each channel that is a unit's, channels from 1; empty if left out
}

// mostChannels is more than any recorder has.
const mostChannels = 1024

// ReadLot reads a lot.toml. Every error is an [*Error].
func ReadLot(path string) (*Lot, error) {
	data, err := read(path)
	if err != nil {
		return nil, err
	}
	return ParseLot(path, data)
}

// ParseLot reads the text of a lot.toml; file is its name for errors and for
// Lot.File. A channel that is no whole number from 1, a serial that is empty or
// there twice, is an error. Every error is an [*Error], and the lot is then nil.
func ParseLot(file string, data []byte) (*Lot, error) {
	d, err := parse(file, data, "write name = \"...\" or a [channels] section, or take the file away")
	if err != nil {
		return nil, err
	}
	d.foreign = map[string]string{
		"network": "pad.toml", "parts": "pad.toml", "service": "pad.toml", "limits": "pad.toml",
		"output": "rig.toml", "input": "rig.toml", "calibration": "rig.toml", "readings": "ohms.toml",
	}
	top := d.table("", d.root)
	lot := &Lot{File: file, Name: top.text("name"), Operator: top.text("operator"), Channels: map[int]string{}}
	section, there := top.section("channels")
	lot.fill(section)
	if there && len(lot.Channels) == 0 && len(d.errs) == 0 {
		top.fail("channels", "names no unit", `write a line a channel: 1 = "0417"`)
	}
	d.unknown()
	if err := d.first(); err != nil {
		return nil, err
	}
	return lot, nil
}

// fill reads which unit stands in which channel.
func (l *Lot) fill(t *table) {
	seen := map[string]string{}
	for _, key := range slices.Sorted(maps.Keys(t.values)) {
		serial := strings.TrimSpace(t.text(key))
		n, err := strconv.Atoi(key)
		lower := strings.ToLower(serial)
		switch _, fits := t.values[key].(string); {
		case err != nil || n < 1 || n > mostChannels:
			t.fail(key, "is no channel", fmt.Sprintf(`channels count from 1: 1 = "0417"; at most %d`, mostChannels))
		case !fits: // said already
		case serial == "":
			t.fail(key, "names no unit", `write its serial, 1 = "0417", or drop the line`)
		case seen[lower] != "":
			t.fail(key, "names unit "+serial+", as channel "+seen[lower]+" does", "give each unit one channel")
		default:
			l.Channels[n], seen[lower] = serial, key
		}
	}
}
