//go:build !windows

package main

import "os"

// takesEscapes reports whether a terminal understands the sequences for colours.
func takesEscapes(*os.File) bool { return true }
