package main

import (
	"cmp"
	"fmt"
	"runtime"
	"strings"
	"time"

	"github.com/spf13/cobra"

	"padproof/cmd/padproof/internal/ledger"
	"padproof/cmd/padproof/internal/nearest"
	"padproof/cmd/padproof/internal/result"
	"padproof/cmd/padproof/internal/unit"
)

// watchFlags are those of watch.
type watchFlags struct {
	pad, rig  string
	reports   string
	settle    time.Duration
	expect    []string
	once      bool
	workers   int
	recording recordFlags
}

func newWatch() *cobra.Command {
	var f watchFlags
	cmd := &cobra.Command{
		Use:   "watch FOLDER",
		Short: "Check each unit as its recordings arrive",
		Long: `Check each unit of a folder as its recordings arrive, print a line, and record it in the
ledger: the one that --ledger or ` + ledgerVariable + ` names, else this machine's own. It goes on
until Ctrl-C.

FOLDER is laid out as for lot: a folder for each unit, or takes named SERIAL.ROLE.wav; sheets,
and takes of the rig alone, serve every unit there. It may be on a network share.

A file is read when its writer is done: when it has not changed for the time of --settle and
its header agrees with its length. A unit is checked when before and after (or both) are
there, with the takes that --expect names and a pad.toml, and nothing of it has changed for
that time. A take that comes later or is recorded again has it checked again, as a new record;
a shared file that changes serves the units that come after it.

What the ledger holds already, by the hashes of takes and sheets, is not checked again: stopped
or killed, watch goes on where it was. A unit is recorded first and printed then. Where ledger
or folder cannot be reached, or a disk is full, watch says so once, waits, and goes on.

Results of rehearsed takes are printed and not recorded, unless --record-simulated.

Exit status: 0 after Ctrl-C; with --once, that of lot.`,
		Example: `  padproof watch lot12
  padproof watch lot12 --expect pad-noise,legs --reports pages --station "bench 2"
  padproof watch lot12 --once`,
		Args: func(cmd *cobra.Command, args []string) error {
			switch {
			case len(args) == 0:
				return usageError(cmd, "watch what? name the folder where recordings arrive")
			case len(args) > 1:
				return usageError(cmd, "one folder at a time; %q is one too many", args[1])
			}
			return nil
		},
		RunE: func(cmd *cobra.Command, args []string) error {
			if err := f.check(cmd); err != nil {
				return err
			}
			return runWatch(cmd, args[0], f)
		},
	}
	f.addTo(cmd)
	return cmd
}

func (f *watchFlags) addTo(cmd *cobra.Command) {
	flags := cmd.Flags()
	flags.SortFlags = false
	flags.DurationVar(&f.settle, "settle", 2*time.Second, "a file that has not changed for so long is done")
	flags.StringSliceVar(&f.expect, "expect", nil, "takes that a unit is waited for until it has them, such as pad-noise,legs")
	flags.BoolVar(&f.once, "once", false, "check what is there now, then end")
	flags.StringVar(&f.reports, "reports", "", "write the page of each unit, SERIAL.html, into this folder, which must be there")
	flags.StringVar(&f.pad, "pad", "", "the drawing of all units, in place of their own")
	flags.StringVar(&f.rig, "rig", "", "the bench of all units, in place of their own")
	flags.IntVar(&f.workers, "workers", runtime.NumCPU(), "units checked at a time")
	f.recording.addTo(cmd)
	flags.Lookup("ledger").Usage = "record in this ledger, a file or postgres://USER@HOST/DATABASE; " + ledgerVariable + ", else this machine's own, if left out"
	flags.Lookup("lot").Usage = "the lot that the units are of, for the ledger; the name in lot.toml if left out"
	_ = cmd.MarkFlagDirname("reports")
	_ = cmd.MarkFlagFilename("pad", "toml")
	_ = cmd.MarkFlagFilename("rig", "toml")
	_ = cmd.RegisterFlagCompletionFunc("expect", cobra.FixedCompletions(unit.Roles(), cobra.ShellCompDirectiveNoFileComp))
}

// check looks whether the flags make sense.
func (f *watchFlags) check(cmd *cobra.Command) error {
	const least, most = 10 * time.Millisecond, time.Hour
	switch {
	case f.workers < 1:
		return usageError(cmd, "--workers counts from 1, not %d", f.workers)
	case f.settle < least || f.settle > most:
		return usageError(cmd, "--settle wants %v to %v, not %v", least, most, f.settle)
	case cmd.Flags().Changed("reports") && !isFolder(f.reports):
		return &result.Error{Text: fmt.Sprintf("--reports names a folder that is there; %q is none", f.reports), Hint: "make it first, or name another"}
	}
	for i, role := range f.expect {
		known, ok := unit.RoleOf(strings.TrimSpace(role))
		if !ok {
			near, _ := nearest.Word(role, unit.Roles())
			return usageError(cmd, "--expect: %q is no role; did you mean %s?", role, near)
		}
		f.expect[i] = known
	}
	return nil
}

func runWatch(cmd *cobra.Command, folder string, f watchFlags) error {
	if !isFolder(folder) {
		_, err := unit.LayoutOf(folder)
		return cmp.Or(err, usageError(cmd, "%q is no folder", folder))
	}
	if _, err := f.recording.stationName(); err != nil {
		return err
	}
	place, err := f.recording.placeOrDefault()
	if err != nil {
		return err
	}
	ctx, stop := untilInterrupted(cmd)
	defer stop()
	l, err := f.recording.open(ctx, place)
	if err != nil {
		return err
	}
	w := newWatching(cmd, folder, f, l)
	f.recording.ledger = place
	gate, done := f.recording.rigGate()
	defer done()
	w.gate = gate
	w.open = func() (book, error) {
		return ledger.OpenWith(ctx, place, ledger.Options{AllowSimulated: f.recording.simulated, MustExist: true})
	}
	defer w.close()
	return w.run(ctx)
}
