package rehearsal

import (
	"errors"
	"math/cmplx"

	"padproof/analysis"
	"padproof/compare/network"
)

// A path is what lies between the signal and one channel of the recorder.
type path struct {
	response func(freqHz float64) complex128 // nil: none, all frequencies alike
	gainDB   float64
	roughly  bool // 0.0001 dB will do for the response: it is for noise
}

// A recipe says how one take is made. Lies change it.
type recipe struct {
	role   string
	source source // its tone, if it has one, at full scale
	gainDB float64
	paths  []path // one a channel

	// What more happens to each channel, made anew for each: on its way to the recorder; in the
	// recorder, with noise and hum there; to the samples, rounding apart.
	onTheWay, inRecorder, toSamples []func() effect

	afterwards func(file string) error // what happens to the finished file; may be nil
}

// recipe says how the take of a role is made.
func (p Plan) recipe(role string) (recipe, error) {
	r := recipe{role: role, source: p.signal(), gainDB: p.LevelDBFS}
	full, err := p.fullVolts()
	if err != nil {
		return r, err
	}
	p.lay(&r, full)
	for _, word := range p.Lies {
		if l, ok := lieOf(word); ok && l.bend != nil {
			l.bend(p, &r)
		}
	}
	return r, nil
}

// lay gives a recipe its paths, and its source where that is not the plan's signal.
func (p Plan) lay(r *recipe, full complex128) {
	b := p.Bench
	afterDB := b.AfterGainDB + b.OffsetDB
	switch r.role {
	case "before":
		r.paths = []path{p.straight(full, 0)}
	case "before-again":
		r.paths = []path{p.straight(full, b.AgainDB)}
	case "after", "after-again":
		r.paths = []path{p.through(p.Pad, full, afterDB)}
	case "flex":
		r.source = steadyTone(p.heardHz(), p.Signal.FreqHz(), p.steadySec(r.role))
		r.paths, r.onTheWay = []path{p.through(p.Pad, full, afterDB)}, p.flexing()
	case "before-loaded":
		r.paths = []path{p.through(p.between(0, b.LoadedOhms), full, 0)}
	case "bypass":
		r.paths = []path{p.through(p.between(b.BypassOhms, 0), full, afterDB)}
	case "calibration":
		r.source = steadyTone(p.heardHz(), CalibrationHz, p.steadySec(r.role))
		r.gainDB, r.paths = dBuFromVolts(b.CalibrationVolts)-b.FullScaleDBu, []path{{}}
	case rigNoise, padNoise:
		r.source = whiteNoise(float64(p.RateHz), p.NoiseSec, randomFor(p.Seed, r.role+": thermal"))
		r.gainDB, r.paths = 0, []path{p.noisePath(r.role)}
	case "legs":
		r.paths = p.legs(full, afterDB, func(_, withPad network.Legs) network.Legs { return withPad })
	case "legs-before":
		r.paths = p.legs(full, 0, func(straight, _ network.Legs) network.Legs { return straight })
	case "both":
		r.paths = []path{p.straight(full, 0), p.through(p.Pad, full, afterDB+b.ChannelDB+b.OutputsDB)}
	}
}

// straight is the path of the load's volts with a cable in the pad's place.
func (p Plan) straight(full complex128, gainDB float64) path {
	return path{gainDB: gainDB, response: func(freqHz float64) complex128 {
		v, _ := p.Pad.LoadVolts(p.Bench.Ends, freqHz)
		return v / full
	}}
}

// through is the path of the load's volts with a circuit in the pad's place.
func (p Plan) through(c *network.Circuit, full complex128, gainDB float64) path {
	return path{gainDB: gainDB, response: func(freqHz float64) complex128 {
		_, v := c.LoadVolts(p.Bench.Ends, freqHz)
		return v / full
	}}
}

// legs are the paths of the volts of each leg, straight through or with the pad.
func (p Plan) legs(full complex128, gainDB float64, of func(straight, withPad network.Legs) network.Legs) []path {
	at := func(freqHz float64) network.Legs {
		return of(p.Pad.LegVolts(p.Bench.Ends, p.Bench.LegsLoadOhms, freqHz))
	}
	return []path{
		{gainDB: gainDB, response: func(freqHz float64) complex128 { return at(freqHz).Hot / full }},
		{gainDB: gainDB + p.Bench.ChannelDB, response: func(freqHz float64) complex128 { return at(freqHz).Cold / full }},
	}
}

