package unit

import (
	"io/fs"
	"os"
	"path/filepath"
	"slices"
	"strings"

	"padproof/cmd/padproof/internal/nearest"
)

// The names of the sheets.
const (
	padSheet = "pad.toml"
	rigSheet = "rig.toml"
	lotSheet = "lot.toml"

	ohmsSheet = "ohms.toml" // one unit's: SERIAL.ohms.toml in a flat lot
)

// otherAudio are endings of recordings that are no WAV.
var otherAudio = []string{".flac", ".aif", ".aiff", ".caf", ".mp3", ".m4a", ".ogg", ".opus", ".wma", ".w64", ".wave", ".bwf"}

// take is a WAV file by its name.
type take struct {
	name   string
	serial string // "" where the name has none
	role   string // "" where the name has none
}

// shelf is what a folder holds, by names.
type shelf struct {
	folder   string
	takes    []take
	byRole   map[string][]string // names of takes by serial and role, see takeKey
	sheets   map[string][]string // names of sheets by pad.toml and rig.toml
	ohms     map[string][]string // names of readings by serial in small letters, "" for none
	lotSheet string              // lot.toml as it is named; "" if there is none
	odd      []string            // .toml files that are no sheet
	foreign  map[string]string   // by role: a recording that is no WAV
	folders  []string
}

// look sorts what a folder holds.
func look(folder string) (*shelf, error) {
	entries, err := os.ReadDir(folder)
	if err != nil {
		return nil, noFolder(folder, err)
	}
	s := &shelf{folder: folder, byRole: map[string][]string{}, sheets: map[string][]string{}, ohms: map[string][]string{}, foreign: map[string]string{}}
	for _, e := range entries {
		if !strings.HasPrefix(e.Name(), ".") {
			s.put(e)
		}
	}
	return s, nil
}

// put sorts one entry in. A folder with the name of a take or sheet is taken for
// one: whoever opens it says what it is.
func (s *shelf) put(e fs.DirEntry) {
	name := e.Name()
	ending := filepath.Ext(name)
	stem := strings.TrimSuffix(name, ending)
	ending = strings.ToLower(ending)
	role, isRole := RoleOf(stem)
	switch {
	case ending == ".wav":
		t := takeOf(name, stem)
		s.takes = append(s.takes, t)
		key := takeKey(t.serial, t.role)
		s.byRole[key] = append(s.byRole[key], name)
	case strings.EqualFold(name, padSheet), strings.EqualFold(name, rigSheet):
		key := strings.ToLower(name)
		s.sheets[key] = append(s.sheets[key], name)
	case strings.EqualFold(name, lotSheet):
		s.lotSheet = name
	case strings.EqualFold(name, ohmsSheet), hasFoldedSuffix(name, "."+ohmsSheet):
		serial := strings.ToLower(strings.TrimSuffix(name[:len(name)-len(ohmsSheet)], "."))
		s.ohms[serial] = append(s.ohms[serial], name)
	case ending == ".toml":
		s.odd = append(s.odd, name)
	case isRole && slices.Contains(otherAudio, ending):
		s.foreign[role] = name
	case isFolder(s.folder, e):
		s.folders = append(s.folders, name)
	}
}

// hasFoldedSuffix tells whether a name ends so, case not counting.
func hasFoldedSuffix(name, end string) bool {
	return len(name) > len(end) && strings.EqualFold(name[len(name)-len(end):], end)
}

// isFolder tells whether an entry is a folder, or a link to one.
func isFolder(folder string, e fs.DirEntry) bool {
	if e.Type()&fs.ModeSymlink == 0 {
		return e.IsDir()
	}
	info, err := os.Stat(filepath.Join(folder, e.Name()))
	return err == nil && info.IsDir()
}

// takeOf reads a WAV's name: ROLE.wav, SERIAL.ROLE.wav, or neither.
func takeOf(name, stem string) take {
	if role, ok := RoleOf(stem); ok {
		return take{name: name, role: role}
	}
	dot := strings.LastIndexByte(stem, '.')
	if dot < 0 {
		return take{name: name}
	}
	role, ok := RoleOf(stem[dot+1:])
	if !ok {
		role = ""
	}
	return take{name: name, serial: stem[:dot], role: role}
}

// stem returns a name without its ending.
func (t take) stem() string { return strings.TrimSuffix(t.name, filepath.Ext(t.name)) }

// last returns what of the stem stands behind the serial, all of it if there is
// none.
func (t take) last() string {
	if t.serial == "" {
		return t.stem()
	}
	return t.stem()[len(t.serial)+1:]
}

// takeKey is the key of a serial, case not counting, and a role.
func takeKey(serial, role string) string { return strings.ToLower(serial) + "/" + role }

// named returns the names of takes with a role and, case not counting, a serial.
func (s *shelf) named(serial, role string) []string { return s.byRole[takeKey(serial, role)] }

// path returns where a name of this folder lies.
func (s *shelf) path(name string) string { return filepath.Join(s.folder, name) }

// noRole is the warning for a WAV whose name is no role. prefix is what stands
// before the role in a name of this layout.
func noRole(name, prefix, stem string) string {
	if role, ok := nearest.Slip(stem, Roles()); ok {
		return name + " is no role and was left out; did you mean " + prefix + role + ".wav?"
	}
	role, _ := nearest.Word(stem, Roles())
	return name + " is no role and was left out; the nearest is " + prefix + role + ".wav"
}

// oddSheets are the warnings for .toml files that were likely meant for one of
// the missing sheets.
func (s *shelf) oddSheets(missing []string) []string {
	var warnings []string
	for _, name := range s.odd {
		for _, sheet := range missing {
			word := strings.TrimSuffix(sheet, ".toml")
			stem := strings.TrimSuffix(strings.ToLower(name), ".toml")
			if _, edits := nearest.Word(stem, []string{word}); edits <= 1 || strings.HasPrefix(stem, word) {
				warnings = append(warnings, s.path(name)+" is no sheet and was left out; did you mean "+sheet+"?")
			}
		}
	}
	return warnings
}
