package arrival

import (
	"errors"
	"fmt"
	"strings"
	"testing"
	"time"
)

// Each layout, with what every unit shares.
func TestLayouts(t *testing.T) {
	for _, c := range []struct {
		name  string
		files []string
		due   string
		waits string // SERIAL lacks FILES
	}{
		{"folders", []string{"0417/before.wav", "0417/After.WAV"}, "0417", ""},
		{"folders, before shared", []string{"before.wav", "9/after.wav", "10/after.wav"}, "9 10", ""},
		{"flat", []string{"0417.before.wav", "0417.after.wav", "A.1.AFTER.wav", "a.1.before.wav"}, "0417 A.1", ""},
		{"flat, before shared", []string{"before.wav", "0417.after.wav"}, "0417", ""},
		{"flat and folders", []string{"before.wav", "0417.after.wav", "0418/after.wav"}, "0417 0418", ""},
		{"both", []string{"0417/both.wav", "0418.both.wav"}, "0417 0418", ""},
		{"no before", []string{"0417/after.wav", "0418.after.wav"}, "", "0417 lacks before.wav; 0418 lacks 0418.before.wav"},
		{"no after", []string{"before.wav", "0417/legs.wav"}, "", "0417 lacks after.wav"},
		{"never shared", []string{"before.wav", "after.wav", "0417/legs.wav"}, "", "0417 lacks after.wav"},
		{"hidden", []string{"before.wav", ".0417.after.wav", "0418/._after.wav"}, "", ""},
		{"only shared", []string{"before.wav"}, "", ""},
	} {
		t.Run(c.name, func(t *testing.T) {
			l := watchLot(t, Options{})
			for _, f := range c.files {
				l.put("lot/"+f, take(1000))
			}
			l.due(l.after(settle-time.Second), "")
			seen := l.after(time.Second)
			l.due(seen, c.due)
			var waits []string
			for _, w := range seen.Waiting {
				waits = append(waits, w.Serial+" lacks "+w.Lacks)
			}
			if got := strings.Join(waits, "; "); got != c.waits {
				t.Errorf("waiting: %q, want %q", got, c.waits)
			}
			l.check(seen)
			l.due(l.after(time.Minute), "")
		})
	}
}

// A unit is due again when something of its own changes, and not for what it
// shares.
func TestRetest(t *testing.T) {
	for _, c := range []struct {
		name  string
		does  func(l *line)
		after time.Duration
		due   string
	}{
		{"a further take", func(l *line) { l.put("lot/0417/legs.wav", take(900)) }, settle, "0417"},
		{"a further take, flat", func(l *line) { l.put("lot/0419.legs.wav", take(900)) }, settle, "0419"},
		{"recorded again, by rename", func(l *line) {
			l.put("lot/0417/new.tmp", take(900))
			l.rename("lot/0417/new.tmp", "lot/0417/after.wav")
		}, settle, "0417"},
		{"recorded again in its place", func(l *line) { l.put("lot/0417/after.wav", take(900)) }, time.Minute, "0417"},
		{"recorded again in its place, flat", func(l *line) { l.put("lot/0419.after.wav", take(900)) }, time.Minute, "0419"},
		{"a sheet of its own", func(l *line) { l.put("lot/0417/pad.toml", []byte("x")) }, settle, "0417"},
		{"shared before recorded again", func(l *line) { l.put("lot/before.wav", take(900)) }, time.Minute, ""},
		{"shared take added", func(l *line) { l.put("lot/rig-noise.wav", take(900)) }, time.Minute, ""},
		{"shared sheet changed", func(l *line) { l.put("lot/pad.toml", []byte("x")) }, time.Minute, ""},
		{"a further unit", func(l *line) { l.put("lot/0420/after.wav", take(900)) }, settle, "0420"},
		{"a take deleted", func(l *line) { l.remove("lot/0417/after.wav") }, time.Minute, ""},
		{"a folder deleted", func(l *line) { l.remove("lot/0417") }, time.Minute, ""},
	} {
		t.Run(c.name, func(t *testing.T) {
			l := watchLot(t, Options{})
			for _, f := range []string{"before.wav", "0417/after.wav", "0418/after.wav", "0419.after.wav"} {
				l.put("lot/"+f, take(1000))
			}
			seen := l.after(settle)
			l.due(seen, "0417 0418 0419")
			l.check(seen)
			l.due(l.after(10*time.Second), "")
			c.does(l)
			seen = l.after(c.after)
			l.due(seen, c.due)
			l.check(seen)
			l.due(l.after(time.Minute), "")
		})
	}
}