// fullVolts is the load's voltage straight through at the tone, per volt of EMF: what reads the
// plan's level. Its size alone counts, since at 0 Hz a response must stay real.
func (p Plan) fullVolts() (complex128, error) {
	straight, _ := p.Pad.LoadVolts(p.Bench.Ends, p.Signal.FreqHz())
	if straight == 0 {
		return 0, errors.New("nothing comes through this bench even without the pad")
	}
	return complex(cmplx.Abs(straight), 0), nil
}

// between is what stands in the pad's place: its legs joined by so many ohms each, and a resistor
// across the output where it has any ohms.
func (p Plan) between(legOhms, acrossOhms float64) *network.Circuit {
	parts := []network.Part{{Ref: "hot", Value: legOhms, A: "in.hot", B: "out.hot"}}
	cold := "out.cold"
	if p.Pad.Balanced() {
		parts = append(parts, network.Part{Ref: "cold", Value: legOhms, A: "in.cold", B: "out.cold"})
	} else {
		cold = "screen"
	}
	if acrossOhms > 0 {
		parts = append(parts, network.Part{Ref: "across", Value: acrossOhms, A: "out.hot", B: cold})
	}
	c, err := network.New(network.Custom, parts)
	if err != nil {
		panic(err) // the ohms are checked
	}
	return c
}

// signal plays what the plan says.
func (p Plan) signal() source {
	if p.Signal.Test {
		return testSignal(float64(p.RateHz), p.ratio())
	}
	return steadyTone(p.heardHz(), p.Signal.ToneHz, p.Signal.Sec)
}

// ratio is how many samples the recorder takes while the player gives one.
func (p Plan) ratio() float64 { return 1 + p.DriftPPM*1e-6 }

// heardHz is the rate that the recorder has by the player's clock: closed forms that are evaluated
// at it come out as they are heard.
func (p Plan) heardHz() float64 { return float64(p.RateHz) * p.ratio() }

// tone returns the recorder's frames between which the tone stands.
func (p Plan) tone(role string) (from, to int64) {
	startSec, sec := SilenceSec, p.steadySec(role)
	if p.Signal.Test && role != "flex" && role != "calibration" {
		for _, g := range analysis.Schedule(float64(p.RateHz)) {
			if g.Kind == analysis.SteadyTone {
				startSec, sec = g.StartSec, g.LengthSec
				break
			}
		}
	}
	return int64(startSec * p.heardHz()), int64((startSec + sec) * p.heardHz())
}

// steadySec is how long a steady tone lasts in a take.
func (p Plan) steadySec(role string) float64 {
	switch {
	case !p.Signal.Test:
		return p.Signal.Sec
	case role == "flex":
		return flexSec
	}
	return calibrationSec
}

const (
	flexSec        = 10.0
	calibrationSec = 4.0
)

// scene sets up one take.
func (p Plan) scene(r recipe) (scene, error) {
	s := scene{source: r.source}
	for i, way := range r.paths {
		effects := []effect{gain(analysis.RatioFromDB(r.gainDB + way.gainDB))}
		if way.response != nil {
			taps, err := kernelFor(float64(p.RateHz), way)
			if err != nil {
				return s, err
			}
			effects = append(effects, newFilter(taps))
		}
		effects = append(effects, made(r.onTheWay)...)
		s.channels = append(s.channels, append(effects, p.recorder(r, i)...))
	}
	return s, nil
}

// kernelFor makes the taps for a path.
func kernelFor(rateHz float64, way path) ([]float64, error) {
	if way.roughly {
		return kernelWithin(rateHz, roughFrac, way.response)
	}
	return kernel(rateHz, way.response)
}

// recorder is what the recorder itself does on one channel.
func (p Plan) recorder(r recipe, channel int) []effect {
	purpose := r.role
	if channel > 0 {
		purpose += ", second channel"
	}
	var effects []effect
	if p.HumDBFS > offDBFS {
		effects = append(effects, newHum(p.HumDBFS, p.mainsHz(), p.heardHz(), randomFor(p.Seed, r.role+": hum")))
	}
	n := noise{noiseRMS(p.NoiseDBFS, float64(p.RateHz)), randomFor(p.Seed, purpose+": noise")}
	effects = append(append(effects, n), made(r.inRecorder)...)
	if !p.Float && n.rms < p.step()/2 {
		effects = append(effects, dither{p.step(), randomFor(p.Seed, purpose+": dither")})
	}
	return append(effects, made(r.toSamples)...)
}

// mainsHz is the mains line, 50 Hz where the rig does not say.
func (p Plan) mainsHz() float64 {
	const usualHz = 50
	if p.Bench.MainsHz > 0 {
		return p.Bench.MainsHz
	}
	return usualHz
}

func made(makers []func() effect) (effects []effect) {
	for _, m := range makers {
		effects = append(effects, m())
	}
	return effects
}
