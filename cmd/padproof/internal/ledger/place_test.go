package ledger

import (
	"context"
	"os"
	"path/filepath"
	"testing"
)

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
