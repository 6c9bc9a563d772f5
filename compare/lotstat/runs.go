package lotstat

import "math"

// beyond finds k of m points in a row that lie more than so many standard
// deviations off, on one side. Windows that touch make one stretch; it holds the
// points beyond, not those between.
func beyond(stdDevs float64, k, m int) func(z []float64) []stretch {
	return both(func(z []float64) [][]int {
		var all [][]int
		var recent []int // points beyond, the last k of them
		for i, v := range z {
			if v <= stdDevs {
				continue
			}
			if recent = append(recent, i); len(recent) > k {
				recent = recent[1:]
			}
			if len(recent) == k && i-recent[0] < m {
				all = joined(all, recent)
			}
		}
		return all
	})
}

// joined adds points to the last stretch where they share one with it, else as a
// stretch of their own.
func joined(all [][]int, points []int) [][]int {
	if n := len(all); n > 0 {
		last := all[n-1]
		end := last[len(last)-1]
		if points[0] <= end {
			for _, p := range points {
				if p > end {
					last = append(last, p)
				}
			}
			all[n-1] = last
			return all
		}
	}
	return append(all, append([]int(nil), points...))
}

// oneSide finds so many points in a row on one side of the centre. A point on
// the centre ends a run.
func oneSide(length int) func(z []float64) []stretch {
	return both(func(z []float64) [][]int {
		return runs(len(z), length, func(i int) bool { return z[i] > 0 })
	})
}

// hugging finds so many points in a row within one standard deviation.
func hugging(length int) func(z []float64) []stretch {
	return func(z []float64) []stretch {
		return plain(runs(len(z), length, func(i int) bool { return math.Abs(z[i]) < 1 }))
	}
}

// avoiding finds so many points in a row none of which lies within one standard
// deviation, with some on either side.
func avoiding(length int) func(z []float64) []stretch {
	return func(z []float64) []stretch {
		var mixed [][]int
		for _, points := range runs(len(z), length, func(i int) bool { return math.Abs(z[i]) > 1 }) {
			above := 0
			for _, p := range points {
				if z[p] > 0 {
					above++
				}
			}
			if above > 0 && above < len(points) {
				mixed = append(mixed, points)
			}
		}
		return plain(mixed)
	}
}

// steadily finds so many points in a row that each rise, or each fall.
func steadily(length int) func(z []float64) []stretch {
	return func(z []float64) []stretch {
		var all []stretch
		for _, p := range steps(len(z), length, func(i int) bool { return z[i+1] > z[i] }) {
			all = append(all, stretch{p, " higher than the one before"})
		}
		for _, p := range steps(len(z), length, func(i int) bool { return z[i+1] < z[i] }) {
			all = append(all, stretch{p, " lower than the one before"})
		}
		return all
	}
}

// alternating finds so many points in a row that go up and down in turn: each
// but the first and the last of them is a peak or a trough.
func alternating(length int) func(z []float64) []stretch {
	return func(z []float64) []stretch {
		turns := runs(len(z)-2, length-2, func(i int) bool {
			return (z[i+1]-z[i])*(z[i+2]-z[i+1]) < 0
		})
		var all [][]int
		for _, t := range turns {
			all = append(all, countFrom(t[0], len(t)+2))
		}
		return plain(all)
	}
}

// steps finds runs of points between each two of which a step holds.
func steps(n, length int, holds func(i int) bool) [][]int {
	var all [][]int
	for _, r := range runs(n-1, length-1, holds) {
		all = append(all, countFrom(r[0], len(r)+1))
	}
	return all
}

// runs finds the longest stretches of 0 to n-1 in which something holds, no
// shorter than length.
func runs(n, length int, holds func(i int) bool) [][]int {
	var all [][]int
	start := 0
	for i := 0; i <= n; i++ {
		if i < n && holds(i) {
			continue
		}
		if i-start >= length {
			all = append(all, countFrom(start, i-start))
		}
		start = i + 1
	}
	return all
}

func countFrom(first, count int) []int {
	points := make([]int, count)
	for i := range points {
		points[i] = first + i
	}
	return points
}

func plain(all [][]int) []stretch {
	var out []stretch
	for _, p := range all {
		out = append(out, stretch{p, ""})
	}
	return out
}
