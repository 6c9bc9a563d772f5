package main

import (
	"context"
	"crypto/sha256"
	"encoding/hex"
	"encoding/json"
	"io"
	"os"
	"slices"
	"time"

	"padproof/cmd/padproof/internal/ledger"
	"padproof/cmd/padproof/internal/result"
	"padproof/cmd/padproof/internal/sheet"
	"padproof/cmd/padproof/internal/unit"
	"padproof/compare"
)

// A book is the ledger as watch uses it.
type book interface {
	List(ctx context.Context, f ledger.Filter, from ledger.Place, limit int) (*ledger.Page, error)
	Show(ctx context.Context, station string, sequence int64) (*ledger.Entry, error)
	Append(ctx context.Context, r ledger.Record) (ledger.Receipt, error)
	Close() error
}

// holdToRigCheck holds an answer against the last check of the rig: it becomes
// UNPROVEN where rig.toml asks for one and there is none in order. It waits while
// the ledger cannot be read.
func (w *watching) holdToRigCheck(ctx context.Context, u *unit.Unit, a *result.Answer) error {
	return w.insist(ctx, func(ctx context.Context) error {
		held := *a
		err := w.gate.Hold(ctx, u, &held, time.Now())
		if err == nil {
			*a = held
		}
		return err
	})
}

// A refusedError is a record that this ledger will never take.
type refusedError struct{ err error }

func (e *refusedError) Error() string { return e.err.Error() }

// record writes an answer into the ledger and enters in it where it stands. It
// waits while the ledger cannot be written. known: another has recorded the same
// takes meanwhile.
func (w *watching) record(ctx context.Context, p pending, a *result.Answer) (known bool, err error) {
	if a.Simulated && !w.recording.simulated {
		if !w.saidTest {
			w.saidTest = true
			w.say("padproof: note: results of rehearsed takes are not recorded; --record-simulated has them recorded")
		}
		return false, nil
	}
	r, err := w.recording.recordOf(a, nil)
	if err != nil {
		return false, &refusedError{err}
	}
	if r.Lot == "" {
		r.Lot = w.named.Name
	}
	own := ownTakes(p, a.Captures)
	tried := false
	err = w.insist(ctx, func(ctx context.Context) error {
		entry, err := findRecord(ctx, w.book, p, func() map[string]string { return own })
		if err != nil {
			return err
		}
		if entry != nil { // ours, if an earlier try did go through
			known = !tried
			a.Recorded = recordedOf(entry.Receipt)
			return nil
		}
		tried = true
		receipt, err := w.book.Append(ctx, r)
		switch ledger.ReasonOf(err) {
		case ledger.Refused, ledger.Simulated:
			return &refusedError{err}
		case "":
			if err == nil {
				a.Recorded = recordedOf(receipt)
			}
		}
		return err
	})
	return known, err
}

// recordedBefore returns the record of a unit's takes as they are, nil if there is
// none.
func (w *watching) recordedBefore(ctx context.Context, p *pending) (entry *ledger.Entry, err error) {
	err = w.insist(ctx, func(ctx context.Context) error {
		var err error
		entry, err = findRecord(ctx, w.book, *p, func() map[string]string { return hashedTakes(*p) })
		return err
	})
	return entry, err
}

// insist does something with the ledger again and again until it goes through, is
// refused for good, or ctx ends; with --once it is done once. What has begun is
// brought to its end even if ctx ends meanwhile.
func (w *watching) insist(ctx context.Context, do func(ctx context.Context) error) error {
	const longest = 30 * time.Second
	for wait := time.Second / 2; ; wait = min(2*wait, longest) {
		err := do(context.WithoutCancel(ctx))
		if _, refused := err.(*refusedError); err == nil || refused {
			w.say(w.stuck.ends("the ledger can be used again"))
			return err
		}
		if w.once {
			return err
		}
		w.say(w.stuck.begins(err, "nothing is lost: units wait until the ledger can be used"))
		sleep(ctx, wait)
		if ctx.Err() != nil {
			return ctx.Err()
		}
		w.reopen(err)
	}
}

