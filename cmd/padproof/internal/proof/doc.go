// Package proof checks one unit end to end: sheets become the model, takes
// become figures, and compare says what they prove. It also predicts what a
// drawing should measure. What comes out is a value of package result.
//
// The usual order of calls:
//
//  1. [Load] reads the sheets and makes the [Drawing].
//  2. [Check] judges a unit's takes; [Predict] needs none.
package proof
