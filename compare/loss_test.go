package compare

import (
	"math"
	"math/rand/v2"
	"testing"

	"padproof/compare/network"
	"padproof/compare/uncertainty"
)

const toneHz = 997

// matched600 are the 600 ohm 10 dB pads by the matched-pad formulas (K = sqrt 10):
// T: series R0 (K-1)/(K+1), shunt 2 R0 K/(K^2-1); pi: series R0 (K^2-1)/(2K),
// shunts R0 (K+1)/(K-1). The same as row 600, 10 of pads_matched_computed.csv.
func matched600(t *testing.T, name string) *network.Circuit {
	t.Helper()
	const r0 = 600
	k := math.Sqrt(10)
	values := map[string][]float64{
		"T":  {r0 * (k - 1) / (k + 1), r0 * (k - 1) / (k + 1), 2 * r0 * k / (k*k - 1)},
		"pi": {r0 * (k + 1) / (k - 1), r0 * (k*k - 1) / (2 * k), r0 * (k + 1) / (k - 1)},
	}[name]
	return circuit(t, name, 0.01, values...)
}

func circuit(t *testing.T, name string, tolFrac float64, values ...float64) *network.Circuit {
	t.Helper()
	var parts []network.Part
	for i, v := range values {
		parts = append(parts, network.Part{Ref: network.Refs(name)[i], Value: v, TolFrac: tolFrac})
	}
	c, err := network.New(name, parts)
	if err != nil {
		t.Fatal(err)
	}
	return c
}

func unbalanced(source, load float64) network.Ends {
	return network.Ends{SourceOhms: source, Drive: network.DriveUnbalanced, LoadOhms: load, Sense: network.SenseUnbalanced}
}

// read makes the reading that a unit would give, with a repeatability.
func read(unit *network.Circuit, e network.Ends, stdErrDB float64) LossReading {
	return LossReading{
		LossDB: unit.LossDB(e, toneHz), FreqHz: toneHz,
		Terms: []uncertainty.Term{uncertainty.FromSample("repeatability", stdErrDB, 15, 1)},
	}
}

// A reading of a fault never passes: the bench hardly sees some of these, and
// then the part must be listed as unseen.
func TestMatchedPadFaultsNeverPass(t *testing.T) {
	for _, name := range []string{"T", "pi"} {
		sound := matched600(t, name)
		r2 := sound.Parts()[1].Value
		r3 := sound.Parts()[2].Value
		faults := map[string]*network.Circuit{
			"R2 short": sound.With("R2", 0),
			"R1 open":  sound.With("R1", math.Inf(1)),
			"R3 +20 %": sound.With("R3", 1.2*r3),
			"R2 +20 %": sound.With("R2", 1.2*r2),
		}
		for fault, unit := range faults {
			for _, stdErrDB := range []float64{0.0001, 0.003, 0.03} {
				k := LossCase{
					Circuit: sound, Service: unbalanced(600, 600),
					Rig:     Rig{Ends: unbalanced(100, 10000), SourceTolFrac: 0.01, LoadTolFrac: 0.01},
					Reading: read(unit, unbalanced(100, 10000), stdErrDB),
				}
				if verdict := judged(t, k, PlusMinus(10, 0.5)); verdict == Pass {
					t.Errorf("%s, %s, standard error %v dB: PASS", name, fault, stdErrDB)
				}
			}
		}
	}
}

// judged is the verdict as proof gives it: a pass only where nothing is unseen.
func judged(t *testing.T, k LossCase, limit Limit) Verdict {
	t.Helper()
	l, err := JudgeLoss(k)
	if err != nil {
		t.Fatal(err)
	}
	verdict, _ := Decide(Guarded, l.ServiceDB, l.UDB, limit, l.ServiceExpectedDB)
	if verdict == Pass && len(FindUnseen(k, l.BenchDB, l.BenchUDB, limit)) > 0 {
		return Unproven
	}
	return verdict
}

// On a bench like the service nothing is carried over and nothing is unseen:
// the bench loss is the answer.
func TestEqualEndsCarryEverything(t *testing.T) {
	sound := matched600(t, "T")
	ends := unbalanced(600, 600)
	for _, scale := range []float64{1, 1.005, 1.5, 20} {
		k := LossCase{Circuit: sound, Service: ends, Rig: Rig{Ends: ends}, Reading: read(sound.With("R3", scale*sound.Parts()[2].Value), ends, 0.001)}
		l, err := JudgeLoss(k)
		if err != nil {
			t.Fatal(err)
		}
		if d := l.ServiceDB - l.BenchDB; math.Abs(d) > 1e-9 {
			t.Errorf("R3 x%v: service %.6f dB, want the bench's %.6f", scale, l.ServiceDB, l.BenchDB)
		}
		// 0.001 dB with 15 degrees of freedom: t = 2.131 (JCGM 100, table G.2).
		if math.Abs(l.UDB-0.00213) > 2e-5 {
			t.Errorf("R3 x%v: U = %.5f dB, want 0.00213", scale, l.UDB)
		}
		if u := FindUnseen(k, l.BenchDB, l.BenchUDB, PlusMinus(l.BenchDB, 0.01)); len(u) > 0 {
			t.Errorf("R3 x%v: %v unseen", scale, u[0].Refs)
		}
	}
}

