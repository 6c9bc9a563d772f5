// Package rehearsal makes simulated takes of a pad on a rig: what a person would record
// there, sound or with a fault.
//
// The usual order of calls:
//
//  1. Put the faults into the drawing (network.Fault), and let [Draw] draw a unit and a
//     bench from their tolerances, or take both as stated.
//  2. Fill a [Plan] and ask [Plan.Check].
//  3. [Plan.Record] writes the takes and the sheets into a folder.
//
// The true figures come from the model, not from the takes: the loss of Plan.Pad between
// Plan.Bench.Ends, and [Plan.RecordedLossDB].
//
// # A take
//
// A signal goes through a chain of effects, block by block: gain, the circuit from source
// to load, noise, dither; then it is rounded to the take's format. The level of the signal
// is that of its tone in before, as a person sets it by the recorder's meter. Before is the
// voltage across the load straight through, after that with the pad, both by nodal analysis
// at every frequency, magnitude and phase, relative to the size of before's at the tone. The
// gain raised for after comes on top. What lies beyond full scale is clipped, as in a
// recorder.
//
// The circuit is a filter whose taps are the inverse transform of its frequency response,
// applied by overlap-save (common practice). From 10 Hz to 0.45 of the sample rate it keeps
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
// Circuits are linear: nothing distorts. A drawing that still rings or settles after some
// ten seconds (at 48 kHz; less at higher rates) is refused.
package rehearsal
