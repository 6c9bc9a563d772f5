package network

import (
	"math"
	"sync"
)

// A solver works out one circuit at one frequency. It is filled (wire, add, inject),
// built and then solved; volts reads the answer.
//
// Nodes are removed one after another by the star-mesh transformation: a node k with
// branches y to its neighbours is replaced by a branch y_i·y_j/Σy between every two
// of them. For resistors this adds and multiplies positive numbers only, so that no
// digits are lost however far apart the values are; it is Gaussian elimination
// arranged that way (common practice, no source). Sources are kept as currents
// between pairs of nodes and treated alike. A part of the circuit that nothing ties
// to screen needs no care: its last node has no neighbour left and is put at 0 V.
type solver struct {
	drawn     int             // nodes as drawn
	tied      links           // drawn nodes joined by wires and links
	number    [maxNodes]uint8 // drawn node to solved node
	branches  []branch
	injected  []injection
	inductive bool

	n        int   // solved nodes; 0 is the screen
	floating bool  // the load is open and only that would tie the output to screen
	islands  links // solved nodes that branches join
	y        []complex128
	j        []complex128 // y[k*n+i] between k and i; j[k*n+i] into k out of i
	inv      [maxNodes]complex128
	order    [maxNodes]uint8 // of removal, from the last to the first
	v        [maxNodes]complex128
	adjoint  [maxNodes]complex128
	returned [maxNodes]complex128
}

type injection struct {
	a, b uint8
	amps float64
}

var solvers = sync.Pool{New: func() any { return new(solver) }}

// begin takes a solver for a circuit of so many nodes; give it back with end.
func begin(nodes int) *solver {
	s := solvers.Get().(*solver)
	s.drawn = nodes
	s.tied.reset(nodes)
	s.branches = s.branches[:0]
	s.injected = s.injected[:0]
	s.inductive = false
	return s
}

func (s *solver) end() { solvers.Put(s) }

// wire joins two drawn nodes.
func (s *solver) wire(a, b uint8) { s.tied.join(a, b) }

// add puts a branch between two drawn nodes.
func (s *solver) add(b branch) {
	if b.what == link {
		s.tied.join(b.a, b.b)
	}
	s.branches = append(s.branches, b)
}

// inject drives a current into drawn node a, out of b.
func (s *solver) inject(a, b uint8, amps float64) {
	s.injected = append(s.injected, injection{a, b, amps})
}

// build numbers the nodes that links left apart and fills the matrix.
func (s *solver) build() {
	s.n = 0
	for i := range s.drawn {
		if s.tied.up[i] == uint8(i) {
			s.number[i] = uint8(s.n)
			s.n++
			continue
		}
		s.number[i] = s.number[s.tied.root(uint8(i))] // a root is always lower
	}
	size := s.n * s.n
	if cap(s.y) < size {
		s.y, s.j = make([]complex128, size), make([]complex128, size)
	}
	s.y, s.j = s.y[:size], s.j[:size]
	clear(s.y)
	clear(s.j)
	s.islands.reset(s.n)
	for _, b := range s.branches {
		if b.what == finite {
			s.stamp(b.a, b.b, b.y, b.y*complex(b.emf, 0))
		}
	}
	s.openLoads()
	for _, c := range s.injected {
		s.stamp(c.a, c.b, 0, complex(c.amps, 0))
	}
}

// openLoads stands for the limit of an ever higher load. Where nothing else joins its
// ends no current can flow, so any conductance will do; elsewhere it has none.
func (s *solver) openLoads() {
	s.floating = false
	for _, b := range s.branches {
		if b.what != open || b.role != ofLoad || s.joined(b.a, b.b) {
			continue
		}
		s.floating = s.floating || b.b == screen && s.joined(outHot, outCold)
		s.stamp(b.a, b.b, 1, 0)
	}
}

func (s *solver) stamp(a, b uint8, y, amps complex128) {
	k, i := int(s.number[a]), int(s.number[b])
	if k == i {
		return
	}
	if y != 0 {
		s.islands.join(uint8(k), uint8(i))
	}
	n := s.n
	s.y[k*n+i] += y
	s.y[i*n+k] += y
	s.j[k*n+i] += amps
	s.j[i*n+k] -= amps
}

// joined reports whether current could flow between two drawn nodes.
func (s *solver) joined(a, b uint8) bool {
	return s.islands.root(s.number[a]) == s.islands.root(s.number[b])
}

// solve finds the voltage of every node.
func (s *solver) solve() {
	for k := range s.n {
		s.order[k] = uint8(k)
	}
	for k := s.n - 1; k > 0; k-- {
		if s.inductive {
			s.choose(k)
		}
		s.remove(k)
	}
	s.v[0] = 0
	n := s.n
	for k := 1; k < n; k++ {
		p := int(s.order[k])
		var amps complex128
		for _, i := range s.order[:k] {
			amps += s.y[p*n+int(i)]*s.v[i] + s.j[p*n+int(i)]
		}
		s.v[p] = amps * s.inv[p]
	}
}

