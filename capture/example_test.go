package capture_test

import (
	"fmt"
	"log"
	"math"
	"os"
	"path/filepath"

	"padproof/capture"
)

func Example() {
	dir, err := os.MkdirTemp("", "saltmarsh")
	if err != nil {
		log.Fatal(err)
	}
	defer os.RemoveAll(dir)
	path := filepath.Join(dir, "before.wav")

	w, err := capture.Create(path, capture.Format{RateHz: 48000, Channels: 1, Bits: 24, Comment: "SIMULATED"})
	if err != nil {
		log.Fatal(err)
	}
	defer w.Abort()
	tone := make([]float64, 48000)
	for i := range tone {
		tone[i] = 0.5 * math.Sin(2*math.Pi*1000*float64(i)/48000)
	}
	if err := w.Write(tone); err != nil {
		log.Fatal(err)
	}
	if err := w.Close(); err != nil {
		log.Fatal(err)
	}

	take, err := capture.Open(path)
	if err != nil {
		log.Fatal(err)
	}
	defer take.Close()
	f := take.Facts()
	fmt.Printf("%d Hz, %d channel, %s of %d bits, %.1f s, %s\n", f.RateHz, f.Channels, f.Encoding, f.Bits, f.Seconds, f.Comments[0])

	block := make([]float64, 4)
	n, err := take.Channel(1).ReadAt(block, 12)
	if err != nil {
		log.Fatal(err)
	}
	fmt.Printf("%d samples, the first %.6f\n", n, block[0])
	// Output:
	// 48000 Hz, 1 channel, integer of 24 bits, 1.0 s, SIMULATED
	// 4 samples, the first 0.500000
}
