package memo_test

import (
	"sync"
	"sync/atomic"
	"testing"

	"parch/internal/memo"
)

// A value is worked out once, however many ask for it at a time; after Forget once more.
func TestWorkedOutOnce(t *testing.T) {
	var m memo.Map[int, int]
	var calls atomic.Int64
	for round := int64(1); round <= 2; round++ {
		var all sync.WaitGroup
		for i := range 80 {
			all.Go(func() {
				key := i % 4
				if got := m.Of(key, func() int { calls.Add(1); return 10 * key }); got != 10*key {
					t.Errorf("key %d gives %d", key, got)
				}
			})
		}
		all.Wait()
		if n := calls.Load(); n != 4*round {
			t.Errorf("round %d: %d values worked out, want %d", round, n, 4*round)
		}
		m.Forget()
	}
}
