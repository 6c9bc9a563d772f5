package draw

import (
	"os"
	"testing"

	"padproof/cmd/padproof/internal/result"
)

func r(ref, code, a, b string) result.DrawnPart {
	return result.DrawnPart{Ref: ref, Kind: "resistor", Value: 1, Code: code, A: a, B: b}
}

func TestZZ(t *testing.T) {
	ends := &result.Ends{SourceOhms: 100, Drive: "impedance-balanced", LoadOhms: 10000, Sense: "balanced", CablePF: 300}
	nets := map[string]*result.Drawing{
		"L":   {Network: "L", Unbalanced: true, Parts: []result.DrawnPart{r("R1", "560", "in.hot", "out.hot"), r("R2", "330", "out.hot", "screen")}},
		"U":   {Network: "U", Parts: []result.DrawnPart{r("R1", "560", "in.hot", "out.hot"), r("R2", "560", "in.cold", "out.cold"), r("R3", "330", "out.hot", "out.cold")}},
		"T":   {Network: "T", Unbalanced: true, Parts: []result.DrawnPart{r("R1", "240", "in.hot", "mid"), r("R2", "240", "mid", "out.hot"), r("R3", "120", "mid", "screen")}},
		"H":   {Network: "H", Parts: []result.DrawnPart{r("R1", "240", "in.hot", "mid.hot"), r("R2", "240", "in.cold", "mid.cold"), r("R3", "240", "mid.hot", "out.hot"), r("R4", "240", "mid.cold", "out.cold"), r("R5", "120", "mid.hot", "mid.cold"), {Ref: "C1", Kind: "capacitor", Value: 1e-8, Code: "10n", A: "out.hot", B: "out.cold"}}},
		"pi":  {Network: "pi", Unbalanced: true, Parts: []result.DrawnPart{r("R1", "1k5", "in.hot", "screen"), r("R2", "4R7", "in.hot", "out.hot"), r("R3", "1k5", "out.hot", "screen")}},
		"O":   {Network: "O", Parts: []result.DrawnPart{r("R1", "1k5", "in.hot", "in.cold"), r("R2", "270", "in.hot", "out.hot"), r("R3", "270", "in.cold", "out.cold"), r("R4", "1k5", "out.hot", "out.cold")}},
		"bT":  {Network: "bridged-T", Unbalanced: true, Parts: []result.DrawnPart{r("R1", "600", "in.hot", "mid"), r("R2", "600", "mid", "out.hot"), r("R3", "2k2", "in.hot", "out.hot"), r("R4", "160", "mid", "screen")}},
		"Ux":  {Network: "U", Parts: []result.DrawnPart{r("R1", "560", "in.hot", "out.hot"), r("R2", "560", "in.cold", "out.cold"), r("R3", "330", "out.hot", "out.cold"), r("R4", "10k", "out.hot", "screen"), r("R5", "10k", "out.cold", "screen"), {Ref: "C1", Kind: "capacitor", Value: 1, Code: "220p", A: "in.hot", B: "out.hot"}, {Ref: "C2", Kind: "capacitor", Value: 1, Code: "220p", A: "in.cold", B: "out.cold"}, {Ref: "L1", Kind: "inductor", Value: 1, Code: "10m", A: "in.hot", B: "in.cold"}}},
		"ct":  {Network: "custom", Parts: []result.DrawnPart{r("R1", "560", "in.hot", "a"), r("R2", "560", "in.cold", "b"), r("R3", "100", "a", "out.hot"), r("R4", "100", "b", "out.cold"), r("R5", "150", "a", "ct"), r("R6", "150", "ct", "b"), {Ref: "C1", Kind: "capacitor", Value: 1, Code: "100n", A: "ct", B: "screen"}}},
		"lat": {Network: "custom", Parts: []result.DrawnPart{r("R1", "560", "in.hot", "out.hot"), r("R2", "560", "in.cold", "out.cold"), r("R3", "1k", "in.hot", "out.cold"), r("R4", "1k", "in.cold", "out.hot")}},
	}
	for name, d := range nets {
		marked := []string{"R2", "R3"}
		if name != "U" && name != "bT" && name != "lat" && name != "H" {
			marked = nil
		}
		p := Schematic(d, SchematicOptions{Title: name, Bench: ends, Marked: marked, Simulated: name == "U"})
		f, _ := os.Create("/tmp/d1p/sch_" + name + ".png")
		if err := p.WritePNG(f); err != nil {
			t.Fatal(err)
		}
		f.Close()
	}
}
