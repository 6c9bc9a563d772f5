package main

import (
	"errors"

	"github.com/spf13/cobra"

	"padproof/cmd/padproof/internal/proof"
	"padproof/cmd/padproof/internal/result"
	"padproof/cmd/padproof/internal/sheet"
)

// readings are the ohmmeter readings of the command line, and the meter.
func (f checkFlags) readings(cmd *cobra.Command, o *proof.Options) error {
	for _, text := range f.ohms {
		r, err := sheet.ParseReading(text)
		if err != nil {
			return ofFlag("ohms", err)
		}
		o.Ohms = append(o.Ohms, r)
	}
	given := cmd.Flags().Changed
	for _, name := range []string{"meter-tolerance", "meter-plus-ohms"} {
		if given(name) && len(f.ohms) == 0 {
			return usageError(cmd, "--%s goes with --ohms; for an ohms.toml write it there", name)
		}
	}
	if given("meter-tolerance") {
		frac, err := sheet.ParseTolerance(f.meterTol)
		if err != nil {
			return ofFlag("meter-tolerance", err)
		}
		o.Meter.TolFrac = &frac
	}
	if given("meter-plus-ohms") {
		if !(f.meterPlus >= 0 && f.meterPlus <= 1000) {
			return usageError(cmd, "--meter-plus-ohms wants 0 to 1000, not %v", f.meterPlus)
		}
		o.Meter.PlusOhms = &f.meterPlus
	}
	return nil
}

// ofFlag is an error of a value that a flag gave.
func ofFlag(name string, err error) error {
	var bad *sheet.Error
	if errors.As(err, &bad) {
		return &result.Error{Text: "--" + name + ": " + bad.Text, Hint: bad.Hint}
	}
	return err
}
