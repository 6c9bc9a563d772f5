package main

import (
	"bytes"
	"os"
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
