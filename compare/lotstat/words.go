package lotstat

import (
	"fmt"
	"math"
	"time"
)

// signedDB is "+0.12 dB", "-0.034 dB"; a figure that is next to nothing is "0.00 dB".
func signedDB(db float64) string {
	switch size := math.Abs(db); {
	case size < leastSaid:
		return "0.00 dB"
	case size >= 0.095:
		return fmt.Sprintf("%+.2f dB", db)
	}
	return fmt.Sprintf("%+.2g dB", db)
}

// sizeDB is a size with digits enough for two that count: "0.12 dB", "0.0034 dB".
func sizeDB(db float64) string {
	switch size := math.Abs(db); {
	case size < leastSaid:
		return "under 0.0001 dB"
	case size >= 0.095:
		return fmt.Sprintf("%.2f dB", size)
	default:
		return fmt.Sprintf("%.2g dB", size)
	}
}

// leastSaid is the size in dB under which no figure is said.
const leastSaid = 1e-4

// ageText is an age in the largest unit that gives two or more of it.
func ageText(age time.Duration) string {
	switch hours := age.Hours(); {
	case hours >= 48:
		return fmt.Sprintf("%.0f days", hours/24)
	case hours >= 2:
		return fmt.Sprintf("%.0f hours", hours)
	}
	return fmt.Sprintf("%.0f minutes", age.Minutes())
}

// percent is a share, or a relative change without its sign: "3.5 %", "12 %", "0.80 %".
func percent(frac float64) string {
	p := 100 * math.Abs(frac)
	switch {
	case p >= 10:
		return fmt.Sprintf("%.0f %%", p)
	case p >= 1:
		return fmt.Sprintf("%.1f %%", p)
	case p < 0.01:
		return "under 0.01 %"
	}
	return fmt.Sprintf("%.2g %%", p)
}
