package draw

import "padproof/cmd/padproof/internal/result"

// SchematicOptions are what is drawn with a circuit.
type SchematicOptions struct {
	Title     string
	Marked    []string     // refs of the parts that are suspect
	Bench     *result.Ends // drawn as source and load where it is there
	Simulated bool
}

// SchematicOf are the options that suit an answer: its bench, and the parts of
// its likeliest suspect marked.
func SchematicOf(a *result.Answer) SchematicOptions {
	if a == nil {
		return SchematicOptions{}
	}
	o := SchematicOptions{Title: titleOf(a, "Drawing"), Bench: a.BenchEnds, Simulated: a.Simulated}
	if len(a.Suspects) > 0 {
		o.Marked = a.Suspects[0].Parts
	}
	return o
}

// Schematic draws a circuit.
func Schematic(d *result.Drawing, o SchematicOptions) *Picture {
	return nothing("schematic", o.Title, "there is no drawing")
}
