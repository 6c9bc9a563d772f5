package lotstat

import (
	"fmt"
	"math"
)

// drift looks for a slow drift: the moving average of the readings in order,
// about the mean of the first eight of them. The limits allow for the doubt of
// that mean too: with weight w the average varies by w/(2-w) of the variance of a
// reading, the mean by 1/8 of it.
func (c *RigCheck) drift(history []float64) {
	if c.State != RigOK || len(history) < 2*rigHistory {
		return
	}
	first := meanOf(history[:rigHistory])
	s := math.Max(meanOf(movingRanges(history))/rangeD2, rigResolutionDB)
	const share = EWMAWeight / (2 - EWMAWeight)
	wide := EWMAStdDevs * math.Sqrt(1+1/(rigHistory*share))
	e, err := ReadEWMA(history[rigHistory:], first, s, EWMAWeight, wide)
	if err != nil || len(e.Beyond) == 0 {
		return
	}
	last := len(e.Values) - 1
	if e.Beyond[len(e.Beyond)-1] != last {
		return
	}
	c.Drifting = true
	c.Text += fmt.Sprintf("; its average has moved from %s to %s: the bench drifts", signedDB(first), signedDB(e.Values[last]))
}
