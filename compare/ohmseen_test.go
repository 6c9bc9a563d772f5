package compare

import (
	"fmt"
	"math"
	"math/rand/v2"
	"slices"
	"strings"
	"testing"

	"padproof/compare/network"
)

// seen is a reading as a meter that is dead right shows it on a unit.
func seen(unit *network.Circuit, a, b string, joined ...string) OhmSeen {
	s := OhmSeen{PinA: a, PinB: b, TolFrac: MeterTolFrac, PlusOhms: MeterPlusOhms}
	copy(s.Joined[:], joined)
	s.Ohms = s.Reading().On(unit)
	return s
}

// A meter good for 0.5 % and 0.2 Ω shows r where r ± (0.005 r + 0.2) reaches the
// 326.7 to 333.3 Ω of a sound R3: from (326.7 - 0.2)/1.005 = 324.876 to
// (333.3 + 0.2)/0.995 = 335.176.
func TestGood(t *testing.T) {
	u := circuit(t, "U", 0.01, 560, 560, 330)
	r3 := OhmSeen{PinA: "out.hot", PinB: "out.cold", TolFrac: 0.005, PlusOhms: 0.2}
	low, high := r3.Good(u)
	if math.Abs(low-324.876) > 0.001 || math.Abs(high-335.176) > 0.001 {
		t.Errorf("Good = %v to %v, want 324.876 to 335.176", low, high)
	}
	screen := r3
	screen.PinB = "screen"
	for _, tt := range []struct {
		s    OhmSeen
		ohms float64
		want bool
	}{
		{r3, 324.8, false}, {r3, 324.9, true}, {r3, 335.1, true}, {r3, 335.2, false}, {r3, math.Inf(1), false}, {r3, 0, false},
		{screen, math.Inf(1), true}, {screen, 8e6, true}, {screen, 330, false}, {screen, 0.9e6, false}, // damp reads megohms
	} {
		tt.s.Ohms = tt.ohms
		if got := tt.s.Fits(u); got != tt.want {
			t.Errorf("%s = %v fits: %v, want %v", tt.s.Reading().How(), tt.ohms, got, tt.want)
		}
	}
	r3.Ohms = 33
	if got := r3.Text(u); got != "out.hot to out.cold shows 33 Ω on the ohmmeter, where a sound unit shows 324.9 Ω to 335.2 Ω" {
		t.Errorf("Text = %q", got)
	}
}

// The output arm of a matched T hardly shows on a load of 10 kΩ. An ohmmeter on
// a sound unit settles it; one coarse enough does not.
func TestReadingSettlesUnseen(t *testing.T) {
	sound := matched600(t, "T")
	k := LossCase{Circuit: sound, Rig: Rig{Ends: unbalanced(100, 10000), SourceTolFrac: 0.01, LoadTolFrac: 0.01}, Service: unbalanced(600, 600)}
	k.Reading = read(sound, k.Rig.Ends, 0.001)
	limit := PlusMinus(sound.LossDB(k.Service, toneHz), 0.5)
	names := func(k LossCase) string {
		l, err := JudgeLoss(k)
		if err != nil {
			t.Fatal(err)
		}
		var all []string
		for _, u := range FindUnseen(k, l.BenchDB, l.BenchUDB, limit) {
			all = append(all, u.Name())
		}
		return strings.Join(all, ", ")
	}
	if got := names(k); !strings.Contains(got, "R2") {
		t.Fatalf("unseen without a reading: %q, want R2 among them", got)
	}
	out := seen(sound, "out.hot", "screen")
	k.Ohms = []OhmSeen{out}
	if got := names(k); got != "" {
		t.Errorf("unseen after out.hot to screen = %.4g Ω: %q, want none", out.Ohms, got)
	}
	k.Ohms[0].PlusOhms = 300 // a meter that tells next to nothing
	if got := names(k); !strings.Contains(got, "R2") {
		t.Errorf("unseen after a coarse reading: %q, want R2 still", got)
	}
	k.Ohms = []OhmSeen{seen(sound, "in.hot", "screen")} // does not go by R2
	if got := names(k); !strings.Contains(got, "R2") {
		t.Errorf("unseen after a reading beside R2: %q, want R2 still", got)
	}
}

