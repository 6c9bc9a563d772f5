package unit

import (
	"errors"
	"strings"
	"testing"
)

func TestNamed(t *testing.T) {
	for _, c := range []struct {
		name, serial, role string
		ok                 bool
	}{
		{"after.wav", "", "after", true},
		{"0417.After.WAV", "0417", "after", true},
		{"A.1.2.pad-noise.wav", "A.1.2", "pad-noise", true},
		{"0417.aftr.wav", "0417", "", true},
		{"song.wav", "", "", true},
		{".after.wav", "", "", false},
		{"after.wav.part", "", "", false},
		{"pad.toml", "", "", false},
		{"", "", "", false},
	} {
		if serial, role, ok := Named(c.name); serial != c.serial || role != c.role || ok != c.ok {
			t.Errorf("Named(%q) = %q, %q, %v, want %q, %q, %v", c.name, serial, role, ok, c.serial, c.role, c.ok)
		}
	}
	for name, want := range map[string]string{"Pad.toml": "pad.toml", "RIG.TOML": "rig.toml", "lot.toml": "lot.toml", "ohms.toml": "", "after.wav": ""} {
		if got := SheetNamed(name); got != want {
			t.Errorf("SheetNamed(%q) = %q, want %q", name, got, want)
		}
	}
}

// One unit of a flat lot is what it is among all.
func TestOpenSerial(t *testing.T) {
	lay(t, "lot/pad.toml", "lot/before.wav", "lot/0417.after.wav", "lot/0417.legz.wav", "lot/A.1.AFTER.wav", "lot/a.1.flex.wav", "lot/0420.before.wav")
	all, _, err := Flat("lot")
	if err != nil {
		t.Fatal(err)
	}
	for _, want := range all {
		got, err := OpenSerial("lot", want.Serial)
		if err != nil || got.Serial != want.Serial || shown(got) != shown(want) || strings.Join(got.Warnings, "|") != strings.Join(want.Warnings, "|") {
			t.Errorf("OpenSerial(%q) = %+v, %v, want %+v", want.Serial, got, err, want)
		}
		if (got.Ready() == nil) != (want.Ready() == nil) {
			t.Errorf("%s ready: %v, want %v", want.Serial, got.Ready(), want.Ready())
		}
	}
	var e *Error
	if _, err := OpenSerial("lot", "0499"); !errors.As(err, &e) || e.Hint == "" {
		t.Errorf("OpenSerial of what is not there: %v", err)
	}
	if _, err := OpenSerial("none", "0417"); !errors.As(err, &e) || e.Text != "no such folder" {
		t.Errorf("OpenSerial in no folder: %v", err)
	}
}
