package proof

import (
	"errors"
	"fmt"
	"math"
	"path/filepath"
	"slices"
	"sync"

	"padproof/analysis"
	"padproof/cmd/padproof/internal/result"
	"padproof/cmd/padproof/internal/unit"
	"padproof/compare"
)

// takes are the recordings of one unit, by role. The two channels of legs,
// legs-before and both are a take each: the second has the role with " 2"
// behind it.
type takes struct {
	by     map[string]*take
	order  []*take // as opened; one for each file
	shared *Shared // what takes that serve several units have shown; nil: nothing is kept
}

// second is the key of a take's second channel.
func second(role string) string { return role + " 2" }

func (ts *takes) close() {
	for _, t := range ts.order {
		t.file.Close()
	}
}

// tone is the tone that a take is judged at, if the take is there and holds one.
func (ts *takes) tone(role string) (analysis.Tone, bool) {
	if t := ts.by[role]; t != nil && t.measured != nil {
		return t.mainTone()
	}
	return analysis.Tone{}, false
}

// again is the tone of a repeated take, nil where there is none.
func (ts *takes) again(role string) *analysis.Tone {
	if tone, ok := ts.tone(role); ok {
		return &tone
	}
	return nil
}

// openTakes opens every take of the unit. One that cannot be read ends it all:
// a take that somebody made is part of what he wants judged.
func openTakes(u *unit.Unit, shared *Shared) (*takes, error) {
	ts := &takes{by: map[string]*take{}, shared: shared}
	for _, role := range unit.Roles() {
		path := u.Files[role]
		if path == "" {
			continue
		}
		t, err := openTake(role, path)
		if err != nil {
			ts.close()
			return nil, err
		}
		t.inherited = u.Inherited[path] || u.Channel > 0
		ts.by[role] = t
		ts.order = append(ts.order, t)
	}
	if ts.by[unit.Before] != nil && ts.by[unit.After] != nil {
		return ts, nil
	}
	if both := ts.by[unit.Both]; both != nil && ts.by[unit.After] == nil {
		return ts, nil
	}
	ts.close()
	return nil, &result.Error{
		File: u.Folder, Text: "there is no pair of takes: before.wav and after.wav, or both.wav",
		Hint: "record the tone straight through as before.wav and through the pad as after.wav",
	}
}

// pair are the take straight through and the one through the pad.
func (ts *takes) pair() (straight, through *take) {
	if both := ts.by[unit.Both]; both != nil && ts.by[unit.After] == nil {
		return both, ts.by[second(unit.Both)]
	}
	return ts.by[unit.Before], ts.by[unit.After]
}

// afterTone are the takes that hold before's tone, and noiseTakes those that
// hold none.
var (
	afterTone  = []string{unit.BeforeAgain, unit.AfterAgain, unit.BeforeLoaded, unit.Bypass, unit.Flex}
	noiseTakes = []string{unit.RigNoise, unit.PadNoise}
	legTakes   = []string{unit.Legs, unit.LegsBefore}
)

// measure settles the channels, finds the tone straight through and, in every
// other take, what that tells to look for: under a strong pad the strongest
// line may be hum. Then the takes are read, two at once. With anything played, a
// take straight through need not hold a tone.
func (ts *takes) measure(channel int, r rigReads, anything bool) error {
	matchDB, mainsHz := r.channelMatchDB, r.mainsHz
	first, err := ts.settleFirst(channel, matchDB)
	if err != nil {
		return err
	}
	if err := first.readOnce(ts.shared, "find", func() error { return first.find(nil) }); err != nil {
		return err
	}
	if anything {
		first.problems = without(first.problems, compare.NoTone, compare.TooShort)
	}
	atHz := frequencies(first.found)
	how := fmt.Sprint(atHz, anything, r)
	jobs := []func() error{func() error {
		return first.readOnce(ts.shared, "measure"+how, func() error { return first.measure(r.linearityDB) })
	}}
	lookHz := map[string][]float64{}
	if len(atHz) > 0 {
		for _, role := range legTakes {
			lookHz[role] = ts.legTonesHz(role, atHz)
		}
	}
	for _, t := range ts.toneTakes(first) {
		if t.channel == 0 {
			if err := t.followChannel(ts.leader(t.role, first), channel, atHz, matchDB); err != nil {
				return err
			}
		}
		hz, ofLegs := lookHz[t.role]
		if !ofLegs {
			hz = atHz
		}
		jobs = append(jobs, func() error {
			return t.readOnce(ts.shared, fmt.Sprint(hz, r), func() error { return t.findAndMeasure(hz, r.linearityDB) })
		})
	}
	if t := ts.by[unit.Calibration]; t != nil {
		t.use(min(first.channel, t.facts.Channels))
		jobs = append(jobs, func() error {
			return t.readOnce(ts.shared, fmt.Sprint(r), func() error { return errors.Join(t.find(nil), t.measure(r.linearityDB)) })
		})
	}
	for _, role := range noiseTakes {
		if t := ts.by[role]; t != nil {
			t.use(min(ts.leader(unit.PadNoise, first).channel, t.facts.Channels))
			jobs = append(jobs, func() error {
				return t.readOnce(ts.shared, fmt.Sprint(mainsHz), func() error { return t.measureNoise(mainsHz) })
			})
		}
	}
	return atOnce(r.workers, jobs)
}

// rigReads is what of the rig tells on how takes are read.
type rigReads struct {
	channelMatchDB, mainsHz, linearityDB float64
	workers                              int // takes read at once
}

// leader is the take whose channel a role follows: with both channels in one
// take, what goes through the pad follows the second.
func (ts *takes) leader(role string, first *take) *take {
	_, through := ts.pair()
	if first.role == unit.Both && slices.Contains([]string{unit.AfterAgain, unit.Bypass, unit.Flex, unit.PadNoise}, role) {
		return through
	}
	return first
}