// A file is read only when its writer is done.
func TestWriters(t *testing.T) {
	whole := take(48000)
	l := watchLot(t, Options{})
	l.put("lot/before.wav", take(1000))
	l.after(10 * time.Second)

	for n := 1000; n < len(whole); n += 9500 { // a copy over a slow share: longer than the settle time all in all
		l.put("lot/0417/after.wav", whole[:n])
		l.due(l.after(time.Second), "")
	}
	l.due(l.after(20*time.Second), "") // it stopped: the header promises more than there is
	l.put("lot/0417/after.wav", whole)
	l.due(l.after(settle-time.Second), "")
	seen := l.after(time.Second)
	l.due(seen, "0417")
	l.check(seen)

	l.put("lot/0418/after.wav", take(0)) // a recorder that has not written a length yet
	l.due(l.after(20*time.Second), "")
	l.put("lot/0418/after.wav", whole[:len(whole)/2])
	l.due(l.after(29*time.Second), "")
	seen = l.after(time.Second) // and never does: taken as it is, for the check to tell
	l.due(seen, "0418")
	l.check(seen)

	room := append([]byte{}, whole...) // room taken first, filled later, while the time of the file stays
	clear(room[2000:])
	l.put("lot/0419.after.wav", room)
	l.due(l.after(20*time.Second), "")
	l.put("lot/0419.after.wav", whole)
	seen = l.after(settle)
	l.due(seen, "0419")
	l.check(seen)

	l.put("lot/0420.after.wav.part", whole) // appears by rename
	l.due(l.after(5*time.Second), "")
	l.rename("lot/0420.after.wav.part", "lot/0420.after.wav")
	seen = l.after(settle)
	l.due(seen, "0420")
	l.put("lot/0420.after.wav", take(2000)) // replaced between the look and the check
	if l.Unchanged(seen.Due[0]) {
		t.Error("a unit whose take was replaced counts as unchanged")
	}
	l.due(l.after(time.Second), "")
	seen = l.after(settle)
	l.due(seen, "0420")
	l.remove("lot/0420.after.wav") // deleted half-way
	if l.Unchanged(seen.Due[0]) {
		t.Error("a unit whose take was deleted counts as unchanged")
	}
	l.due(l.after(10*time.Second), "")

	l.put("lot/0421.after.wav", []byte("no WAV at all"))
	l.due(l.after(20*time.Second), "")
	l.due(l.after(10*time.Second), "0421")
}

// The grace of a unit is that of all its files together: takes that come one after
// another are checked together, and expected ones are waited for.
func TestTogether(t *testing.T) {
	l := watchLot(t, Options{Expect: []string{"pad-noise"}, NeedsDrawing: true})
	l.put("lot/before.wav", take(1000))
	for _, f := range []string{"after.wav", "legs.wav", "flex.wav"} {
		l.put("lot/0417/"+f, take(1000))
		l.due(l.after(time.Second), "")
	}
	seen := l.after(time.Minute)
	l.due(seen, "")
	if len(seen.Waiting) != 1 || seen.Waiting[0].Lacks != "pad-noise.wav, pad.toml" {
		t.Errorf("waiting: %+v, want 0417 for pad-noise.wav and pad.toml", seen.Waiting)
	}
	l.put("lot/0417/pad-noise.wav", take(1000))
	l.put("lot/pad.toml", []byte("x"))
	l.due(l.after(time.Second), "")
	l.put("lot/before.wav", take(1100)) // it stands on this too
	l.due(l.after(time.Second), "")
	l.due(l.after(time.Second), "0417")
}

