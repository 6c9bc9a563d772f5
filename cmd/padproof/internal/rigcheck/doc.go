// Package rigcheck checks the bench itself: a reference pad of known loss is
// measured each shift, its readings are kept in the ledger, and their chart says
// whether units may pass on this bench.
//
//  1. [Measure] measures the reference pad as check measures a unit.
//  2. [ReadingOf] takes the reading out of such an answer; [Readings] reads those
//     that the ledger keeps of a station and a rig.
//  3. [ChartOf] is the bench at a time: its state, and the chart.
//  4. [Enter] writes what the chart makes of a reading into its answer, to be
//     recorded.
//  5. A [Gate] holds each unit's answer against the rig check that held when the
//     unit was checked: one line for whoever checks units.
//
// # The known loss
//
// The [reference] section of rig.toml says what the pad loses between the ends of
// this bench: a figure with its uncertainty, read when the bench was known to be in
// order; or a drawing, whose loss is worked out between the ends that the sheet
// states, in doubt by the tolerances of its parts and of these ends. Where the
// sheet's figure is changed, all readings are held against the new one.
//
// # The verdict
//
// Limits and states are those of [lotstat.CheckRig]. Where within_db is set, the
// doubt of a reading must fit in as well: with U the expanded uncertainty (k = 2)
// of known loss and reading together, a reading that is off by d is only in order
// with |d| + U up to within_db, as with any guarded limit; else it proves nothing.
// Nor does a take with a problem that touches the loss.
//
// # Limits
//
// A rig is told by the name in its sheet, a station by its own. Simulated readings
// and real ones make two charts. What counts is when a unit is checked, not when
// it was recorded: a file does not tell that for certain. Check a lot in the shift
// in which it was recorded.
package rigcheck
