package ledger

import (
	"bytes"
	"context"
	"database/sql"
	"os"
	"os/exec"
	"path/filepath"
	"runtime"
	"strings"
	"testing"
	"time"
)

// clear demands an error of the reason that names the place and says what to do.
func clear(t *testing.T, err error, want Reason, where string) {
	t.Helper()
	e, ok := err.(*Error)
	if !ok || e.Reason != want {
		t.Errorf("the error is %q of reason %q, want reason %q", err, ReasonOf(err), want)
		return
	}
	if e.Hint == "" || !strings.Contains(e.Error(), where) {
		t.Errorf("the error %q with the hint %q does not name %s and what to do", e, e.Hint, where)
	}
}

// asRoot skips what needs a mount.
func asRoot(t *testing.T) {
	t.Helper()
	if runtime.GOOS != "linux" || os.Getuid() != 0 {
		t.Skip("only root on Linux can mount a small disk")
	}
}

// disk mounts a small disk of its own.
func disk(t *testing.T, size string) string {
	t.Helper()
	asRoot(t)
	folder := t.TempDir()
	if said, err := exec.Command("mount", "-t", "tmpfs", "-o", "size="+size, "tmpfs", folder).CombinedOutput(); err != nil {
		t.Skipf("no small disk can be mounted here: %s", said)
	}
	t.Cleanup(func() { _ = exec.Command("umount", folder).Run() })
	return folder
}

// On a full disk a record is refused, all before it are there, and with room made
// the next goes in.
func TestDiskFull(t *testing.T) {
	ctx := context.Background()
	folder := disk(t, "400k")
	where := filepath.Join(folder, "ledger.db")
	l := open(t, where, Options{})
	stuffing := filepath.Join(folder, "stuffing")
	if err := os.WriteFile(stuffing, make([]byte, 60<<10), 0o600); err != nil {
		t.Fatal(err)
	}
	reported := map[string]Receipt{}
	var err error
	for n := 0; err == nil && n < 2000; n++ {
		var r Receipt
		if r, err = l.Append(ctx, record("bench", n)); err == nil {
			reported[r.String()] = r
		}
	}
	clear(t, err, Full, where)
	if len(reported) == 0 {
		t.Error("nothing went in before the disk was full")
	}
	if err := os.Remove(stuffing); err != nil {
		t.Fatal(err)
	}
	r, err := l.Append(ctx, record("bench", 5000))
	if err != nil || r.Sequence != int64(len(reported)+1) {
		t.Errorf("Append with room made = %v, %v, want sequence %d", r, err, len(reported)+1)
	}
	holds(t, where, reported)
}

// A ledger where nothing may be written can be read, and says why nothing goes in.
func TestReadOnlyDisk(t *testing.T) {
	ctx := context.Background()
	folder := disk(t, "4m")
	where := filepath.Join(folder, "ledger.db")
	l := open(t, where, Options{})
	for n := range 3 {
		if _, err := l.Append(ctx, record("bench", n)); err != nil {
			t.Fatal(err)
		}
	}
	_ = l.Close()
	if said, err := exec.Command("mount", "-o", "remount,ro", folder).CombinedOutput(); err != nil {
		t.Skipf("%s", said)
	}
	l, err := Open(ctx, where)
	if err == nil {
		_, err = l.Append(ctx, record("bench", 9))
		_ = l.Close()
	}
	clear(t, err, ReadOnly, where)
	r := open(t, where, Options{ReadOnly: true})
	if v, err := r.Verify(ctx); err != nil || v.Records != 3 || len(v.Faults) > 0 {
		t.Errorf("Verify = %+v, %v, want 3 sound records", v, err)
	}
}

