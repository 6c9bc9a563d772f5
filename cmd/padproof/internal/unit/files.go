package unit

import (
	"maps"
	"path/filepath"
	"slices"
	"strings"

	"padproof/cmd/padproof/internal/nearest"
)

// FromFiles makes a unit of files named one by one: the path of each take by its
// role (case not counting; an empty path is a take left out), and the sheets,
// each "" if there is none. Nothing is looked for beside them. The serial is what
// stands before the role where every take through the pad is named
// SERIAL.ROLE.wav with one serial, else the name of the folder where they all
// lie, else "". It is an error, an [*Error], if a role is unknown, or if there is
// neither a before and an after nor a both.
func FromFiles(files map[string]string, pad, rig string) (*Unit, error) {
	u := newUnit("", "")
	u.PadFile, u.RigFile = pad, rig
	for _, name := range slices.Sorted(maps.Keys(files)) {
		role, ok := RoleOf(name)
		if !ok {
			near, _ := nearest.Word(name, Roles())
			return nil, &Error{File: files[name], Text: "\"" + name + "\" is no role", Hint: "did you mean " + near + "?"}
		}
		if files[name] != "" {
			u.Files[role] = files[name]
		}
	}
	u.Serial = commonSerial(u.Files)
	if err := u.Ready(); err != nil {
		return nil, err
	}
	return u, nil
}

// commonSerial returns the serial of the takes that are the unit's own.
func commonSerial(files map[string]string) string {
	var serials, folders []string
	for role, path := range files {
		if Shared(role) {
			continue
		}
		name := filepath.Base(path)
		serials = append(serials, takeOf(name, strings.TrimSuffix(name, filepath.Ext(name))).serial)
		folders = append(folders, filepath.Dir(path))
	}
	if serial := only(serials); serial != "" {
		return serial
	}
	if folder := only(folders); folder != "" {
		return serialOf(folder)
	}
	return ""
}

// only returns the word that all words are, "" if they differ or there is none.
func only(words []string) string {
	slices.Sort(words)
	if words = slices.Compact(words); len(words) != 1 {
		return ""
	}
	return words[0]
}
