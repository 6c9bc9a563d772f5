package compare

import (
	"math"
	"testing"

	"padproof/compare/network"
)

// A U pad of 560, 560 and 330 ohm, driven balanced from 100 ohm, each leg loaded by 5 kilohm. By
// symmetry a leg is half of it: the EMF's half behind 50 ohm, 560 in series, 165 beside 5000 across.
func TestLegLevels(t *testing.T) {
	drawn := circuit(t, "U", 0, 560, 560, 330)
	e := ends(network.DriveBalanced, network.SenseBalanced, 100, 10000, 0)
	parallel := func(a, b float64) float64 { return a * b / (a + b) }
	with, straight := parallel(165, 5000)/(parallel(165, 5000)+610), 5000./5050
	wantDB := 20 * math.Log10(with/straight)
	for _, recorded := range []bool{true, false} {
		c := LegsCase{Circuit: drawn, Rig: Rig{Ends: e}, LegsLoadOhms: 5000}
		c = legScene{unit: drawn, ends: e, loadOhms: 5000, channelDB: 0.3, straight: recorded}.record(c)
		l := c.Levels()
		want := LegLevels{FreqHz: l.FreqHz, FromStraight: true, HotDB: wantDB, ColdDB: wantDB, DrawnHotDB: wantDB, DrawnColdDB: wantDB}
		if !recorded { // then the channels' own difference is in it, half to each
			want = LegLevels{FreqHz: l.FreqHz, HotDB: -0.15, ColdDB: 0.15}
		}
		for what, pair := range map[string][2]float64{
			"HotDB": {l.HotDB, want.HotDB}, "ColdDB": {l.ColdDB, want.ColdDB}, "DrawnHotDB": {l.DrawnHotDB, want.DrawnHotDB}, "DrawnColdDB": {l.DrawnColdDB, want.DrawnColdDB},
		} {
			if math.Abs(pair[0]-pair[1]) > 1e-6 {
				t.Errorf("recorded %v: %s = %.6f, want %.6f", recorded, what, pair[0], pair[1])
			}
		}
		if l.FromStraight != recorded {
			t.Errorf("FromStraight = %v, want %v", l.FromStraight, recorded)
		}
	}
	c := LegsCase{Circuit: drawn, Rig: Rig{Ends: e}, LegsLoadOhms: 5000}
	c = legScene{unit: drawn, ends: e, loadOhms: 5000, straight: true}.record(c)
	c.Cold.NoTone = true
	if l := c.Levels(); !math.IsNaN(l.ColdDB) || math.Abs(l.HotDB-wantDB) > 1e-6 {
		t.Errorf("with a dead cold leg HotDB = %g, ColdDB = %g, want %g and NaN", l.HotDB, l.ColdDB, wantDB)
	}
}
