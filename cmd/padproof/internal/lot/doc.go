// Package lot checks every unit of a lot, several at once, and says what the lot
// as a whole shows.
//
//  1. [Open] finds the units of a folder.
//  2. [Run] checks them and hands on each answer in the order of the serials.
//  3. [Tally] takes the answers in and keeps a line of each: what it needs does not
//     grow with the length of the recordings.
//  4. [Tally.Lot] is the lot: yield, spread, capability, charts, and what they mean.
//
// A unit that cannot be checked is one of the lot's units and never stops it.
package lot
