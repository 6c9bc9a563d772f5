package main

import (
	"fmt"
	"io"
	"math"
	"slices"
	"strconv"
	"strings"

	"padproof/cmd/padproof/internal/proof"
	"padproof/cmd/padproof/internal/rehearsal"
	"padproof/cmd/padproof/internal/result"
	"padproof/cmd/padproof/internal/unit"
	"padproof/compare/network"
)

// rehearsed says what was made and what is true of it.
func (f *rehearseFlags) rehearsed(d *proof.Drawing, faults []fault, p rehearsal.Plan, takes []rehearsal.Take) *result.Rehearsal {
	toneHz := p.Signal.FreqHz()
	losses := func(c *network.Circuit, bench network.Ends) result.Losses {
		return result.Losses{BenchDB: result.Number(c.LossDB(bench, toneHz)), ServiceDB: result.Number(c.LossDB(d.Service, toneHz))}
	}
	const picofarad = 1e-12
	r := &result.Rehearsal{
		Schema: result.RehearseSchema, Pad: d.Name, Rig: d.Sheet.Name, Simulated: true,
		Folder: f.out, Sheets: []string{"pad.toml", "rig.toml"},
		Signal: f.signal, ToneHz: result.Number(toneHz), LevelDBFS: result.Number(p.LevelDBFS), NoiseDBFS: result.Number(p.NoiseDBFS),
		HumDBFS: result.Number(p.HumDBFS), DriftPPM: result.Number(p.DriftPPM),
		Faults: []string{}, Lies: append([]string{}, p.Lies...), Varied: f.vary, Seed: p.Seed, Flex: []result.RehearsedEvent{}, Warnings: []string{},
		Drawing: losses(d.Circuit, d.Rig.Ends),
		Truth: result.Truth{
			Losses: losses(p.Pad, p.Bench.Ends), RecordedDB: result.Number(p.RecordedLossDB()),
			SourceOhms: result.Number(p.Bench.Ends.SourceOhms), LoadOhms: result.Number(p.Bench.Ends.LoadOhms),
			CablePF: result.Number(p.Bench.Ends.CableFarads / picofarad), GainOffsetDB: result.Number(p.Bench.OffsetDB),
		},
	}
	r.Truth.UnitNoiseDBu, r.Truth.ThermalDBu = result.Missing, result.Missing
	if slices.Contains(p.Takes, "pad-noise") {
		unitDBu, thermalDBu := p.UnitNoiseDBu()
		r.Truth.UnitNoiseDBu, r.Truth.ThermalDBu = result.Number(unitDBu), result.Number(thermalDBu)
	}
	for i, atSec := range p.FlexSec() {
		r.Flex = append(r.Flex, result.RehearsedEvent{AtSec: result.Number(atSec), What: p.Flex[i]})
	}
	for _, one := range faults {
		r.Faults = append(r.Faults, one.text)
	}
	if f.ohms {
		r.Sheets = append(r.Sheets, "ohms.toml")
	}
	for _, part := range p.Pad.Parts() {
		r.Truth.Parts = append(r.Truth.Parts, result.RehearsedPart{Ref: part.Ref, Kind: part.Kind.String(), Value: result.Number(part.Value)})
	}
	encoding := "integer"
	if p.Float {
		encoding = "float"
	}
	for _, t := range takes {
		r.Takes = append(r.Takes, result.RehearsedTake{
			Role: t.Role, File: t.File, RateHz: p.RateHz, Channels: t.Channels, Bits: p.Bits, Encoding: encoding,
			Seconds: result.Number(float64(t.Frames) / float64(p.RateHz)),
		})
		if t.Clipped {
			r.Warnings = append(r.Warnings, t.File+" lies beyond full scale and is clipped; a lower --level-dbfs may not be")
		}
	}
	return r
}

// provenBy checks the takes that were written: which limits this rig could
// prove, and which not, and why.
func provenBy(folder string, o proof.Options) ([]result.Proven, error) {
	proven := []result.Proven{}
	u, err := unit.Open(folder)
	if err != nil {
		return proven, err
	}
	answer, err := proof.Check(u, o)
	if err != nil {
		return proven, err
	}
	for _, c := range answer.Checks {
		if c.Verdict != "" {
			proven = append(proven, result.Proven{Check: c.Name, Verdict: c.Verdict, Reason: c.Reason})
		}
	}
	return proven, nil
}

