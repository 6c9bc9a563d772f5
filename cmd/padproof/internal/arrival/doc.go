// Package arrival watches a folder that recordings are being written into, and
// tells which units have arrived whole.
//
//  1. [New] begins; nothing is read yet.
//  2. [Watcher.Look] looks once, as often as the caller likes, and returns the
//     units that are due.
//  3. The caller checks a unit, asks [Watcher.Unchanged] whether its files are
//     still those that were due, and says [Watcher.Done] or [Watcher.Failed]. A
//     unit of which nothing is said stays due.
//
// # Where units lie
//
// In a folder each, with takes named ROLE.wav; or in the watched folder itself as
// SERIAL.ROLE.wav; both may be mixed. Sheets and shared takes in the watched folder
// serve all. Where lot.toml names a unit for each channel, the takes ROLE.wav in
// the watched folder are theirs.
//
// # When a file is done
//
// When its size and its time have been the same for [Options].Settle, by our own
// clock: that of a share may be off. A WAV must also look whole: a length in its
// header that was filled in and is there, and an end that is not all zeros, as
// that of a file is whose room was taken before it was copied. One that does not
// is waited for up to [Options].Patience and then taken as it is: a recorder that
// died leaves such files for good, and the check will say so.
//
// # When a unit is due
//
// When it has what a check needs, every file that it has or shares is done, and
// nothing of it has changed for the settle time, so that takes which come one
// after another are checked together. After [Watcher.Done] it is due again when
// one of its own files changes: a take recorded again, a further take, a sheet of
// its own. A shared file that changes serves the units that come after it and
// makes none due again: a before taken each morning is not yesterday's before.
// After [Watcher.Failed] any file that the unit uses makes it due again.
//
// # Why by looking
//
// File-system events differ between platforms, get lost when many come at once,
// and are not sent for what another machine writes to a network share. Looking
// works everywhere alike. It costs one question for each unit's folder; files are
// asked for only while something moves, and all of them every [Options].FullEvery
// or, where that takes long, less often, since some shares keep no time of a folder, and a file
// written over in its place leaves it as it was.
//
// # Limits
//
// Memory grows with the units that lie in the folder, by about a kilobyte each. A
// file replaced by one of the same size and time is not noticed.
package arrival