// A unit that could not be checked is tried again when any of its files changes,
// shared ones too, or after the pause that was asked for.
func TestFailed(t *testing.T) {
	l := watchLot(t, Options{})
	l.put("lot/before.wav", take(1000))
	l.put("lot/0417/after.wav", take(1000))
	seen := l.after(settle)
	l.due(seen, "0417")
	if !l.Failed(seen.Due[0], "pad.toml:3: a part twice", 0) {
		t.Error("the first failure is no news")
	}
	l.due(l.after(time.Minute), "")
	l.put("lot/pad.toml", []byte("x"))
	seen = l.after(settle)
	l.due(seen, "0417")
	l.Failed(seen.Due[0], "cannot be read", 10*time.Second)
	l.due(l.after(9*time.Second), "")
	seen = l.after(time.Second)
	l.due(seen, "0417")
	if l.Failed(seen.Due[0], "cannot be read", 10*time.Second) {
		t.Error("the same failure of the same files is news")
	}
	seen = l.after(10 * time.Second)
	l.due(seen, "0417")
	l.check(seen)
	l.due(l.after(time.Minute), "")
	// Nothing said of a unit: it stays due.
	l.put("lot/0418/after.wav", take(1000))
	l.due(l.after(settle), "0418")
	l.due(l.after(time.Minute), "0418")
}

// A share that goes away and comes back: nothing is forgotten, nothing is due
// twice, also where it comes back empty for a while.
func TestShareAway(t *testing.T) {
	l := watchLot(t, Options{})
	l.put("lot/before.wav", take(1000))
	l.put("lot/0417/after.wav", take(1000))
	l.put("lot/0418.after.wav", take(1000))
	l.check(l.after(settle))
	gone := errors.New("host is down")
	l.broken["lot"] = gone
	for range 100 {
		l.now = l.now.Add(time.Second)
		if _, err := l.Look(); !errors.Is(err, gone) {
			t.Fatalf("Look = %v, want %v", err, gone)
		}
	}
	delete(l.broken, "lot")
	l.due(l.after(time.Minute), "")

	files := l.nodes
	l.nodes = map[string]*node{"lot": {name: "lot", dir: true, time: l.now}}
	if seen := l.after(5 * time.Minute); seen.Units != 0 {
		t.Errorf("%d units on an empty share", seen.Units)
	}
	l.nodes = files
	l.due(l.after(time.Minute), "")
}

// One folder that cannot be read is told once and stops no other.
func TestFolderFault(t *testing.T) {
	l := watchLot(t, Options{})
	l.put("lot/before.wav", take(1000))
	l.put("lot/0417/after.wav", take(1000))
	l.put("lot/0418/after.wav", take(1000))
	l.broken["lot/0417"] = errors.New("permission denied")
	first, err := l.Look()
	if err != nil || len(first.Faults) != 1 || !strings.Contains(first.Faults[0].Error(), "lot/0417") {
		t.Fatalf("faults %v, %v, want one of lot/0417", first.Faults, err)
	}
	seen := l.after(settle)
	l.due(seen, "0418")
	l.check(seen)
	if seen = l.after(time.Minute); len(seen.Faults) != 0 {
		t.Errorf("faults %v told again", seen.Faults)
	}
	delete(l.broken, "lot/0417")
	l.due(l.after(settle), "0417")
}

// What belongs to no unit is told once.
func TestStrays(t *testing.T) {
	l := watchLot(t, Options{})
	for _, f := range []string{"after.wav", "0417.aftr.wav", "song.wav", "0418/befor.wav", "0419/song.wav", "0419/after.wav"} {
		l.put("lot/"+f, take(1000))
	}
	seen, err := l.Look()
	if err != nil {
		t.Fatal(err)
	}
	got := strings.Join(seen.Strays, "\n")
	for _, want := range []string{"after.wav names no unit and was left out; name it SERIAL.after.wav", "did you mean 0417.after.wav?", "song.wav is no role",
		"0418/befor.wav: befor.wav is no role and was left out; did you mean before.wav?"} {
		if !strings.Contains(got, want) {
			t.Errorf("strays:\n%s\nwant %q among them", got, want)
		}
	}
	if len(seen.Strays) != 4 {
		t.Errorf("%d strays, want 4:\n%s", len(seen.Strays), got)
	}
	if seen := l.after(time.Minute); len(seen.Strays) != 0 {
		t.Errorf("told again: %q", seen.Strays)
	}
}