func provenText(r *result.Rehearsal) []string {
	if len(r.Proven) == 0 {
		return nil
	}
	lines := []string{"These takes prove of the limits set:"}
	for _, p := range r.Proven {
		line := "  " + p.Check + ": " + p.Verdict
		if p.Reason != "" {
			line += " (" + p.Reason + ")"
		}
		lines = append(lines, line)
	}
	return lines
}

func rehearsalText(w io.Writer, r *result.Rehearsal) error {
	var files []string
	for _, t := range r.Takes {
		files = append(files, t.File)
	}
	names := joinedWords(files)
	unit := faultsText(r.Faults)
	if r.Varied {
		unit += ", drawn from its tolerances"
	}
	lines := []string{
		fmt.Sprintf("Wrote %s to %s, SIMULATED, with %s: %s.", names, r.Folder, joinedWords(r.Sheets), unit),
		fmt.Sprintf("True loss on this bench %s (the drawing's %s), in service %s (the drawing's %s).",
			lossText(r.Truth.BenchDB), lossText(r.Drawing.BenchDB), lossText(r.Truth.ServiceDB), lossText(r.Drawing.ServiceDB)),
	}
	if r.Truth.UnitNoiseDBu.OK() {
		lines = append(lines, fmt.Sprintf("The unit's true noise is %.2f dBu at the rig's input, 20 Hz to 20 kHz; thermal noise is %.2f dBu of it.",
			float64(r.Truth.UnitNoiseDBu), float64(r.Truth.ThermalDBu)))
	}
	for _, e := range r.Flex {
		lines = append(lines, fmt.Sprintf("In flex a %s at %.3f s.", e.What, float64(e.AtSec)))
	}
	if len(r.Lies) > 0 {
		lines = append(lines, "The recordings lie: "+strings.Join(r.Lies, ", ")+".")
	}
	if r.Truth.GainOffsetDB != 0 && r.Truth.RecordedDB.OK() {
		lines = append(lines, fmt.Sprintf("The gain of after is off by %+.3f dB, so that the takes hold %s.", r.Truth.GainOffsetDB, lossText(r.Truth.RecordedDB)))
	}
	for _, warning := range r.Warnings {
		lines = append(lines, "Warning: "+warning+".")
	}
	lines = append(lines, provenText(r)...)
	lines = append(lines, "Next: padproof check "+quoteForShell(r.Folder))
	_, err := fmt.Fprintln(w, strings.Join(lines, "\n"))
	return err
}

// faultsText is the unit in words, and the bench where that is not as stated.
func faultsText(faults []string) string {
	var ofUnit, ofBench []string
	for _, text := range faults {
		if _, isEnd, _ := network.ParseEndFault(text); isEnd {
			ofBench = append(ofBench, text)
		} else {
			ofUnit = append(ofUnit, text)
		}
	}
	unit := "a sound unit"
	if len(ofUnit) > 0 {
		unit = "a unit with " + strings.Join(ofUnit, " and ")
	}
	if len(ofBench) > 0 {
		unit += ", on a bench with " + strings.Join(ofBench, " and ")
	}
	return unit
}

// joinedWords are words for a sentence: "a, b and c".
func joinedWords(words []string) string {
	n := len(words)
	if n < 2 {
		return strings.Join(words, "")
	}
	return strings.Join(words[:n-1], ", ") + " and " + words[n-1]
}

// lossText is a loss as read by people.
func lossText(loss result.Number) string {
	if !loss.OK() {
		return "without end, nothing comes through"
	}
	const thousandths = 1000
	return fmt.Sprintf("%.3f dB", math.Round(float64(loss)*thousandths)/thousandths+0) // + 0: never -0
}

// quoteForShell puts a path into quotes where a shell might cut it up.
func quoteForShell(path string) string {
	if strings.ContainsAny(path, " \t\"'`$&|;<>()*?#!") {
		return strconv.Quote(path)
	}
	return path
}
