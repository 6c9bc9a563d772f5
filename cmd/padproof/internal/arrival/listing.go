package arrival

import (
	"errors"
	"io/fs"
	"path/filepath"
	"slices"
	"time"

	"padproof/cmd/padproof/internal/unit"
)

// listAgain is for how long a folder is listed at every look after its time has
// changed: a name that comes within one tick of a coarse clock (two seconds on
// some cards) would otherwise be missed.
const listAgain = 3 * time.Second

// A listing is what a folder held when it was last listed.
type listing struct {
	path    string
	names   []string // sorted: takes, WAVs of no role, sheets
	folders []string
	known   bool
	time    time.Time // the folder's own
	again   time.Time // listed at every look until then
	fault   string    // why it could not be read, as last told
}

// refresh lists the folder anew where it may have changed, and reports whether it
// did.
func (l *listing) refresh(fsys FS, now time.Time, full bool) (listed bool, err error) {
	info, err := fsys.Stat(l.path)
	if err == nil && !info.IsDir() {
		err = &fs.PathError{Op: "look into", Path: l.path, Err: errors.New("is no folder")}
	}
	if err != nil {
		return false, err
	}
	moved := !l.known || !info.ModTime().Equal(l.time)
	if moved {
		l.again = now.Add(listAgain)
	}
	if !moved && !full && now.After(l.again) {
		return false, nil
	}
	entries, err := fsys.ReadDir(l.path)
	if err != nil {
		l.known = false
		return false, err
	}
	l.time, l.known = info.ModTime(), true
	l.names, l.folders = l.names[:0], l.folders[:0]
	for _, e := range entries {
		l.sort(fsys, e)
	}
	slices.Sort(l.names)
	return true, nil
}

// sort enters one entry.
func (l *listing) sort(fsys FS, e fs.DirEntry) {
	name := e.Name()
	_, _, isWAV := unit.Named(name)
	switch {
	case name == "" || name[0] == '.':
	case isWAV || unit.SheetNamed(name) != "":
		l.names = append(l.names, name)
	case e.IsDir():
		l.folders = append(l.folders, name)
	case e.Type()&fs.ModeSymlink != 0:
		if info, err := fsys.Stat(l.in(name)); err == nil && info.IsDir() {
			l.folders = append(l.folders, name)
		}
	}
}

func (l *listing) in(name string) string { return filepath.Join(l.path, name) }
