package main

import (
	"bytes"
	"os"

	"padproof/cmd/padproof/internal/result"
	"padproof/cmd/padproof/internal/unit"
)

// A usedFile is a sheet of a unit as it lies on the disk.
type usedFile struct {
	role, path string
	text       []byte
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

// unchanged looks whether the sheets are still what they were before a check, so
// that no record is taken for one of sheets that were not used.
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
