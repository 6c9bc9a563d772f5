package proof

import (
	"crypto/sha256"
	"encoding/hex"
	"path/filepath"

	"padproof/cmd/padproof/internal/result"
)

// sheetsOf are the sheets as they were read. What stands for a missing one is in
// the assumptions.
func sheetsOf(folder string, d *Drawing) []result.Sheet {
	sheets := []result.Sheet{}
	add := func(role, path string, source []byte) {
		sum := sha256.Sum256(source)
		sheets = append(sheets, result.Sheet{Role: role,
			File: fileIn(folder, path), SHA256: hex.EncodeToString(sum[:]),
			Text: string(source),
		})
	}
	if d.Pad != nil {
		add("pad", d.Pad.File, d.Pad.Source)
	}
	if d.Sheet.File != "" {
		add("rig", d.Sheet.File, d.Sheet.Source)
	}
	return sheets
}

// fileIn is a path as seen from the unit's folder.
func fileIn(folder, path string) string {
	if folder != "" {
		if relative, err := filepath.Rel(folder, path); err == nil {
			return filepath.ToSlash(relative)
		}
	}
	return path
}