// Another that holds the file's lock is named as the cause, after the wait.
func TestLockedByAnother(t *testing.T) {
	ctx := context.Background()
	where := inFile(t)
	l := open(t, where, Options{Wait: 300 * time.Millisecond})
	interpreter := python(t)
	other := exec.Command(interpreter, "-c", "import sqlite3,sys; d=sqlite3.connect(sys.argv[1], isolation_level=None); d.execute('BEGIN IMMEDIATE'); print('held', flush=True); sys.stdin.read()", where)
	in, err := other.StdinPipe()
	if err != nil {
		t.Fatal(err)
	}
	out, err := other.StdoutPipe()
	if err != nil {
		t.Fatal(err)
	}
	if err := other.Start(); err != nil {
		t.Fatal(err)
	}
	if _, err := out.Read(make([]byte, 4)); err != nil {
		t.Fatal(err)
	}
	_, err = l.Append(ctx, record("bench", 1))
	clear(t, err, Busy, where)
	_ = in.Close()
	_ = other.Wait()
	if r, err := l.Append(ctx, record("bench", 1)); err != nil || r.Sequence != 1 {
		t.Errorf("Append once the lock is gone = %v, %v, want sequence 1", r, err)
	}
}

func TestStrangeFiles(t *testing.T) {
	ctx := context.Background()
	folder := t.TempDir()
	garbage := filepath.Join(folder, "garbage.db")
	if err := os.WriteFile(garbage, bytes.Repeat([]byte("Saltmarsh\n"), 2000), 0o600); err != nil {
		t.Fatal(err)
	}
	strange := filepath.Join(folder, "strange.db")
	db, err := sql.Open("sqlite3", "file:"+strange)
	if err != nil {
		t.Fatal(err)
	}
	if _, err := db.ExecContext(ctx, "CREATE TABLE songs (name TEXT)"); err != nil {
		t.Fatal(err)
	}
	_ = db.Close()
	for _, c := range []struct {
		name, where string
		o           Options
		want        Reason
	}{
		{"bytes that are no database", garbage, Options{}, Foreign},
		{"another's database", strange, Options{}, Foreign},
		{"a folder", folder, Options{}, Foreign},
		{"no folder for it", filepath.Join(folder, "no", "ledger.db"), Options{}, Denied},
		{"none to read", filepath.Join(folder, "none.db"), Options{ReadOnly: true}, Missing},
		{"a file for a folder", filepath.Join(garbage, "ledger.db"), Options{}, Denied},
	} {
		t.Run(c.name, func(t *testing.T) {
			before, _ := os.ReadFile(c.where)
			_, err := OpenWith(ctx, c.where, c.o)
			clear(t, err, c.want, c.where)
			if after, _ := os.ReadFile(c.where); !bytes.Equal(before, after) {
				t.Error("the file was changed")
			}
		})
	}
	if _, err := os.Stat(filepath.Join(folder, "none.db")); err == nil {
		t.Error("a ledger that was only to be read was made")
	}
}

// A ledger with a damaged middle says so and is left as it is.
func TestDamaged(t *testing.T) {
	ctx := context.Background()
	where := inFile(t)
	l := open(t, where, Options{})
	var many []Record
	for n := range 300 {
		many = append(many, record("bench", n))
	}
	if _, err := l.AppendAll(ctx, many); err != nil {
		t.Fatal(err)
	}
	_ = l.Close()
	text, err := os.ReadFile(where)
	if err != nil {
		t.Fatal(err)
	}
	copy(text[8192:], bytes.Repeat([]byte{0xa5}, len(text)-8192))
	if err := os.WriteFile(where, text, 0o600); err != nil {
		t.Fatal(err)
	}
	l, err = Open(ctx, where)
	if err == nil {
		_, err = l.Append(ctx, record("bench", 1000))
		if err == nil {
			_, err = l.Verify(ctx)
		}
		_ = l.Close()
	}
	clear(t, err, Corrupt, where)
}

// A ledger of a later padproof is refused untouched; a half-made older one is
// brought up to date with its records.
func TestSchemaVersions(t *testing.T) {
	onBoth(t, func(t *testing.T, where string) {
		ctx := context.Background()
		l := open(t, where, Options{})
		if _, err := l.Append(ctx, record("bench", 1)); err != nil {
			t.Fatal(err)
		}
		texts, err := migrations(migrationFiles, l.engine.suffix())
		if err != nil {
			t.Fatal(err)
		}
		later := append(texts, "ALTER TABLE padproof_record ADD COLUMN mood TEXT")
		if err := l.migrate(ctx, append(later, "this is no SQL")); err == nil {
			t.Error("a migration that fails half-way was let through")
		}
		if have, err := l.version(ctx); err != nil || have != len(texts) {
			t.Errorf("version after a failed migration = %d, %v, want %d", have, err, len(texts))
		}
		if err := l.migrate(ctx, later); err != nil {
			t.Fatal(err)
		}
		if r, err := l.Append(ctx, record("bench", 2)); err != nil || r.Sequence != 2 {
			t.Errorf("Append to the newer form = %v, %v, want sequence 2", r, err)
		}
		for _, o := range []Options{{}, {ReadOnly: true}} {
			_, err = OpenWith(ctx, where, o)
			clear(t, err, Newer, l.where)
		}
		if v, err := l.Verify(ctx); err != nil || v.Records != 2 || len(v.Faults) > 0 {
			t.Errorf("Verify = %+v, %v, want 2 sound records", v, err)
		}
	})
}

