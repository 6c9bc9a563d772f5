package lotstat

import (
	"fmt"
	"math"
	"time"
)

// signedDB is "+0.12 dB"; a figure that rounds to nothing is "0.00 dB".
func signedDB(db float64) string {
	if math.Abs(db) < 0.005 {
		return "0.00 dB"
	}
	return fmt.Sprintf("%+.2f dB", db)
}

// sizeDB is a size with digits enough for two that count: "0.12 dB", "0.0034 dB".
func sizeDB(db float64) string {
	db = math.Abs(db)
	if db >= 0.095 {
		return fmt.Sprintf("%.2f dB", db)
	}
	return fmt.Sprintf("%.2g dB", db)
}

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

// percent is a relative change without its sign: "3.5 %", "12 %", "0.80 %".
func percent(frac float64) string {
	p := 100 * math.Abs(frac)
	switch {
	case p >= 10:
		return fmt.Sprintf("%.0f %%", p)
	case p >= 1:
		return fmt.Sprintf("%.1f %%", p)
	}
	return fmt.Sprintf("%.2g %%", p)
}
