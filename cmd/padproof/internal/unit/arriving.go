package unit

import (
	"path/filepath"
	"strings"
)

// Named reads the name of a file: the serial ("" for ROLE.wav) and the role of a
// take ("" for a WAV whose name has none); ok is false for all that is no WAV,
// and for hidden files.
func Named(name string) (serial, role string, ok bool) {
	ending := filepath.Ext(name)
	if strings.HasPrefix(name, ".") || !strings.EqualFold(ending, ".wav") {
		return "", "", false
	}
	t := takeOf(name, strings.TrimSuffix(name, ending))
	return t.serial, t.role, true
}

// SheetNamed returns which sheet a file is by its name, in lower case: pad.toml,
// rig.toml or lot.toml; "" if none.
func SheetNamed(name string) string {
	for _, sheet := range []string{padSheet, rigSheet, lotSheet} {
		if strings.EqualFold(name, sheet) {
			return sheet
		}
	}
	return ""
}

// Stray says what to do about a WAV of a lot folder that belongs to no unit.
func Stray(name string) string {
	serial, role, _ := Named(name)
	if serial == "" && role != "" {
		return name + " names no unit and was left out; name it SERIAL." + name
	}
	prefix := ""
	if serial != "" {
		prefix = serial + "."
	}
	t := take{name: name, serial: serial}
	return noRole(name, prefix, t.last())
}

// OpenSerial finds the files of one unit of a flat lot folder, as [Flat] does for
// all. It is an error, an [*Error], if the folder cannot be read or has no take of
// that serial. That a take is lacking is none: ask [Unit.Ready].
func OpenSerial(folder, serial string) (*Unit, error) {
	folder = filepath.Clean(folder)
	s, err := look(folder)
	if err != nil {
		return nil, err
	}
	if !s.holds(func(t take) bool { return t.role != "" && strings.EqualFold(t.serial, serial) }) {
		return nil, &Error{Serial: serial, File: folder, Text: "no take is named " + serial + ".ROLE.wav", Hint: "name takes like " + serial + ".after.wav"}
	}
	u := flatUnit(s, serial)
	s.warnFlat(map[string]*Unit{strings.ToLower(serial): u})
	return u, nil
}
