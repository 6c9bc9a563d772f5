package main

import (
	"os"

	"golang.org/x/sys/windows"
)

// takesEscapes has a console understand the sequences for colours, and reports
// whether it does.
func takesEscapes(f *os.File) bool {
	console, mode := windows.Handle(f.Fd()), uint32(0)
	if windows.GetConsoleMode(console, &mode) != nil {
		return false
	}
	return windows.SetConsoleMode(console, mode|windows.ENABLE_VIRTUAL_TERMINAL_PROCESSING) == nil
}
