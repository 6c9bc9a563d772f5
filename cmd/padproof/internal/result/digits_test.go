package result

import (
	"math"
	"testing"
)

func TestPlaces(t *testing.T) {
	for _, tt := range []struct {
		u    Number
		want int
	}{
		{0.00012, 3}, {0.012, 3}, {0.12, 2}, {1.2, 1}, {12, 0}, {1200, 0}, {0.1, 2}, {1, 1},
		{0, 3}, {-1, 3}, {Missing, 3}, {Number(math.Inf(1)), 3}, {math.SmallestNonzeroFloat64, 3}, {math.MaxFloat64, 0},
	} {
		if got := Places(tt.u); got != tt.want {
			t.Errorf("Places(%v) = %d, want %d", tt.u, got, tt.want)
		}
	}
}

func TestFixed(t *testing.T) {
	for _, tt := range []struct {
		n      Number
		places int
		want   string
	}{
		{13.966, 2, "13.97"}, {-0.0004, 3, "0.000"}, {-0.0006, 3, "-0.001"}, {-0.2, 0, "0"}, {1e3, 0, "1000"},
		{Missing, 2, "none"}, {Number(math.Inf(-1)), 2, "none"},
	} {
		if got := tt.n.Fixed(tt.places, "none"); got != tt.want {
			t.Errorf("(%v).Fixed(%d) = %q, want %q", tt.n, tt.places, got, tt.want)
		}
	}
}

// The next prefix begins where rounding would give 1000 of the one before.
func TestOhms(t *testing.T) {
	for _, tt := range []struct {
		n      Number
		digits int
		want   string
	}{
		{4.7, 3, "4.7 Ω"}, {330, 3, "330 Ω"}, {999.4, 3, "999 Ω"}, {999.5, 3, "1 kΩ"}, {999.5, 4, "999.5 Ω"},
		{10000, 3, "10 kΩ"}, {1118.2, 4, "1.118 kΩ"}, {999499, 3, "999 kΩ"}, {999500, 3, "1 MΩ"}, {2.2e9, 3, "2200 MΩ"},
		{0, 3, "0 Ω"}, {0.0047, 3, "0.0047 Ω"}, {Missing, 3, "open"}, {Number(math.Inf(1)), 4, "open"},
	} {
		if got := tt.n.Ohms(tt.digits); got != tt.want {
			t.Errorf("(%v).Ohms(%d) = %q, want %q", tt.n, tt.digits, got, tt.want)
		}
	}
}

func TestDigits(t *testing.T) {
	for _, tt := range []struct {
		v      float64
		digits int
		want   string
	}{
		{12345, 3, "12345"}, {-31.42, 3, "-31.4"}, {0.5, 2, "0.5"}, {0.00123456, 3, "0.00123"}, {0, 3, "0"},
		{math.NaN(), 3, "NaN"}, {math.Inf(1), 3, "+Inf"},
	} {
		if got := Digits(tt.v, tt.digits); got != tt.want {
			t.Errorf("Digits(%v, %d) = %q, want %q", tt.v, tt.digits, got, tt.want)
		}
	}
}
