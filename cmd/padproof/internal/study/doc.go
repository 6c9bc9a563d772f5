// Package study gathers the readings of a repeatability study, and works it out.
//
//  1. [Folder] measures the units of a folder OPERATOR/ROUND, each round a lot; or
//     [ReadCSV] reads a table of readings.
//  2. [Of] is the study: shares of the spread, and what they mean.
//
// # The folder
//
//	study/
//	  pad.toml rig.toml          serve all
//	  anna/1/before.wav          each operator has a folder, each round of one a folder inside
//	  anna/1/0417.after.wav      a round is a lot, laid out as any lot may be
//	  anna/1/0418.after.wav
//	  anna/2/ … berta/1/ …
//
// Every operator measures the same units, each as often: a round each time, with
// everything unplugged in between. What stays plugged is not tried.
//
// # The table
//
// A CSV whose first line names the columns: operator (or appraiser, inspector),
// unit (serial, part), value (loss_db, reading), and repeat (round, trial) if there
// is one. Commas part the columns, or semicolons; then a decimal comma will do.
package study
