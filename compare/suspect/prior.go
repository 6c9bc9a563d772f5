package suspect

import "padproof/compare/network"

// How often what goes wrong, before anything is measured, against one another: see the package doc.
// All are common practice, no source.
const (
	openShare      = 2.0  // a joint left out, a cracked part
	shortShare     = 1.1  // a bridge of solder
	decadeShare    = 1.0  // the multiplier misread, each way
	neighbourShare = 0.7  // the drawer beside, each way
	driftShare     = 2.0  // overheated, damp, aged
	swapShare      = 2.0  // each pair
	legOpenShare   = 1.5  // a broken wire, a plug not soldered
	legScreenShare = 1.25 // a strand of the screen
	crossedShare   = 1.5  // hot for cold
	endsShare      = 1.5  // the pad the wrong way round
	endShare       = 1.5  // source or load, each
)

// What part of all units that come here is sound, and has something wrong that is none of these.
const (
	soundPrior = 0.5
	nonePrior  = 0.1
	faultPrior = 1 - soundPrior - nonePrior
)

// Sizes of a drift, as the logarithm of a ratio: 3 % to threefold.
const (
	leastDrift = 0.029558802241544403 // ln 1.03
	mostDrift  = 1.0986122886681098   // ln 3
	mostRatio  = 2.302585092994046    // ln 10, of an end of the bench
)

// share is the prior of a fault against others.
func (f Fault) share() float64 {
	if f.End != NoEnd {
		return endShare
	}
	switch f.Form {
	case network.PartOpen:
		return openShare
	case network.PartShort:
		return shortShare
	case network.PartTimesTen, network.PartTenth:
		return decadeShare
	case network.PartIs:
		return neighbourShare
	case network.PartDrifted:
		return driftShare
	case network.PartsSwapped:
		return swapShare
	case network.LegOpen:
		return legOpenShare
	case network.LegToScreen:
		return legScreenShare
	case network.LegsCrossed:
		return crossedShare
	}
	return endsShare
}
