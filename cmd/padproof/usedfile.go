package main

import (
	"bytes"
	"os"

	"padproof/cmd/padproof/internal/result"
	"padproof/cmd/padproof/internal/unit"
)

// A usedFile is a sheet as it was read for a check.
type usedFile struct {
	role, path string
	text       []byte
}

// sheetsUsed reads the sheets of a unit that is to be recorded. One that cannot be
// read is left out: the check itself will say why.
func (f *recordFlags) sheetsUsed(u *unit.Unit) []usedFile {
	if f.place() == "" {
		return nil
	}
	all, err := sheetsOf(u)
	if err != nil {
		return nil
	}
	return all
}

// sheetsOf reads the sheets of a unit.
func sheetsOf(u *unit.Unit) ([]usedFile, error) {
	var all []usedFile
	for _, s := range []usedFile{{role: "pad", path: u.PadFile}, {role: "rig", path: u.RigFile}} {
		if s.path == "" {
			continue
		}
		var err error
		if s.text, err = os.ReadFile(s.path); err != nil {
			return nil, err
		}
		all = append(all, s)
	}
	return all, nil
}

// unchanged looks whether the sheets are still what they were before the check, so
// that no record names a sheet that was not used.
func unchanged(before []usedFile, u *unit.Unit) error {
	after, err := sheetsOf(u)
	if err != nil {
		return err
	}
	for i, s := range after {
		if i >= len(before) || !bytes.Equal(before[i].text, s.text) {
			return &result.Error{File: s.path, Text: "was changed while the unit was checked", Hint: "check the unit again"}
		}
	}
	return nil
}