// settleFirst gives the take straight through its channel, and the takes of two
// channels both of theirs.
func (ts *takes) settleFirst(channel int, matchDB float64) (*take, error) {
	for _, role := range append([]string{unit.Both}, legTakes...) {
		t := ts.by[role]
		if t == nil {
			continue
		}
		t.use(1)
		if t.facts.Channels >= 2 {
			other := &take{role: role, path: t.path, inherited: t.inherited, stamp: t.stamp, file: t.file, facts: t.facts}
			other.use(2)
			ts.by[second(role)] = other
		} else if role == unit.Both {
			return nil, &result.Error{File: t.path, Text: "there is one channel only", Hint: "record two outputs at once: channel 1 straight through, channel 2 through the pad"}
		}
	}
	first, _ := ts.pair()
	if first.channel == 0 {
		return first, first.pickChannel(channel, nil, matchDB)
	}
	return first, nil
}

// toneTakes are all that hold the first take's tone, but for itself.
func (ts *takes) toneTakes(first *take) []*take {
	var all []*take
	roles := append([]string{unit.Before, unit.After, unit.Both, second(unit.Both)}, afterTone...)
	for _, role := range legTakes {
		roles = append(roles, role, second(role))
	}
	for _, role := range roles {
		if t := ts.by[role]; t != nil && t != first {
			all = append(all, t)
		}
	}
	return all
}

func (t *take) findAndMeasure(atHz []float64, linearityDB float64) error {
	if len(atHz) > 0 {
		if err := t.find(atHz); err != nil {
			return err
		}
	}
	return t.measure(linearityDB)
}

// legTonesHz are the tones to look for in the legs: before's, or where the legs
// were recorded with another, that.
func (ts *takes) legTonesHz(role string, atHz []float64) []float64 {
	for _, key := range []string{role, second(role)} {
		t := ts.by[key]
		if t == nil {
			continue
		}
		var other *analysis.OtherToneError
		if _, err := analysis.FindTonesAt(t.samples, atHz); errors.As(err, &other) && !compare.IsMainsLine(other.FreqHz) {
			return []float64{other.FreqHz}
		}
	}
	return atHz
}

// noiseClipsDBFS is where a noise take counts as clipped: noise has no level
// that it keeps, so one sample at full scale is enough.
const noiseClipsDBFS = -0.01

// measureNoise reads a take that holds no tone.
func (t *take) measureNoise(mainsHz float64) error {
	n, err := analysis.MeasureNoise(t.watched(), 0, math.Inf(1), mainsHz)
	switch {
	case errors.Is(err, analysis.ErrSilent):
		t.problem(compare.ChannelSilent, math.NaN(), "channel %d holds digital silence, not even the recorder's own noise; look at the routing and record again", t.channel)
	case errors.Is(err, analysis.ErrNoiseTooShort):
		t.problem(compare.TooShort, math.NaN(), "%v; record 60 s", err)
	case err != nil:
		return fmt.Errorf("%s: %w", t.path, err)
	default:
		t.noise = n
		if p := compare.NoiseProblem(n); p.Name != "" {
			t.problems = append(t.problems, p)
		}
		if n.PeakDBFS > noiseClipsDBFS {
			t.problem(compare.Clipped, math.NaN(), "the noise reaches %.2f dBFS, full scale; lower the gain and record both noise takes again", n.PeakDBFS)
		}
		if n.Bad.Count > 0 {
			t.problem(compare.BadSamples, n.Bad.FirstSec, "%d samples are no numbers (NaN or infinite); export the take again, or record it again", n.Bad.Count)
		}
	}
	t.sha256, err = t.file.SHA256()
	return err
}

// without leaves out the problems of some names.
func without(problems []compare.Problem, names ...string) []compare.Problem {
	var rest []compare.Problem
	for _, p := range problems {
		if !slices.Contains(names, p.Name) {
			rest = append(rest, p)
		}
	}
	return rest
}

// noteCopies names takes that are copies of another: the later one proves
// nothing. Before and after are held against each other elsewhere, more closely.
func (ts *takes) noteCopies() {
	straight, through := ts.pair()
	for i, later := range ts.order {
		for _, t := range ts.order[:i] {
			if t == straight && later == through {
				continue
			}
			if t.sha256 == later.sha256 || ts.sameTone(t.role, later.role) {
				later.problem(compare.SameRecording, math.NaN(), "this is the recording %s once more; record each take by itself", filepath.Base(t.path))
				break
			}
		}
	}
}

func (ts *takes) sameTone(role, other string) bool {
	a, okA := ts.tone(role)
	b, okB := ts.tone(other)
	return okA && okB && compare.SameSamples(a, b)
}

// atOnce runs jobs, so many at a time, and returns the first error in their order.
func atOnce(workers int, jobs []func() error) error {
	errs := make([]error, len(jobs))
	next := make(chan int)
	var wait sync.WaitGroup
	for range min(workers, len(jobs)) {
		wait.Go(func() {
			for i := range next {
				errs[i] = guarded(jobs[i])
			}
		})
	}
	for i := range jobs {
		next <- i
	}
	close(next)
	wait.Wait()
	for _, err := range errs {
		if err != nil {
			return err
		}
	}
	return nil
}

// guarded turns a fault of the program in a worker into an error: the end that
// Go makes of it has the exit status of UNPROVEN.
func guarded(job func() error) (err error) {
	defer func() {
		if r := recover(); r != nil {
			err = fmt.Errorf("a fault in padproof itself: %v", r)
		}
	}()
	return job()
}