// lot.toml names a unit for each channel, whenever it comes.
func TestChannels(t *testing.T) {
	named, fault := map[int]string{2: "0418", 1: "0417"}, error(nil)
	l := watchLot(t, Options{Channels: func(string) (map[int]string, error) { return named, fault }})
	l.put("lot/before.wav", take(1000))
	l.put("lot/after.wav", take(1000))
	l.put("lot/lot.toml", []byte("x"))
	if seen := l.after(0); len(seen.Strays) != 0 {
		t.Errorf("strays %q though lot.toml was not read yet", seen.Strays)
	}
	seen := l.after(2 * settle)
	l.due(seen, "0417:1 0418:2")
	l.check(seen)
	l.due(l.after(time.Minute), "")
	l.put("lot/after.wav", take(900))
	seen = l.after(time.Minute)
	l.due(seen, "0417:1 0418:2")
	l.check(seen)
	fault = errors.New("lot.toml:1: x is no key")
	l.put("lot/lot.toml", []byte("xx"))
	told := 0
	for range 20 {
		told += len(l.after(time.Second).Faults)
	}
	if told != 1 {
		t.Errorf("a fault in lot.toml was told %d times", told)
	}
	fault, named = nil, map[int]string{1: "0417", 2: "0419"}
	l.put("lot/lot.toml", []byte("xxx"))
	l.due(l.after(2*settle), "0419:2")
}

// Thousands of finished units cost one question each and no listing; a take that
// came though the folder's time stayed, as on some shares, is found at the next
// full look.
func TestCheap(t *testing.T) {
	l := watchLot(t, Options{})
	l.put("lot/before.wav", take(10))
	const units = 300
	for i := range units {
		l.put(fmt.Sprintf("lot/%04d/after.wav", i), take(10))
		l.put(fmt.Sprintf("lot/f%04d.after.wav", i), take(10))
	}
	l.check(l.after(settle))
	l.after(5 * time.Second)
	l.nextFull = l.now.Add(time.Hour)
	l.stats, l.lists, l.opens = 0, 0, 0
	l.due(l.after(0), "")
	if want := units + 2; l.stats > want || l.lists > 0 || l.opens > 0 {
		t.Errorf("a look at %d finished units: %d stats, %d lists, %d opens, want %d, 0, 0", 2*units, l.stats, l.lists, l.opens, want)
	}
	l.stale = true
	l.put("lot/0007/legs.wav", take(10))
	l.due(l.after(10*time.Second), "")
	l.nextFull = time.Time{}
	l.due(l.after(settle), "0007")
}

// A take that comes within one tick of a folder's coarse clock is not missed.
func TestCoarseClock(t *testing.T) {
	l := watchLot(t, Options{Expect: []string{"legs"}})
	l.put("lot/0417/both.wav", take(10))
	l.after(0)
	l.nextFull = l.now.Add(time.Hour)
	l.now = l.now.Add(time.Second)
	l.stale = true
	l.put("lot/0417/legs.wav", take(10))
	l.due(l.after(settle), "0417")
}

// What is known stays bounded by what lies in the folder.
func TestMemoryBounded(t *testing.T) {
	l := watchLot(t, Options{})
	l.put("lot/before.wav", take(10))
	for i := range 300 {
		l.put(fmt.Sprintf("lot/%04d/after.wav", i), take(10))
		l.put(fmt.Sprintf("lot/f%04d.after.wav", i), take(10))
		l.now = l.now.Add(settle)
		if i%10 == 9 {
			seen := l.after(settle)
			if len(seen.Due) != 20 {
				t.Fatalf("%d due, want 20", len(seen.Due))
			}
			l.check(seen)
			for j := i - 9; j <= i; j++ {
				l.remove(fmt.Sprintf("lot/%04d", j))
				l.remove(fmt.Sprintf("lot/f%04d.after.wav", j))
			}
		}
	}
	l.after(0)
	l.now = l.now.Add(forgetAfter)
	l.after(time.Second)
	if len(l.pads)+len(l.folders) > 0 || len(l.shared) != 1 {
		t.Errorf("%d units, %d folders, %d shared files are kept, want 0, 0, 1", len(l.pads), len(l.folders), len(l.shared))
	}
}
