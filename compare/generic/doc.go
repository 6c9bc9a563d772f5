// Package generic says what might be wrong with a pad of which there is no drawing, only a mark.
//
// It is a package of its own, apart from the ranking of the faults of a drawing, since nothing here is
// a finding: the pads are textbook ones, and all that is known of the real one is one loss. It must
// not be possible to mistake its weights for those of a drawing.
//
// The order of calls: fill a [Case], call [Likelihoods], and show at most what it returns. It returns
// nothing where the reading agrees with the mark.
//
// # Method
//
// The pads that may bear the mark ([Pads]) are the usual networks: U, H and O, or L, T and pi where an
// end of the rig is unbalanced; all of them where one end is and the other is not. H and O, T and pi are
// symmetrical matched pads; U and L show their marked impedance at the input when loaded with it (Bird,
// Electrical Circuit Theory and Technology, ch. 41, and the same laws for the L). A mark that holds
// on this bench is given to pads of 150 Ω and 600 Ω that would read it there; one of unknown
// meaning to those and to matched pads of the common impedances.
//
// Each pad is given each fault: a part open, shorted, ten times or a tenth of its value, or of another
// value from 3 % to threefold; a leg open or down to screen at either end; legs crossed; in and
// out swapped; the source or the load of the rig up to ten times from what is stated; and, as no fault at
// all, a pad marked for another impedance or of the kind U or L, and a pad that is not in circuit. The
// model says what loss this bench would read.
//
// The weight of a fault is how near that lies to what was read: a normal density, its standard
// deviation from the reading, the rig's tolerances, parts within 5 % and a mark rounded by up to
// half a decibel (both rectangles). Every kind of fault counts alike beforehand, spread evenly over the parts or
// legs that can have it, and so does "none of these", which reads anything from 0 to 60 dB. Plain
// priors: no source. The likelihood is the share of all weights.
//
// # Units and signs
//
// Losses are insertion losses in dB, positive where the pad lowers the output. Likelihoods
// run from 0 to 1; what is missing to 1 belongs to faults not shown and to none of these.
//
// # Limits
//
// A single loss cannot tell these faults apart: that is what the measuring is for. Pads with
// capacitors or transformers, and pads for other ends than those above, are not among the alternatives.
package generic
