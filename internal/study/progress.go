package study

import "sync"

// parts of the work on a lot that progress is counted in: ranking, break-evens and
// the grid of other lots.
const parts = 3

// meter counts what is done. A nil meter counts nothing.
type meter struct {
	lock        sync.Mutex
	done, total int
	tell        func(done, total int)
}

func newMeter(tell func(done, total int), total int) *meter {
	if tell == nil {
		return nil
	}
	return &meter{total: total, tell: tell}
}

func (m *meter) step() {
	if m == nil {
		return
	}
	m.lock.Lock()
	defer m.lock.Unlock()
	m.done = min(m.done+1, m.total) // lots may be ranked in several rounds
	m.tell(m.done, m.total)
}
