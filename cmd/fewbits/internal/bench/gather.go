package bench

import (
	"sync"

	"fewbits/measure"
)

// gather lends histograms to whoever counts at the same time, as many as
// that, and adds them up once at the end: counts are whole numbers, so it does
// not matter who counted what.
type gather struct {
	e    *engine
	mu   sync.Mutex
	free []*measure.Histogram
	all  []*measure.Histogram
}

// count runs f with a histogram that nobody else uses meanwhile.
func (g *gather) count(f func(h *measure.Histogram)) {
	h := g.borrow()
	f(h)
	g.mu.Lock()
	defer g.mu.Unlock()
	g.free = append(g.free, h)
}

func (g *gather) borrow() *measure.Histogram {
	g.mu.Lock()
	defer g.mu.Unlock()
	if n := len(g.free); n > 0 {
		h := g.free[n-1]
		g.free = g.free[:n-1]
		return h
	}
	h := g.e.histogram()
	g.all = append(g.all, h)
	return h
}

// into adds all counts to h and gives the histograms back.
func (g *gather) into(h *measure.Histogram) {
	for _, o := range g.all {
		h.Merge(o)
		g.e.giveBack(o)
	}
	g.free, g.all = nil, nil
}