// A reading that is taken already is not asked for again; a value between those
// that are tried anyway is tried where a reading leaves just that open: 390 Ω.
func TestUnseenGoesByReadings(t *testing.T) {
	sound := circuit(t, "T", 0.001, 312, 312, 422)
	k := LossCase{Circuit: sound, Rig: Rig{Ends: unbalanced(100, 10000)}, Service: unbalanced(600, 600)}
	k.Reading = read(sound, k.Rig.Ends, 0.01)
	limit := PlusMinus(sound.LossDB(k.Service, toneHz), 0.3)
	r2 := func() Unseen {
		for _, u := range FindUnseen(k, k.Reading.LossDB, 0.2, limit) {
			if u.Name() == "R2" {
				return u
			}
		}
		t.Fatal("R2 is not unseen")
		return Unseen{}
	}
	first := r2().Reading
	coarse := seen(sound, first.PinA, first.PinB, first.Joined[:]...)
	coarse.TolFrac = 0.5
	k.Ohms = []OhmSeen{coarse}
	if again := r2().Reading; again.same(sound, first) || again.PinA == "" {
		t.Errorf("asks for %s after it was taken", again.How())
	}
	exact := seen(sound.With("R2", 390), "out.hot", "screen")
	exact.TolFrac, exact.PlusOhms = 0, 0
	k.Ohms = []OhmSeen{exact}
	if u := r2(); u.LowValue < 389 || u.HighValue > 391 {
		t.Errorf("R2 may be %v to %v, want 390 ± 0.5 Ω", u.LowValue, u.HighValue)
	}
}

// The values of R2 that a reading of 734 Ω at the output of a T of 312, 312 and
// 422 Ω, 1 %, leaves open: the meter may mean 734 ± 3.87 Ω, R3 be 422 ± 4.22 Ω,
// so R2 may be 312 ± 8.09 Ω.
func TestReadAllows(t *testing.T) {
	k := LossCase{Circuit: circuit(t, "T", 0.01, 312, 312, 422)}
	k.Ohms = []OhmSeen{seen(k.Circuit, "out.hot", "screen")}
	parts := k.Circuit.Parts()
	got := k.readAllows(parts[1])
	if math.Abs(got.low-303.91) > 0.005 || math.Abs(got.high-320.09) > 0.005 {
		t.Errorf("R2 may be %v to %v, want 303.91 to 320.09", got.low, got.high)
	}
	if got := k.readAllows(parts[0]); got != (values{0, math.Inf(1)}) {
		t.Errorf("R1, which the reading does not go by, may be %v, want anything", got)
	}
	k.Ohms[0].Ohms = math.Inf(1)
	if got := k.readAllows(parts[1]); got.low < 0.9e6 || !got.holds(math.Inf(1)) {
		t.Errorf("R2 with the output open may be %v, want open", got)
	}
	k.Ohms = append(k.Ohms, seen(k.Circuit, "out.hot", "in.hot"))
	if got := k.readAllows(parts[1]); got.holds(0) || got.holds(312) || got.holds(math.Inf(1)) {
		t.Errorf("R2 with readings that speak against one another may be %v, want nothing", got)
	}
}

// Pads that a bench of 100 Ω and 10 kΩ sees badly, and every single fault.
func faultyPads(t *testing.T) map[*network.Circuit][]network.Fault {
	t.Helper()
	all := map[*network.Circuit][]network.Fault{}
	for _, c := range []*network.Circuit{
		matched600(t, "T"), matched600(t, "pi"), circuit(t, "U", 0.01, 560, 560, 330),
		circuit(t, "H", 0.01, 156, 156, 156, 156, 422), circuit(t, "bridged-T", 0.01, 600, 600, 1297, 277.5),
	} {
		for _, p := range c.Parts() {
			for _, form := range []network.FaultForm{network.PartOpen, network.PartShort, network.PartTimesTen, network.PartTenth} {
				all[c] = append(all[c], network.Fault{Form: form, Ref: p.Ref})
			}
			for _, drift := range []float64{-0.15, 0.05, 0.2} {
				all[c] = append(all[c], network.Fault{Form: network.PartDrifted, Ref: p.Ref, Value: drift})
			}
			if p.Ref != "R1" {
				all[c] = append(all[c], network.Fault{Form: network.PartsSwapped, Ref: "R1", Other: p.Ref})
			}
		}
		all[c] = append(all[c], c.LegFaults()...)
	}
	return all
}

