package ledger

import (
	"context"
	"os"
	"os/exec"
	"path/filepath"
	"runtime"
	"testing"
	"time"
)

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
