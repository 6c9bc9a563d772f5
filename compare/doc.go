// Package compare holds what was measured against what the drawing gives, and
// says what that proves.
//
// The usual order of calls:
//
//  1. [ReadLoss] makes the bench loss, with its own uncertainty terms, of the
//     tone as two takes measured it.
//  2. [JudgeLoss] carries it over to the service condition through the model of
//     package network, with the whole uncertainty budget; [FindUnseen] lists the
//     parts that this bench could not have seen.
//  3. [Decide] holds a figure and its expanded uncertainty against a [Limit].
//  4. [JudgeNoise] takes the rig's noise off that of the unit and holds it against
//     the thermal noise of the drawing; [JudgeHum] reads the hum. Both decide by
//     methods of their own, in power. [JudgeResponse] and [JudgeFlatness] hold a
//     response against the designed curve and against a level line.
//  5. [PairTones] and [PairProblems] name what is wrong between two takes, and [Voids] says
//     which checks a problem takes the ground from.
//
// [ReadLossTwice] reads the loss where takes were recorded a second time,
// [ReadLossBoth] from the two channels of one take. The other checks come as a
// [Finding] each, with its budget and, where it is open, what would settle it:
// [JudgeSteadiness], [JudgeDistortion], [JudgeLegs], [JudgeBypass]. What single
// takes show is named by [ClippedProblem], [DropoutProblems],
// [SteppedProblems], [GainRidingProblem] and [LegsProblems], what a repeat
// shows by [AgainProblems] and [BothProblems]. [FindSource] and [FindFullScale]
// tell the rig's own figures from takes, with the lines for rig.toml.
//
// [Readings] lists where to put an ohmmeter, [OhmReading.Band] what a sound unit
// reads there. Readings that were taken ([OhmSeen]) go into the [LossCase]: what
// they contradict explains no loss and is no longer unseen, and
// [LossCase.OhmDoubt] says where they speak against a PASS. A value is
// contradicted only where neither the meter's doubt nor any values of the other
// parts within their tolerances could give the reading.
//
// # Units and signs
//
// A loss is in decibels, positive where the output is lower: 20 lg of the load
// voltage without the pad over that with it, same source and load (insertion
// loss). Impedances are in ohms, capacitance in farads, tolerances are
// half-widths as a fraction. U is the expanded uncertainty at 95 % (JCGM 100).
//
// # Sources
//
// The budget follows JCGM 100:2008, its intervals JCGM 101:2008 where one
// rectangle dominates (package uncertainty). The decision follows JCGM 106:2012
// and ILAC-G8:09/2019. Carrying a bench reading over to the service condition
// is a linear least-squares estimate (the best linear prediction of the service
// loss from the bench loss, given the tolerances of the parts); no published
// procedure for pads was found.
//
// # Limits
//
// Nothing here reads files or sheets, or prints.
package compare
