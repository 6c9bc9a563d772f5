package unit

import (
	"errors"
	"fmt"
	"io/fs"
	"maps"
	"os"
	"path/filepath"
	"slices"
	"strings"
	"testing"
)

// lay makes a lot with the given files, each a slash path, and moves into it, so
// that paths are short. Files are empty: this package opens none.
func lay(t *testing.T, files ...string) {
	t.Helper()
	t.Chdir(t.TempDir())
	for _, f := range files {
		path := filepath.FromSlash(f)
		if err := os.MkdirAll(filepath.Dir(path), 0o755); err != nil {
			t.Fatal(err)
		}
		if strings.HasSuffix(f, "/") {
			if err := os.MkdirAll(path, 0o755); err != nil {
				t.Fatal(err)
			}
			continue
		}
		if err := os.WriteFile(path, nil, 0o644); err != nil {
			t.Fatal(err)
		}
	}
}

// shown is a unit's files in one line, those that serve others too with a star.
func shown(u *Unit) string {
	var words []string
	add := func(what, path string) {
		if path == "" {
			return
		}
		star := ""
		if u.Inherited[path] {
			star = "*"
		}
		words = append(words, fmt.Sprintf("%s=%s%s", what, filepath.ToSlash(path), star))
	}
	add("pad", u.PadFile)
	add("rig", u.RigFile)
	for _, role := range slices.Sorted(maps.Keys(u.Files)) {
		add(role, u.Files[role])
	}
	return strings.Join(words, " ")
}

func TestOpen(t *testing.T) {
	for _, c := range []struct {
		name, folder string
		files        []string
		serial, want string
	}{
		{"whole", "0417", []string{"0417/pad.toml", "0417/rig.toml", "0417/before.wav", "0417/after.wav"},
			"0417", "pad=0417/pad.toml rig=0417/rig.toml after=0417/after.wav before=0417/before.wav"},
		{"names in capitals", "0417", []string{"0417/PAD.TOML", "0417/Rig.toml", "0417/BEFORE.WAV", "0417/After.Wav"},
			"0417", "pad=0417/PAD.TOML rig=0417/Rig.toml after=0417/After.Wav before=0417/BEFORE.WAV"},
		{"shared by the lot", "lot/0417", []string{"lot/pad.toml", "lot/rig.toml", "lot/before.wav", "lot/calibration.wav", "lot/before-again.wav",
			"lot/before-loaded.wav", "lot/rig-noise.wav", "lot/legs-before.wav", "lot/0417/after.wav"},
			"0417", "pad=lot/pad.toml* rig=lot/rig.toml* after=lot/0417/after.wav before=lot/before.wav* before-again=lot/before-again.wav* " +
				"before-loaded=lot/before-loaded.wav* calibration=lot/calibration.wav* legs-before=lot/legs-before.wav* rig-noise=lot/rig-noise.wav*"},
		{"never shared", "lot/0417", []string{"lot/before.wav", "lot/after-again.wav", "lot/pad-noise.wav", "lot/flex.wav", "lot/legs.wav",
			"lot/bypass.wav", "lot/both.wav", "lot/after.wav", "lot/0417/after.wav"},
			"0417", "after=lot/0417/after.wav before=lot/before.wav*"},
		{"own before shared", "lot/0417", []string{"lot/pad.toml", "lot/before.wav", "lot/0417/pad.toml", "lot/0417/before.wav", "lot/0417/after.wav"},
			"0417", "pad=lot/0417/pad.toml after=lot/0417/after.wav before=lot/0417/before.wav"},
		{"two above is too far", "a/lot/0417", []string{"a/pad.toml", "a/lot/before.wav", "a/lot/0417/after.wav"},
			"0417", "after=a/lot/0417/after.wav before=a/lot/before.wav*"},
		{"both in place of two", "lot/0417", []string{"lot/before.wav", "lot/rig-noise.wav", "lot/0417/both.wav"},
			"0417", "both=lot/0417/both.wav rig-noise=lot/rig-noise.wav*"},
		{"slash at the end", "0417/", []string{"0417/before.wav", "0417/after.wav"}, "0417", "after=0417/after.wav before=0417/before.wav"},
		{"dots on the way", "./x/../0417/.", []string{"x/", "0417/before.wav", "0417/after.wav"}, "0417", "after=0417/after.wav before=0417/before.wav"},
		{"hidden files", "0417", []string{"0417/before.wav", "0417/after.wav", "0417/._before.wav", "0417/._pad.toml", "0417/.after.wav"},
			"0417", "after=0417/after.wav before=0417/before.wav"},
		{"all roles", "u.v", func() []string {
			var files []string
			for _, role := range Roles() {
				if role != Both {
					files = append(files, "u.v/"+role+".wav")
				}
			}
			return files
		}(), "u.v", "after=u.v/after.wav after-again=u.v/after-again.wav before=u.v/before.wav before-again=u.v/before-again.wav " +
			"before-loaded=u.v/before-loaded.wav bypass=u.v/bypass.wav calibration=u.v/calibration.wav flex=u.v/flex.wav " +
			"legs=u.v/legs.wav legs-before=u.v/legs-before.wav pad-noise=u.v/pad-noise.wav rig-noise=u.v/rig-noise.wav"},
	} {
		t.Run(c.name, func(t *testing.T) {
			lay(t, c.files...)
			u, err := Open(c.folder)
			if err != nil {
				t.Fatal(err, hintOf(err))
			}
			if got := shown(u); got != c.want || u.Serial != c.serial || len(u.Warnings) != 0 {
				t.Errorf("Open(%q) = %q %s, warnings %q\nwant %q %s", c.folder, u.Serial, got, u.Warnings, c.serial, c.want)
			}
		})
	}
}

