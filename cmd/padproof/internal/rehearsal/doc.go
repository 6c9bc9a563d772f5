// Package rehearsal makes simulated takes of a pad on a rig: what a person would record
// there, sound or with a fault.
//
// The usual order of calls:
//
//  1. Put the faults into the drawing (network.Fault), and let [Draw] draw a unit and a
//     bench from their tolerances, or take both as stated.
//  2. Fill a [Plan] and ask [Plan.Check].
//  3. [Plan.Record] writes the takes and the sheets into a folder. [Plan.Read] is what an
//     ohmmeter shows on the unit.
//
// The true figures come from the model, not from the takes: the loss of Plan.Pad between
// Plan.Bench.Ends, and [Plan.RecordedLossDB].
//
// # A take
//
// A signal goes through a chain of effects, block by block, one chain for each channel: gain,
// the circuit from source to load, hum, noise, dither; then it is rounded to the take's
// format. The level of the signal is that of its tone in before, as a person sets it by the
// recorder's meter. Before is the voltage across the load straight through, after that with
// the pad, both by nodal analysis at every frequency, magnitude and phase, relative to the
// size of before's at the tone. The gain raised for after comes on top. What lies beyond
// full scale is clipped, as in a recorder.
//
// The other roles of a unit's folder ([Takes]) are made likewise: before-loaded has the known
// resistor in the pad's place, bypass its contacts, legs and legs-before the voltage of each
// leg to screen, both the straight signal beside the one through the pad. Calibration is a
// tone of 200 Hz at the volts that the meter read. Flex is a steady tone, with events.
//
// Hum is the mains line and its harmonics to the tenth, harmonic n lower by 20 lg n². A
// recorder's clock that runs fast or slow is made by evaluating the signal, a closed form, at
// the recorder's own instants; nothing is interpolated.
//
// A lie ([Lies]) changes how a take is made, or the finished file.
//
// # Noise takes
//
// Rig-noise and pad-noise hold what stands at the rig's input terminals: thermal noise
// 4kT·Re Z of the plug or of the pad with its plug (leg to leg, no tie to screen), through
// the divider with load and cable; that of the load, unless it is quiet; the input's noise
// current through all of them; the input's noise voltage. They are shaped with frequency as
// the circuit shapes them, within 0.0001 dB. The recorder's own noise comes on top.
//
// The circuit is a filter whose taps are the inverse transform of its frequency response,
// applied by overlap-save (common practice). From 10 Hz to 0.47 of the sample rate it keeps
// to the response within 0.0005 dB, and far closer unless the drawing settles slowly; above
// that the phase bends so that it is real at half the rate. It adds no delay.
//
// # Noise and rounding
//
// Noise is white up to half the sample rate, Gaussian, and independent in every take. Its
// level is that of the part between 20 Hz and 20 kHz (or half the rate, where that is lower),
// in dBFS: RMS relative to the RMS of a full-scale sine (AES17). It is the recorder's own, so
// it is the same whatever the gain.
//
// Integer takes are rounded to the nearest code. Where the noise is less than half a step
// RMS, triangular dither of two steps peak to peak comes before (common practice), so that
// the rounding hangs on the signal in no take. Float takes have neither.
//
// # What repeats
//
// The same plan gives the same bytes. Between kinds of processor the last bit of a few
// samples may differ, since some of them round a product and a sum at once.
//
// # Limits
//
// Circuits are linear: nothing distorts. The load's thermal noise counts as that of one
// resistor leg to leg, which is not quite so beside a pad whose parts to screen differ. A drawing that still rings or settles after some
// ten seconds (at 48 kHz; less at higher rates) is refused.
package rehearsal
