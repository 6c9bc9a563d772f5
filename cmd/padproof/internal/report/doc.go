// Package report makes texts for people out of results. It reads the types of
// package result and nothing else, and works no figure out: what it prints is
// what the JSON holds, with no more digits than the doubt allows.
package report
