package unit

import (
	"errors"
	"fmt"
	"path/filepath"
	"strings"
	"testing"
)

func TestLayoutOf(t *testing.T) {
	for _, c := range []struct {
		name  string
		files []string
		want  Layout
	}{
		{"unit", []string{"x/before.wav", "x/after.wav"}, OneUnit},
		{"unit of both", []string{"x/both.wav"}, OneUnit},
		{"unit not yet whole", []string{"x/before.wav"}, OneUnit},
		{"unit with a folder in it", []string{"x/after.wav", "x/old/after.wav"}, OneUnit},
		{"flat", []string{"x/0417.after.wav", "x/0418.after.wav"}, FlatLot},
		{"flat, before shared", []string{"x/before.wav", "x/A.1.After.WAV"}, FlatLot},
		{"folders", []string{"x/0417/after.wav", "x/notes.txt"}, FolderLot},
		{"folders, before shared", []string{"x/before.wav", "x/pad.toml", "x/0417/after.wav"}, FolderLot},
		{"folders without takes", []string{"x/0417/notes.txt", "x/pad.toml"}, NoLayout},
		{"hidden folder", []string{"x/.trash/after.wav"}, NoLayout},
		{"WAVs of no role", []string{"x/song.wav"}, NoLayout},
		{"nothing", []string{"x/"}, NoLayout},
	} {
		lay(t, c.files...)
		if got, err := LayoutOf("x/"); got != c.want || err != nil {
			t.Errorf("%s: LayoutOf = %q, %v, want %q", c.name, got, err, c.want)
		}
	}
	var e *Error
	if _, err := LayoutOf("none"); !errors.As(err, &e) || e.Text != "no such folder" {
		t.Errorf("LayoutOf what is not there: %v", err)
	}
}

func TestFlat(t *testing.T) {
	lay(t, "lot/pad.toml", "lot/before.wav", "lot/rig-noise.wav", "lot/after.wav",
		"lot/0418.after.wav", "lot/0417.after.wav", "lot/0417.before.wav", "lot/A.1.2.AFTER.wav", "lot/a.1.2.Flex.WAV",
		"lot/0419.both.wav", "lot/0420.before.wav", "lot/0417.legz.wav", "lot/0499.aftr.wav", "lot/song.wav", "lot/.0500.after.wav", "lot/rig2.toml")
	units, warnings, err := Flat("lot/")
	if err != nil {
		t.Fatal(err)
	}
	want := []string{
		"0417: pad=lot/pad.toml* after=lot/0417.after.wav before=lot/0417.before.wav rig-noise=lot/rig-noise.wav*",
		"0418: pad=lot/pad.toml* after=lot/0418.after.wav before=lot/before.wav* rig-noise=lot/rig-noise.wav*",
		"0419: pad=lot/pad.toml* both=lot/0419.both.wav rig-noise=lot/rig-noise.wav*",
		"0420: pad=lot/pad.toml* before=lot/0420.before.wav rig-noise=lot/rig-noise.wav*",
		"A.1.2: pad=lot/pad.toml* after=lot/A.1.2.AFTER.wav before=lot/before.wav* flex=lot/a.1.2.Flex.WAV rig-noise=lot/rig-noise.wav*",
	}
	var got []string
	for _, u := range units {
		got = append(got, u.Serial+": "+shown(u))
	}
	if strings.Join(got, "\n") != strings.Join(want, "\n") {
		t.Errorf("Flat =\n%s\nwant\n%s", strings.Join(got, "\n"), strings.Join(want, "\n"))
	}
	for _, u := range units {
		err := u.Ready()
		if (err != nil) != (u.Serial == "0420") {
			t.Errorf("unit %s ready: %v", u.Serial, err)
		}
	}
	err = units[3].Ready()
	var e *Error
	if !errors.As(err, &e) || e.Serial != "0420" || err.Error() != "lot: 0420.after.wav is missing; looked in lot" || !strings.Contains(e.Hint, "0420.after.wav") {
		t.Errorf("unit 0420: %v, hint %q", err, hintOf(err))
	}
	if w := units[0].Warnings; len(w) != 1 || w[0] != "0417.legz.wav is no role and was left out; did you mean 0417.legs.wav?" {
		t.Errorf("warnings of 0417 = %q", w)
	}
	all := filepath.ToSlash(strings.Join(warnings, "\n"))
	for _, part := range []string{"0499.aftr.wav is no role and was left out; did you mean 0499.after.wav?", "song.wav is no role", "after.wav names no unit",
		"lot/rig2.toml is no sheet"} {
		if !strings.Contains(all, part) {
			t.Errorf("warnings %q, want %q among them", all, part)
		}
	}
	if len(warnings) != 4 {
		t.Errorf("%d warnings, want 4: %q", len(warnings), all)
	}
}

func TestFlatErrors(t *testing.T) {
	lay(t, "lot/before.wav", "empty/")
	for folder, want := range map[string]string{"lot": "SERIAL.ROLE.wav", "empty": "SERIAL.ROLE.wav", "none": "no such folder"} {
		units, _, err := Flat(folder)
		var e *Error
		if !errors.As(err, &e) || !strings.Contains(e.Text, want) || e.Hint == "" || units != nil {
			t.Errorf("Flat(%q) = %v, %v, want an error with %q", folder, units, err, want)
		}
	}
}

