package network

// pad adds the parts, with these values.
func (s *solver) pad(c *Circuit, values []float64, omega float64) {
	s.inductive = s.inductive || c.inductive
	for i, p := range c.pins {
		s.add(between(p[0], p[1], c.parts[i].Kind, values[i], omega))
	}
}

// straight joins input to output as a cable instead of the pad does.
func (s *solver) straight() {
	s.wire(inHot, outHot)
	s.wire(inCold, outCold)
}

// plugs ties the cold pins to screen where the network or the plugs do so.
func (s *solver) plugs(unbalanced bool, e Ends) {
	if unbalanced || e.Drive == DriveUnbalanced {
		s.wire(inCold, screen)
	}
	if unbalanced || e.Sense == SenseUnbalanced {
		s.wire(outCold, screen)
	}
}

// source adds the drive with the given EMF, 0 for a dead source.
func (s *solver) source(e Ends, emf float64) {
	add := func(a, b uint8, ohms, emf float64) {
		s.add(branch{a: a, b: b, y: complex(1/ohms, 0), emf: emf, role: ofSource})
	}
	switch e.Drive {
	case DriveFloating:
		add(inHot, inCold, e.SourceOhms, emf)
	case DriveImpedanceBalanced:
		add(inHot, screen, e.SourceOhms/2, emf)
		add(inCold, screen, e.SourceOhms/2, 0)
	case DriveUnbalanced:
		add(inHot, screen, e.SourceOhms, emf)
	default:
		add(inHot, screen, e.SourceOhms/2, emf/2)
		add(inCold, screen, e.SourceOhms/2, -emf/2)
	}
}

// load adds the load and the cable.
func (s *solver) load(e Ends, omega float64) {
	switch e.Sense {
	case SenseFloating:
		s.resistor(outHot, outCold, e.LoadOhms)
	case SenseUnbalanced:
		s.resistor(outHot, screen, e.LoadOhms)
	default:
		s.legLoads(e.LoadOhms / 2)
	}
	s.cable(e, omega)
}

// legLoads loads each leg of the output to screen.
func (s *solver) legLoads(ohms float64) {
	s.resistor(outHot, screen, ohms)
	s.resistor(outCold, screen, ohms)
}

func (s *solver) resistor(a, b uint8, ohms float64) {
	br := between(a, b, Resistor, ohms, 0)
	br.role = ofLoad
	s.add(br)
}

func (s *solver) cable(e Ends, omega float64) {
	if br := between(outHot, outCold, Capacitor, e.CableFarads, omega); br.what == finite {
		br.role = ofCable
		s.add(br)
	}
}

// through is the circuit from source to load at one frequency, with 1 V of EMF: with
// the pad in circuit if values are given, else straight. Ends must be bounded.
func (c *Circuit) through(values []float64, e Ends, omega float64) *solver {
	var s *solver
	if values != nil {
		s = begin(len(c.nodes))
		s.pad(c, values, omega)
	} else {
		s = begin(terminals)
		s.straight()
	}
	s.plugs(c.unbalanced, e)
	s.source(e, 1)
	s.load(e, omega)
	s.build()
	s.solve()
	return s
}
