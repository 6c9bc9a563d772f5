package main

import (
	"bytes"
	"os"
	"path/filepath"
	"regexp"
	"strings"
	"testing"
)

// The README's transcripts are run, and must be what the program prints.
func TestReadmeTranscripts(t *testing.T) {
	t.Chdir("../..")
	text, err := os.ReadFile("README.md")
	if err != nil {
		t.Fatal(err)
	}
	ran := 0
	for _, block := range strings.Split(string(text), "```\n")[1:] {
		command, want, found := strings.Cut(block, "\n")
		args, isOurs := strings.CutPrefix(command, "$ padproof ")
		if !found || !isOurs {
			continue
		}
		ran++
		var stdout, stderr bytes.Buffer
		run(strings.Fields(args), &stdout, &stderr)
		if got := stdout.String() + stderr.String(); got != want {
			t.Errorf("%s\nprints:\n%s\nREADME says:\n%s", command, got, want)
		}
	}
	if ran < 2 {
		t.Errorf("%d transcripts in README.md, want one that passes and one that fails", ran)
	}
}

// README's pictures are those that the command beside them makes: what each says
// of itself is compared, not every stroke.
func TestReadmePictures(t *testing.T) {
	t.Chdir("../..")
	text, err := os.ReadFile("README.md")
	if err != nil {
		t.Fatal(err)
	}
	command := regexp.MustCompile("`padproof check (\\S+) --plots (\\S+)`").FindSubmatch(text)
	pictures := regexp.MustCompile(`!\[[^\]]+\]\((\S+)\)`).FindAllSubmatch(text, -1)
	if command == nil || len(pictures) == 0 {
		t.Fatal("README names no command that makes pictures, or shows none")
	}
	fresh := t.TempDir()
	var stdout, stderr bytes.Buffer
	if status := run([]string{"check", string(command[1]), "--plots", fresh}, &stdout, &stderr); status == exitNoCheck {
		t.Fatalf("%s", &stderr)
	}
	for _, p := range pictures {
		path := string(p[1])
		if filepath.Dir(path) != string(command[2]) {
			t.Errorf("%s does not lie where the command puts its pictures", path)
		}
		if got, want := saysOf(t, path), saysOf(t, filepath.Join(fresh, filepath.Base(path))); got != want {
			t.Errorf("%s says %q, and made anew %q", path, got, want)
		}
	}
}

// saysOf is the title and the description in a picture.
func saysOf(t *testing.T, path string) string {
	svg, err := os.ReadFile(path)
	if err != nil {
		t.Fatal(err)
	}
	return string(regexp.MustCompile(`(?s)<title>.*</desc>`).Find(svg))
}
