package main

import (
	"context"
	"errors"
	"fmt"
	"strings"

	"padproof/cmd/padproof/internal/arrival"
	"padproof/cmd/padproof/internal/lot"
	"padproof/cmd/padproof/internal/result"
	"padproof/cmd/padproof/internal/unit"
)

// add counts a verdict; known is one that was in the ledger already.
func (c *watchCount) add(verdict string, known bool) {
	if known {
		c.known++
	}
	switch verdict {
	case "PASS":
		c.passed++
	case "FAIL":
		c.failed++
	default:
		c.unproven++
	}
}

func (c *watchCount) checked() int { return c.passed + c.failed + c.unproven - c.known }

// text says how many were checked and how.
func (c *watchCount) text() string {
	text := fmt.Sprintf("%d units checked", c.checked())
	if c.checked() == 1 {
		text = "1 unit checked"
	}
	if c.known > 0 {
		text += fmt.Sprintf(", %d in the ledger already", c.known)
	}
	if c.passed+c.failed+c.unproven > 0 {
		text += fmt.Sprintf(": %d PASS, %d FAIL, %d UNPROVEN", c.passed, c.failed, c.unproven)
	}
	if c.notChecked > 0 {
		text += fmt.Sprintf("; %d not checked", c.notChecked)
	}
	return text
}

// ended says what was done after Ctrl-C; other errors are passed on.
func (w *watching) ended(ctx context.Context, err error) error {
	if ctx.Err() == nil || !errors.Is(err, context.Canceled) {
		return err
	}
	w.say("padproof: " + w.count.text())
	w.say(waitingText(w.waiting))
	w.say(w.pages.unwritten())
	return nil
}

// waitingText names units that lack a file, the first few; "" if none does.
func waitingText(all []arrival.Waiting) string {
	if len(all) == 0 {
		return ""
	}
	const most = 5
	var some []string
	for _, u := range all[:min(most, len(all))] {
		some = append(some, u.Serial+" for "+u.Lacks)
	}
	text := "padproof: waiting: " + strings.Join(some, "; ")
	if more := len(all) - most; more > 0 {
		text += fmt.Sprintf("; and %d more", more)
	}
	return text
}

// endOnce ends a run that was to look once: what is not whole yet was not checked.
func (w *watching) endOnce(ctx context.Context, seen *arrival.Seen) error {
	for _, a := range seen.Settling {
		err := &result.Error{File: a.Folder, Text: "a file of it is still being written", Hint: "check it when it is done"}
		w.count.notChecked++
		if err := w.print(lot.Outcome{Unit: &unit.Unit{Serial: a.Serial}, Err: err}); err != nil {
			return err
		}
	}
	w.pages.settle(ctx, w, true)
	w.say("padproof: " + w.count.text())
	c := w.count
	found := result.Lot{Units: seen.Units, NotChecked: c.notChecked, Failed: c.failed, Unproven: c.unproven}
	found.Verdict = found.Worst()
	status := lotStatus(&found)
	if text := w.pages.unwritten(); text != "" {
		w.say(text)
		return exitStatus(exitNoCheck)
	}
	return status
}
