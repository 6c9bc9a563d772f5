package network

import (
	"math"
	"testing"
)

var sinkDB float64

func BenchmarkLossDB(b *testing.B) {
	for _, name := range []string{"U", "H", "T"} {
		c := saltmarsh(b, name)
		e := Ends{SourceOhms: 100, LoadOhms: 10000, CableFarads: 300e-12}
		b.Run("network="+name, func(b *testing.B) {
			b.ReportAllocs()
			for range b.N {
				sinkDB += c.LossDB(e, 997)
			}
		})
	}
}

func BenchmarkSensitivities(b *testing.B) {
	c := saltmarsh(b, "H")
	e := Ends{SourceOhms: 100, LoadOhms: 10000, CableFarads: 300e-12}
	b.ReportAllocs()
	for range b.N {
		sinkDB += c.Sensitivities(e, 997)[0]
	}
}

func BenchmarkValuesForLoss(b *testing.B) {
	c := saltmarsh(b, "H")
	e := Ends{SourceOhms: 100, LoadOhms: 10000, CableFarads: 300e-12}
	b.ReportAllocs()
	for range b.N {
		sinkDB += c.ValuesForLoss(e, 997, "R5", 10, math.Inf(1))[0].Low
	}
}

func BenchmarkWorstCase(b *testing.B) {
	c := saltmarsh(b, "H")
	e := Ends{SourceOhms: 100, LoadOhms: 10000, CableFarads: 300e-12}
	for range b.N {
		low, _ := c.WorstCase(e, 997)
		sinkDB += low
	}
}
