package main

import (
	"errors"
	"io"
	"math"
	"math/rand/v2"
	"os"
	"os/exec"
	"strconv"
	"strings"
	"testing"

	"github.com/rogpeppe/go-internal/testscript"

	"padproof/capture"
)

func TestMain(m *testing.M) {
	if strings.Contains(os.Args[0], ".test") { // not as a script's command
		_ = os.Unsetenv(ledgerVariable) // no test writes into a ledger of yours
	}
	testscript.Main(m, map[string]func(){
		"padproof": func() { os.Exit(run(os.Args[1:], os.Stdout, os.Stderr)) },
	})
}

// The scripts say what the command promises, one behaviour each.
func TestScripts(t *testing.T) {
	testscript.Run(t, testscript.Params{
		Dir:                 "testdata/script",
		RequireExplicitExec: true,
		UpdateScripts:       os.Getenv("UPDATE_SCRIPTS") != "",
		Cmds: map[string]func(ts *testscript.TestScript, neg bool, args []string){
			"exits":   exits,
			"tonewav": toneWAV,
			"joinwav": joinWAV,
		},
	})
}

// exits STATUS PROGRAM ARGS... runs a program and demands its exact exit status.
func exits(ts *testscript.TestScript, neg bool, args []string) {
	if neg || len(args) < 2 {
		ts.Fatalf("usage: exits STATUS PROGRAM ARGS...")
	}
	want, err := strconv.Atoi(args[0])
	ts.Check(err)
	got := 0
	var ended *exec.ExitError
	if err := ts.Exec(args[1], args[2:]...); errors.As(err, &ended) {
		got = ended.ExitCode()
	} else {
		ts.Check(err)
	}
	if got != want {
		ts.Fatalf("exit status %d, want %d", got, want)
	}
}

// toneWAV FILE KEY=VALUE... writes a steady tone with white noise. Keys, with
// what they are if left out: hz 997, dbfs -6, noise -100 (whole bandwidth),
// sec 2, rate 48000, bits 24, channels 1, channel 1 (0: all), seed 1, lead 0
// (seconds of noise before and after), second 0 (the level of as long a stretch
// behind the first, where not 0).
func toneWAV(ts *testscript.TestScript, neg bool, args []string) {
	if neg || len(args) == 0 {
		ts.Fatalf("usage: tonewav FILE KEY=VALUE...")
	}
	v := map[string]float64{"hz": 997, "dbfs": -6, "noise": -100, "sec": 2, "rate": 48000, "bits": 24, "channels": 1, "channel": 1, "seed": 1, "lead": 0, "second": 0}
	for _, arg := range args[1:] {
		key, text, _ := strings.Cut(arg, "=")
		number, err := strconv.ParseFloat(text, 64)
		ts.Check(err)
		if _, known := v[key]; !known {
			ts.Fatalf("tonewav: no key %q", key)
		}
		v[key] = number
	}
	w, err := capture.Create(ts.MkAbs(args[0]), capture.Format{RateHz: int(v["rate"]), Channels: int(v["channels"]), Bits: int(v["bits"])})
	ts.Check(err)
	rng := rand.New(rand.NewPCG(uint64(v["seed"]), 0))
	peak, sigma := math.Pow(10, v["dbfs"]/20), math.Pow(10, v["noise"]/20)/math.Sqrt2
	lead, tone := int(v["lead"]*v["rate"]), int(v["sec"]*v["rate"])
	turned := tone // where the second level begins
	if v["second"] != 0 {
		tone *= 2
	}
	frame := make([]float64, int(v["channels"]))
	for i := range lead + tone + lead {
		if i == lead+turned {
			peak = math.Pow(10, v["second"]/20)
		}
		for c := range frame {
			frame[c] = sigma * rng.NormFloat64()
			if (int(v["channel"]) == c+1 || v["channel"] == 0) && i >= lead && i < lead+tone {
				frame[c] += peak * math.Sin(2*math.Pi*v["hz"]*float64(i)/v["rate"])
			}
		}
		ts.Check(w.Write(frame))
	}
	ts.Check(w.Close())
}

// joinWAV FILE TAKE... writes a take that has the first channel of each take as one
// of its own. Shorter ones end in silence.
func joinWAV(ts *testscript.TestScript, neg bool, args []string) {
	if neg || len(args) < 2 {
		ts.Fatalf("usage: joinwav FILE TAKE...")
	}
	var all [][]float64
	rateHz, longest := 0, 0
	for _, path := range args[1:] {
		take, err := capture.Open(ts.MkAbs(path))
		ts.Check(err)
		samples := make([]float64, take.Facts().Frames)
		if _, err := take.Channel(1).ReadAt(samples, 0); err != io.EOF {
			ts.Check(err)
		}
		ts.Check(take.Close())
		all, rateHz, longest = append(all, samples), take.Facts().RateHz, max(longest, len(samples))
	}
	w, err := capture.Create(ts.MkAbs(args[0]), capture.Format{RateHz: rateHz, Channels: len(all), Bits: 24})
	ts.Check(err)
	frame := make([]float64, len(all))
	for i := range longest {
		for c, samples := range all {
			frame[c] = 0
			if i < len(samples) {
				frame[c] = samples[i]
			}
		}
		ts.Check(w.Write(frame))
	}
	ts.Check(w.Close())
}
