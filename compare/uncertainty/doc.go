// Package uncertainty turns what is doubtful about a measured figure into one
// number, the expanded uncertainty U, and checks such figures by Monte Carlo.
//
// The usual order of calls:
//
//  1. Make a [Term] for every source of doubt: [FromSample] for what repeated
//     readings show, [FromRectangle] for a tolerance or a stated limit of error,
//     [FromExpanded] for what a certificate says, [FromNormal], [FromArcsine]
//     and [FromTriangle] for the rest.
//  2. Gather them in a [Budget].
//  3. [Budget.ExpandedU] with 0.95 gives U; [Budget.Dominant] says which term is
//     worth working on first.
//  4. Where the model is bent, or the shape of the answer matters, [MonteCarlo]
//     puts draws of the inputs through the model itself.
//
// # Units and signs
//
// A term's StandardU is in the unit of its own source, its Sensitivity turns it
// into the unit of the result (∂result/∂source, either sign), and every figure
// of a budget is in the unit of the result, never negative. Coverage is a
// fraction, 0 to 1. Degrees of freedom are +Inf where the figure is not itself
// in doubt.
//
// # Method
//
// With contributions c·u the combined standard uncertainty is their root sum of
// squares (JCGM 100:2008, 5.1.2), and the effective degrees of freedom are those
// of Welch and Satterthwaite (JCGM 100:2008, G.2b):
//
//	dof = combined⁴ / Σ (contribution⁴ / term's dof)
//
// They are cut down to the next lower whole number, as JCGM 100:2008, G.4.1
// allows, and U is Student's t at that number times the combined figure.
// Student's t needs an answer that is nearly normal. Where one rectangle makes
// more than [DominantShare] of the combined figure it is not, and U is the
// half-width of the interval about zero that holds the coverage asked for of the
// rectangle plus all the rest: the interval of JCGM 101:2008 for such a sum,
// found from its distribution in closed form, without random numbers. The rest
// counts as a Student's t with its own effective degrees of freedom, cut down in
// the same way, and with its standard uncertainty as the scale (JCGM 101:2008,
// 6.4.9).
//
// Clause numbers are from memory; the figures the tests hold them to are
// published ones.
//
// # Limits
//
// The terms of a budget are taken to be independent and the model straight over
// their width. Only a dominating rectangle gets its own interval: under one
// dominating arcsine U is wider than need be. Welch and Satterthwaite's figure
// falls short where a term of one or two degrees of freedom leads and others
// stand beside it: in simulation the interval said to hold 95 % then held about
// 89 % at one degree and 92.5 % at two, 94 % at three; take more readings, or
// pool them. Degrees of freedom below 1 are an error. Nothing here panics on bad figures; what is returned instead stands
// with each function.
package uncertainty
