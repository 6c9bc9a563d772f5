// Package network is the drawing of a pad as a circuit. It predicts what a bench
// or an ohmmeter should read: loss, response, impedances, leg levels, spread from
// part tolerances, ohms between pins, watts in each part and phantom volts lost.
//
// One nodal analysis serves everything. There is no closed formula per network;
// those are in the tests.
//
// The usual order of calls:
//
//  1. [New] makes a [Circuit] from a network name and its parts. It refuses a
//     drawing that cannot be built, with an [*Error] that names the part.
//  2. [Ends] says what stands on both sides: source, load and cable. Use
//     [Ends.Check] on figures that a person wrote.
//  3. [Circuit.LossDB], [Circuit.Transfer], [Circuit.ResponseDB] and the other
//     methods answer questions at one or many frequencies.
//  4. [Circuit.Sensitivities], [Circuit.WorstCase] and [Circuit.Spread] say how
//     much each part matters.
//  5. [Circuit.With] and [Circuit.Swapped] make faulty copies;
//     [Circuit.ValuesForLoss] says which values of one part explain a loss.
//     [Fault] and [EndFault] are faults of the unit and of the bench, in words.
//
// A Circuit never changes after New, so any number of goroutines may share one.
//
// # Nodes
//
// A pad has five pins: in.hot, in.cold, out.hot, out.cold and screen. The screen
// goes straight through. Inner nodes of the named networks are called mid (T and
// bridged-T) and mid.hot, mid.cold (H), so that an added part can sit there. Any
// other name is a node of the user's own.
//
// In an unbalanced network (L, T, pi, bridged-T) in.cold, out.cold and screen are
// one node, with the pad in circuit and without it. A custom network is unbalanced
// when in.cold and out.cold each either touch no part or are tied to screen by
// links (resistors of 0 Ω); any other custom network is balanced.
//
// # Units and signs
//
// Ohms, farads, henries, volts, watts, amperes and hertz, never their multiples.
// Loss is positive when the pad lowers the output: 20 lg of the load voltage
// straight through over the load voltage with the pad, same source, load and cable
// (insertion loss, FED-STD-1037C). Voltages per EMF are complex, RMS or peak alike,
// relative to 1 V of source EMF. Tolerances are half-widths as fractions: 0.01 is
// 1 %. Sensitivities are dB per relative change: a value of −2 means that a part
// 1 % high lowers the loss by 0.02 dB.
//
// A resistor of 0 is a link and one of +Inf is open. At frequency 0 capacitors are
// open and inductors are links; but a capacitor of +Inf is shorted and an inductor of
// +Inf broken at any frequency.
//
// # Limits
//
// Parts are ideal and linear. A drawing has at most 64 parts and 64 nodes. An
// impedance under 1e-15 Ω counts as a link, one over 1e18 Ω as open. The source is
// at least 1 mΩ (the drive is solved as a current source beside its resistance) and
// at most 1 TΩ. Frequencies above 1 GHz count as 1 GHz; a frequency that is
// negative or NaN counts as 0. No method returns NaN. A pad through which nothing
// comes has a loss of +Inf, which a caller must turn into words before printing.
package network
