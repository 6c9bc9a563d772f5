package analysis

import "testing"

func TestWithoutMains(t *testing.T) {
	var points []ResponsePoint
	for i, f := range []float64{44.7, 47.3, 50.1, 53.1, 56.2} {
		p := ResponsePoint{FreqHz: f, LowHz: f / 1.03, HighHz: f * 1.03, StandardUDB: 0.01}
		if i == 2 {
			p.StandardUDB = 0.3
		}
		points = append(points, p)
	}
	if got := WithoutMains(points, 60); len(got) != 5 {
		t.Errorf("at 60 Hz mains %d points are left, want all 5", len(got))
	}
	got := WithoutMains(points, 0)
	if len(got) != 4 {
		t.Fatalf("%d points are left, want 4", len(got))
	}
	if below, above := got[1], got[2]; below.HighHz != above.LowHz || below.FreqHz != 47.3 || above.FreqHz != 53.1 {
		t.Errorf("the neighbours end at %.2f and begin at %.2f Hz, want them to meet", below.HighHz, above.LowHz)
	}
	points[2].StandardUDB = 0.02
	if got := WithoutMains(points, 50); len(got) != 5 {
		t.Errorf("a point hardly less sure is left out")
	}
}
