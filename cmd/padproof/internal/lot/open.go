package lot

import (
	"path/filepath"

	"padproof/cmd/padproof/internal/sheet"
	"padproof/cmd/padproof/internal/unit"
)

// Open finds the units of a lot's folder, those that its lot.toml names by channel
// as well, and the lot's name: by lot.toml, else the folder's.
func Open(folder string) (found *unit.Lot, name string, err error) {
	named := &sheet.Lot{}
	if path := unit.LotSheet(folder); path != "" {
		if named, err = sheet.ReadLot(path); err != nil {
			return nil, "", err
		}
	}
	if found, err = unit.OpenLot(folder, named.Channels); err != nil {
		return nil, "", err
	}
	name = named.Name
	if full, err := filepath.Abs(folder); name == "" && err == nil {
		name = filepath.Base(full)
	}
	return found, name, nil
}
