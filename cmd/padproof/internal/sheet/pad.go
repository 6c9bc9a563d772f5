package sheet

import (
	"fmt"
	"strings"
)

// Pad is a pad.toml: the drawing of a pad, the place where it will work, and
// what is asked of it.
type Pad struct {
	File    string // as it was given to [ReadPad]
	Source  []byte // the file as [ReadPad] read it
	Name    string // "" if left out
	Network string // one of [Networks]
	Parts   []Part // in the order of the sheet
	Service *Service
	Limits  Limits

	lines map[string]int
}

// Service is the place where the pad will work. Each figure that is nil was
// left out: the bench's own stands for it.
type Service struct {
	SourceOhms *float64 // 0 or more
	LoadOhms   *float64 // above 0
	CablePF    *float64 // across the output; 0 or more
	Drive      string   // "" if left out; see [Service.DriveFor]
	Sense      string   // "" if left out; see [Service.SenseFor]
}

// DriveFor returns the drive in service: where it was left out, balanced for a
// balanced network and unbalanced for the others.
func (s *Service) DriveFor(unbalanced bool) string { return orUsual(s.Drive, unbalanced) }

// SenseFor returns the sense in service, where left out as DriveFor.
func (s *Service) SenseFor(unbalanced bool) string { return orUsual(s.Sense, unbalanced) }

// orUsual returns word, or what is usual for a network if word is empty.
func orUsual(word string, unbalanced bool) string {
	switch {
	case word != "":
		return word
	case unbalanced:
		return "unbalanced"
	}
	return "balanced"
}

// The words for drive and sense.
var (
	drives = []string{"balanced", "floating", "impedance-balanced", "unbalanced"}
	senses = []string{"balanced", "floating", "unbalanced"}
)

// LineOf returns the line on which a part stands, 0 if there is no such part.
func (p *Pad) LineOf(ref string) int {
	for _, part := range p.Parts {
		if part.Ref == ref {
			return part.Line
		}
	}
	return 0
}

// Line returns the line of a key by its path, such as "network",
// "limits.loss_nominal_db" or "parts"; 0 where the sheet has no such key.
func (p *Pad) Line(path string) int { return p.lines[path] }

// Errorf returns an error at the line of a part, or of the network where ref is
// "" or no part's: for faults that only the circuit shows. The hint is the
// mend, the rest as for fmt.Sprintf.
func (p *Pad) Errorf(ref, hint, format string, args ...any) *Error {
	line := p.LineOf(ref)
	if line == 0 {
		line = p.Line("network")
	}
	return &Error{File: p.File, Line: line, Text: fmt.Sprintf(format, args...), Hint: hint}
}

// ReadPad reads a pad.toml. Every error is an [*Error].
func ReadPad(path string) (*Pad, error) {
	data, err := read(path)
	if err != nil {
		return nil, err
	}
	sheet, err := ParsePad(path, data)
	if err != nil {
		return nil, err
	}
	sheet.Source = data
	return sheet, nil
}

// ParsePad reads the text of a pad.toml; file is its name for errors and for
// Pad.File. Every error is an [*Error], and the pad is then nil.
func ParsePad(file string, data []byte) (*Pad, error) {
	d, err := parse(file, data, "begin with: network = \"U\" and parts = [ ... ]")
	if err != nil {
		return nil, err
	}
	d.foreign = map[string]string{"output": "rig.toml", "input": "rig.toml", "calibration": "rig.toml",
		"temperature_c": "rig.toml", "mains_hz": "rig.toml"}
	top := d.table("", d.root)
	p := &Pad{File: file, Name: top.text("name"), lines: d.lines}
	p.Network = top.network()
	p.Parts = top.parts()
	p.Service = top.service()
	p.Limits = top.limits()
	d.unknown()
	if err := d.first(); err != nil {
		return nil, err
	}
	d.whole(p)
	if err := d.first(); err != nil {
		return nil, err
	}
	return p, nil
}

// network reads the name of the network.
func (t *table) network() string {
	if _, there := t.values["network"]; !there {
		t.ask("network")
		t.fail("network", "is missing", fmt.Sprintf("write network = \"U\"; it can be %s", list(Networks())))
		return ""
	}
	return t.word("network", Networks()...)
}

// service reads the [service] section, nil if there is none.
func (t *table) service() *Service {
	s, there := t.section("service")
	out := &Service{
		SourceOhms: s.number("source_ohms", sourceSpan),
		LoadOhms:   s.number("load_ohms", loadSpan),
		CablePF:    s.number("cable_pF", cableSpan),
		Drive:      s.word("drive", drives...),
		Sense:      s.word("sense", senses...),
	}
	if !there {
		return nil
	}
	return out
}

// The ranges of impedances, wide enough for anything real.
var (
	sourceSpan = span{from: 0, to: 1e6}
	loadSpan   = span{from: 0, to: 1e9, open: true, mend: "write the load's ohms; for hardly any load, a large number"}
	cableSpan  = span{from: 0, to: 1e6, mend: "write picofarads, 0 for none"}
)

// whole checks what must hold together once every key is good by itself.
func (d *document) whole(p *Pad) {
	if len(p.Parts) == 0 {
		path := "parts"
		if d.lines[path] == 0 {
			path = "network"
		}
		d.fail(path, "no parts", `write parts = [ { ref = "R1", value = "560" }, ... ]`)
		return
	}
	d.unique(p)
	if p.Network == "custom" {
		d.customParts(p)
		return
	}
	d.fixedParts(p)
}

// unique notes each part whose ref another part has, case not counting.
func (d *document) unique(p *Pad) {
	seen := map[string]Part{}
	for i, part := range p.Parts {
		key := strings.ToUpper(part.Ref)
		if first, twice := seen[key]; twice {
			d.fail(item("parts", i), fmt.Sprintf("part %s is there twice (line %d has it too)", part.Ref, first.Line),
				"give each part a ref of its own")
			continue
		}
		seen[key] = part
	}
}
