package bench

import "sync"

// shelf keeps things that are done with, to be used again. Unlike a sync.Pool it
// holds them through garbage collections: the peak of memory depends on what is
// worked on at a time, not on for how long. The zero value is empty.
type shelf[T any] struct {
	mu    sync.Mutex
	items []T
}

// take gives what was put last; false where there is nothing.
func (s *shelf[T]) take() (t T, ok bool) {
	s.mu.Lock()
	defer s.mu.Unlock()
	n := len(s.items) - 1
	if n < 0 {
		return t, false
	}
	t = s.items[n]
	s.items = s.items[:n]
	return t, true
}

func (s *shelf[T]) put(t T) {
	s.mu.Lock()
	defer s.mu.Unlock()
	s.items = append(s.items, t)
}
