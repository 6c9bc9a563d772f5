package rehearsal

import (
	"context"
	"errors"
	"io/fs"
	"os"
	"path/filepath"
	"slices"
	"testing"
)

// sheets writes two sheets outside of any unit's folder.
func sheets(t *testing.T) Sheets {
	t.Helper()
	folder := t.TempDir()
	s := Sheets{Pad: filepath.Join(folder, "l.toml"), Rig: filepath.Join(folder, "workbench.toml")}
	write(t, s.Pad, "name = \"Saltmarsh\"\n")
	write(t, s.Rig, "name = \"Workbench\"\n")
	return s
}

func write(t *testing.T, path, text string) {
	t.Helper()
	if err := os.WriteFile(path, []byte(text), 0o666); err != nil {
		t.Fatal(err)
	}
}

func names(t *testing.T, folder string) []string {
	t.Helper()
	entries, err := os.ReadDir(folder)
	if err != nil {
		t.Fatal(err)
	}
	var all []string
	for _, e := range entries {
		all = append(all, e.Name())
	}
	return all
}

func short(t *testing.T) Plan {
	p := plan(pad(t))
	p.Signal.Sec = 0.1
	return p
}

func TestRecordFillsAFolder(t *testing.T) {
	folder := filepath.Join(t.TempDir(), "lot", "0417")
	takes, err := short(t).Record(t.Context(), folder, sheets(t))
	if err != nil {
		t.Fatal(err)
	}
	want := []Take{{Role: "before", File: "before.wav", Channels: 1, Frames: 52800}, {Role: "after", File: "after.wav", Channels: 1, Frames: 52800}}
	if !slices.Equal(takes, want) {
		t.Errorf("Record() = %+v, want %+v", takes, want)
	}
	if got := names(t, folder); !slices.Equal(got, []string{"after.wav", "before.wav", "pad.toml", "rig.toml"}) {
		t.Errorf("the folder holds %q", got)
	}
	if text, _ := os.ReadFile(filepath.Join(folder, "pad.toml")); string(text) != "name = \"Saltmarsh\"\n" {
		t.Errorf("pad.toml holds %q", text)
	}
}

func TestRecordOverwritesNothing(t *testing.T) {
	for _, name := range []string{"before.wav", "AFTER.WAV", "pad.toml", "Rig.toml"} {
		folder := t.TempDir()
		write(t, filepath.Join(folder, name), "mine")
		_, err := short(t).Record(t.Context(), folder, sheets(t))
		if !errors.Is(err, fs.ErrExist) {
			t.Errorf("with %s there: error %v, want %v", name, err, fs.ErrExist)
		}
		if got := names(t, folder); !slices.Equal(got, []string{name}) {
			t.Errorf("with %s there the folder holds %q", name, got)
		}
		if text, _ := os.ReadFile(filepath.Join(folder, name)); string(text) != "mine" {
			t.Errorf("%s was overwritten", name)
		}
	}
}

// The sheets may be those of the folder itself.
func TestRecordBesideItsSheets(t *testing.T) {
	folder := t.TempDir()
	s := Sheets{Pad: filepath.Join(folder, "PAD.toml"), Rig: filepath.Join(folder, "rig.toml")}
	write(t, s.Pad, "pad")
	write(t, s.Rig, "rig")
	if _, err := short(t).Record(t.Context(), folder, s); err != nil {
		t.Fatal(err)
	}
	if got := names(t, folder); !slices.Equal(got, []string{"PAD.toml", "after.wav", "before.wav", "rig.toml"}) {
		t.Errorf("the folder holds %q", got)
	}
}

// After an error only what was there before is left.
func TestRecordLeavesNothingAfterAnError(t *testing.T) {
	cancelled, cancel := context.WithCancel(t.Context())
	cancel()
	missing := sheets(t)
	missing.Rig += ".gone"
	tooLong := short(t)
	for range 500 {
		tooLong.Note += "0123456789"
	}
	for name, tc := range map[string]struct {
		plan   Plan
		ctx    context.Context
		sheets Sheets
	}{
		"interrupted":      {short(t), cancelled, sheets(t)},
		"no rig sheet":     {short(t), t.Context(), missing},
		"comment too long": {tooLong, t.Context(), sheets(t)},
	} {
		parent := t.TempDir()
		if takes, err := tc.plan.Record(tc.ctx, filepath.Join(parent, "lot", "0417"), tc.sheets); err == nil || takes != nil {
			t.Errorf("%s: Record() = %v, %v, want an error", name, takes, err)
		}
		if got := names(t, parent); got != nil {
			t.Errorf("%s: left behind %q", name, got)
		}
		write(t, filepath.Join(parent, "note.txt"), "mine")
		if _, err := tc.plan.Record(tc.ctx, parent, tc.sheets); err == nil {
			t.Errorf("%s: no error in a folder that is there", name)
		}
		if got := names(t, parent); !slices.Equal(got, []string{"note.txt"}) {
			t.Errorf("%s: the folder holds %q, want note.txt alone", name, got)
		}
	}
}

// An interruption half way leaves nothing either.
func TestRecordInterruptedHalfWay(t *testing.T) {
	ctx, cancel := context.WithCancel(t.Context())
	p := short(t)
	parent := t.TempDir()
	folder := filepath.Join(parent, "0417")
	p.Signal.Sec = 600
	go func() {
		for {
			if found, _ := filepath.Glob(filepath.Join(folder, "before.wav*")); len(found) > 0 {
				cancel()
				return
			}
		}
	}()
	if _, err := p.Record(ctx, folder, sheets(t)); !errors.Is(err, context.Canceled) {
		t.Errorf("Record() = %v, want %v", err, context.Canceled)
	}
	if got := names(t, parent); got != nil {
		t.Errorf("left behind %q", got)
	}
}

func TestRecordSaysWhatClips(t *testing.T) {
	p := short(t)
	p.Bench.AfterGainDB = 30
	p.Float, p.Bits = false, 24
	takes, err := p.Record(t.Context(), filepath.Join(t.TempDir(), "0417"), sheets(t))
	if err != nil {
		t.Fatal(err)
	}
	if takes[0].Clipped || !takes[1].Clipped {
		t.Errorf("clipped: before %v, after %v; want after alone", takes[0].Clipped, takes[1].Clipped)
	}
}

func TestRecordIntoAFileIsAnError(t *testing.T) {
	path := filepath.Join(t.TempDir(), "0417")
	write(t, path, "mine")
	if _, err := short(t).Record(t.Context(), path, sheets(t)); err == nil {
		t.Error("no error for a folder that is a file")
	}
}
