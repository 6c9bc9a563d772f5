package ledger

import (
	"bytes"
	"context"
	"database/sql"
	"os"
	"path/filepath"
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
