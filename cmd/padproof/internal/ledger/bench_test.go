package ledger

import (
	"context"
	"fmt"
	"path/filepath"
	"testing"
)

// BenchmarkAppend times records that are each on the disk before the next; a batch
// is one transaction.
func BenchmarkAppend(b *testing.B) {
	for _, engine := range []string{"sqlite", "postgres"} {
		for _, batch := range []int{1, 10, 100} {
			b.Run(fmt.Sprintf("%s/batch=%d", engine, batch), func(b *testing.B) {
				where := filepath.Join(b.TempDir(), "ledger.db")
				if engine == "postgres" {
					where = onServer(b)
				}
				l, err := Open(context.Background(), where)
				if err != nil {
					b.Fatal(err)
				}
				defer func() { _ = l.Close() }()
				n := 0
				for b.Loop() {
					records := make([]Record, batch)
					for i := range records {
						records[i] = manyRecord(n)
						records[i].Station = "bench"
						n++
					}
					if _, err := l.AppendAll(context.Background(), records); err != nil {
						b.Fatal(err)
					}
				}
				b.ReportMetric(float64(n)/b.Elapsed().Seconds(), "records/s")
			})
		}
	}
}
