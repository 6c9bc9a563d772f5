package rehearsal

import (
	"context"
	"errors"
	"io/fs"
	"math"
	"os"
	"path/filepath"
	"strings"

	"padproof/capture"
)

// A Take is a recording that was made.
type Take struct {
	Role     string
	File     string // its name in the folder
	Channels int
	Frames   int64
	Clipped  bool // something lay beyond full scale
}

// Sheets are the files that describe pad and rig; copies of them lie beside the takes, and
// so does the text of an ohms.toml, where there is one.
type Sheets struct {
	Pad, Rig string
	Ohms     string // its text; "" for none
}

const ohmsSheet = "ohms.toml"

// names returns the file in a unit's folder for each sheet.
func (s Sheets) names() [][2]string {
	return [][2]string{{s.Pad, "pad.toml"}, {s.Rig, "rig.toml"}}
}

// Record makes the takes of a plan in a folder, which is made if it is not there, and
// copies the sheets into it. Nothing there is overwritten: a file of one of the names is an
// error (errors.Is finds [fs.ErrExist]), in whatever case it is written, unless it is that
// very sheet. After an error, a cancelled context included, nothing is left of what Record
// made.
func (p Plan) Record(ctx context.Context, folder string, sheets Sheets) ([]Take, error) {
	if err := p.Check(); err != nil {
		return nil, err
	}
	f := &unitFolder{path: filepath.Clean(folder), kept: map[string]bool{}}
	takes, err := p.record(ctx, f, sheets)
	if err != nil {
		return nil, errors.Join(err, f.undo())
	}
	return takes, nil
}

func (p Plan) record(ctx context.Context, f *unitFolder, sheets Sheets) ([]Take, error) {
	if err := f.vacant(p.Takes, sheets); err != nil {
		return nil, err
	}
	if err := f.makeFolder(f.path); err != nil {
		return nil, err
	}
	for _, s := range sheets.names() {
		if err := f.copySheet(s[0], s[1]); err != nil {
			return nil, err
		}
	}
	if err := f.writeOhms(sheets.Ohms); err != nil {
		return nil, err
	}
	var takes []Take
	for _, role := range p.Takes {
		t, err := p.take(ctx, f, role)
		if err != nil {
			return nil, err
		}
		takes = append(takes, t)
	}
	return takes, nil
}

// take records one role.
func (p Plan) take(ctx context.Context, f *unitFolder, role string) (Take, error) {
	t := Take{Role: role, File: role + ".wav"}
	r, err := p.recipe(p.madeAs(role))
	if err != nil {
		return t, err
	}
	s, err := p.scene(r)
	if err != nil {
		return t, err
	}
	t.Channels = len(r.paths)
	path := filepath.Join(f.path, t.File)
	w, err := capture.Create(path, p.format(r))
	if err != nil {
		return t, err
	}
	defer w.Abort()
	err = s.play(func(frames []float64) error {
		for _, x := range frames {
			t.Clipped = t.Clipped || math.Abs(x) > 1 && !math.IsInf(x, 0)
		}
		t.Frames += int64(len(frames) / t.Channels)
		f.wrote(int64(len(frames)/t.Channels), p)
		return errors.Join(ctx.Err(), w.Write(frames))
	})
	if err != nil {
		return t, err
	}
	if err := w.Close(); err != nil {
		return t, err
	}
	f.made = append(f.made, path)
	if r.afterwards != nil {
		return t, r.afterwards(path)
	}
	return t, nil
}

// A unitFolder is the place written to, and what was made there.
type unitFolder struct {
	path string
	kept map[string]bool // sheets that lie there already, by name
	made []string        // files and folders, in the order in which they came to be
	done int64           // frames written
}

// wrote counts frames and tells of them.
func (f *unitFolder) wrote(frames int64, p Plan) {
	f.done += frames
	if p.Progress != nil {
		total := p.frames()
		p.Progress(min(f.done, total), total)
	}
}

// vacant makes sure that none of the names is taken.
func (f *unitFolder) vacant(roles []string, sheets Sheets) error {
	there, err := os.ReadDir(f.path)
	if errors.Is(err, fs.ErrNotExist) {
		return nil
	}
	if err != nil {
		return err
	}
	sheetOf := map[string]string{}
	for _, s := range sheets.names() {
		sheetOf[s[1]] = s[0]
	}
	for _, entry := range there {
		name, path := strings.ToLower(entry.Name()), filepath.Join(f.path, entry.Name())
		taken := name == ohmsSheet && sheets.Ohms != ""
		for _, role := range roles {
			taken = taken || name == role+".wav"
		}
		sheet, isSheet := sheetOf[name]
		if taken || isSheet && !same(path, sheet) {
			return &fs.PathError{Op: "create", Path: path, Err: fs.ErrExist}
		}
		f.kept[name] = isSheet
	}
	return nil
}

// same tells whether two paths lead to one file.
func same(a, b string) bool {
	x, errA := os.Stat(a)
	y, errB := os.Stat(b)
	return errA == nil && errB == nil && os.SameFile(x, y)
}

// makeFolder makes a folder and those above it.
func (f *unitFolder) makeFolder(path string) error {
	err := os.Mkdir(path, 0o777)
	switch {
	case err == nil:
		f.made = append(f.made, path)
		return nil
	case errors.Is(err, fs.ErrExist):
		return nil
	case errors.Is(err, fs.ErrNotExist) && filepath.Dir(path) != path:
		if err := f.makeFolder(filepath.Dir(path)); err != nil {
			return err
		}
		return f.makeFolder(path)
	}
	return err
}

// copySheet puts a copy of a sheet there, unless it is there already.
func (f *unitFolder) copySheet(from, name string) error {
	if f.kept[name] {
		return nil
	}
	data, err := os.ReadFile(from)
	if err != nil {
		return err
	}
	return f.write(name, data)
}

// writeOhms writes the readings of an ohmmeter, where there are some.
func (f *unitFolder) writeOhms(text string) error {
	if text == "" {
		return nil
	}
	return f.write(ohmsSheet, []byte(text))
}

// write makes a file of a name that is vacant.
func (f *unitFolder) write(name string, data []byte) error {
	to := filepath.Join(f.path, name)
	out, err := os.OpenFile(to, os.O_WRONLY|os.O_CREATE|os.O_EXCL, 0o666)
	if err != nil {
		return err
	}
	f.made = append(f.made, to)
	_, err = out.Write(data)
	return errors.Join(err, out.Close())
}

// undo takes away what was made, the last first.
func (f *unitFolder) undo() error {
	var errs []error
	for i := len(f.made) - 1; i >= 0; i-- {
		if err := os.Remove(f.made[i]); !errors.Is(err, fs.ErrNotExist) {
			errs = append(errs, err)
		}
	}
	return errors.Join(errs...)
}
