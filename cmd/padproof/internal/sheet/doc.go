// Package sheet reads the sheets that a user writes: pad.toml, the drawing of a
// pad, rig.toml, the bench that records it, and ohms.toml, what an ohmmeter read
// on one unit.
//
// Usual order of calls:
//
//  1. [ReadPad] and [ReadRig] read a sheet from a file ([ParsePad] and
//     [ParseRig] from memory). Without a rig.toml, take [DefaultRig].
//  2. Turn Pad.Parts and Pad.Network into a circuit. Where that fails because of
//     a part, [Pad.LineOf] and [Pad.Errorf] make an error that names file and
//     line.
//  3. Ask [Rig.Drive], [Rig.Sense] and [Rig.LegsLoadOhms] with the pad's kind
//     (balanced or not), since what is left out depends on it.
//  4. [ReadOhms] reads an ohms.toml, [ParseReading] one reading as it is typed.
//     Whether the drawing has the nodes is the circuit's to say: [Ohms.Errorf].
//  5. Say [Rig.Assumed] with the answer: every figure that nobody wrote.
//
// # Units and signs
//
// Values of parts are in ohms, farads and henries; all else carries its unit in
// its name. A tolerance is a fraction (0.01 for "1%"), the half-width of a
// rectangle. Losses are positive. A limit that was left out is a nil pointer.
//
// # Strictness
//
// A sheet is TOML 1.1 in UTF-8, with or without a byte-order mark, of at most
// 64 KiB and [MaxParts] parts. Anything not understood is an error: an unknown
// key, a wrong type, a key or part twice, a value that is no value, a number out
// of its range. Every error is an [*Error] with the file, the line where there
// is one, and how to mend it. The sheet is looked at in three rounds: the form
// (TOML, UTF-8), then every key and value by itself, then what must hold
// together (the parts that a network needs, say). The first round with a fault
// ends the reading, and the fault that stands first in the file is returned.
//
// # Limits
//
// Whether the circuit of a custom network makes sense (a node that hangs loose)
// is not judged here; nor whether a drive and a sense go together.
package sheet
