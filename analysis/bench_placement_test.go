package analysis

import "testing"

func BenchmarkFindSignal(b *testing.B) {
	c := player{48000}.take(48000, 1, 1.0001, 25, -20).noise(-90, 1)
	tones, err := FindTones(c)
	if err != nil {
		b.Fatal(err)
	}
	b.Run("hint", func(b *testing.B) {
		for range b.N {
			if _, err := FindSignal(c, tones...); err != nil {
				b.Fatal(err)
			}
		}
	})
	b.Run("everywhere", func(b *testing.B) {
		for range b.N {
			if _, err := newMarkerFinder(c).everywhere(); err != nil {
				b.Fatal(err)
			}
		}
	})
	b.Run("full pass", func(b *testing.B) {
		for range b.N {
			if _, err := MeasureTones(c, tones); err != nil {
				b.Fatal(err)
			}
		}
	})
}

func BenchmarkResponse(b *testing.B) {
	c := player{48000}.take(48000, 1, 1.0001, 25, -20).noise(-90, 1).hum(50, -80)
	p, err := FindSignal(c)
	if err != nil {
		b.Fatal(err)
	}
	for range b.N {
		if _, err := Response(c, p, c, p); err != nil {
			b.Fatal(err)
		}
	}
}
