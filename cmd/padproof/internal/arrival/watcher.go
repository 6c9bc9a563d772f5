package arrival

import (
	"cmp"
	"slices"
	"strings"
	"time"

	"padproof/cmd/padproof/internal/unit"
)

// Options say how a folder is watched. The zero value will do.
type Options struct {
	Settle       time.Duration // unchanged for so long, a file is done; 2 s if left out
	Patience     time.Duration // how long a file that does not look whole is waited for; 15 times Settle if left out
	FullEvery    time.Duration // how often every file is asked for, or less often so that it takes a tenth of the time; 5 s if left out
	Expect       []string      // roles that a unit is waited for until it has them
	NeedsDrawing bool          // a unit is waited for until it has a pad.toml, its own or a shared one
	AsIs         bool          // units that lack something are due as well

	// Channels reads lot.toml: the serials by channel, none where it names none.
	// If nil, lot.toml is not looked at.
	Channels func(path string) (map[int]string, error)

	FS  FS               // the machine's own if nil
	Now func() time.Time // time.Now if nil
}

// A Watcher knows what lies in a folder. It may be used from one goroutine.
type Watcher struct {
	o        Options
	top      listing
	shared   map[string]*file    // in the watched folder, by path
	folders  map[string]*listing // of units, by name
	pads     map[string]*pad     // by key
	lot      lotSheet
	strays   map[string]bool // names that were told of
	looks    int
	nextFull time.Time
}

// Seen is what one look has shown.
type Seen struct {
	Units    int       // that are there
	Due      []Unit    // in the order in which their last takes were made
	Settling []Unit    // some file is still being written
	Waiting  []Waiting // for a file
	Faults   []error   // of folders that cannot be read: each is told once
	Strays   []string  // what belongs to no unit, in sentences: each is told once
	Shared   string    // a fingerprint of the shared files
}

// Waiting is a unit that lacks something.
type Waiting struct {
	Unit
	Lacks string // names of files
}

// New begins to watch a folder.
func New(folder string, o Options) *Watcher {
	if o.Settle <= 0 {
		o.Settle = 2 * time.Second
	}
	o.Patience = max(o.Settle, cmp.Or(o.Patience, 15*o.Settle))
	o.FullEvery = cmp.Or(o.FullEvery, 5*time.Second)
	if o.FS == nil {
		o.FS = machine{}
	}
	if o.Now == nil {
		o.Now = time.Now
	}
	return &Watcher{o: o, top: listing{path: folder}, shared: map[string]*file{}, folders: map[string]*listing{},
		pads: map[string]*pad{}, strays: map[string]bool{}}
}

// Look looks once. The error is that of the watched folder: all that is known of
// its units is kept until it can be read again.
func (w *Watcher) Look() (*Seen, error) {
	now := w.o.Now()
	full := !now.Before(w.nextFull)
	if _, err := w.top.refresh(w.o.FS, now, full); err != nil {
		return nil, err
	}
	w.looks++
	seen := &Seen{}
	w.lookAtTop(seen, now, full)
	w.lookAtFolders(seen, now, full)
	w.forget(now)
	if full {
		ended := w.o.Now()
		w.nextFull = ended.Add(max(w.o.FullEvery, 10*ended.Sub(now)))
	}
	for _, p := range w.pads {
		if p.atSee == w.looks {
			w.judge(p, seen, now)
		}
	}
	w.order(seen)
	return seen, nil
}

// judge says what is to be done about a pad.
func (w *Watcher) judge(p *pad, seen *Seen, now time.Time) {
	seen.Units++
	if p.asked {
		p.asked, p.own = false, markOf(p.files)
	}
	if p.done && p.own == p.doneOwn {
		return
	}
	shared, lacks := p.shares(w.shared), ""
	p.all = p.allMark(shared)
	switch {
	case p.failed && p.all == p.failedAll && (p.retry.IsZero() || now.Before(p.retry)):
		return
	case !p.rest || !settled(shared, &w.o, now):
		seen.Settling = append(seen.Settling, p.Unit)
		return
	default:
		lacks = p.lacks(shared, &w.o)
	}
	if lacks != "" && !w.o.AsIs {
		seen.Waiting = append(seen.Waiting, Waiting{p.Unit, lacks})
		return
	}
	seen.Due = append(seen.Due, p.Unit)
}

// order puts units in the order of their making: by the time of their last take,
// then by serial.
func (w *Watcher) order(seen *Seen) {
	slices.SortFunc(seen.Due, func(a, b Unit) int {
		return cmp.Or(w.pads[a.key].made().Compare(w.pads[b.key].made()), byName(a, b))
	})
	slices.SortFunc(seen.Settling, byName)
	slices.SortFunc(seen.Waiting, func(a, b Waiting) int { return byName(a.Unit, b.Unit) })
	shared := markOf(w.shared)
	seen.Shared = string(shared[:])
}

func byName(a, b Unit) int {
	return cmp.Or(a.Channel-b.Channel, unit.CompareSerials(a.Serial, b.Serial), strings.Compare(a.key, b.key))
}

// Unchanged reports whether the files of a unit, shared ones too, are still those
// that were due.
func (w *Watcher) Unchanged(u Unit) bool {
	p := w.pads[u.key]
	if p == nil {
		return false
	}
	now := w.o.Now()
	p.refresh(&w.o, now)
	shared := p.shares(w.shared)
	for path, f := range shared {
		f.refresh(w.o.FS, path, now)
		if f.gone || f.err != nil {
			return false
		}
	}
	for _, f := range p.files {
		if f.err != nil {
			return false
		}
	}
	return p.allMark(shared) == u.all
}

// Done says that a unit was checked as it was when it was due.
func (w *Watcher) Done(u Unit) {
	if p := w.pads[u.key]; p != nil {
		p.done, p.doneOwn, p.failed, p.why = true, u.own, false, ""
	}
}

// Failed says that a unit could not be checked, and why. It is due again when any
// of its files changes, and after a pause, if that is not 0. It reports whether
// the reason is another than the last time.
func (w *Watcher) Failed(u Unit, why string, pause time.Duration) (news bool) {
	p := w.pads[u.key]
	if p == nil {
		return true
	}
	news = p.why != why || p.failedAll != u.all
	p.failed, p.failedAll, p.why, p.retry = true, u.all, why, time.Time{}
	if pause > 0 {
		p.retry = w.o.Now().Add(pause)
	}
	return news
}
