package analysis

import "testing"

// The channel that carries the tone shows, loudest line or not.
func TestToneLevels(t *testing.T) {
	carrying := generated(t, 48000).noise(-90, 1)
	leak := generated(t, 48000)
	for n := range leak.x {
		leak.x[n] *= 0.05 // 26.02 dB down
	}
	channels := []Samples{newClip(48000, 23.5), leak.noise(-95, 2), carrying, newClip(48000, 23.5).noise(-90, 3).hum(50, -70)}
	got, err := ToneLevels(channels, nil)
	if err != nil {
		t.Fatal(err)
	}
	near(t, "silence", got[0], FloorDBFS, 0)
	near(t, "leak", got[1], -32.02, 0.1)
	near(t, "carrying", got[2], -6, 0.1)
	near(t, "hum", got[3], -70, 0.5)

	got, err = ToneLevels(channels, []float64{997})
	if err != nil {
		t.Fatal(err)
	}
	near(t, "carrying at 997 Hz", got[2], -6, 0.1)
	if got[3] > -90 {
		t.Errorf("hum counts as %g dBFS at 997 Hz", got[3])
	}

	behindPad := newClip(48000, 8).tone(997, -75, 0, 2, 6).noise(-85, 4).hum(50, -55)
	got, err = ToneLevels([]Samples{newClip(48000, 8).noise(-85, 5).hum(50, -50), behindPad}, []float64{997})
	if err != nil {
		t.Fatal(err)
	}
	near(t, "behind a pad", got[1], -75, 0.3)
	if got[0] > -85 {
		t.Errorf("the other channel counts as %g dBFS", got[0])
	}
	if _, err := ToneLevels([]Samples{newClip(48000, 0.1)}, nil); err == nil {
		t.Error("a tenth of a second gave no error")
	}
}
