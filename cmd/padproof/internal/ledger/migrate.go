package ledger

import (
	"context"
	"embed"
	"fmt"
	"io/fs"
	"strings"
)

//go:embed migration/*.sql
var migrationFiles embed.FS

// migrations returns the texts that bring a ledger from nothing to the newest
// schema, in order. A name is NNNN_noun.sql, or NNNN_noun.ENGINE.sql where the
// engines differ.
func migrations(files fs.FS, suffix string) ([]string, error) {
	entries, err := fs.ReadDir(files, "migration")
	if err != nil {
		return nil, err
	}
	var texts []string
	for _, entry := range entries {
		parts := strings.Split(entry.Name(), ".")
		if len(parts) == 3 && parts[1] != suffix {
			continue
		}
		text, err := fs.ReadFile(files, "migration/"+entry.Name())
		if err != nil {
			return nil, err
		}
		texts = append(texts, string(text))
	}
	return texts, nil
}

// settle brings the schema up to date in one transaction, and refuses one that is
// newer than this program.
func (l *Ledger) settle(ctx context.Context) error {
	texts, err := migrations(migrationFiles, l.engine.suffix())
	if err != nil {
		return err
	}
	return l.migrate(ctx, texts)
}

func (l *Ledger) migrate(ctx context.Context, texts []string) error {
	have, err := l.version(ctx)
	switch {
	case err != nil:
		return err
	case have > len(texts):
		return &Error{Where: l.where, Reason: Newer,
			Text: fmt.Sprintf("the ledger was written by a later padproof: its form is %d, this one knows %d", have, len(texts)),
			Hint: "use the padproof that wrote it, or a later one; nothing was changed"}
	case have == len(texts):
		return nil
	case have == 0 && l.options.MustExist:
		return &Error{Where: l.where, Reason: Missing, Text: "there is no ledger in it yet", Hint: "the first check with --ledger makes one"}
	case l.options.ReadOnly:
		return &Error{Where: l.where, Reason: ReadOnly, Text: "the ledger has an older form and must be brought up to date first",
			Hint: "open it once where it may be written"}
	}
	return l.bringUp(ctx, texts)
}

func (l *Ledger) version(ctx context.Context) (int, error) {
	tx, err := l.db.BeginTx(ctx, readOnly)
	if err != nil {
		return 0, err
	}
	defer func() { _ = tx.Rollback() }()
	return l.engine.version(ctx, tx)
}

func (l *Ledger) bringUp(ctx context.Context, texts []string) error {
	tx, err := l.db.BeginTx(ctx, nil)
	if err != nil {
		return err
	}
	defer func() { _ = tx.Rollback() }()
	if err := l.engine.lockSchema(ctx, tx); err != nil {
		return err
	}
	have, err := l.engine.version(ctx, tx)
	if err != nil || have >= len(texts) { // another was first
		return err
	}
	for _, text := range texts[have:] {
		if _, err := tx.ExecContext(ctx, l.engine.text(text)); err != nil {
			return err
		}
	}
	for v := have + 1; v <= len(texts); v++ {
		if err := l.engine.stamp(ctx, tx, v); err != nil {
			return err
		}
	}
	return tx.Commit()
}
