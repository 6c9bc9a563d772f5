package compare

import (
	"fmt"
	"math"
	"math/rand/v2"
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

// A unit with a fault, read with the meter at every pair of pins, does not pass;
// nor does one read at a few. Of sound units, read well, nearly all that passed
// on an ideal bench pass here.
func TestReadingsNeverPassAFault(t *testing.T) {
	sound := matched600(t, "T")
	rig := Rig{Ends: unbalanced(100, 10000), SourceTolFrac: 0.01, LoadTolFrac: 0.01}
	service := unbalanced(600, 600)
	limit := PlusMinus(sound.LossDB(service, toneHz), 0.5)
	faults := []string{"", "R1 open", "R1 short", "R2 open", "R2 short", "R2 x10", "R2 /10", "R3 open", "R2 drifted +20 %", "R2 drifted -15 %",
		"R1 and R3 swapped", "R2 and R3 swapped", "hot leg open at out", "hot leg to screen at out", "in and out swapped"}
	for _, text := range faults {
		rng := rand.New(rand.NewPCG(5, 5))
		passed, broke := 0, 0
		const units = 60
		for range units {
			unit := sound.Sample(rng)
			if text != "" {
				f, err := network.ParseFault(sound, text)
				if err != nil {
					t.Fatal(err)
				}
				unit = f.Apply(unit)
			}
			k := LossCase{Circuit: sound, Rig: rig, Service: service, Reading: read(unit, rig.Ends, 0.001)}
			for _, r := range Readings(sound) {
				if text == "" || rng.IntN(2) == 0 { // of a faulty unit some are taken
					k.Ohms = append(k.Ohms, misread(unit, r, rng))
				}
			}
			loss, err := JudgeLoss(k)
			if err != nil {
				t.Fatal(err)
			}
			if judged(t, k, limit) == Pass && k.OhmDoubt(loss) == "" {
				passed++
				if !limit.Holds(unit.LossDB(service, toneHz)) {
					broke++
				}
			}
		}
		if broke > 1 {
			t.Errorf("%q: %d of %d units that break the limit pass", text, broke, units)
		}
		if text == "" && passed < units*95/100 {
			t.Errorf("%d of %d sound units pass, want 95 %%", passed, units)
		}
	}
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
