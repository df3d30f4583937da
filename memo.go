package hazewright

import "sync"

// memoSize bounds how many particles an engine remembers the optics of.
const memoSize = 64

// memo remembers the optics of particles, oldest forgotten first.
type memo struct {
	mu    sync.Mutex
	size  int
	known map[string]*population
	order []string
}

func newMemo(size int) *memo { return &memo{size: size, known: map[string]*population{}} }

func (m *memo) get(key string) (*population, bool) {
	m.mu.Lock()
	defer m.mu.Unlock()
	p, ok := m.known[key]
	return p, ok
}

func (m *memo) put(key string, p *population) {
	m.mu.Lock()
	defer m.mu.Unlock()
	if _, ok := m.known[key]; ok {
		return
	}
	if len(m.order) == m.size {
		delete(m.known, m.order[0])
		m.order = m.order[1:]
	}
	m.known[key] = p
	m.order = append(m.order, key)
}