// A unit with a fault, read with the meter where it does not show, does not pass
// where it breaks the limit.
func TestReadingsNeverPassAFault(t *testing.T) {
	const units = 4 // of each fault
	rng := rand.New(rand.NewPCG(5, 5))
	judgedUnits, broke := 0, 0
	for sound, faults := range faultyPads(t) {
		for _, f := range faults {
			for range units {
				unit := f.Apply(sound.Sample(rng))
				k, limit := readCase(sound, unit, rng, 0.7, 0.3)
				k.Ohms = slices.DeleteFunc(k.Ohms, func(s OhmSeen) bool { return !s.Fits(sound) })
				judgedUnits++
				if passes(t, k, limit) && !limit.Holds(unit.LossDB(k.Service, toneHz)) {
					broke++
					t.Logf("%s, %s passes, loss in service %.3f dB, limits %.3f to %.3f", sound.Name(), f, unit.LossDB(k.Service, toneHz), limit.Low, limit.High)
				}
			}
		}
	}
	if broke > judgedUnits/200 {
		t.Errorf("%d of %d units with a fault break the limit and pass, want at most 1 in 200", broke, judgedUnits)
	}
}

// Sound units, read at every pair of pins, pass: the readings rule out what this
// bench could not see.
func TestSoundUnitsPassWithReadings(t *testing.T) {
	const units = 12
	rng := rand.New(rand.NewPCG(6, 6))
	for sound := range faultyPads(t) {
		passed, without := 0, 0
		for range units {
			k, limit := readCase(sound, sound.Sample(rng), rng, 1, 0.5)
			if passes(t, k, limit) {
				passed++
			}
			k.Ohms = nil
			if passes(t, k, limit) {
				without++
			}
		}
		if passed < units*95/100 || without > passed {
			t.Errorf("%s: %d of %d sound units pass with readings, %d without; want 95 %% with", sound.Name(), passed, units, without)
		}
	}
}

// readCase is a unit between the ends of a bench and, each with that chance, at
// every pair of pins.
func readCase(sound, unit *network.Circuit, rng *rand.Rand, chance, halfDB float64) (LossCase, Limit) {
	bench, service := network.Ends{SourceOhms: 100, LoadOhms: 10000}, network.Ends{SourceOhms: 600, LoadOhms: 600}
	if sound.Unbalanced() {
		bench, service = unbalanced(100, 10000), unbalanced(600, 600)
	}
	k := LossCase{Circuit: sound, Rig: Rig{Ends: bench, SourceTolFrac: 0.01, LoadTolFrac: 0.01}, Service: service, Reading: read(unit, bench, 0.001)}
	for _, r := range Readings(sound) {
		if rng.Float64() < chance {
			k.Ohms = append(k.Ohms, misread(unit, r, rng))
		}
	}
	return k, PlusMinus(sound.LossDB(service, toneHz), halfDB)
}

// passes is the verdict with all that speaks against a PASS.
func passes(t *testing.T, k LossCase, limit Limit) bool {
	t.Helper()
	l, err := JudgeLoss(k)
	if err != nil {
		t.Fatal(err)
	}
	return judged(t, k, limit) == Pass && k.OhmDoubt(l) == ""
}

// misread is a reading by a meter that is off within what it states.
func misread(unit *network.Circuit, r OhmReading, rng *rand.Rand) OhmSeen {
	s := OhmSeen{PinA: r.PinA, PinB: r.PinB, Joined: r.Joined, TolFrac: MeterTolFrac, PlusOhms: MeterPlusOhms}
	off := func(half float64) float64 { return half * (2*rng.Float64() - 1) }
	s.Ohms = math.Max(0, (r.On(unit)+off(s.PlusOhms))/(1+off(s.TolFrac)))
	return s
}

