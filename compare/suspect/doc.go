// Package suspect tells which single fault of a pad explains all that was measured of it, how sure
// that is, and where to put the ohmmeter.
//
// The usual order of calls:
//
//  1. Fill an [Evidence]: the drawing, the bench, and the figures of every take there is, each with
//     its standard uncertainty. [NoiseOf] makes the part of two noise takes.
//  2. [Rank] gives a [Ranking]: the suspects by weight, each a [Fault] or a group of faults that
//     nothing taken parts, with the reading of an ohmmeter that parts it best ([Confirm]).
//  3. Take that reading, add it to Evidence.Ohms, and Rank again.
//
// [Faults] lists what is looked for, in the words of package network.
//
// # Units and signs
//
// As in package network: ohms, farads, hertz, decibels of loss. A weight is a probability, 0 to 1, and
// those of all faults, of a sound unit and of "none of these" add up to 1. DriftFrac 0.12 is +12 %.
//
// # Which faults
//
// Of each part: open, short, ten times, a tenth, either neighbour in E24 (IEC 60063), and a drift by
// an amount that is not known: log-uniform in the size of the logarithm of its ratio, from 3 % to
// threefold, up or down. Two parts of one kind, swapped, that share a node or are of six or
// fewer. A leg open or down to screen at either end, legs crossed, in and out swapped. The bench's
// source or its load other than stated: log-uniform in the ratio from the tolerance to tenfold, up or
// down. What leaves every pin as it is, is no fault.
//
// # Score
//
// For each fault the model of package network gives every figure that was measured, and how each
// moves with every part, the source, the load, the cable and the load of each leg. Parts and bench
// count as known to their tolerance over the root of 3 (a rectangle's standard uncertainty, JCGM 100,
// 4.3.7), measured figures to their own standard uncertainty. As one error of the bench moves loss,
// response and legs together, all that is measured is one normal vector with its full covariance,
// worked out at the faulty circuit. What source and load do only together counts too: between matched
// ends it is all there is. Where a figure is nil but for tolerances, as across a bridge in balance, it
// is taken as of their size. A drift, and an end of the bench, is summed over its amount, which also
// makes a fault that could give anything less likely than one that gives just this.
//
// Beside the vector: a loss of which only a bound is known, a dead leg and an ohmmeter over range
// count by the chance that the bound holds; polarity by a chance of 1 in 10000 that a marker is
// misread; noise by the excess of pad-noise over rig-noise against the thermal noise of the faulty
// circuit, the load being a resistor or none; hum over the rig's own by a ratio of 6 for faults that
// leave a leg hanging or down to screen. A circuit through which nothing comes is taken to leak 120 dB
// under straight through.
//
// Weight is prior times likelihood (Bayes). The model itself, the priors and the likelihoods of noise
// and hum are common practice, no source.
//
// # Priors
//
// How often what goes wrong, against one another: plain figures, common practice, no source.
//
//	fault                           share  why
//	a part open                     2.0    joints left out, cracked parts
//	a part short                    1.1    a bridge of solder
//	ten times, a tenth              1.0    the multiplier misread, each
//	a neighbour in E24              0.7    the drawer beside, each
//	a part drifted                  2.0    overheated, damp, aged
//	two parts swapped               2.0    each pair
//	a leg open                      1.5    a broken wire, a plug not soldered, each
//	a leg to screen                 1.25   a strand of the screen, each
//	legs crossed; in and out        1.5    each
//	source, load not as stated      1.5    each
//
// Of all units that come here half are sound, a tenth have something else, and the rest one fault.
//
// # None of these
//
// Something else is for the most part one of the faults with any second part off beside it: slopes
// tell what that would move, and so what two faults can explain that one cannot. The rest is a broad
// normal distribution about the drawing, with and without a tilt of the response.
//
// # Groups
//
// Faults that no pin can tell apart count as one, as do a drift and another value of the same part
// within the drift's doubt, the lesser of which is named where it has a third of the other's weight. A
// group holds those within three times of the likeliest one's weight, as
// long as what they give for each measured figure agrees as two such figures do in nine cases of ten.
//
// # Ohmmeter
//
// For the first suspect the reading is the one, of those of [compare.Readings], after which the
// likeliest fault is most often the true one, the meter being good for 0.5 % and 0.2 Ω and every part
// for its tolerance; a sound unit counts with a tenth at least, and a reading without joined pins is
// preferred where it is nearly as good. For the others it is the one that best tells the suspect from
// a sound unit and from the likeliest other. Over range begins at 2 MΩ at the latest.
//
// # Limits
//
// Two things wrong of which one hides behind the other look like one. Of a dead output of an
// unbalanced pad little can be told without noise or an ohmmeter. Amounts are normal in their
// logarithm only near the best one; a tolerance of ±50 % is still taken in a straight line.
package suspect
