package network_test

import (
	"fmt"
	"math"

	"padproof/compare/network"
)

// The drawing of the standing design: 13.57 dB on the bench, 13.97 dB in service.
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
	bench := network.Ends{SourceOhms: 100, LoadOhms: 10000, CableFarads: 300e-12}
	service := network.Ends{SourceOhms: 120, LoadOhms: 2700, CableFarads: 800e-12}
	fmt.Printf("bench %.2f dB, service %.2f dB\n", pad.LossDB(bench, 997), pad.LossDB(service, 997))

	low, high := pad.WorstCase(bench, 997)
	fmt.Printf("good units read %.2f to %.2f dB\n", low, high)
	fmt.Printf("out.hot to out.cold: %.0f ohms\n", pad.Ohms("out.hot", "out.cold"))

	for _, in := range pad.ValuesForLoss(bench, 997, "R3", 12.9, math.Inf(1)) {
		fmt.Printf("12.9 dB or more: R3 from %.0f to %.0f ohms\n", in.Low, in.High)
	}
	// Output:
	// bench 13.57 dB, service 13.97 dB
	// good units read 13.44 to 13.70 dB
	// out.hot to out.cold: 330 ohms
	// 12.9 dB or more: R3 from 0 to 366 ohms
}