func hintOf(err error) string {
	var e *Error
	if !errors.As(err, &e) {
		return "(no *Error)"
	}
	return e.Hint
}

// The folder one is in, and the one above, have their names and what they share.
func TestOpenFromInside(t *testing.T) {
	lay(t, "lot/pad.toml", "lot/before.wav", "lot/0417/after.wav", "lot/0417/deep/")
	t.Chdir(filepath.FromSlash("lot/0417"))
	for folder, want := range map[string]string{
		".":  "pad=../pad.toml* after=after.wav before=../before.wav*",
		"./": "pad=../pad.toml* after=after.wav before=../before.wav*",
	} {
		u, err := Open(folder)
		if err != nil || u.Serial != "0417" || shown(u) != want {
			t.Errorf("Open(%q) = %+v, %v, want 0417 %s", folder, u, err, want)
		}
	}
	t.Chdir("deep")
	u, err := Open("..")
	if want := "pad=../../pad.toml* after=../after.wav before=../../before.wav*"; err != nil || u.Serial != "0417" || shown(u) != want {
		t.Errorf("Open(..) = %+v, %v, want 0417 %s", u, err, want)
	}
}

// A link to a unit's folder is a unit by the link's name; above it is the folder
// that holds the link.
func TestOpenLink(t *testing.T) {
	lay(t, "there/0417/after.wav", "there/before.wav", "here/before.wav", "here/take.wav")
	if err := os.Symlink(filepath.FromSlash("../there/0417"), filepath.FromSlash("here/0418")); err != nil {
		t.Skip("no links on this system: ", err)
	}
	u, err := Open(filepath.FromSlash("here/0418"))
	if want := "after=here/0418/after.wav before=here/before.wav*"; err != nil || u.Serial != "0418" || shown(u) != want {
		t.Errorf("Open = %+v, %v, want 0418 %s", u, err, want)
	}
	if layout, err := LayoutOf("here"); layout != FolderLot || err != nil {
		t.Errorf("LayoutOf a folder with a linked unit = %q, %v, want %q", layout, err, FolderLot)
	}
}

