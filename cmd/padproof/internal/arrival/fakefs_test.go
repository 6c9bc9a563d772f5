package arrival

import (
	"bytes"
	"encoding/binary"
	"io/fs"
	"path"
	"strings"
	"testing"
	"time"

	"padproof/cmd/padproof/internal/unit"
)

// A fakeFS is a file system in memory, with its own clock.
type fakeFS struct {
	now    time.Time
	nodes  map[string]*node
	broken map[string]error // by path: nothing at or below it can be reached
	stale  bool             // the time of a folder stays as it is, as on some shares
	stats  int
	lists  int
	opens  int
}

type node struct {
	name string
	dir  bool
	data []byte
	time time.Time
}

func (n *node) Name() string               { return n.name }
func (n *node) Size() int64                { return int64(len(n.data)) }
func (n *node) ModTime() time.Time         { return n.time }
func (n *node) IsDir() bool                { return n.dir }
func (n *node) Sys() any                   { return nil }
func (n *node) Info() (fs.FileInfo, error) { c := *n; return &c, nil }
func (n *node) Type() fs.FileMode          { return n.Mode().Type() }
func (n *node) Mode() fs.FileMode {
	if n.dir {
		return fs.ModeDir
	}
	return 0
}

func (f *fakeFS) fails(p string) error {
	for at, err := range f.broken {
		if p == at || strings.HasPrefix(p, at+"/") {
			return &fs.PathError{Op: "reach", Path: p, Err: err}
		}
	}
	if f.nodes[p] == nil {
		return &fs.PathError{Op: "reach", Path: p, Err: fs.ErrNotExist}
	}
	return nil
}

func (f *fakeFS) Stat(p string) (fs.FileInfo, error) {
	f.stats++
	if err := f.fails(p); err != nil {
		return nil, err
	}
	return f.nodes[p].Info()
}

func (f *fakeFS) ReadDir(p string) ([]fs.DirEntry, error) {
	f.lists++
	if err := f.fails(p); err != nil {
		return nil, err
	}
	var all []fs.DirEntry
	for at, n := range f.nodes {
		if path.Dir(at) == p && at != p {
			all = append(all, n)
		}
	}
	return all, nil
}

type fakeFile struct{ *bytes.Reader }

func (fakeFile) Close() error { return nil }

func (f *fakeFS) Open(p string) (File, error) {
	f.opens++
	if err := f.fails(p); err != nil {
		return nil, err
	}
	return fakeFile{bytes.NewReader(f.nodes[p].data)}, nil
}

// touched moves the time of the folder that holds p.
func (f *fakeFS) touched(p string) {
	if d := f.nodes[path.Dir(p)]; d != nil && !f.stale {
		d.time = f.now
	}
}

func (f *fakeFS) mkdir(p string) {
	if f.nodes[p] == nil {
		f.nodes[p] = &node{name: path.Base(p), dir: true, time: f.now}
		f.touched(p)
	}
}

// put writes a file; one that is there is written over in its place.
func (f *fakeFS) put(p string, data []byte) {
	if path.Dir(p) != "lot" && path.Dir(p) != "." {
		f.mkdir(path.Dir(p))
	}
	if f.nodes[p] == nil {
		f.touched(p)
	}
	f.nodes[p] = &node{name: path.Base(p), data: data, time: f.now}
}

func (f *fakeFS) remove(p string) {
	for at := range f.nodes {
		if at == p || strings.HasPrefix(at, p+"/") {
			delete(f.nodes, at)
		}
	}
	f.touched(p)
}

func (f *fakeFS) rename(from, to string) {
	n := f.nodes[from]
	f.remove(from)
	f.put(to, n.data)
	f.nodes[to].time = n.time
}

// take is a small WAV of 16 bits with so many frames, none of them nil.
func take(frames int) []byte {
	le := binary.LittleEndian
	b := append([]byte("RIFF"), 0, 0, 0, 0)
	le.PutUint32(b[4:], uint32(36+2*frames))
	b = append(b, "WAVEfmt \x10\x00\x00\x00\x01\x00\x01\x00"...)
	b = le.AppendUint32(b, 48000)
	b = le.AppendUint32(b, 96000)
	b = append(b, 2, 0, 16, 0)
	b = append(b, "data"...)
	b = le.AppendUint32(b, uint32(2*frames))
	for i := range frames {
		b = le.AppendUint16(b, uint16(1+i%100))
	}
	return b
}

// A line is a watched folder and its clock.
type line struct {
	*fakeFS
	*Watcher
	t *testing.T
}

// settle is what tests watch with.
const settle = 2 * time.Second

func watchLot(t *testing.T, o Options) *line {
	f := &fakeFS{now: time.Date(2026, 11, 30, 8, 0, 0, 0, time.UTC), nodes: map[string]*node{}, broken: map[string]error{}}
	f.mkdir("lot")
	o.FS, o.Now, o.Settle = f, func() time.Time { return f.now }, settle
	return &line{f, New("lot", o), t}
}

// after lets time pass and looks, in steps as a caller does; what the last look
// has shown counts.
func (l *line) after(d time.Duration) *Seen {
	l.t.Helper()
	var seen *Seen
	for end := l.now.Add(d); ; {
		var err error
		if seen, err = l.Look(); err != nil {
			l.t.Fatal(err)
		}
		if !l.now.Before(end) {
			return seen
		}
		l.now = l.now.Add(min(time.Second, end.Sub(l.now)))
	}
}

// due demands which units are due, as SERIAL or SERIAL:CHANNEL, parted by blanks.
func (l *line) due(seen *Seen, want string) {
	l.t.Helper()
	var all []string
	for _, u := range seen.Due {
		name := u.Serial
		if u.Layout == unit.ChannelLot {
			name += ":" + string(rune('0'+u.Channel))
		}
		all = append(all, name)
	}
	if got := strings.Join(all, " "); got != want {
		l.t.Errorf("due: %q, want %q (settling %v, waiting %v)", got, want, seen.Settling, seen.Waiting)
	}
}

// check says of all that is due that it was checked.
func (l *line) check(seen *Seen) {
	for _, u := range seen.Due {
		if !l.Unchanged(u) {
			l.t.Errorf("%s has changed though nothing was done to it", u.Serial)
		}
		l.Done(u)
	}
}
