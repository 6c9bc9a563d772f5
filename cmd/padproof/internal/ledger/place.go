package ledger

import (
	"errors"
	"io/fs"
	"os"
	"path/filepath"
	"runtime"
)

// DefaultPath is where a ledger lies that nobody named: the folder for a program's
// data of the platform. The folder need not be there: [MakeFolder] makes it.
func DefaultPath() (string, error) {
	folder, err := dataFolder(runtime.GOOS, os.Getenv, os.UserHomeDir)
	if err != nil {
		return "", &Error{Reason: Other, Text: "it is not known where your data lies: " + err.Error(), Hint: "name the ledger with --ledger"}
	}
	return filepath.Join(folder, "padproof", "ledger.db"), nil
}

// dataFolder: Windows %LocalAppData%; macOS ~/Library/Application Support; others
// the XDG base directory for data.
func dataFolder(system string, env func(string) string, home func() (string, error)) (string, error) {
	switch system {
	case "windows":
		if folder := env("LocalAppData"); folder != "" {
			return folder, nil
		}
		return "", errors.New("%LocalAppData% is not set")
	case "darwin", "ios":
		at, err := home()
		return filepath.Join(at, "Library", "Application Support"), err
	}
	if folder := env("XDG_DATA_HOME"); filepath.IsAbs(folder) { // one that is not must be passed over, it says
		return folder, nil
	}
	at, err := home()
	return filepath.Join(at, ".local", "share"), err
}

// MakeFolder makes the folder of a ledger's file, for you alone.
func MakeFolder(path string) error {
	err := os.MkdirAll(filepath.Dir(path), 0o700)
	if errors.Is(err, fs.ErrPermission) {
		return &Error{Where: path, Reason: Denied, Text: "the folder of the ledger cannot be made", Hint: "name the ledger with --ledger"}
	}
	return err
}