// Takes of one unit beside the folders of others leave none of them out.
func TestMixedLot(t *testing.T) {
	lay(t, "lot/before.wav", "lot/0419.after.wav", "lot/0420.after.wav", "lot/0417/after.wav", "lot/0418/both.wav", "lot/0420/after.wav", "lot/pictures/")
	lot, err := OpenLot("lot", nil)
	if err != nil {
		t.Fatal(err)
	}
	var got []string
	for _, u := range lot.Units {
		got = append(got, u.Serial)
	}
	if want := "0417 0418 0419 0420"; strings.Join(got, " ") != want {
		t.Fatalf("units %q, want %s", got, want)
	}
	if shown := shown(lot.Units[0]); !strings.Contains(shown, "before=lot/before.wav*") {
		t.Errorf("0417: %s, want the shared before", shown)
	}
	if err := lot.Units[3].Ready(); err == nil || !strings.Contains(err.Error(), "two units of one serial") {
		t.Errorf("0420, there both ways: %v", err)
	}
	if w := strings.Join(lot.Warnings, "; "); !strings.Contains(w, "pictures") {
		t.Errorf("warnings %q, want one of the folder pictures", w)
	}
}

// One unit with two files for a role spoils no other.
func TestFlatTwoFiles(t *testing.T) {
	lay(t, "lot/before.wav", "lot/0417.after.wav", "lot/0417.After.wav", "lot/0418.after.wav")
	if !caseCounts(t) {
		t.Skip("names here do not differ by case")
	}
	units, _, err := Flat("lot")
	if err != nil || len(units) != 2 {
		t.Fatalf("Flat = %v, %v, want two units", units, err)
	}
	if err := units[0].Ready(); err == nil || !strings.Contains(err.Error(), "two files for one role") {
		t.Errorf("0417: %v", err)
	}
	if err := units[1].Ready(); err != nil {
		t.Errorf("0418: %v", err)
	}
}

// A long lot takes no longer than its names.
func TestFlatLarge(t *testing.T) {
	var files []string
	for i := range 3000 {
		files = append(files, fmt.Sprintf("lot/%05d.after.wav", i))
	}
	lay(t, append(files, "lot/before.wav")...)
	units, _, err := Flat("lot")
	if err != nil || len(units) != 3000 {
		t.Fatalf("Flat = %d units, %v, want 3000", len(units), err)
	}
}

func TestFromFiles(t *testing.T) {
	for _, c := range []struct {
		name   string
		files  map[string]string
		serial string
	}{
		{"one folder", map[string]string{Before: "lot/before.wav", After: "lot/0417/a.wav"}, "0417"},
		{"serial in the name", map[string]string{Before: "x/before.wav", After: "y/04.17.after.wav", Legs: "z/04.17.legs.wav"}, "04.17"},
		{"two folders", map[string]string{Before: "b.wav", After: "x/a.wav", Flex: "y/f.wav"}, ""},
		{"role in capitals", map[string]string{"Before": "b/b.wav", "AFTER": "u/a.wav"}, "u"},
		{"both", map[string]string{Both: "u/b.wav"}, "u"},
		{"empty paths", map[string]string{Before: "u/b.wav", After: "u/a.wav", Both: "", RigNoise: ""}, "u"},
	} {
		lay(t)
		u, err := FromFiles(c.files, "p.toml", "")
		if err != nil {
			t.Errorf("%s: %v", c.name, err)
			continue
		}
		if u.Serial != c.serial || u.PadFile != "p.toml" || u.RigFile != "" || u.Folder != "" || len(u.Inherited) != 0 {
			t.Errorf("%s: %+v, want serial %q", c.name, u, c.serial)
		}
		for name, path := range c.files {
			if role, _ := RoleOf(name); u.Files[role] != path {
				t.Errorf("%s: %s = %q, want %q", c.name, role, u.Files[role], path)
			}
		}
	}
}

func TestFromFilesErrors(t *testing.T) {
	for _, c := range []struct {
		files      map[string]string
		says, mend string
	}{
		{nil, "no take is named for before and after", "--before"},
		{map[string]string{Before: "b.wav"}, "no take is named for after", "--after"},
		{map[string]string{"befor": "b.wav", After: "a.wav"}, `"befor" is no role`, "did you mean before?"},
		{map[string]string{Both: "x.wav", After: "a.wav"}, "stands in place", "keep the one"},
	} {
		u, err := FromFiles(c.files, "", "")
		var e *Error
		if !errors.As(err, &e) || u != nil || !strings.Contains(e.Text, c.says) || !strings.Contains(e.Hint, c.mend) {
			t.Errorf("FromFiles(%v) = %v, %v, hint %q, want %q, hint %q", c.files, u, err, hintOf(err), c.says, c.mend)
		}
	}
}

func TestRoles(t *testing.T) {
	if len(Roles()) != 13 {
		t.Errorf("%d roles, want 13", len(Roles()))
	}
	for _, role := range []string{After, AfterAgain, PadNoise, Flex, Legs, Bypass, Both} {
		if Shared(role) {
			t.Errorf("%s is shared, but holds the pad", role)
		}
	}
	for text, want := range map[string]bool{"Before": true, "RIG-NOISE": true, "before.wav": false, "": false, "befor": false} {
		if _, ok := RoleOf(text); ok != want {
			t.Errorf("RoleOf(%q) = %v, want %v", text, ok, want)
		}
	}
}
