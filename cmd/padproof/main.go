// Padproof tells whether a passive audio attenuator (a pad) does what its
// drawing says, from recordings of a test tone made before and after it.
//
// Usage:
//
//	padproof COMMAND [flags]
//
// The commands are check, lot, watch, predict, signal, rehearse and ledger; padproof
// COMMAND --help explains each. The exit status is 0 for PASS (or done), 1 for FAIL, 2 for
// UNPROVEN and 3 where nothing could be checked.
package main

import "os"

func main() {
	os.Exit(run(os.Args[1:], os.Stdout, os.Stderr))
}
