package network

// links says which nodes are joined into one (union-find). The lowest number of a
// set stands for it, so the screen stands for all that is tied to it.
type links struct {
	up [maxNodes]uint8
}

// reset parts nodes 0 to n-1.
func (l *links) reset(n int) {
	for i := range n {
		l.up[i] = uint8(i)
	}
}

// root returns the number that stands for the set of a node.
func (l *links) root(a uint8) uint8 {
	for l.up[a] != a {
		l.up[a] = l.up[l.up[a]]
		a = l.up[a]
	}
	return a
}

// join makes two nodes one and reports whether they were apart.
func (l *links) join(a, b uint8) bool {
	a, b = l.root(a), l.root(b)
	if a == b {
		return false
	}
	l.up[max(a, b)] = min(a, b)
	return true
}