func TestRefused(t *testing.T) {
	ctx := context.Background()
	l := open(t, inFile(t), Options{})
	for name, c := range map[string]struct {
		spoil func(*Record)
		want  Reason
	}{
		"simulated":   {func(r *Record) { r.Simulated = true }, Simulated},
		"no station":  {func(r *Record) { r.Station = " \n" }, Refused},
		"no verdict":  {func(r *Record) { r.Verdict = "" }, Refused},
		"no kind":     {func(r *Record) { r.Kind = "song" }, Refused},
		"long":        {func(r *Record) { r.Lot = strings.Repeat("x", 201) }, Refused},
		"no JSON":     {func(r *Record) { r.Answer = []byte("{") }, Refused},
		"before time": {func(r *Record) { r.Time = time.Date(1960, 1, 1, 0, 0, 0, 0, time.UTC) }, Refused},
	} {
		r := record("bench", 1)
		c.spoil(&r)
		// In a batch it keeps the sound ones out too.
		if _, err := l.AppendAll(ctx, []Record{record("bench", 0), r}); ReasonOf(err) != c.want {
			t.Errorf("AppendAll with one of %s = %v, want reason %s", name, err, c.want)
		}
	}
	if v, err := l.Verify(ctx); err != nil || v.Records != 0 {
		t.Errorf("Verify = %+v, %v, want no records", v, err)
	}
	allowed := open(t, inFile(t), Options{AllowSimulated: true})
	r := record("bench", 1)
	r.Simulated = true
	if _, err := allowed.Append(ctx, r); err != nil {
		t.Errorf("Append of a simulated record where they are allowed = %v", err)
	}
}

func TestDataFolder(t *testing.T) {
	home := func() (string, error) { return filepath.FromSlash("/home/jo"), nil }
	for _, c := range []struct{ system, variable, value, want string }{
		{"linux", "", "", "/home/jo/.local/share"},
		{"linux", "XDG_DATA_HOME", "/data", "/data"},
		{"linux", "XDG_DATA_HOME", "data", "/home/jo/.local/share"},
		{"darwin", "XDG_DATA_HOME", "/data", "/home/jo/Library/Application Support"},
		{"windows", "LocalAppData", `C:\Users\jo\AppData\Local`, `C:\Users\jo\AppData\Local`},
	} {
		env := func(name string) string {
			if name == c.variable {
				return c.value
			}
			return ""
		}
		got, err := dataFolder(c.system, env, home)
		if err != nil || got != filepath.FromSlash(c.want) {
			t.Errorf("dataFolder(%s, %s=%s) = %q, %v, want %q", c.system, c.variable, c.value, got, err, c.want)
		}
	}
	if _, err := dataFolder("windows", func(string) string { return "" }, home); err == nil {
		t.Error("dataFolder on Windows without LocalAppData gives no error")
	}
}

// Odd names of files are no obstacle.
func TestOddPaths(t *testing.T) {
	for _, name := range []string{"a b.db", "a?b#c%20.db", "µ.db", "a&mode=ro.db"} {
		where := filepath.Join(t.TempDir(), name)
		l := open(t, where, Options{})
		if _, err := l.Append(context.Background(), record("bench", 1)); err != nil {
			t.Errorf("%s: %v", name, err)
		}
		if _, err := os.Stat(where); err != nil {
			t.Error(err)
		}
		_ = l.Close()
		if left, _ := filepath.Glob(filepath.Join(filepath.Dir(where), "*")); len(left) != 1 {
			t.Errorf("beside %s there is %v", name, left)
		}
	}
}
