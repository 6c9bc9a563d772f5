package ledger

import (
	"context"
	"testing"
)

// A ledger of a later padproof is refused untouched; a half-made older one is
// brought up to date with its records.
func TestSchemaVersions(t *testing.T) {
	onBoth(t, func(t *testing.T, where string) {
		ctx := context.Background()
		l := open(t, where, Options{})
		if _, err := l.Append(ctx, record("bench", 1)); err != nil {
			t.Fatal(err)
		}
		texts, err := migrations(migrationFiles, l.engine.suffix())
		if err != nil {
			t.Fatal(err)
		}
		later := append(texts, "ALTER TABLE padproof_record ADD COLUMN mood TEXT")
		if err := l.migrate(ctx, append(later, "this is no SQL")); err == nil {
			t.Error("a migration that fails half-way was let through")
		}
		if have, err := l.version(ctx); err != nil || have != len(texts) {
			t.Errorf("version after a failed migration = %d, %v, want %d", have, err, len(texts))
		}
		if err := l.migrate(ctx, later); err != nil {
			t.Fatal(err)
		}
		if r, err := l.Append(ctx, record("bench", 2)); err != nil || r.Sequence != 2 {
			t.Errorf("Append to the newer form = %v, %v, want sequence 2", r, err)
		}
		for _, o := range []Options{{}, {ReadOnly: true}} {
			_, err = OpenWith(ctx, where, o)
			clear(t, err, Newer, l.where)
		}
		if v, err := l.Verify(ctx); err != nil || v.Records != 2 || len(v.Faults) > 0 {
			t.Errorf("Verify = %+v, %v, want 2 sound records", v, err)
		}
	})
}
