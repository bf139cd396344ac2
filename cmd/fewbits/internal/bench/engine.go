package bench

import (
	"context"
	"math"
	"slices"
	"sync"

	"fewbits/codec/family"
	"fewbits/measure"
	"fewbits/measure/fault"
)

// engine carries what all passes of a run share.
type engine struct {
	ctx    context.Context
	plan   Plan
	tokens chan struct{} // one per worker: whoever works on samples holds one
	hists  shelf[*measure.Histogram]
	parts  shelf[*fault.Part]
	share  int // of frames kept of each clip

	mu           sync.Mutex
	step         Step
	last         *tableSet
	made, toMake int64 // designs

	spread *spread // of all clips measured
}

func newEngine(ctx context.Context, plan Plan) *engine {
	plan.Workers = max(1, plan.Workers)
	return &engine{ctx: ctx, plan: plan, tokens: make(chan struct{}, plan.Workers)}
}

// begin starts a pass over so many samples.
func (e *engine) begin(pass string, total int64) {
	e.mu.Lock()
	defer e.mu.Unlock()
	e.step = Step{Pass: pass, Unit: "samples", Total: total}
	e.tell()
}

// designing starts or resumes making designs, of which e.toMake are to be made.
func (e *engine) designing() {
	e.mu.Lock()
	defer e.mu.Unlock()
	e.step = Step{Pass: "designing", Unit: "designs", Done: e.made, Total: e.toMake}
	e.tell()
}

// designed reports one more design made.
func (e *engine) designed() {
	e.mu.Lock()
	e.made++
	e.mu.Unlock()
	e.advance(1)
}

// advance reports n more samples, or designs, done.
func (e *engine) advance(n int64) {
	e.mu.Lock()
	defer e.mu.Unlock()
	e.step.Done += n
	e.tell()
}

func (e *engine) tell() {
	if e.plan.Progress != nil {
		e.plan.Progress(e.step)
	}
}

// chunks walks a recording: work runs on many chunks at once, take in order.
func chunks[T any](e *engine, s *survey, work func(c chunk) (T, error), take func(c chunk, t T) error) error {
	cut := cutsOf(s.clip.Samples, s.frame)
	return inOrder(e.ctx, cut.count(), e.plan.Workers,
		func(i int) (T, error) {
			e.tokens <- struct{}{}
			defer func() { <-e.tokens }()
			return work(cut.at(i))
		},
		func(i int, t T) error {
			e.advance(cut.at(i).samples * int64(s.clip.Channels))
			return take(cut.at(i), t)
		})
}

// histogram borrows an empty histogram; giveBack returns it.
func (e *engine) histogram() *measure.Histogram {
	h, ok := e.hists.take()
	if !ok {
		return new(measure.Histogram)
	}
	h.Reset()
	return h
}

func (e *engine) giveBack(h *measure.Histogram) { e.hists.put(h) }

// frameSamples is the frame length in samples, rounded by the definition.
func frameSamples(rate int, seconds float64) int {
	return max(1, int(math.Floor(float64(rate)*seconds+0.5)))
}

// limits are the settings as measure wants them.
func (s Settings) limits() measure.Limits {
	return measure.Limits{Lower: s.LimitsDB[0], Upper: s.LimitsDB[1], OpenUpper: s.OpenLimitsDB[1]}
}

// needs reports whether any design must know that much of the recordings.
func (e *engine) needs(n family.Need) bool {
	return slices.ContainsFunc(e.plan.Specs, func(s family.Spec) bool { return s.Need() >= n })
}
