// Package analysis turns recorded samples into numbers: the steady tone of a take, its level and
// how well it repeats, the noise beside it, and what is wrong with the take. It also holds the test
// signal: what it consists of and how it sounds.
//
// The usual order of calls:
//
//  1. [ToneLevels] shows which of several channels carries the tone.
//  2. [FindTones] looks here and there into that channel and returns the stretches in which a steady
//     tone stands; [FindTonesAt] does so for known frequencies, in a take behind a pad.
//  3. [MeasureTones] reads the channel once, from the first sample to the last, and returns a
//     [Measurement]: a [Tone] for each stretch, peak, clipping, bad samples, and the [Track] of the
//     short-term level.
//  4. [Steady] judges the track between two times, those of a stage of the test signal or of
//     [ToneSpan]: how far the level departs, steps, gaps, lost samples, crackle. [LevelBetween]
//     reads the levels about the test signal's step, [Measurement.CutPeaks] says whether the tone
//     itself is clipped, [Tone.Distortion] adds its harmonics, the noise taken off.
//  5. [MeasureNoise] reads a take, or a part of one, without a signal: a [Noise] with its spectrum,
//     level, hum and weighted figures. [HumIn] finds the hum beside a tone.
//
// [Generate] writes the test signal of [Schedule], [GenerateTone] a plain tone. [FitSine3] and
// [FitSine4] are the sine fits of IEEE Std 1057 on a plain slice.
//
// A channel is anything that satisfies [Samples].
//
// # Units and signs
//
// Samples lie between -1 and 1, full scale. Levels are in dBFS: RMS relative to the RMS of a
// full-scale sine (AES17), so a sine of peak 1 reads 0 and a full-scale square wave +3.01. Nothing
// at all reads [FloorDBFS]; no figure is ever infinite or NaN. Harmonics and scatter are in dB
// relative to the tone. Times are in seconds from the first sample, phases in radians and those of
// a cosine.
//
// # Method
//
// The level comes from least squares on a constant, a cosine and a sine (IEEE Std 1057, the
// three-parameter fit) in blocks of 100 ms, one every 50 ms. Unlike there the blocks are weighted,
// by a Hann window, so that DC, hum and other lines 20 Hz away and more do not leak in; below
// 400 Hz what lies 10 Hz away is taken off as well. The frequency follows from the phase, block by
// block, over the whole steady part. The blocks are then averaged with their phase in batches of up
// to a second, so that noise does not bias a weak tone, and the scatter of the batches gives the
// standard error. Noise and harmonics are read from a [Spectrum] of the steady part.
//
// Noise is the sum of a spectrum's bins, the lines of the mains left out; how well such a sum is
// known follows from window and overlap ([Spectrum.PowerIn]). The weightings are those of IEC 61672-1
// and of ITU-R BS.468-4; the rates of the latter's quasi-peak detector are fitted to its burst tables
// as remembered, not as read.
//
// # Limits
//
// Sample rates of 8 to 384 kHz. Tones from 20 Hz to 0.45 of the rate, steady for at least a second:
// within 0.5 dB, noise apart. A tone down to 10 dB under the noise of the band is measured; from 0 dB
// down its stretch is found with less certainty. A line closer than a few hertz to the tone, such as
// a harmonic of the mains right beside it, cannot be told from it in a short take: it adds to the
// level and shows as scatter only as far as it beats within the take. Memory grows with the length
// of a take by 1.5 MB an hour, for the track.
package analysis
