package bench

import (
	"context"
	"sync"
)

// inOrder computes work(0) to work(n-1) on at most workers goroutines and
// hands the results to take in order, from one goroutine at a time, so that
// what take adds up does not depend on the number of workers. At most a few
// results per worker wait for their turn. The first error ends it.
func inOrder[T any](ctx context.Context, n, workers int, work func(i int) (T, error), take func(i int, t T) error) error {
	ctx, cancel := context.WithCancel(ctx)
	defer cancel()
	o := &ordering[T]{waiting: map[int]T{}, take: take}
	o.turn = sync.NewCond(&o.mu)
	var group sync.WaitGroup
	workers = max(1, min(workers, n))
	for range workers {
		group.Go(func() {
			for i, ok := o.claim(ctx, n, 2*workers); ok; i, ok = o.claim(ctx, n, 2*workers) {
				t, err := work(i)
				if err = o.deliver(i, t, err); err != nil {
					cancel()
					return
				}
			}
		})
	}
	group.Wait()
	if o.err == nil && o.taken < n {
		return ctx.Err()
	}
	return o.err
}

type ordering[T any] struct {
	mu      sync.Mutex
	turn    *sync.Cond
	claimed int
	taken   int
	waiting map[int]T
	take    func(int, T) error
	err     error
}

// claim hands out the next index once fewer than ahead results are pending.
func (o *ordering[T]) claim(ctx context.Context, n, ahead int) (int, bool) {
	o.mu.Lock()
	defer o.mu.Unlock()
	for o.err == nil && o.claimed-o.taken >= ahead {
		o.turn.Wait()
	}
	if o.err != nil || o.claimed >= n || ctx.Err() != nil {
		return 0, false
	}
	o.claimed++
	return o.claimed - 1, true
}

// deliver keeps a result and takes all whose turn has come.
func (o *ordering[T]) deliver(i int, t T, err error) error {
	o.mu.Lock()
	defer o.mu.Unlock()
	defer o.turn.Broadcast()
	if err == nil {
		o.waiting[i] = t
	} else if o.err == nil {
		o.err = err
	}
	for next, ok := o.waiting[o.taken]; ok && o.err == nil; next, ok = o.waiting[o.taken] {
		delete(o.waiting, o.taken)
		o.err = o.take(o.taken, next)
		o.taken++
	}
	return o.err
}