// reopen opens the ledger anew, where it was not just busy.
func (w *watching) reopen(why error) {
	if ledger.ReasonOf(why) == ledger.Busy || w.open == nil {
		return
	}
	if b, err := w.open(); err == nil {
		_ = w.book.Close()
		w.book = b
	}
}

func (w *watching) close() { _ = w.book.Close() }

// findRecord finds the record that was made of a unit's own takes and sheets as
// they are. Shared files do not count: a unit that was checked is not checked
// again because they changed. takes gives the hashes by role, and is asked only if
// the unit has any record.
func findRecord(ctx context.Context, b book, p pending, takes func() map[string]string) (*ledger.Entry, error) {
	const atATime, most = 50, 200
	filter := ledger.Filter{Unit: p.unit.Serial, Kind: ledger.UnitCheck}
	page, err := b.List(ctx, filter, ledger.Place{}, atATime)
	if err != nil || len(page.Rows) == 0 {
		return nil, err
	}
	own := takes()
	for looked := 0; len(own) > 0 && looked < most; {
		for _, row := range page.Rows {
			entry, err := b.Show(ctx, row.Station, row.Sequence)
			if err != nil {
				return nil, err
			}
			if madeOf(entry.Record, own, p) {
				return entry, nil
			}
		}
		if looked += len(page.Rows); len(page.Rows) < atATime {
			break
		}
		if page, err = b.List(ctx, filter, page.Next, atATime); err != nil {
			return nil, err
		}
	}
	return nil, nil
}

// madeOf reports whether a record was made of such takes, by role, and of the
// unit's own sheets, and stands here: a PASS of check, which asks for no rig check,
// does not where the bench's sheet asks for one.
func madeOf(r ledger.Record, own map[string]string, p pending) bool {
	var a struct {
		Captures []result.Capture
		RigCheck *result.RigHeld `json:"rig_check"`
	}
	if json.Unmarshal(r.Answer, &a) != nil {
		return false
	}
	if r.Verdict == string(compare.Pass) && a.RigCheck == nil && asksForRigCheck(r) {
		return false
	}
	for role, hash := range own {
		if !slices.ContainsFunc(a.Captures, func(c result.Capture) bool { return c.Role == role && c.SHA256 == hash }) {
			return false
		}
	}
	for _, s := range p.sheets {
		hash := sha256.Sum256(s.text)
		same := func(f ledger.File) bool { return f.Role == s.role && f.SHA256 == hex.EncodeToString(hash[:]) }
		if p.isOwn(s.path) && !slices.ContainsFunc(r.Files, same) {
			return false
		}
	}
	return true
}

// asksForRigCheck reports whether the bench's sheet, as a record keeps it, lets no
// unit pass without a rig check.
func asksForRigCheck(r ledger.Record) bool {
	for _, f := range r.Files {
		if f.Role != "rig" {
			continue
		}
		rig, err := sheet.ParseRig(f.File, []byte(f.Text))
		return err == nil && rig.Reference != nil && rig.Reference.Required
	}
	return false
}

// isOwn reports whether a file is the unit's own rather than shared.
func (p *pending) isOwn(path string) bool { return !p.unit.Inherited[path] }

// ownTakes are the hashes of the unit's own takes by role, as they were checked.
func ownTakes(p pending, captures []result.Capture) map[string]string {
	own := map[string]string{}
	for _, c := range captures {
		if path := p.unit.Files[c.Role]; path != "" && p.isOwn(path) {
			own[c.Role] = c.SHA256
		}
	}
	return own
}

// hashedTakes are the same, as they are now; nil if one cannot be read.
func hashedTakes(p pending) map[string]string {
	own := map[string]string{}
	for role, path := range p.unit.Files {
		if !p.isOwn(path) {
			continue
		}
		hash, err := hashOfFile(path)
		if err != nil {
			return nil
		}
		own[role] = hash
	}
	return own
}

func hashOfFile(path string) (string, error) {
	f, err := os.Open(path)
	if err != nil {
		return "", err
	}
	defer func() { _ = f.Close() }()
	h := sha256.New()
	if _, err := io.Copy(h, f); err != nil {
		return "", err
	}
	return hex.EncodeToString(h.Sum(nil)), nil
}
