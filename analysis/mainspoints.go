package analysis

import "math"

// WithoutMains leaves out the points of a response that mains hum has spoiled:
// those with one of the first ten harmonics of 50 or 60 Hz in their band, or of
// mainsHz where that is not 0, that are three times less sure than both their
// neighbours. The neighbours' bands are widened to meet. Where what was played
// has no silence, hum cannot be told from it and be taken off.
func WithoutMains(points []ResponsePoint, mainsHz float64) []ResponsePoint {
	var kept []ResponsePoint
	for i, p := range points {
		spoiled := i > 0 && i+1 < len(points) && holdsMains(p, mainsHz) &&
			p.StandardUDB > 3*math.Max(points[i-1].StandardUDB, points[i+1].StandardUDB)
		if !spoiled {
			if n := len(kept); n > 0 && kept[n-1].HighHz < p.LowHz {
				middle := math.Sqrt(kept[n-1].HighHz * p.LowHz)
				kept[n-1].HighHz, p.LowHz = middle, middle
			}
			kept = append(kept, p)
		}
	}
	return kept
}

func holdsMains(p ResponsePoint, mainsHz float64) bool {
	lines := []float64{50, 60}
	if mainsHz > 0 {
		lines = []float64{mainsHz}
	}
	for _, f := range lines {
		for n := 1.0; n <= 10; n++ {
			if low, high := p.LowHz*0.995, p.HighHz*1.005; low <= n*f && n*f <= high {
				return true
			}
		}
	}
	return false
}
