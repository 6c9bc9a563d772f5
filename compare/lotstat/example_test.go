package lotstat_test

import (
	"fmt"

	"padproof/compare"
	"padproof/compare/lotstat"
	"padproof/compare/network"
)

// Twelve Saltmarsh pads whose shunt came from a reel that is too high: too little
// loss on every one.
func Example() {
	pad, err := network.New("U", []network.Part{
		{Ref: "R1", Value: 560, TolFrac: 0.01},
		{Ref: "R2", Value: 560, TolFrac: 0.01},
		{Ref: "R3", Value: 330, TolFrac: 0.01},
	})
	if err != nil {
		fmt.Println(err)
		return
	}
	bench := compare.Rig{
		Ends:          network.Ends{SourceOhms: 100, LoadOhms: 10000},
		SourceTolFrac: 0.02, LoadTolFrac: 0.02,
	}
	off := []float64{-0.251, -0.243, -0.262, -0.239, -0.255, -0.247, -0.258, -0.250, -0.244, -0.249, -0.256, -0.252}

	d, err := lotstat.Diagnose(lotstat.Lot{DeviationsDB: off, CommonStdUDB: 0.01, Model: lotstat.ModelOf(pad, bench, 997)})
	if err != nil {
		fmt.Println(err)
		return
	}
	for _, s := range d.Sentences {
		fmt.Println(s)
	}
	yield, err := lotstat.YieldOf(11, 12, compare.Coverage)
	if err != nil {
		fmt.Println(err)
		return
	}
	fmt.Printf("yield %.0f %%, of the line %.0f to %.1f %%\n", 100*yield.Frac, 100*yield.Interval.Low, 100*yield.Interval.High)
	// Output:
	// loss sits 0.25 dB low on all units: suspect the reel of R3, 3.8 % high (1.0 % allowed), or the reel of R1 and R2, 3.9 % low (1.0 % allowed)
	// yield 92 %, of the line 62 to 99.8 %
}
