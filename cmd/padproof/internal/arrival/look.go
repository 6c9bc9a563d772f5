package arrival

import (
	"fmt"
	"path/filepath"
	"strings"
	"time"

	"padproof/cmd/padproof/internal/unit"
)

// forgetAfter is how long a unit that is not there is remembered: a share that
// comes back with nothing on it, for a moment, leaves no unit to be looked up anew.
const forgetAfter = 10 * time.Minute

// A lotSheet is lot.toml as it was last read.
type lotSheet struct {
	path     string
	file     file
	read     bool
	channels map[int]string
}

// lookAtTop sorts the watched folder's own files: shared ones, those of a flat lot
// and those of a lot of channels.
func (w *Watcher) lookAtTop(seen *Seen, now time.Time, full bool) {
	w.readLotSheet(seen, now)
	flat, channels := map[string]map[string]string{}, map[string]string{}
	serials := map[string]string{} // as written, by key
	shared := map[string]string{}
	for _, name := range w.top.names {
		path, sheet := w.top.in(name), unit.SheetNamed(name)
		serial, role, _ := unit.Named(name)
		key := strings.ToLower(serial)
		switch {
		case sheet != "":
			if sheet != lotTOML {
				shared[path], channels[path] = sheet, sheet
			}
		case role != "" && serial != "":
			if flat[key] == nil {
				flat[key], serials[key] = map[string]string{}, serial
			}
			flat[key][path] = role
		case role != "" && w.lot.path != "" && !w.lot.read: // whose they are is not known yet
		case role != "" && len(w.lot.channels) > 0:
			channels[path] = role
		case role != "" && unit.Shared(role):
			shared[path] = role
		default:
			w.stray(seen, name, name)
		}
	}
	w.share(shared, now)
	for key, files := range flat {
		u := Unit{Serial: serials[key], Folder: w.top.path, Layout: unit.FlatLot, key: "flat/" + key}
		w.see(u, files, now, full)
	}
	for channel, serial := range w.lot.channels {
		u := Unit{Serial: serial, Folder: w.top.path, Layout: unit.ChannelLot, Channel: channel, key: fmt.Sprintf("channel/%d/%s", channel, serial)}
		w.see(u, channels, now, full)
	}
}

const lotTOML = "lot.toml"

// readLotSheet reads lot.toml where it has changed and is done.
func (w *Watcher) readLotSheet(seen *Seen, now time.Time) {
	path := ""
	for _, name := range w.top.names {
		if unit.SheetNamed(name) == lotTOML {
			path = w.top.in(name)
		}
	}
	if path != w.lot.path {
		w.lot = lotSheet{path: path, file: file{sheet: true}}
	}
	if w.o.Channels == nil {
		w.lot.read = true
	}
	if path == "" || w.o.Channels == nil {
		return
	}
	f, last := &w.lot.file, w.lot.file
	f.refresh(w.o.FS, path, now)
	if f.size != last.size || !f.time.Equal(last.time) {
		w.lot.read = false
	}
	if w.lot.read || f.gone || !f.settled(&w.o, path, now) {
		return
	}
	w.lot.read = true
	channels, err := w.o.Channels(path)
	if err != nil {
		seen.Faults = append(seen.Faults, err)
		return
	}
	w.lot.channels = channels
}

// share makes the shared files those that are named, and asks for them.
func (w *Watcher) share(roles map[string]string, now time.Time) {
	for path := range w.shared {
		if _, there := roles[path]; !there {
			delete(w.shared, path)
		}
	}
	for path, role := range roles {
		if w.shared[path] == nil {
			w.shared[path] = &file{role: role, sheet: strings.HasSuffix(role, ".toml")}
		}
		if w.shared[path].refresh(w.o.FS, path, now); w.shared[path].gone {
			delete(w.shared, path)
		}
	}
}

// lookAtFolders looks at the folders in the watched one.
func (w *Watcher) lookAtFolders(seen *Seen, now time.Time, full bool) {
	there := map[string]bool{}
	for _, name := range w.top.folders {
		there[name] = true
		l := w.folders[name]
		if l == nil {
			l = &listing{path: w.top.in(name)}
			w.folders[name] = l
		}
		listed, err := l.refresh(w.o.FS, now, full)
		if err != nil {
			w.fault(seen, l, err)
			continue
		}
		l.fault = ""
		w.lookAtFolder(seen, l, name, now, listed)
	}
	for name := range w.folders {
		if !there[name] {
			delete(w.folders, name)
		}
	}
}

// fault tells of a folder that cannot be read, once. Its unit is kept as it was.
func (w *Watcher) fault(seen *Seen, l *listing, err error) {
	if l.fault != err.Error() {
		l.fault = err.Error()
		seen.Faults = append(seen.Faults, err)
	}
	if p := w.pads[folderKey(filepath.Base(l.path))]; p != nil {
		p.atSee, p.gone = w.looks, time.Time{}
		p.rest = false
	}
}

func folderKey(name string) string { return "folder/" + name }

// lookAtFolder looks at one folder; it is a unit's if a take lies in it.
func (w *Watcher) lookAtFolder(seen *Seen, l *listing, name string, now time.Time, listed bool) {
	if p := w.pads[folderKey(name)]; p != nil && !listed {
		p.atSee, p.gone = w.looks, time.Time{}
		if !p.rest {
			p.refresh(&w.o, now)
		}
		return
	}
	files, takes := map[string]string{}, 0
	var odd []string
	for _, file := range l.names {
		serial, role, isWAV := unit.Named(file)
		sheet := unit.SheetNamed(file)
		switch {
		case sheet == lotTOML:
		case sheet != "":
			files[l.in(file)] = sheet
		case isWAV && serial == "" && role != "":
			files[l.in(file)] = role
			takes++
		case isWAV:
			odd = append(odd, file)
		}
	}
	if takes > 0 {
		w.see(Unit{Serial: name, Folder: l.path, Layout: unit.FolderLot, key: folderKey(name)}, files, now, true)
		return
	}
	for _, file := range odd { // in a unit's folder its answer tells of them
		w.stray(seen, name+"/"+file, file)
	}
}

// see takes in that a unit is there with such files, and asks for them where they
// may have changed.
func (w *Watcher) see(u Unit, files map[string]string, now time.Time, ask bool) {
	p := w.pads[u.key]
	if p == nil {
		p = &pad{Unit: u, files: map[string]*file{}}
		w.pads[u.key] = p
	}
	p.atSee, p.gone = w.looks, time.Time{}
	if p.hold(files) || !p.rest || ask {
		p.refresh(&w.o, now)
	}
}

// stray tells once of a file that belongs to no unit.
func (w *Watcher) stray(seen *Seen, key, name string) {
	const most = 1000 // names are kept, so there must be an end
	if w.strays[key] || len(w.strays) >= most {
		return
	}
	w.strays[key] = true
	text := unit.Stray(name)
	if key != name {
		text = key + ": " + text
	}
	seen.Strays = append(seen.Strays, text)
}

// forget drops the units that have been away for long.
func (w *Watcher) forget(now time.Time) {
	for key, p := range w.pads {
		switch {
		case p.atSee == w.looks:
		case p.gone.IsZero():
			p.gone = now
		case now.Sub(p.gone) > forgetAfter:
			delete(w.pads, key)
		}
	}
}