func TestOpenErrors(t *testing.T) {
	for _, c := range []struct {
		name, folder     string
		files            []string
		says, mend, file string
	}{
		{"no folder named", "", nil, "no folder is named", "", ""},
		{"not there", "0417", nil, "no such folder", "spelling", "0417"},
		{"a file", "0417.wav", []string{"0417.wav"}, "is a file, not a folder", "--before", "0417.wav"},
		{"below a file", "x.wav/0417", []string{"x.wav"}, "", "", "x.wav/0417"},
		{"empty", "lot/0417", []string{"lot/0417/"}, "before.wav and after.wav are missing; looked in lot/0417 and lot", "both.wav", "lot/0417"},
		{"no after", "lot/0417", []string{"lot/0417/before.wav"}, "after.wav is missing; looked in lot/0417", "record the tone through the pad", "lot/0417"},
		{"no before", "lot/0417", []string{"lot/0417/after.wav"}, "before.wav is missing; looked in lot/0417 and lot", "one folder up", "lot/0417"},
		{"after above", "lot/0417", []string{"lot/after.wav", "lot/before.wav", "lot/0417/"}, "after.wav is missing", "lot/after.wav serves no unit: move it", "lot/0417"},
		{"name misspelt", "0417", []string{"0417/befor.wav", "0417/after.wav"}, "before.wav is missing", "befor.wav is there: if it is the one, rename it to before.wav", "0417"},
		{"another format", "0417", []string{"0417/before.wav", "0417/after.flac"}, "after.wav is missing", "0417/after.flac is there: save it again as WAV", "0417"},
		{"a lot of folders", "lot", []string{"lot/before.wav", "lot/0417/after.wav"}, "after.wav is missing", "one by one", "lot"},
		{"a flat lot", "lot", []string{"lot/0417.before.wav", "lot/0417.x.after.wav", "lot/0418.rig-noise.wav"}, "are missing", "", "lot"},
		{"two takes for a role", "0417", []string{"0417/before.wav", "0417/BEFORE.wav", "0417/after.wav"}, "and BEFORE.wav are two files for one role", "keep one", "0417/before.wav"},
		{"two shared takes for a role", "lot/0417", []string{"lot/before.wav", "lot/Before.wav", "lot/0417/after.wav"}, "are two files for one role", "keep one", "lot/before.wav"},
		{"two sheets", "0417", []string{"0417/before.wav", "0417/after.wav", "0417/pad.toml", "0417/Pad.toml"}, "are two files for one sheet", "keep one", "0417/pad.toml"},
		{"both and after", "0417", []string{"0417/both.wav", "0417/after.wav"}, "but after.wav is there too", "keep the one or the other", "0417/both.wav"},
	} {
		t.Run(c.name, func(t *testing.T) {
			lay(t, c.files...)
			if strings.Contains(c.name, "two") && !caseCounts(t) {
				t.Skip("names here do not differ by case")
			}
			u, err := Open(c.folder)
			var e *Error
			if !errors.As(err, &e) || u != nil {
				t.Fatalf("Open(%q) = %+v, %v, want an *Error alone", c.folder, u, err)
			}
			if !strings.Contains(e.Text, c.says) || !strings.Contains(filepath.ToSlash(e.Hint), c.mend) || e.Hint == "" || filepath.ToSlash(e.File) != c.file {
				t.Errorf("Open(%q): file %q, %q, hint %q\nwant file %q, %q, hint %q", c.folder, e.File, e.Text, e.Hint, c.file, c.says, c.mend)
			}
		})
	}
}

// After alone is not looked for above, and the error does not say so.
func TestMissingAfterLookedInOwnFolder(t *testing.T) {
	lay(t, "lot/before.wav", "lot/0417/")
	_, err := Open("lot/0417")
	if want := "lot/0417: after.wav is missing; looked in lot/0417"; err == nil || filepath.ToSlash(err.Error()) != want {
		t.Errorf("Open = %v, want %q", err, want)
	}
}

// caseCounts tells whether this system tells names apart by case.
func caseCounts(t *testing.T) bool {
	t.Helper()
	dir := t.TempDir()
	if err := os.WriteFile(filepath.Join(dir, "a"), nil, 0o644); err != nil {
		t.Fatal(err)
	}
	_, err := os.Stat(filepath.Join(dir, "A"))
	return err != nil
}

// The superuser may read every folder, so the refusal is made here.
func TestUnreadableFolder(t *testing.T) {
	refused := &fs.PathError{Op: "open", Path: "0417", Err: fs.ErrPermission}
	if err := noFolder("0417", refused); err.Text != "may not be read" || err.File != "0417" || err.Hint == "" {
		t.Errorf("noFolder(%v) = %+v, want what it is and what to do", refused, err)
	}
}

