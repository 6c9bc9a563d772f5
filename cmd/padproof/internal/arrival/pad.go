package arrival

import (
	"crypto/sha256"
	"fmt"
	"maps"
	"slices"
	"strings"
	"time"

	"padproof/cmd/padproof/internal/unit"
)

// A Unit is a pad whose recordings have arrived.
type Unit struct {
	Serial  string
	Folder  string      // its own, or the watched one
	Layout  unit.Layout // [unit.FolderLot], [unit.FlatLot] or [unit.ChannelLot]
	Channel int         // in a ChannelLot

	key      string
	own, all mark
}

// A mark is a fingerprint of names, sizes and times of files.
type mark [sha256.Size]byte

// A pad is what is known of one unit.
type pad struct {
	Unit
	files map[string]*file // its own takes and sheets, by path
	atSee int              // the look at which it was last there
	gone  time.Time        // since when it is not there

	rest      bool // all its files were settled when last asked for
	asked     bool // its files were asked for since own was made
	done      bool
	doneOwn   mark // its own files when it was done
	failed    bool
	failedAll mark // all its files when it failed
	why       string
	retry     time.Time // not due before; zero: not until a file changes
}

// hold makes the pad's files those that are named, role by path, and reports
// whether they are others than before.
func (p *pad) hold(roles map[string]string) (others bool) {
	for path := range p.files {
		if _, there := roles[path]; !there {
			delete(p.files, path)
			others = true
		}
	}
	for path, role := range roles {
		if p.files[path] == nil {
			p.files[path] = &file{role: role, sheet: strings.HasSuffix(role, ".toml")}
			others = true
		}
	}
	return others
}

// refresh asks for the pad's files.
func (p *pad) refresh(o *Options, now time.Time) {
	p.rest, p.asked = true, true
	for path, f := range p.files {
		f.refresh(o.FS, path, now)
		if f.gone {
			delete(p.files, path)
			continue
		}
		p.rest = p.rest && f.settled(o, path, now)
	}
}

// has reports whether the pad has a file of a role.
func (p *pad) has(role string) bool {
	for _, f := range p.files {
		if f.role == role {
			return true
		}
	}
	return false
}

// shares returns which of the shared files the pad uses: those of which it has
// none of its own.
func (p *pad) shares(shared map[string]*file) map[string]*file {
	if p.Layout == unit.ChannelLot {
		return nil
	}
	used := map[string]*file{}
	for path, f := range shared {
		if !p.has(f.role) && !(f.role == unit.Before && p.has(unit.Both)) {
			used[path] = f
		}
	}
	return used
}

// lacks is what the pad needs and does not have, "" if nothing.
func (p *pad) lacks(shared map[string]*file, o *Options) string {
	there := map[string]bool{}
	for _, files := range []map[string]*file{p.files, shared} {
		for _, f := range files {
			there[f.role] = true
		}
	}
	want := slices.Clone(o.Expect)
	if !there[unit.Both] {
		want = append([]string{unit.Before, unit.After}, want...)
	}
	var missing []string
	for _, role := range want {
		name := role + ".wav"
		if p.Layout == unit.FlatLot {
			name = p.Serial + "." + name
		}
		if !there[role] && !slices.Contains(missing, name) {
			missing = append(missing, name)
		}
	}
	if o.NeedsDrawing && !there[padSheet] {
		missing = append(missing, padSheet)
	}
	return strings.Join(missing, ", ")
}

const padSheet = "pad.toml"

// allMark is the fingerprint of all files that the pad uses.
func (p *pad) allMark(shared map[string]*file) mark {
	together := maps.Clone(p.files)
	maps.Copy(together, shared)
	return markOf(together)
}

func markOf(files map[string]*file) mark {
	h := sha256.New()
	for _, path := range slices.Sorted(maps.Keys(files)) {
		f := files[path]
		fmt.Fprintf(h, "%s\x00%d\x00%d\n", path, f.size, f.time.UnixNano())
	}
	return mark(h.Sum(nil))
}

// settled reports whether all of some files are.
func settled(files map[string]*file, o *Options, now time.Time) bool {
	for path, f := range files {
		if !f.settled(o, path, now) {
			return false
		}
	}
	return true
}

// made is when the last of a pad's takes was written, by the file system.
func (p *pad) made() time.Time {
	var last time.Time
	for _, f := range p.files {
		if !f.sheet && f.time.After(last) {
			last = f.time
		}
	}
	return last
}
