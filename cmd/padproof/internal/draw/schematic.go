package draw

import (
	"slices"
	"strconv"

	"padproof/cmd/padproof/internal/result"
)

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

// Schematic draws a circuit: the signal from left to right, hot on top, the screen
// at the bottom. A circuit that cannot be drawn so without one thing lying on
// another is drawn with a rail for each node. Parts that are marked have a thick
// outline, a dashed frame and the word suspect.
func Schematic(d *result.Drawing, o SchematicOptions) *Picture {
	if o.Title == "" {
		o.Title = "Drawing"
	}
	if d == nil || len(d.Parts) == 0 {
		return nothing("schematic", o.Title, "there is no drawing")
	}
	marked := map[string]bool{}
	for _, ref := range o.Marked {
		marked[ref] = true
	}
	var p *plan
	if l, ok := ladderOf(d, marked); ok {
		p = l.plan(o.Bench)
	} else {
		p = railsOf(d, marked)
	}
	addIdle(p, graphOf(d).idle)
	top := 6.0
	if o.Simulated {
		top = captionLine
	}
	pic := &Picture{
		Name: "schematic", Title: o.Title, Says: schematicSays(d, o.Marked), Simulated: o.Simulated,
		Width: max(usualWidth, float64(p.width)+2*edge), Height: float64(p.height) + top + 4,
	}
	pic.paint = func(s *sheet) { p.draw(s, lengthOf(top)) }
	return pic
}

// addIdle names parts that have both ends on one node, below the drawing.
func addIdle(p *plan, idle []result.DrawnPart) {
	for _, part := range idle {
		p.height += lengthOf(textSize * leading)
		p.words = append(p.words, planWord{
			side.clip(part.Ref+" ("+textOf(part)+") joins two points of one node and does nothing", p.width-2*edge),
			pointOf(edge, float64(p.height)-10), fromLeft, side,
		})
	}
}

func schematicSays(d *result.Drawing, marked []string) string {
	says := "The " + d.Network + " network of " + strconv.Itoa(len(d.Parts)) + " parts: "
	if d.Network == "custom" {
		says = "A network of its own, of " + strconv.Itoa(len(d.Parts)) + " parts: "
	}
	var parts []string
	for i, p := range d.Parts {
		if i == 8 && len(d.Parts) > 9 {
			parts = append(parts, "and "+strconv.Itoa(len(d.Parts)-i)+" more")
			break
		}
		parts = append(parts, shortRef(p.Ref)+" "+textOf(p))
	}
	says += join(parts)
	var there []string
	for _, ref := range marked {
		if slices.ContainsFunc(d.Parts, func(p result.DrawnPart) bool { return p.Ref == ref }) {
			there = append(there, shortRef(ref))
		}
	}
	if len(there) > 0 {
		are := " is"
		if len(there) > 1 {
			are = " are"
		}
		says += "; " + join(there) + are + " marked as suspect"
	}
	return says + "."
}
