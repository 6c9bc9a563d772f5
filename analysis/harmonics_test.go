package analysis

import (
	"fmt"
	"math"
	"testing"
)

// Harmonics as they were made, within 1 dB from 10 dB above the noise in their bins, and each
// inside its own uncertainty in most takes.
func TestHarmonics(t *testing.T) {
	inside, all := 0, 0
	for seed := range uint64(40) {
		c := newClip([]float64{44100, 48000}[seed%2], 5).tone(997, -10, 0, 0, 5).noise(-70, seed)
		// Noise of -70 dBFS over 20 kHz, nine bins of 1.35 or 1.46 Hz: -102 dBFS.
		want := map[int]float64{2: -75, 3: -80, 5: -81.5, 10: -60}
		for number, db := range want {
			c.tone(997*float64(number), -10+db, float64(seed)+float64(number), 0, 5)
		}
		m := measureAll(t, c)
		harmonics := m.Tones[0].Harmonics()
		if len(harmonics) != 9 {
			t.Fatalf("%d harmonics, want 9", len(harmonics))
		}
		for _, h := range harmonics {
			power := 0.0
			if db, ok := want[h.Number]; ok {
				power = math.Pow(10, db/10)
				near(t, fmt.Sprintf("take %d: harmonic %d", seed, h.Number), 10*math.Log10(h.Power), db, 1)
			}
			all++
			if math.Abs(h.Power-power) <= 2*h.StandardU {
				inside++
			}
		}
	}
	// 360 at 95 % scatter by 1.2 %.
	if share := float64(inside) / float64(all); share < 0.92 || share > 0.99 {
		t.Errorf("%.3f of the harmonics inside two standard uncertainties, want 0.92 to 0.99", share)
	}
}

// The noise floor is no distortion: with none, the sum lies about 0, and the most is a bound that
// holds.
func TestDistortionOfNoiseAlone(t *testing.T) {
	shows, takes := 0, 40
	sum, square := 0.0, 0.0
	for seed := range takes {
		c := newClip(48000, 4).tone(997, -20, 0, 0, 4).noise(-60, uint64(seed))
		d := measureAll(t, c).Tones[0].Distortion()
		if d.Shows() {
			shows++
		}
		z := d.Power / d.StandardU
		sum, square = sum+z, square+z*z
	}
	if shows > 4 { // 2.5 % of 40 is 1
		t.Errorf("distortion shows in %d of %d takes without any", shows, takes)
	}
	if mean := sum / float64(takes); math.Abs(mean) > 0.6 {
		t.Errorf("mean of the sums is %.2f standard uncertainties, want about 0", mean)
	}
	if rms := math.Sqrt(square / float64(takes)); rms < 0.6 || rms > 1.4 {
		t.Errorf("the sums scatter by %.2f standard uncertainties, want about 1", rms)
	}
}

// Powers add: two of -80 dB are -76.99 dB. Above 20 kHz none counts.
func TestDistortionAddsByPower(t *testing.T) {
	c := newClip(96000, 4).tone(4000, -6, 0, 0, 4).tone(8000, -86, 1, 0, 4).tone(12000, -86, 2, 0, 4).tone(24000, -40, 0, 0, 4).noise(-130, 1)
	d := measureAll(t, c).Tones[0].Distortion()
	near(t, "distortion", 10*math.Log10(d.Power), -80+10*math.Log10(2), 0.02)
	if d.Harmonics != 3 {
		t.Errorf("%d harmonics of 4 kHz below 20 kHz, want 3", d.Harmonics)
	}
	if d := (Tone{}).Distortion(); d.Harmonics != 0 || d.Shows() {
		t.Errorf("distortion of no spectrum = %+v, want none", d)
	}
}
