// Package memo remembers what is worked out once and asked for by several goroutines.
package memo

import "sync"

// Map holds a value for each key. The zero value is empty and ready for use.
type Map[K comparable, V any] struct {
	lock  sync.Mutex
	known map[K]*entry[V]
}

type entry[V any] struct {
	once  sync.Once
	value V
}

// Of returns the value of a key. The first to ask works it out, whoever asks
// meanwhile waits for it.
func (m *Map[K, V]) Of(key K, find func() V) V {
	e := m.entry(key)
	e.once.Do(func() { e.value = find() })
	return e.value
}

func (m *Map[K, V]) entry(key K) *entry[V] {
	m.lock.Lock()
	defer m.lock.Unlock()
	if m.known == nil {
		m.known = map[K]*entry[V]{}
	}
	e := m.known[key]
	if e == nil {
		e = &entry[V]{}
		m.known[key] = e
	}
	return e
}

// Forget drops all values.
func (m *Map[K, V]) Forget() {
	m.lock.Lock()
	defer m.lock.Unlock()
	m.known = nil
}
