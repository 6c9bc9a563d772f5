package unit

import (
	"maps"
	"path/filepath"
	"slices"
	"strings"

	"padproof/cmd/padproof/internal/nearest"
)

// Unit is one pad under test and its files.
type Unit struct {
	Serial    string            // the folder's name, or what stands before the role; "" if not known
	Folder    string            // where it lies, as it was given; "" for files named one by one
	PadFile   string            // "" if there is none
	RigFile   string            // "" if there is none
	OhmsFile  string            // ohmmeter readings, never another unit's; "" if there are none
	Files     map[string]string // the path of each take by its role
	Inherited map[string]bool   // the paths, of PadFile, RigFile and Files, that serve other units too
	Warnings  []string          // one sentence each, for the reader of the answer
	Channel   int               // the channel of every take that is this unit's, from 1; 0 where a take is one unit's

	prefix  string            // before the role in the unit's names: "0417." in a flat lot
	fault   *Error            // two files for one role
	looked  []string          // the folders looked into
	instead map[string]string // by role: what is there in a missing take's place, and what to do
}

// Open finds the files of the unit whose folder is given. Its serial is the
// folder's name (of "." the name of the folder that it is). It is an error, an
// [*Error], if the folder cannot be read, if two files have one role, or if there
// is neither a before and an after nor a both.
func Open(folder string) (*Unit, error) {
	if folder == "" {
		return nil, &Error{Text: "no folder is named", Hint: "name the unit's folder"}
	}
	folder = filepath.Clean(folder)
	own, err := look(folder)
	if err != nil {
		return nil, err
	}
	return openWith(own, nil)
}

// openWith finds the files of the unit whose folder was looked into. shared is the
// folder above where that was looked into as well, or nil.
func openWith(own, shared *shelf) (*Unit, error) {
	folder := own.folder
	u := newUnit(serialOf(folder), folder)
	u.looked = []string{folder}
	u.takes(own, "", false)
	u.sheets(own, false)
	u.readings(own, "")
	u.warn(own)
	if above := parent(folder); shared != nil && above == shared.folder {
		u.inheritFrom(shared)
	} else if above != "" {
		u.inherit(above)
	}
	u.Warnings = append(u.Warnings, own.oddSheets(append(u.lacking(), u.lackingOhms()...))...)
	if err := u.Ready(); err != nil {
		return nil, err
	}
	return u, nil
}

func newUnit(serial, folder string) *Unit {
	return &Unit{Serial: serial, Folder: folder,
		Files: map[string]string{}, Inherited: map[string]bool{}, instead: map[string]string{}}
}

// serialOf returns the name of a folder, "" for the root.
func serialOf(folder string) string {
	full, err := filepath.Abs(folder)
	if err != nil {
		return ""
	}
	name := filepath.Base(full)
	if name == string(filepath.Separator) || name == filepath.VolumeName(full) {
		return ""
	}
	return name
}

// parent returns the folder above, "" for the root.
func parent(folder string) string {
	if full, err := filepath.Abs(folder); err != nil || filepath.Dir(full) == full {
		return ""
	}
	if base := filepath.Base(folder); base == "." || base == ".." {
		return filepath.Join(folder, "..")
	}
	return filepath.Dir(folder)
}

// takes adds the takes of a shelf that u does not have yet: those with the
// serial, or only the shared ones if they come from above.
func (u *Unit) takes(s *shelf, serial string, inherited bool) {
	for _, role := range Roles() {
		if u.Files[role] == "" && (!inherited || Shared(role)) {
			u.add(s, s.named(serial, role), "role", inherited, func(path string) { u.Files[role] = path })
		}
	}
}

// sheets adds the sheets that u does not have yet.
func (u *Unit) sheets(s *shelf, inherited bool) {
	if u.PadFile == "" {
		u.add(s, s.sheets[padSheet], "sheet", inherited, func(path string) { u.PadFile = path })
	}
	if u.RigFile == "" {
		u.add(s, s.sheets[rigSheet], "sheet", inherited, func(path string) { u.RigFile = path })
	}
}

