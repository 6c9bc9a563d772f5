package sheet

import (
	"path/filepath"
	"testing"
	"time"
)

func TestParseReference(t *testing.T) {
	r, err := ParseRig(filepath.Join("bench", "rig.toml"), []byte(`[reference]
serial = "REF-14"
loss_db = 13.57
uncertainty_db = 0.03
within_db = 0.1
every_hours = 8
chart_from = 2026-11-30
required = true
`))
	if err != nil {
		t.Fatal(err)
	}
	ref := r.Reference
	if ref == nil || ref.Serial != "REF-14" || !ref.Required || ref.PadFile != "" {
		t.Fatalf("Reference = %+v", ref)
	}
	sameFigure(t, "loss_db", ref.LossDB, 13.57)
	figure(t, "uncertainty_db", ref.UncertaintyDB, 0.03)
	figure(t, "within_db", ref.WithinDB, 0.1)
	figure(t, "every_hours", ref.EveryHours, 8)
	if want := time.Date(2026, 11, 30, 0, 0, 0, 0, time.UTC); !ref.ChartFrom.Equal(want) {
		t.Errorf("chart_from = %v, want %v", ref.ChartFrom, want)
	}
}

// A drawing is found from the sheet's own folder, wherever that is.
func TestParseReferenceDrawing(t *testing.T) {
	r, err := ParseRig(filepath.Join("bench", "rig.toml"), []byte("[reference]\nserial = \"REF-14\"\npad = \"ref/pad.toml\"\n"))
	if err != nil {
		t.Fatal(err)
	}
	if want := filepath.Join("bench", "ref", "pad.toml"); r.Reference.PadFile != want || r.Reference.LossDB != nil {
		t.Errorf("Reference = %+v, want the drawing %s", r.Reference, want)
	}
}

func TestReferenceTimes(t *testing.T) {
	want := time.Date(2026, 11, 30, 14, 5, 0, 0, time.UTC)
	for _, text := range []string{"2026-11-30T14:05:00", "2026-11-30T15:05:00+01:00", `"2026-11-30T14:05"`} {
		r, err := ParseRig("rig.toml", []byte("[reference]\nserial = \"R\"\nloss_db = 6\nwithin_db = 0.1\nchart_from = "+text+"\n"))
		if err != nil || !r.Reference.ChartFrom.Equal(want) {
			t.Errorf("chart_from = %s: %+v, %v, want %v", text, r, err, want)
		}
	}
}

// Nothing is asked for where the section is left out.
func TestNoReference(t *testing.T) {
	r, err := ParseRig("rig.toml", []byte("name = \"bench\"\n"))
	if err != nil || r.Reference != nil || DefaultRig().Reference != nil {
		t.Errorf("a rig without the section: %+v, %v", r, err)
	}
}

func TestReferenceFaults(t *testing.T) {
	const head = "[reference]\nserial = \"REF-14\"\n"
	checkFaults(t, "rig.toml", parseRig, []fault{
		{"no serial", "[reference]\nloss_db = 13\nwithin_db = 0.1\n", 1, "names no pad", "serial"},
		{"blank serial", "[reference]\nserial = \" \"\nloss_db = 13\nwithin_db = 0.1\n", 1, "names no pad", "serial"},
		{"a path", "[reference]\nserial = \"a/b\"\nloss_db = 13\nwithin_db = 0.1\n", 2, "is a path", "name alone"},
		{"no loss", head + "required = true\n", 1, "does not say what the pad loses", "loss_db"},
		{"two losses", head + "loss_db = 13\npad = \"p.toml\"\nwithin_db = 0.1\n", 4, "two figures for one loss", "keep one"},
		{"doubt of a drawing", head + "pad = \"p.toml\"\nuncertainty_db = 0.1\n", 4, "goes with loss_db", "drop it"},
		{"no doubt", head + "loss_db = 13\n", 3, "has no uncertainty", "within_db"},
		{"no loss at all", head + "loss_db = 0\n", 3, "is 0", "decibels"},
		{"negative doubt", head + "loss_db = 13\nuncertainty_db = -1\n", 4, "is -1", "above 0"},
		{"no hours", head + "loss_db = 13\nwithin_db = 0.1\nevery_hours = 0\n", 5, "is 0", "8 for a shift"},
		{"hours in quotes", head + "every_hours = \"8\"\n", 3, "not a number", "without quotes"},
		{"no date", head + "chart_from = \"yesterday\"\n", 3, "is no date", "2026-11-30"},
		{"no truth", head + "required = \"yes\"\n", 3, "not true or false", "without quotes"},
		{"slip", head + "evry_hours = 8\n", 3, "unknown key reference.evry_hours", "did you mean every_hours?"},
		{"no section", "reference = \"REF-14\"\n", 1, "not a section", "[reference]"},
	})
}
