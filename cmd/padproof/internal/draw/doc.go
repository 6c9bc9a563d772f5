// Package draw makes the pictures and schematics of an answer or a prediction.
//
// # Order of calls
//
//  1. [OfAnswer] or [OfPrediction] gives the pictures that there is something to
//     show for; or one is asked for by itself: [Response], [Flatness], [Noise],
//     [Level], [Spectrum], [Legs], [Predicted], [Schematic]. [OfLot] gives those of
//     a lot: [LotSpread] and [LotChart] of each figure.
//  2. [Picture.WriteSVG], [Picture.WritePNG] and [Picture.WritePDF] write a file;
//     [Picture.WriteInline] writes the element for a page.
//
// All but Response, Flatness and Schematic need the curves that an answer holds
// only where they were asked for (proof.Options.Curves).
//
// # What a picture owes its reader
//
// It says in one sentence what was found ([Picture.Says]), so that nobody need
// read it off. Each line is named where it ends. Lines differ in width and dash as
// well as in colour, so that they can be told apart in grey; the colours are those
// of M. Okabe and K. Ito, "Color Universal Design" (2008; from memory), darkened where their
// contrast with white is less than 3 to 1 (WCAG 2.2, 1.4.11). Frequencies are
// logarithmic with the octaves of ISO 266; levels are in decibels in steps of 1, 2
// or 5. SIMULATED stands in every picture that rehearsed takes made.
//
// # Limits
//
// Text in an SVG is text, in Liberation Sans, Arial, Helvetica or whatever sans
// serif font the reader has, each text as wide as in the first, by which pictures
// are set out. PNG and PDF hold that font; a character that it lacks, a picture
// sign in a name say, is shown there as an empty box or a question mark.
package draw