func TestWarnings(t *testing.T) {
	sound := []string{"lot/0417/before.wav", "lot/0417/after.wav"}
	for _, c := range []struct{ file, want string }{
		{"lot/0417/befor-again.wav", "befor-again.wav is no role and was left out; did you mean before-again.wav?"},
		{"lot/0417/Before Loaded.wav", "Before Loaded.wav is no role and was left out; did you mean before-loaded.wav?"},
		{"lot/0417/rig_noise.WAV", "rig_noise.WAV is no role and was left out; did you mean rig-noise.wav?"},
		{"lot/0417/0417.flex.wav", "0417.flex.wav is no role and was left out; did you mean flex.wav?"},
		{"lot/0417/notes to self.wav", "notes to self.wav is no role and was left out; the nearest is "},
		{"lot/0417/pad-v2.toml", "lot/0417/pad-v2.toml is no sheet and was left out; did you mean pad.toml?"},
		{"lot/rgi.toml", "lot/rgi.toml is no sheet and was left out; did you mean rig.toml?"},
		{"lot/calibratoin.wav", "lot/calibratoin.wav is no role and was left out; did you mean calibration.wav?"},
		{"lot/aftr.wav", ""}, // what lies above serves no unit as after
		{"lot/holiday.wav", ""},
		{"lot/0417/ohms.toml", ""},
		{"lot/0417/0417.ohms.toml", "lot/0417/0417.ohms.toml was left out: in a unit's own folder its name is ohms.toml"},
		{"lot/0417/ohm.toml", "lot/0417/ohm.toml is no sheet and was left out; did you mean ohms.toml?"},
		{"lot/ohms.toml", "lot/ohms.toml was left out: readings are one unit's"},
		{"lot/0417/readme.txt", ""},
		{"lot/0417/.hidden.wav", ""},
	} {
		lay(t, append(sound, c.file)...)
		u, err := Open(filepath.FromSlash("lot/0417"))
		if err != nil {
			t.Errorf("with %s: %v", c.file, err)
			continue
		}
		got := filepath.ToSlash(strings.Join(u.Warnings, " | "))
		if (c.want == "") != (got == "") || !strings.HasPrefix(got, c.want) || len(u.Warnings) > 1 {
			t.Errorf("with %s: warnings %q, want %q", c.file, got, c.want)
		}
	}
}

// Readings are the unit's own, in a folder and in a flat lot.
func TestOhmsFile(t *testing.T) {
	lay(t, "lot/0417/before.wav", "lot/0417/after.wav", "lot/0417/Ohms.toml", "lot/0418/before.wav", "lot/0418/after.wav")
	for serial, want := range map[string]string{"0417": "lot/0417/Ohms.toml", "0418": ""} {
		u, err := Open(filepath.Join("lot", serial))
		if err != nil {
			t.Fatal(err)
		}
		if got := filepath.ToSlash(u.OhmsFile); got != want {
			t.Errorf("Open(%s).OhmsFile = %q, want %q", serial, got, want)
		}
	}
	lay(t, "flat/before.wav", "flat/0417.a.after.wav", "flat/0417.A.ohms.toml", "flat/0418.after.wav", "flat/0419.ohms.toml", "flat/ohms.toml")
	units, warnings, err := Flat("flat")
	if err != nil {
		t.Fatal(err)
	}
	got := map[string]string{}
	for _, u := range units {
		got[u.Serial] = filepath.ToSlash(u.OhmsFile)
	}
	if len(got) != 2 || got["0417.a"] != "flat/0417.A.ohms.toml" || got["0418"] != "" {
		t.Errorf("Flat() readings = %q", got)
	}
	want := []string{"ohms.toml was left out: readings are one unit's; name it SERIAL.ohms.toml", "0419.ohms.toml was left out: there is no take of that unit"}
	if !slices.Equal(warnings, want) {
		t.Errorf("Flat() warnings = %q, want %q", warnings, want)
	}
}

func TestOhmsFileTwice(t *testing.T) {
	if !caseCounts(t) {
		t.Skip("this system holds one file for both names")
	}
	lay(t, "0417/before.wav", "0417/after.wav", "0417/Ohms.toml", "0417/ohms.toml")
	if _, err := Open("0417"); err == nil || !strings.Contains(err.Error(), "two files for one sheet") {
		t.Errorf("Open with two ohms.toml = %v, want an error", err)
	}
}
