package unit

import (
	"maps"
	"path/filepath"
	"slices"
	"strings"
)

// Layout is how a folder holds its units.
type Layout string

// The layouts.
const (
	NoLayout  Layout = ""        // no take anywhere
	OneUnit   Layout = "unit"    // takes named ROLE.wav
	FlatLot   Layout = "flat"    // takes named SERIAL.ROLE.wav
	FolderLot Layout = "folders" // folders, one a unit

	// ChannelLot is a lot whose takes hold a unit in each channel: what OneUnit
	// looks like where lot.toml names the channels.
	ChannelLot Layout = "channels"
)

// LayoutOf tells how a folder holds its units, by names alone. Takes that cannot
// be shared decide first, since they are a unit's: one named ROLE.wav makes the
// folder one unit's. Then come takes with a serial, then folders with takes; and
// a folder with shared takes alone is a unit that is not yet whole. The error, an
// [*Error], is that of a folder that cannot be read.
func LayoutOf(folder string) (Layout, error) {
	s, err := look(filepath.Clean(folder))
	if err != nil {
		return NoLayout, err
	}
	switch {
	case s.holds(func(t take) bool { return t.serial == "" && t.role != "" && !Shared(t.role) }):
		return OneUnit, nil
	case s.holds(func(t take) bool { return t.serial != "" && t.role != "" }):
		return FlatLot, nil
	case s.foldersHold():
		return FolderLot, nil
	case s.holds(func(t take) bool { return t.role != "" }):
		return OneUnit, nil
	}
	return NoLayout, nil
}

// holds tells whether a take is such.
func (s *shelf) holds(such func(take) bool) bool {
	return slices.ContainsFunc(s.takes, such)
}

// foldersHold tells whether a folder in this one has a take. One that cannot be
// read has none.
func (s *shelf) foldersHold() bool {
	return slices.ContainsFunc(s.folders, func(name string) bool {
		in, err := look(s.path(name))
		return err == nil && in.holds(func(t take) bool { return t.serial == "" && t.role != "" })
	})
}

// Flat finds the units of a flat lot folder, whose takes are named
// SERIAL.ROLE.wav, in the order of their serials. Sheets, and shared takes
// without a serial, serve every unit. A unit that lacks a take is among them: ask
// [Unit.Ready]. Warnings of the folder that belong to no unit are returned
// beside. It is an error, an [*Error], if the folder cannot be read or has no
// such take.
func Flat(folder string) (units []*Unit, warnings []string, err error) {
	folder = filepath.Clean(folder)
	s, err := look(folder)
	if err != nil {
		return nil, nil, err
	}
	bySerial := map[string]*Unit{}
	for _, t := range s.takes {
		key := strings.ToLower(t.serial)
		if t.serial != "" && t.role != "" && bySerial[key] == nil {
			bySerial[key] = flatUnit(s, t.serial)
		}
	}
	if len(bySerial) == 0 {
		return nil, nil, &Error{File: folder, Text: "no take is named SERIAL.ROLE.wav",
			Hint: "name takes like 0417.after.wav, or give each unit a folder of its own"}
	}
	warnings = s.warnFlat(bySerial)
	for _, key := range slices.SortedFunc(maps.Keys(bySerial), CompareSerials) {
		units = append(units, bySerial[key])
	}
	return units, warnings, nil
}

// flatUnit returns the unit of a serial in a flat folder.
func flatUnit(s *shelf, serial string) *Unit {
	u := newUnit(serial, s.folder)
	u.prefix = serial + "."
	u.looked = []string{s.folder}
	u.takes(s, serial, false)
	u.takes(s, "", true)
	u.sheets(s, true)
	u.readings(s, serial)
	u.dropBefore()
	return u
}

// warnFlat warns of the WAVs of a flat folder that have no role, each to the unit
// of its serial; it returns those that belong to none.
func (s *shelf) warnFlat(bySerial map[string]*Unit) []string {
	lacking := slices.DeleteFunc([]string{padSheet, rigSheet}, func(name string) bool { return len(s.sheets[name]) > 0 })
	warnings := append(s.oddSheets(lacking), s.oddOhms(bySerial)...)
	for _, t := range s.takes {
		prefix := ""
		if t.serial != "" {
			prefix = t.serial + "."
		}
		switch u := bySerial[strings.ToLower(t.serial)]; {
		case t.role == "" && t.serial != "" && u != nil:
			u.slip(t.name, prefix, t.last())
		case t.role == "":
			warnings = append(warnings, noRole(t.name, prefix, t.last()))
		case t.serial == "" && !Shared(t.role):
			warnings = append(warnings, t.name+" names no unit and was left out; name it SERIAL."+t.name)
		}
	}
	return warnings
}

// oddOhms warns of readings in a flat folder that are no unit's there.
func (s *shelf) oddOhms(bySerial map[string]*Unit) []string {
	var warnings []string
	for _, serial := range slices.Sorted(maps.Keys(s.ohms)) {
		if bySerial[serial] != nil {
			continue
		}
		for _, name := range s.ohms[serial] {
			why := "there is no take of that unit"
			if serial == "" {
				why = "readings are one unit's; name it SERIAL." + ohmsSheet
			}
			warnings = append(warnings, name+" was left out: "+why)
		}
	}
	return warnings
}
