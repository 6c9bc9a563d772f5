package sheet

// Limits are what is asked of a pad. A nil limit was left out; one that is set
// must be proven.
type Limits struct {
	LossPlusMinusDB     *float64 // about the marked or computed loss
	LossNominalDB       *float64 // the marked loss, 0 or more; the computed one if nil
	ResponsePlusMinusDB *float64 // about the designed curve on this bench
	FlatnessPlusMinusDB *float64 // of the service curve, the tone at 0
	ResponseFromHz      float64  // of both; 20 if left out
	ResponseToHz        float64  // of both; 20000 if left out
	NoiseOverThermalDB  *float64
	NoiseMaxDBu         *float64
	DistortionMaxDB     *float64 // harmonics 2 to 10 relative to the tone, below 0
	HumMaxDBu           *float64
	LegMatchDB          *float64
	SteadyWithinDB      *float64
	BypassWithinDB      *float64
	SamePolarity        bool   // false if left out: not asked for
	RequireTestSignal   bool   // false if left out
	Decision            string // "guarded" (also if left out) or "shared"
}

// The ranges of limits. A limit of 0 could never be proven.
var (
	widthSpan = span{from: 0, to: 100, open: true, mend: "write how far it may be off, as a positive number of dB: 0.3"}
	lossSpan  = span{from: 0, to: 200, mend: "a loss is a positive number of dB: 14.0"}
	dbuSpan   = span{from: -250, to: 60, mend: "write dBu, negative for what is small: -90.0"}
	harmSpan  = span{from: -250, to: -1e-3, mend: "write dB relative to the tone, below 0: -80.0"}
	freqSpan  = span{from: 0, to: 1e6, open: true, mend: "write hertz: 20"}
)

// limits reads the [limits] section; without it nothing is asked for.
func (t *table) limits() Limits {
	s, _ := t.section("limits")
	l := Limits{
		LossPlusMinusDB:     s.number("loss_plus_minus_db", widthSpan),
		LossNominalDB:       s.number("loss_nominal_db", lossSpan),
		ResponsePlusMinusDB: s.number("response_plus_minus_db", widthSpan),
		FlatnessPlusMinusDB: s.number("flatness_plus_minus_db", widthSpan),
		NoiseOverThermalDB:  s.number("noise_over_thermal_db", widthSpan),
		NoiseMaxDBu:         s.number("noise_max_dbu", dbuSpan),
		DistortionMaxDB:     s.number("distortion_max_db", harmSpan),
		HumMaxDBu:           s.number("hum_max_dbu", dbuSpan),
		LegMatchDB:          s.number("leg_match_db", widthSpan),
		SteadyWithinDB:      s.number("steady_within_db", widthSpan),
		BypassWithinDB:      s.number("bypass_within_db", widthSpan),
		SamePolarity:        s.truth("same_polarity"),
		RequireTestSignal:   s.truth("require_test_signal"),
		Decision:            s.word("decision", "guarded", "shared"),
	}
	if l.Decision == "" {
		l.Decision = "guarded"
	}
	s.responseBand(&l)
	return l
}

// responseBand reads the band of response and flatness.
func (t *table) responseBand(l *Limits) {
	l.ResponseFromHz, l.ResponseToHz = 20, 20000
	from, to := t.number("response_from_hz", freqSpan), t.number("response_to_hz", freqSpan)
	if from != nil {
		l.ResponseFromHz = *from
	}
	if to != nil {
		l.ResponseToHz = *to
	}
	if l.ResponseFromHz < l.ResponseToHz {
		return
	}
	key := "response_from_hz"
	if from == nil {
		key = "response_to_hz"
	}
	t.fail(key, "leaves no band: it begins at or above its end", "write the lower edge first; left out they are 20 and 20000")
}