// remove replaces node order[k] by a mesh between the nodes before it.
func (s *solver) remove(k int) {
	n := s.n
	left := s.order[:k]
	p := int(s.order[k])
	y, j := s.y[p*n:p*n+n], s.j[p*n:p*n+n]
	var sum complex128
	for _, i := range left {
		sum += y[i]
	}
	inv := inverse(sum)
	s.inv[p] = inv
	if inv == 0 {
		return
	}
	for at, i := range left {
		fy, fj := y[i]*inv, j[i]*inv
		if fy == 0 && fj == 0 {
			continue
		}
		row := int(i) * n
		for _, q := range left[:at] {
			dy := fy * y[q]
			dj := fy*j[q] - fj*y[q]
			back := int(q)*n + int(i)
			s.y[row+int(q)] += dy
			s.y[back] += dy
			s.j[row+int(q)] += dj
			s.j[back] -= dj
		}
	}
}

// choose puts at order[k] the node whose branches cancel least: at resonance the sum
// of a node's branches may be nothing. The output keeps its place.
func (s *solver) choose(k int) {
	best, at := -1.0, k
	last := max(s.number[outHot], s.number[outCold])
	for c := k; c > min(int(last), k-1); c-- {
		p := int(s.order[c])
		var sum complex128
		var size float64
		for _, i := range s.order[:k+1] {
			y := s.y[p*s.n+int(i)]
			if int(i) != p {
				sum += y
				size += square(y)
			}
		}
		if size == 0 {
			continue
		}
		if r := square(sum) / size; r > best {
			best, at = r, c
		}
	}
	s.order[k], s.order[at] = s.order[at], s.order[k]
	if best >= 0 && best < 1e-28 {
		s.damp(k)
	}
}

// damp gives a lossless resonance the least loss that the arithmetic can hold, so that
// its voltage stays finite: a part in 1e13 of the node's largest branch, to each
// neighbour.
func (s *solver) damp(k int) {
	p := int(s.order[k])
	for _, i := range s.order[:k] {
		y := s.y[p*s.n+int(i)]
		y += complex(1e-13*(math.Abs(real(y))+math.Abs(imag(y))), 0)
		s.y[p*s.n+int(i)] = y
		s.y[int(i)*s.n+p] = y
	}
}

// solveAdjoint finds the voltage of every node when the circuit's sources are dead and
// 1 A goes into drawn node a, out of b. It follows solve.
func (s *solver) solveAdjoint(a, b uint8) {
	n := s.n
	clear(s.returned[:n])
	s.returned[s.number[a]]++
	s.returned[s.number[b]]--
	for k := n - 1; k > 0; k-- {
		p := int(s.order[k])
		f := s.returned[p] * s.inv[p]
		for _, i := range s.order[:k] {
			s.returned[i] += f * s.y[p*n+int(i)]
		}
	}
	s.adjoint[0] = 0
	for k := 1; k < n; k++ {
		p := int(s.order[k])
		amps := s.returned[p]
		for _, i := range s.order[:k] {
			amps += s.y[p*n+int(i)] * s.adjoint[i]
		}
		s.adjoint[p] = amps * s.inv[p]
	}
}

// volts returns the voltage from drawn node a to b.
func (s *solver) volts(a, b uint8) complex128 {
	return s.v[s.number[a]] - s.v[s.number[b]]
}

// loadVolts returns the voltage from out.hot to out.cold. As both are removed last, after
// which only the screen is left, their difference is had without subtracting the one
// from the other: nothing is lost under a high common voltage.
func (s *solver) loadVolts() complex128 {
	hot, cold := int(s.number[outHot]), int(s.number[outCold])
	if hot < 2 || cold != 1 {
		return s.v[hot] - s.v[cold]
	}
	row := hot * s.n
	return s.inv[hot] * (s.j[row] + s.j[row+cold] - s.y[row]*s.v[cold])
}

// adjointVolts is volts for solveAdjoint.
func (s *solver) adjointVolts(a, b uint8) complex128 {
	return s.adjoint[s.number[a]] - s.adjoint[s.number[b]]
}

// inverse returns 1/z, and 0 where z is nothing: the last node of an island.
func inverse(z complex128) complex128 {
	d := square(z)
	if d < 1e-280 {
		return 0
	}
	return complex(real(z)/d, -imag(z)/d)
}

func square(z complex128) float64 { return real(z)*real(z) + imag(z)*imag(z) }
