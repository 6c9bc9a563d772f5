package lotstat

import (
	"testing"
	"time"
)

func TestWords(t *testing.T) {
	for _, c := range []struct{ got, want string }{
		{signedDB(0.123), "+0.12 dB"}, {signedDB(-0.0341), "-0.034 dB"}, {signedDB(1e-5), "0.00 dB"}, {signedDB(-12.345), "-12.35 dB"},
		{sizeDB(-0.123), "0.12 dB"}, {sizeDB(0.00341), "0.0034 dB"}, {sizeDB(0), "under 0.0001 dB"}, {sizeDB(0.0998), "0.10 dB"},
		{percent(0.0351), "3.5 %"}, {percent(-0.121), "12 %"}, {percent(0.0081), "0.81 %"}, {percent(1.234), "123 %"}, {percent(0), "under 0.01 %"},
		{ageText(90 * time.Minute), "90 minutes"}, {ageText(13 * time.Hour), "13 hours"}, {ageText(100 * time.Hour), "4 days"},
		{listed([]string{"R1"}), "R1"}, {listed([]string{"R1", "R2", "R3"}), "R1, R2 and R3"},
		{pointsText([]int{3}), "point 4"}, {pointsText([]int{3, 4}), "points 4 to 5"}, {pointsText([]int{3, 5}), "points 4, 6"},
	} {
		if c.got != c.want {
			t.Errorf("%q, want %q", c.got, c.want)
		}
	}
}
