// Package lotstat turns the figures of many units, or of one unit measured many
// times, into what they say of a line: yield, spread, capability, charts, the
// repeatability study, and the chart of a reference pad.
//
// The usual order of calls for a lot:
//
//  1. [YieldOf] for the share of units that pass, [Summarise] for the mean and
//     the standard deviation, each with its interval.
//  2. [SplitSpread] parts the spread of the units from that of the measurement.
//  3. [CapabilityOf] holds the spread against the limits.
//  4. [FindChartLimits] and [ReadChart] make the individuals and moving-range
//     chart, with the runs that break a [Book] of rules.
//  5. [Diagnose] says in plain sentences what the deviations of a lot from its
//     drawing mean: which reel, or which end of the bench; [ModelOf] makes what
//     it needs of a drawing and a rig.
//
// For the bench itself: [StudyOf] works out repeatability and reproducibility,
// and [CheckRig] judges the readings of a reference pad and makes their chart.
//
// # Units and signs
//
// Where a name has no unit the figure is in the unit of the readings, whatever
// that is. Deviations are measured less drawn, so that + is more loss. Coverage
// is a fraction, 0.95 for 95 %. Shares are fractions too. Points of a chart and
// units of a lot are counted from 0 in data and from 1 in sentences. A figure
// that there is none of is NaN, an interval that there is none of is NaN to NaN;
// an interval that is open is so because the method gives no end: -Inf or +Inf.
//
// # Errors
//
// An error says which reading is at fault. A reading must be a finite number.
// Too few readings are no error: what cannot be worked out is NaN, and a reason
// or a sentence says what is missing.
//
// # Sources
//
// Each function names its published source. Where the source was not at hand and
// the formula is written down from knowledge of it, this is said: from memory.
// Tests hold such formulas to published examples, to scipy, to closed forms or
// to simulation.
//
// # Limits
//
// Intervals of standard deviations, capability indices and variance components,
// and the tests for outliers, hold for readings that are nearly normal. Parts
// drawn from rectangles give sums with shorter tails than that: intervals of a
// spread are then wider than they need be, and tests of it find less.
package lotstat