// The true service loss of sound units lies inside U in at least 95 %: parts
// and rig drawn from their rectangles, the reading from its scatter.
func TestServiceLossOfSoundUnitsCovered(t *testing.T) {
	const units = 3000
	rng := rand.New(rand.NewPCG(417, 1))
	cases := map[string]struct {
		circuit *network.Circuit
		bench   network.Ends
		service network.Ends
	}{
		"T":  {matched600(t, "T"), unbalanced(100, 10000), unbalanced(600, 600)},
		"pi": {matched600(t, "pi"), unbalanced(100, 10000), unbalanced(600, 600)},
		"L":  {circuit(t, "L", 0.05, 1800, 220), unbalanced(150, 10000), unbalanced(50, 1500)},
	}
	for name, tt := range cases {
		inside := 0
		for range units {
			rig := Rig{Ends: tt.bench, SourceTolFrac: 0.05, LoadTolFrac: 0.02}
			actual := tt.bench
			actual.SourceOhms *= 1 + rig.SourceTolFrac*(2*rng.Float64()-1)
			actual.LoadOhms *= 1 + rig.LoadTolFrac*(2*rng.Float64()-1)
			unit := tt.circuit.Sample(rng)
			reading := read(unit, actual, 0.01)
			reading.LossDB += 0.01 * rng.NormFloat64()
			l, err := JudgeLoss(LossCase{Circuit: tt.circuit, Rig: rig, Service: tt.service, Reading: reading})
			if err != nil {
				t.Fatal(err)
			}
			if math.Abs(l.ServiceDB-unit.LossDB(tt.service, toneHz)) <= l.UDB {
				inside++
			}
		}
		// Of 3000 at 95 % the count scatters by 0.4 %: three of those below 95 % would be chance.
		if share := float64(inside) / units; share < 0.938 {
			t.Errorf("%s: true service loss inside U in %.3f, want at least 0.95", name, share)
		}
	}
}

// A wrong part far outside tolerance: the service loss is the range that single
// parts give, and the true one lies in it.
func TestReadingOutsideTolerancesGivesARange(t *testing.T) {
	sound := matched600(t, "T")
	bench, service := unbalanced(100, 10000), unbalanced(600, 600)
	unit := sound.With("R3", 2*sound.Parts()[2].Value)
	l, err := JudgeLoss(LossCase{Circuit: sound, Rig: Rig{Ends: bench}, Service: service, Reading: read(unit, bench, 0.001)})
	if err != nil {
		t.Fatal(err)
	}
	if !l.Outside {
		t.Fatal("R3 doubled is not seen as outside the tolerances")
	}
	truth := unit.LossDB(service, toneHz)
	if math.Abs(l.ServiceDB-truth) > l.UDB {
		t.Errorf("service %.3f ± %.3f dB, want the true %.3f inside", l.ServiceDB, l.UDB, truth)
	}
	if verdict, _ := Decide(Guarded, l.ServiceDB, l.UDB, PlusMinus(10, 0.5), 10); verdict != Fail {
		t.Errorf("verdict %s, want FAIL: service loss %.2f ± %.2f dB", verdict, l.ServiceDB, l.UDB)
	}
}

// One part wrong by an unknown amount, the others within tolerance, the rig
// within its own: the true service loss lies inside U in at least 95 %.
func TestServiceLossOfWrongPartCovered(t *testing.T) {
	const units = 2000
	rng := rand.New(rand.NewPCG(418, 1))
	pads := map[string]*network.Circuit{"T": matched600(t, "T"), "pi": matched600(t, "pi"), "L": circuit(t, "L", 0.01, 1800, 220)}
	for name, sound := range pads {
		inside, outside := 0, 0
		for range units {
			rig := Rig{Ends: unbalanced(100, 10000), SourceTolFrac: 0.05, LoadTolFrac: 0.05}
			actual := rig.Ends
			actual.SourceOhms *= 1 + rig.SourceTolFrac*(2*rng.Float64()-1)
			actual.LoadOhms *= 1 + rig.LoadTolFrac*(2*rng.Float64()-1)
			unit := sound.Sample(rng)
			wrong := unit.Parts()[rng.IntN(len(unit.Parts()))]
			unit = unit.With(wrong.Ref, wrong.Value*math.Exp(3*(2*rng.Float64()-1)))
			reading := read(unit, actual, 0.005)
			reading.LossDB += 0.005 * rng.NormFloat64()
			service := unbalanced(200, 2000)
			l, err := JudgeLoss(LossCase{Circuit: sound, Rig: rig, Service: service, Reading: reading})
			if err != nil {
				t.Fatal(err)
			}
			if !l.Outside {
				continue
			}
			outside++
			if math.Abs(l.ServiceDB-unit.LossDB(service, toneHz)) <= l.UDB {
				inside++
			}
		}
		if share := float64(inside) / float64(outside); outside < units/4 || share < 0.94 {
			t.Errorf("%s: true service loss inside U in %.3f of %d, want at least 0.95", name, share, outside)
		}
	}
}

// A reading that no part alone explains proves nothing about service.
func TestReadingThatNothingExplains(t *testing.T) {
	sound := matched600(t, "T")
	k := LossCase{Circuit: sound, Rig: Rig{Ends: unbalanced(100, 10000)}, Service: unbalanced(600, 600), Reading: LossReading{LossDB: -3, FreqHz: toneHz}}
	l, err := JudgeLoss(k)
	if err != nil {
		t.Fatal(err)
	}
	if !math.IsNaN(l.ServiceDB) {
		t.Errorf("service loss %.2f dB from a gain of 3 dB, want none", l.ServiceDB)
	}
	if verdict, _ := Decide(Guarded, l.ServiceDB, l.UDB, PlusMinus(10, 0.5), 10); verdict != Unproven {
		t.Errorf("verdict %s, want UNPROVEN", verdict)
	}
}
