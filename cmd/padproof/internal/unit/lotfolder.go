package unit

import (
	"path/filepath"
	"slices"
	"strings"
)

// A Lot is the units of a folder, in the order of their serials.
type Lot struct {
	Layout   Layout
	Units    []*Unit
	Warnings []string // of the folder, that belong to no unit
}

// OpenLot finds the units of a lot folder: folders, one a unit; takes named
// SERIAL.ROLE.wav, or both at once; or, where channels names a unit for each channel (from 1, as
// lot.toml does), one set of takes whose channels are units. A unit that lacks
// something is among them: ask [Unit.Ready]. It is an error, an [*Error], if the
// folder cannot be read or holds no lot.
func OpenLot(folder string, channels map[int]string) (*Lot, error) {
	folder = filepath.Clean(folder)
	layout, err := LayoutOf(folder)
	switch {
	case err != nil:
		return nil, err
	case len(channels) > 0 && layout == OneUnit:
		return channelLot(folder, channels)
	case len(channels) > 0:
		return nil, &Error{File: folder, Text: "lot.toml names a unit for each channel, but the takes here are not one set of before.wav and after.wav",
			Hint: "take [channels] out of lot.toml, or put the takes of all channels into this folder"}
	case layout == FlatLot:
		return mixedLot(folder)
	case layout == FolderLot:
		return folderLot(folder)
	case layout == OneUnit:
		return nil, &Error{File: folder, Text: "holds the takes of one unit, not of a lot",
			Hint: "check it by padproof check " + folder + ", or name the folder above; where its channels are units, name them in lot.toml"}
	}
	return nil, &Error{File: folder, Text: "holds no takes",
		Hint: "give each unit a folder with its after.wav, or name takes SERIAL.after.wav"}
}

// folderLot finds a unit in every folder that holds a take of its own.
func folderLot(folder string) (*Lot, error) {
	s, err := look(folder)
	if err != nil {
		return nil, err
	}
	lot := &Lot{Layout: FolderLot}
	var empty []string
	for _, name := range s.folders {
		path := s.path(name)
		in, err := look(path)
		if err == nil && !in.holds(func(t take) bool { return t.serial == "" && t.role != "" }) {
			empty = append(empty, name)
			continue
		}
		lot.Units = append(lot.Units, openFaulty(path, name, in, s))
	}
	slices.SortFunc(lot.Units, func(a, b *Unit) int { return CompareSerials(a.Serial, b.Serial) })
	if len(empty) > 0 {
		lot.Warnings = append(lot.Warnings, "no takes in the folders "+strings.Join(empty, ", ")+": they were left out")
	}
	return lot, nil
}

// mixedLot finds the units of takes named SERIAL.ROLE.wav, and those of folders
// beside them. One that is there both ways is so once, and cannot be checked: which
// takes are its own is not known.
func mixedLot(folder string) (*Lot, error) {
	units, warnings, err := Flat(folder)
	if err != nil {
		return nil, err
	}
	lot, err := folderLot(folder)
	if err != nil {
		return nil, err
	}
	lot.Layout, lot.Warnings = FlatLot, append(warnings, lot.Warnings...)
	flat := map[string]*Unit{}
	for _, u := range units {
		flat[strings.ToLower(u.Serial)] = u
	}
	for _, u := range lot.Units {
		if twin := flat[strings.ToLower(u.Serial)]; twin == nil {
			units = append(units, u)
		} else {
			twin.fault = &Error{File: u.Folder, Text: "and the takes " + twin.Serial + ".ROLE.wav are two units of one serial",
				Hint: "keep one of them here, move or rename the other"}
		}
	}
	slices.SortFunc(units, func(a, b *Unit) int { return CompareSerials(a.Serial, b.Serial) })
	lot.Units = units
	return lot, nil
}

// openFaulty opens a unit's folder, which holds own, in a folder that was looked
// into once for all units; what keeps it from being opened is the unit's fault.
func openFaulty(path, name string, own, shared *shelf) *Unit {
	var u *Unit
	var err error
	if own != nil {
		u, err = openWith(own, shared)
	} else {
		u, err = Open(path)
	}
	if err == nil {
		return u
	}
	u = newUnit(name, path)
	fault, ok := err.(*Error)
	if !ok {
		fault = &Error{File: path, Text: err.Error()}
	}
	u.fault = fault
	return u
}

// channelLot makes a unit of each channel of one set of takes.
func channelLot(folder string, channels map[int]string) (*Lot, error) {
	lot := &Lot{Layout: ChannelLot}
	for channel, serial := range channels {
		u, err := Open(folder)
		if err != nil {
			return nil, err
		}
		if u.Files[Both] != "" {
			return nil, &Error{File: u.Files[Both], Text: "both.wav has one unit only",
				Hint: "for channels that are units, record before.wav and after.wav with all channels"}
		}
		u.Serial, u.Channel = serial, channel
		lot.Units = append(lot.Units, u)
	}
	slices.SortFunc(lot.Units, func(a, b *Unit) int { return CompareSerials(a.Serial, b.Serial) })
	if len(lot.Units) > 0 {
		lot.Warnings, lot.Units[0].Warnings = lot.Units[0].Warnings, nil
		for _, u := range lot.Units[1:] {
			u.Warnings = nil
		}
	}
	return lot, nil
}

// LotSheet returns the path of a folder's lot.toml, "" if there is none.
func LotSheet(folder string) string {
	s, err := look(filepath.Clean(folder))
	if err != nil || s.lotSheet == "" {
		return ""
	}
	return s.path(s.lotSheet)
}
