package main

import (
	"errors"
	"fmt"
	"io"
	"slices"

	"github.com/spf13/cobra"
)

// Exit statuses.
const (
	exitPass     = 0
	exitFail     = 1
	exitUnproven = 2
	exitNoCheck  = 3
)

// An exitStatus ends a command that has already said all it has to say.
type exitStatus int

func (exitStatus) Error() string { return "" }

// run carries out one command line and returns the exit status.
func run(args []string, stdout, stderr io.Writer) (status int) {
	defer func() {
		if r := recover(); r != nil { // Go's own exit status for it would read as UNPROVEN
			fmt.Fprintf(stderr, "padproof: error: a fault in padproof itself: %v\npadproof: hint: please report it, with the files and the command\n", r)
			status = exitNoCheck
		}
	}()
	root := newRoot()
	root.SetArgs(args)
	root.SetOut(stdout)
	root.SetErr(stderr)
	cmd, err := root.ExecuteC()
	if err == nil {
		return exitPass
	}
	var said exitStatus
	if errors.As(err, &said) {
		return int(said)
	}
	reportError(cmd, err, slices.Contains(args, "--json"), stdout, stderr)
	return exitNoCheck
}

func newRoot() *cobra.Command {
	root := &cobra.Command{
		Use:   "padproof COMMAND",
		Short: "Prove that a passive audio attenuator does what its drawing says",
		Long: `Padproof tells whether a passive audio attenuator (a pad) does what its drawing says.
Record a test tone before the pad (straight through) and after it (pad in circuit);
padproof turns the WAV files into PASS, FAIL or UNPROVEN, with figures and uncertainty.

Exit status: 0 PASS or done, 1 FAIL, 2 UNPROVEN, 3 could not check.`,
		Example:       "  padproof check testdata/saltmarsh/0417",
		SilenceUsage:  true,
		SilenceErrors: true,
		Version:       version(),
		RunE:          func(cmd *cobra.Command, args []string) error { return cmd.Help() },
		Args: func(cmd *cobra.Command, args []string) error {
			if len(args) > 0 {
				return usageError(cmd, "there is no command %q", args[0])
			}
			return nil
		},
	}
	root.SetFlagErrorFunc(func(cmd *cobra.Command, err error) error { return usageError(cmd, "%v", err) })
	root.PersistentFlags().Bool("json", false, "print the result as JSON")
	root.AddCommand(newCheck(), newPredict(), newSignal(), newRehearse(), newLot(), newWatch(), newLedger(), newRigCheck())
	root.InitDefaultCompletionCmd()
	if completion, _, err := root.Find([]string{"completion"}); err == nil {
		completion.Args = func(cmd *cobra.Command, args []string) error {
			if len(args) > 0 {
				return usageError(cmd, "there is no completion for %q; there are bash, zsh, fish and powershell", args[0])
			}
			return nil
		}
		completion.RunE = func(cmd *cobra.Command, args []string) error { return cmd.Help() }
	}
	root.SetUsageTemplate(usageTemplate)
	return root
}

// usageTemplate is one usage line, the commands, the flags and an example.
const usageTemplate = `Usage:
  {{if .HasAvailableSubCommands}}{{.CommandPath}} COMMAND [flags]{{else}}{{.UseLine}}{{end}}
{{- if .HasAvailableSubCommands}}

Commands:{{range .Commands}}{{if .IsAvailableCommand}}
  {{rpad .Name .NamePadding}} {{.Short}}{{end}}{{end}}{{end}}
{{- if .HasAvailableLocalFlags}}

Flags:
{{.LocalFlags.FlagUsages | trimTrailingWhitespaces}}{{end}}
{{- if .HasAvailableInheritedFlags}}
{{.InheritedFlags.FlagUsages | trimTrailingWhitespaces}}{{end}}
{{- if .HasExample}}

Example:
{{.Example}}{{end}}
{{- if .HasAvailableSubCommands}}

{{.CommandPath}} COMMAND --help explains a command.{{end}}
`
