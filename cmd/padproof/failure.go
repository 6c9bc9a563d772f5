package main

import (
	"errors"
	"fmt"
	"io"
	"io/fs"

	"github.com/spf13/cobra"

	"padproof/capture"
	"padproof/cmd/padproof/internal/ledger"
	"padproof/cmd/padproof/internal/result"
	"padproof/cmd/padproof/internal/sheet"
	"padproof/cmd/padproof/internal/unit"
)

// usageError is a slip on the command line, with the way to the help as hint.
func usageError(cmd *cobra.Command, format string, args ...any) error {
	return &result.Error{
		Text: fmt.Sprintf(format, args...),
		Hint: fmt.Sprintf("%s --help explains it", cmd.CommandPath()),
	}
}

// reportError prints what could not be done: one object on stdout with --json,
// else text on stderr.
func reportError(cmd *cobra.Command, err error, asJSON bool, stdout, stderr io.Writer) {
	e := describe(err)
	if asJSON || cmd != nil && wantsJSON(cmd) {
		if writeJSON(stdout, result.Failure{Schema: schemaOf(cmd), Unit: unitOf(err), Error: *e}) == nil {
			return
		}
	}
	printError(stderr, e)
}

func printError(stderr io.Writer, e *result.Error) {
	fmt.Fprintf(stderr, "padproof: error: %s\n", e.Error())
	if e.Hint != "" {
		fmt.Fprintf(stderr, "padproof: hint: %s\n", e.Hint)
	}
}

// schemaOf is the schema of what a command would have printed.
func schemaOf(cmd *cobra.Command) string {
	schema, known := map[string]string{
		"predict": result.PredictSchema, "signal": result.SignalSchema, "rehearse": result.RehearseSchema,
		"rigcheck": result.RigCheckSchema, "chart": result.RigCheckSchema, "study": result.StudySchema,
		"ledger": ledgerSchema, "list": ledgerSchema, "show": ledgerSchema, "export": ledgerSchema, "verify": ledgerSchema,
	}[commandName(cmd)]
	if !known {
		return result.CheckSchema
	}
	return schema
}

func commandName(cmd *cobra.Command) string {
	if cmd == nil {
		return ""
	}
	return cmd.Name()
}

// describe turns any error into the one form that is printed.
func describe(err error) *result.Error {
	var e *result.Error
	var inSheet *sheet.Error
	var inUnit *unit.Error
	var inTake *capture.FormatError
	var inLedger *ledger.Error
	var inPath *fs.PathError
	switch {
	case errors.As(err, &e):
		return e
	case errors.As(err, &inSheet):
		return &result.Error{File: inSheet.File, Line: inSheet.Line, Text: inSheet.Text, Hint: inSheet.Hint}
	case errors.As(err, &inUnit):
		return &result.Error{File: inUnit.File, Text: inUnit.Text, Hint: inUnit.Hint}
	case errors.As(err, &inTake):
		return &result.Error{File: inTake.Name, Text: inTake.Text, Hint: inTake.Hint}
	case errors.As(err, &inLedger):
		return &result.Error{File: inLedger.Where, Text: inLedger.Text, Hint: inLedger.Hint}
	case errors.As(err, &inPath):
		return &result.Error{File: inPath.Path, Text: inPath.Err.Error(), Hint: pathHint(err)}
	}
	return &result.Error{Text: err.Error(), Hint: pathHint(err)}
}

func pathHint(err error) string {
	switch {
	case errors.Is(err, fs.ErrNotExist):
		return "look at the spelling of the path"
	case errors.Is(err, fs.ErrPermission):
		return "see that you may read and write there, or choose another place"
	case errors.Is(err, fs.ErrExist):
		return "choose another name, or remove what is there"
	}
	return ""
}

// A unitError is an error met while a known unit was checked.
type unitError struct {
	serial string
	err    error
}

func (e *unitError) Error() string { return e.err.Error() }
func (e *unitError) Unwrap() error { return e.err }

func inUnit(serial string, err error) error { return &unitError{serial, err} }

func unitOf(err error) string {
	var known *unitError
	if errors.As(err, &known) {
		return known.serial
	}
	var inUnit *unit.Error
	if errors.As(err, &inUnit) {
		return inUnit.Serial
	}
	return ""
}
