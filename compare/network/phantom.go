package network

// The P48 feed of IEC 61938:2018: 48 V through 6.8 kΩ into each leg.
const (
	PhantomVolts    = 48
	PhantomFeedOhms = 6800
)

// PhantomLeg is what happens to phantom power in one leg.
type PhantomLeg struct {
	LostVolts float64 // from the out pin to the in pin
	LeftVolts float64 // in pin to screen; negative when the feed cannot give so much current
	Blocked   bool    // no direct current reaches the in pin from the out pins, or it is shorted to screen
}

// Phantom is what happens to phantom power in the pad.
type Phantom struct {
	Hot, Cold PhantomLeg
	FeedAmps  float64 // drawn from the feed in all, shunts to screen included
}

// PhantomDrop returns what the pad takes from P48 phantom power that is fed in at its
// output while a microphone at its input draws totalAmps, half from each leg, or all
// from one if the other is blocked. A leg is blocked by a series capacitor or an open
// part: then all is lost that stands at its out pin. The second result is false for an
// unbalanced network, which shorts the cold leg of the feed and is not for phantom.
func (c *Circuit) PhantomDrop(totalAmps float64) (Phantom, bool) {
	if c.unbalanced {
		return Phantom{}, false
	}
	hotOpen, coldOpen := c.phantomBlocked()
	s := begin(len(c.nodes))
	defer s.end()
	s.pad(c, c.values, 0)
	for _, pin := range []uint8{outHot, outCold} {
		s.add(branch{a: pin, b: screen, y: 1.0 / PhantomFeedOhms, emf: PhantomVolts, role: ofSource})
	}
	switch {
	case !hotOpen && !coldOpen:
		s.inject(inHot, screen, -totalAmps/2)
		s.inject(inCold, screen, -totalAmps/2)
	case !hotOpen:
		s.inject(inHot, screen, -totalAmps)
	case !coldOpen:
		s.inject(inCold, screen, -totalAmps)
	}
	s.build()
	s.solve()
	return Phantom{
		Hot:      s.phantomLeg(inHot, outHot, hotOpen),
		Cold:     s.phantomLeg(inCold, outCold, coldOpen),
		FeedAmps: (2*PhantomVolts - real(s.volts(outHot, screen)+s.volts(outCold, screen))) / PhantomFeedOhms,
	}, true
}

func (s *solver) phantomLeg(in, out uint8, blocked bool) PhantomLeg {
	at, left := real(s.volts(out, screen)), real(s.volts(in, screen))
	if blocked {
		left = 0
	}
	return PhantomLeg{LostVolts: at - left, LeftVolts: left, Blocked: blocked}
}

// phantomBlocked says for each in pin whether no chain of parts that pass direct current
// joins it to an out pin without passing the screen.
func (c *Circuit) phantomBlocked() (hot, cold bool) {
	var wired, reach links
	wired.reset(len(c.nodes))
	reach.reset(len(c.nodes))
	branches := make([]branch, len(c.pins))
	for i, p := range c.pins {
		branches[i] = between(p[0], p[1], c.parts[i].Kind, c.values[i], 0)
		if branches[i].what == link {
			wired.join(p[0], p[1])
		}
	}
	for _, b := range branches {
		p, q := wired.root(b.a), wired.root(b.b)
		if b.what != open && p != screen && q != screen {
			reach.join(p, q)
		}
	}
	blocked := func(pin uint8) bool {
		at := wired.root(pin) // the screen joins none of reach
		for _, out := range []uint8{outHot, outCold} {
			if o := wired.root(out); o != screen && reach.root(o) == reach.root(at) {
				return false
			}
		}
		return true
	}
	return blocked(inHot), blocked(inCold)
}
