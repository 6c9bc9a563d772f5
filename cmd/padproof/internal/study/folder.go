package study

import (
	"context"
	"errors"
	"fmt"
	"os"
	"path/filepath"
	"strings"

	"padproof/cmd/padproof/internal/lot"
	"padproof/cmd/padproof/internal/proof"
	"padproof/cmd/padproof/internal/result"
	"padproof/cmd/padproof/internal/rigcheck"
	"padproof/cmd/padproof/internal/sheet"
	"padproof/cmd/padproof/internal/unit"
	"padproof/compare"
)

// Sheets are those to use in place of what lies in the folder; "" for none.
type Sheets struct{ Pad, Rig string }

// Folder measures every unit of every round, so many at a time. One that cannot be
// measured ends the study: it needs them all. Its errors say how many more there
// are.
func Folder(ctx context.Context, folder string, sheets Sheets, workers int) (*Data, error) {
	all, names, warnings, err := gather(folder, sheets)
	if err != nil {
		return nil, err
	}
	m := &measured{data: Data{Name: folder, Figure: "loss", Unit: "dB", Limit: compare.NoLimit(), Warnings: warnings}, names: names, takes: map[string]string{}}
	err = lot.Run(ctx, all, workers, proof.Options{}, func(o lot.Outcome) error {
		m.add(o)
		return nil
	})
	if err != nil {
		return nil, err
	}
	return &m.data, m.fault()
}

// A name is whose a unit's takes are, and of which round.
type name struct{ operator, round string }

// gather finds the units of every round of every operator.
func gather(folder string, sheets Sheets) ([]*unit.Unit, map[*unit.Unit]name, []string, error) {
	operators, err := foldersIn(folder)
	if err != nil {
		return nil, nil, nil, err
	}
	var all []*unit.Unit
	var warnings []string
	names := map[*unit.Unit]name{}
	for _, operator := range operators {
		rounds, err := foldersIn(filepath.Join(folder, operator))
		if err != nil {
			return nil, nil, nil, err
		}
		for _, round := range rounds {
			found, _, err := lot.Open(filepath.Join(folder, operator, round))
			if err != nil {
				return nil, nil, nil, err
			}
			for _, u := range found.Units {
				useSheets(u, folder, sheets)
				names[u] = name{operator, round}
			}
			all = append(all, found.Units...)
			warnings = append(warnings, found.Warnings...)
		}
	}
	if len(all) == 0 {
		return nil, nil, nil, &result.Error{File: folder, Text: "holds no study",
			Hint: "each operator has a folder, with a folder for each round inside that is laid out as a lot: anna/1/0417.after.wav"}
	}
	return all, names, warnings, nil
}

// useSheets gives a unit the sheets asked for, or those of the study where its
// round has none.
func useSheets(u *unit.Unit, folder string, sheets Sheets) {
	for _, s := range []struct {
		of          *string
		given, name string
	}{{&u.PadFile, sheets.Pad, "pad.toml"}, {&u.RigFile, sheets.Rig, "rig.toml"}} {
		path := filepath.Join(folder, s.name)
		switch _, err := os.Stat(path); {
		case s.given != "":
			*s.of = s.given
		case *s.of == "" && err == nil:
			*s.of = path
		}
	}
}

// foldersIn are the names of the folders in one, in order.
func foldersIn(folder string) ([]string, error) {
	entries, err := os.ReadDir(folder)
	if err != nil {
		return nil, err
	}
	var names []string
	for _, e := range entries {
		info, err := os.Stat(filepath.Join(folder, e.Name())) // of what a link leads to
		if err == nil && info.IsDir() && !strings.HasPrefix(e.Name(), ".") {
			names = append(names, e.Name())
		}
	}
	return names, nil
}

// measured takes the outcomes in.
type measured struct {
	data   Data
	names  map[*unit.Unit]name
	pad    string
	takes  map[string]string // whose a take through the pad is, by its SHA-256
	faults []*result.Error
}

func (m *measured) add(o lot.Outcome) {
	of := m.names[o.Unit]
	where := fmt.Sprintf("operator %s, round %s, unit %s", of.operator, of.round, o.Unit.Serial)
	if o.Answer == nil {
		m.fail(o.Unit.Folder, where+" cannot be measured: "+o.Err.Error(), hintOf(o.Err))
		return
	}
	r := rigcheck.ReadingOf(o.Answer, noTime)
	key := fmt.Sprint(r.Through, " ", o.Unit.Channel)
	switch limit := limitOf(o.Answer); {
	case r.Void != "":
		m.fail(o.Unit.Folder, where+" proves no loss: "+r.Void, "record it again; padproof check says more")
		return
	case r.Through != "" && m.takes[key] != "":
		m.fail(o.Unit.Folder, where+" is the recording of "+m.takes[key]+" once more", "record it anew, with everything unplugged in between")
	case len(m.data.Readings) == 0:
		m.data.Limit, m.pad = limit, o.Answer.Pad
	case !lot.AlikeLoss(limit.Low, m.data.Limit.Low) || !lot.AlikeLoss(limit.High, m.data.Limit.High) || m.pad != o.Answer.Pad:
		m.fail(o.Unit.Folder, where+" has another drawing or other limits than the first", "a study is of units of one drawing")
	}
	m.takes[key] = where
	m.data.Simulated = m.data.Simulated || o.Answer.Simulated
	m.data.Readings = append(m.data.Readings, Reading{of.operator, o.Unit.Serial, of.round, r.LossDB})
}

func (m *measured) fail(folder, text, hint string) {
	m.faults = append(m.faults, &result.Error{File: folder, Text: text, Hint: hint})
}

// fault is the first of the faults, with how many more there are.
func (m *measured) fault() error {
	if len(m.faults) == 0 {
		return nil
	}
	e := *m.faults[0]
	if more := len(m.faults) - 1; more > 0 {
		e.Text += fmt.Sprintf(" (and %d more)", more)
	}
	return &e
}

func hintOf(err error) string {
	var inUnit *unit.Error
	var inSheet *sheet.Error
	switch {
	case errors.As(err, &inUnit):
		return inUnit.Hint
	case errors.As(err, &inSheet):
		return inSheet.Hint
	}
	return "padproof check on that unit says more"
}

// limitOf is the limit of an answer's loss.
func limitOf(a *result.Answer) compare.Limit {
	for _, c := range a.Checks {
		if c.Name == "loss" {
			return lot.LimitOf(c)
		}
	}
	return compare.NoLimit()
}
