package ledger

import (
	"context"
	"database/sql"
	"errors"
	"fmt"
	"os"
	"os/exec"
	"strings"
	"sync"
	"sync/atomic"
	"testing"
)

// A server is a PostgreSQL of the tests' own.
type server struct {
	folder string
	lack   string // why there is none
	count  int
	mu     sync.Mutex
}

var (
	started atomic.Bool
	shared  = sync.OnceValue(func() *server { started.Store(true); return startServer() })
)

func startServer() *server {
	folder, err := os.MkdirTemp("", "pp") // short: a socket's path may not be long
	if err != nil {
		return &server{lack: err.Error()}
	}
	s := &server{folder: folder}
	if said, err := s.script("start"); err != nil {
		s.lack = strings.TrimSpace(said)
		var ended *exec.ExitError
		if !errors.As(err, &ended) || ended.ExitCode() != 77 {
			s.lack = "PostgreSQL did not start: " + s.lack
		}
		_ = os.RemoveAll(folder)
	}
	return s
}

func (s *server) script(what string) (string, error) {
	said, err := exec.Command("sh", "testdata/postgres.sh", what, s.folder).CombinedOutput()
	return string(said), err
}

func (s *server) end() {
	if s.lack == "" {
		_, _ = s.script("stop")
		_ = os.RemoveAll(s.folder)
	}
}

// address names a database of the server.
func (s *server) address(database string) string {
	return fmt.Sprintf("postgres://postgres:saltmarsh@/%s?host=%s", database, s.folder)
}

// onServer is the address of a new database, or the test is skipped.
func onServer(t testing.TB) string {
	t.Helper()
	s := shared()
	if s.lack != "" {
		if !strings.HasPrefix(s.lack, "no") && !strings.HasPrefix(s.lack, "there is no user") {
			t.Fatal(s.lack)
		}
		t.Skip(s.lack)
	}
	s.mu.Lock()
	defer s.mu.Unlock()
	s.count++
	name := fmt.Sprintf("ledger%d", s.count)
	db, err := sql.Open("pgx", s.address("postgres"))
	if err != nil {
		t.Fatal(err)
	}
	defer func() { _ = db.Close() }()
	if _, err := db.ExecContext(context.Background(), "CREATE DATABASE "+name); err != nil {
		t.Fatal(err)
	}
	return s.address(name)
}

// onBoth runs a test on a file and on a server.
func onBoth(t *testing.T, test func(t *testing.T, where string)) {
	t.Run("sqlite", func(t *testing.T) { test(t, inFile(t)) })
	t.Run("postgres", func(t *testing.T) { test(t, onServer(t)) })
}

func TestMain(m *testing.M) {
	if job := os.Getenv("LEDGER_TEST_WRITER"); job != "" {
		writeUntilKilled(job)
		return
	}
	status := m.Run()
	if started.Load() {
		shared().end()
	}
	os.Exit(status)
}
