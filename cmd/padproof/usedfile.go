package main

import (
	"os"

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
