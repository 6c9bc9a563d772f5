// Package unit finds the files of one pad under test: which recording has which
// role, which sheets go with it, what comes from the folder above, what is
// missing. It goes by names alone and opens no file.
//
// Usual order of calls:
//
//  1. [LayoutOf] tells whether a folder is one unit's, a flat lot, or a lot of
//     folders.
//  2. [Open] for one unit's folder, [Flat] for a flat lot, or [FromFiles] for
//     files named one by one.
//  3. In a lot, [Unit.Ready] tells which units lack a take; Open and FromFiles
//     have asked it already.
//  4. Say [Unit.Warnings] with the answer.
//
// # Names
//
// A take is ROLE.wav in its unit's folder, SERIAL.ROLE.wav in a flat lot, where a
// serial may hold dots. Sheets are pad.toml and rig.toml; ohms.toml, the
// unit's ohmmeter readings, is named as a take is (SERIAL.ohms.toml). Case does not
// count in any of these, so two names that differ in case alone are two files for
// one role: an error. Hidden files are passed over, and with them the "._" files
// that some systems put beside the real ones.
//
// # What comes from above
//
// Sheets and the takes of [Shared] roles may lie one folder up (in a flat lot:
// in the folder itself, without a serial) and then serve every unit there. What
// lies in the unit's own folder wins. Ohmmeter readings are never shared. One folder
// up is meant by the name as it was given: of a link to a folder it is the folder
// that holds the link.
package unit
