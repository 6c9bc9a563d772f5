package whole_test

import (
	"context"
	"errors"
	"io"
	"os"
	"path/filepath"
	"strings"
	"testing"

	"padproof/cmd/padproof/internal/whole"
)

var errSpent = errors.New("the disk is full")

func TestWriteIsAllOrNothing(t *testing.T) {
	stopped, stop := context.WithCancel(context.Background())
	stop()
	during, end := context.WithCancel(context.Background())
	long := strings.Repeat("line\n", 5000)
	tests := []struct {
		name string
		ctx  context.Context
		fill func(w io.Writer) error
		want error
	}{
		{"fails midway", context.Background(), func(w io.Writer) error {
			io.WriteString(w, long)
			return errSpent
		}, errSpent},
		{"stopped before", stopped, func(w io.Writer) error {
			_, err := io.WriteString(w, "short")
			return err
		}, context.Canceled},
		{"stopped midway", during, func(w io.Writer) error {
			if _, err := io.WriteString(w, long); err != nil {
				return err
			}
			end()
			_, err := io.WriteString(w, long)
			return err
		}, context.Canceled},
	}
	for _, tt := range tests {
		for _, before := range []string{"", "what was there"} {
			folder := t.TempDir()
			path := filepath.Join(folder, "report.html")
			if before != "" {
				os.WriteFile(path, []byte(before), 0o666)
			}
			if err := whole.Write(tt.ctx, path, tt.fill); !errors.Is(err, tt.want) {
				t.Errorf("%s: %v, want %v", tt.name, err, tt.want)
			}
			left, _ := os.ReadDir(folder)
			text, _ := os.ReadFile(path)
			if string(text) != before || before == "" && len(left) != 0 || before != "" && len(left) != 1 {
				t.Errorf("%s: left %v, the file %d bytes, want %q alone", tt.name, left, len(text), before)
			}
		}
	}
}

func TestWriteReplaces(t *testing.T) {
	path := filepath.Join(t.TempDir(), "report.html")
	os.WriteFile(path+".part0", []byte("of a killed run"), 0o666)
	for _, want := range []string{"first", "second"} {
		err := whole.Write(context.Background(), path, func(w io.Writer) error {
			_, err := io.WriteString(w, want)
			return err
		})
		if got, _ := os.ReadFile(path); err != nil || string(got) != want {
			t.Errorf("file holds %q (%v), want %q", got, err, want)
		}
	}
}

func TestWriteNamesTheFileItWasAskedFor(t *testing.T) {
	folder := t.TempDir()
	for _, path := range []string{filepath.Join(folder, "none", "report.html"), folder} {
		err := whole.Write(context.Background(), path, func(io.Writer) error { return nil })
		if err == nil || !strings.Contains(err.Error(), path+":") {
			t.Errorf("error %v does not name %s", err, path)
		}
	}
	if left, _ := os.ReadDir(folder); len(left) != 0 {
		t.Errorf("left behind: %v", left)
	}
}

// A fault of the program leaves no more behind than a full disk does.
func TestWritePanics(t *testing.T) {
	folder := t.TempDir()
	func() {
		defer func() {
			if recover() == nil {
				t.Error("the panic was swallowed")
			}
		}()
		_ = whole.Write(t.Context(), filepath.Join(folder, "report.html"), func(io.Writer) error { panic("odd") })
	}()
	if left, _ := os.ReadDir(folder); len(left) != 0 {
		t.Errorf("left behind: %v", left)
	}
}
