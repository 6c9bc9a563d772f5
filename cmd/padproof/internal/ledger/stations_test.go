package ledger

import (
	"context"
	"fmt"
	"math/rand/v2"
	"sync"
	"testing"
	"time"
)

// Eight stations write 20,000 records to one server at once, each through two
// connections that vie for its chain: none is lost, none doubled, every chain
// verifies.
func TestEightStations(t *testing.T) {
	t.Parallel()
	where := onServer(t)
	const stations, hands, each = 8, 2, 1250
	began := time.Now()
	var mu sync.Mutex
	reported := map[string]Receipt{}
	var writing sync.WaitGroup
	for s := range stations {
		for h := range hands {
			writing.Go(func() {
				for _, r := range writeHand(t, where, fmt.Sprintf("bench %d", s), h*each, each) {
					mu.Lock()
					if was, twice := reported[r.String()]; twice {
						t.Errorf("%s was reported twice: %s and %s", r, was.Hash, r.Hash)
					}
					reported[r.String()] = r
					mu.Unlock()
				}
			})
		}
	}
	writing.Wait()
	t.Logf("%d records in %v", len(reported), time.Since(began).Round(time.Millisecond))
	if len(reported) != stations*hands*each {
		t.Errorf("%d records were reported, want %d", len(reported), stations*hands*each)
	}
	holds(t, where, reported)
	l := open(t, where, Options{})
	v, err := l.Verify(context.Background())
	if err != nil || v.Records != stations*hands*each || len(v.Heads) != stations {
		t.Errorf("Verify = %d records of %d stations, %v, want %d of %d", v.Records, len(v.Heads), err, stations*hands*each, stations)
	}
}

// writeHand writes units from a number on, one at a time and in small batches.
func writeHand(t *testing.T, where, station string, from, count int) []Receipt {
	ctx := context.Background()
	l, err := OpenWith(ctx, where, Options{Wait: time.Minute})
	if err != nil {
		t.Error(err)
		return nil
	}
	defer func() { _ = l.Close() }()
	random := rand.New(rand.NewPCG(uint64(from), 417))
	var all []Receipt
	for n := from; n < from+count; {
		var records []Record
		for range min(1+random.IntN(20), from+count-n) {
			r := record(station, n)
			r.Unit = fmt.Sprintf("%s-%06d", station, n)
			records = append(records, r)
			n++
		}
		receipts, err := l.AppendAll(ctx, records)
		if err != nil {
			t.Errorf("AppendAll = %v", err)
			return all
		}
		all = append(all, receipts...)
	}
	return all
}