// A reading that no sound unit shows leaves a loss unproven, and says why; a
// loss off by more than the parts allow, with readings of a sound unit, is no
// part's.
func TestOhmDoubt(t *testing.T) {
	sound := circuit(t, "U", 0.01, 560, 560, 330)
	ends := network.Ends{SourceOhms: 100, LoadOhms: 10000}
	service := network.Ends{SourceOhms: 120, LoadOhms: 2700}
	k := LossCase{Circuit: sound, Rig: Rig{Ends: ends}, Service: service, Reading: read(sound, ends, 0.001)}
	doubt := func() string {
		l, err := JudgeLoss(k)
		if err != nil {
			t.Fatal(err)
		}
		return k.OhmDoubt(l)
	}
	k.Ohms = []OhmSeen{seen(sound, "out.hot", "out.cold")}
	if got := doubt(); got != "" {
		t.Errorf("a sound unit: %q, want nothing", got)
	}
	k.Ohms[0].Ohms = 300
	if got := doubt(); !strings.Contains(got, "out.hot to out.cold shows 300 Ω") || !strings.Contains(got, "324.9 Ω to 335.2 Ω") {
		t.Errorf("300 Ω across R3: %q", got)
	}
	wrongBench := ends
	wrongBench.LoadOhms = 600
	k.Reading = read(sound, wrongBench, 0.001)
	k.Ohms = []OhmSeen{seen(sound, "out.hot", "out.cold"), seen(sound, "in.hot", "out.hot"), seen(sound, "in.cold", "out.cold")}
	l, err := JudgeLoss(k)
	if err != nil {
		t.Fatal(err)
	}
	if !l.ReadOtherwise || math.IsNaN(l.ServiceDB) || !strings.Contains(k.OhmDoubt(l), "source and load") || l.OhmRemark() == "" {
		t.Errorf("a wrong bench: %+v, %q, want the readings to speak against every part", l.ReadOtherwise, k.OhmDoubt(l))
	}
}

// A reading of one part narrows what explains a loss beyond the tolerances.
func TestReadingNarrowsWhatExplains(t *testing.T) {
	sound := circuit(t, "T", 0.01, 312, 312, 422)
	rig := Rig{Ends: unbalanced(100, 10000)}
	unit := sound.With("R3", 300)
	k := LossCase{Circuit: sound, Rig: rig, Service: unbalanced(600, 600), Reading: read(unit, rig.Ends, 0.001)}
	before, err := JudgeLoss(k)
	if err != nil {
		t.Fatal(err)
	}
	k.Ohms = []OhmSeen{seen(unit, "out.hot", "screen"), seen(unit, "in.hot", "out.hot")}
	after, err := JudgeLoss(k)
	if err != nil {
		t.Fatal(err)
	}
	truth := unit.LossDB(k.Service, toneHz)
	if !before.Outside || after.UDB > before.UDB/2 || math.Abs(after.ServiceDB-truth) > after.UDB {
		t.Errorf("service %s before, %s after the readings, true %.3f; want it held, by a U at most half", lossText(before), lossText(after), truth)
	}
}

func lossText(l Loss) string { return fmt.Sprintf("%.3f ± %.3f dB", l.ServiceDB, l.UDB) }

// Two arms swapped read alike on the bench, within a coarse repeatability; the
// meter on one of them tells.
func TestReadingRulesOutSwap(t *testing.T) {
	sound := circuit(t, "T", 0.001, 150, 330, 100)
	k := LossCase{Circuit: sound, Rig: Rig{Ends: unbalanced(0, 400)}, Service: unbalanced(600, 50), Reading: read(sound, unbalanced(0, 400), 0.5)}
	limit := PlusMinus(sound.LossDB(k.Service, toneHz), 0.3)
	swapUnseen := func() bool {
		for _, u := range FindUnseen(k, sound.LossDB(k.Rig.Ends, toneHz), 3, limit) {
			if u.Name() == "R1 and R2" {
				return true
			}
		}
		return false
	}
	k.Ohms = []OhmSeen{seen(sound, "in.hot", "out.hot")} // 480 Ω either way
	if !swapUnseen() {
		t.Error("a reading that is the same with R1 and R2 swapped rules the swap out")
	}
	k.Ohms = append(k.Ohms, seen(sound, "in.hot", "screen")) // 250 Ω, swapped 430
	if swapUnseen() {
		t.Error("R1 and R2 swapped is unseen with 250 Ω read from in.hot to screen")
	}
}
