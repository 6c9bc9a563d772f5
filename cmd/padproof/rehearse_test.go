package main

import (
	"slices"
	"testing"

	"padproof/cmd/padproof/internal/rehearsal"
	"padproof/cmd/padproof/internal/unit"
)

// What can be rehearsed is what a unit's folder may hold, by the same words.
func TestEveryRoleCanBeRehearsed(t *testing.T) {
	got, want := slices.Sorted(slices.Values(rehearsal.Takes())), slices.Sorted(slices.Values(unit.Roles()))
	if !slices.Equal(got, want) {
		t.Errorf("rehearsal.Takes() = %q, want %q as unit.Roles()", got, want)
	}
}