// readings adds the ohmmeter readings of a serial.
func (u *Unit) readings(s *shelf, serial string) {
	u.add(s, s.ohms[strings.ToLower(serial)], "sheet", false, func(path string) { u.OhmsFile = path })
}

// lacking returns the names of the sheets that u does not have.
func (u *Unit) lacking() []string {
	var names []string
	if u.PadFile == "" {
		names = append(names, padSheet)
	}
	if u.RigFile == "" {
		names = append(names, rigSheet)
	}
	return names
}

// lackingOhms returns the name of the readings where u has none.
func (u *Unit) lackingOhms() []string {
	if u.OhmsFile != "" {
		return nil
	}
	return []string{ohmsSheet}
}

// add sets what the only name of names stands for; with several it notes the
// fault.
func (u *Unit) add(s *shelf, names []string, what string, inherited bool, set func(path string)) {
	switch {
	case len(names) == 0:
		return
	case len(names) > 1 && u.fault == nil:
		u.fault = &Error{File: s.path(names[1]), Text: "and " + names[0] + " are two files for one " + what,
			Hint: "keep one of them here, move or rename the other"}
	}
	path := s.path(names[0])
	set(path)
	if inherited {
		u.Inherited[path] = true
	}
}

// inherit adds what the folder above shares. That it cannot be read is no error
// by itself.
func (u *Unit) inherit(above string) {
	s, err := look(above)
	if err != nil {
		u.looked = append(u.looked, above+" (which cannot be read)")
		return
	}
	u.inheritFrom(s)
}

// inheritFrom adds what a folder above shares that was looked into.
func (u *Unit) inheritFrom(s *shelf) {
	u.looked = append(u.looked, s.folder)
	u.takes(s, "", true)
	u.sheets(s, true)
	u.dropBefore()
	u.slipsAbove(s)
}

// dropBefore leaves the shared before out where the unit's own both stands in
// its place.
func (u *Unit) dropBefore() {
	if path := u.Files[Before]; u.Files[Both] != "" && u.Inherited[path] {
		delete(u.Inherited, path)
		delete(u.Files, Before)
	}
}

// warn notes the WAVs of a unit's own folder whose names are no role.
func (u *Unit) warn(s *shelf) {
	for _, t := range s.takes {
		switch {
		case t.role == "":
			u.slip(t.name, "", t.stem())
		case t.serial != "":
			u.slip(t.name, "", t.role)
		}
	}
	for _, serial := range slices.Sorted(maps.Keys(s.ohms)) {
		if serial != "" {
			u.Warnings = append(u.Warnings, s.path(s.ohms[serial][0])+" was left out: in a unit's own folder its name is "+ohmsSheet)
		}
	}
	for role, name := range s.foreign {
		u.instead[role] = s.path(name) + " is there: save it again as WAV, named " + role + ".wav"
	}
}

// slip warns of a take with no role, and remembers what it was likely meant for.
// The words are as [noRole] wants them.
func (u *Unit) slip(name, prefix, stem string) {
	u.Warnings = append(u.Warnings, noRole(name, prefix, stem))
	if role, ok := nearest.Slip(stem, Roles()); ok {
		u.instead[role] = name + " is there: if it is the one, rename it to " + prefix + role + ".wav"
	}
}

// slipsAbove warns of WAVs of the folder above that were nearly shared. All else
// there is none of this unit's business.
func (u *Unit) slipsAbove(s *shelf) {
	for _, t := range s.takes {
		if t.role != "" {
			continue
		}
		if role, ok := nearest.Slip(t.stem(), Roles()); ok && Shared(role) && u.Files[role] == "" {
			u.slip(s.path(t.name), "", t.stem())
		}
	}
	for _, role := range []string{After, Both} {
		for _, name := range s.named("", role) {
			if u.instead[role] == "" {
				u.instead[role] = s.path(name) + " serves no unit: move it into the folder of the unit that it was made of"
			}
		}
	}
	for _, name := range s.ohms[""] {
		u.Warnings = append(u.Warnings, s.path(name)+" was left out: readings are one unit's; move it into the folder of the unit that was read")
	}
	u.Warnings = append(u.Warnings, s.oddSheets(u.lacking())...)
}
