package fault

import "math"

// runs follows stretches of equal samples: digital silence, cut-outs, held
// values, and flat tops at the extremes.
type runs struct {
	silence, held, gap int64 // shortest run that counts, in samples

	last, before float64 // value of the running run, and of the sample before it
	length       int64   // of the running run; 0 before the first sample
	begun        bool    // a run came before the running one

	zeros        int64 // exact zeros, wherever
	silences     tally // runs of zeros of at least 10 ms
	holds        tally // runs of another value, at least 20 ms
	gaps         tally // zeros of at least 1 ms with loud edges
	upper, lower top
}

// tally counts runs.
type tally struct{ runs, samples, longest int64 }

func (t *tally) count(n int64) {
	t.runs++
	t.samples += n
	t.longest = max(t.longest, n)
}

// top is an extreme value and how often the channel sat there.
type top struct {
	value   float64
	samples int64
	flat    tally // of these, runs of two or more
}

const (
	silenceSeconds = 0.010
	heldSeconds    = 0.020
	gapSeconds     = 0.001
	// gapEdge is the amplitude that must stand on both sides of a cut-out.
	gapEdge = 1.0 / 64
)

func newRuns(rate int) runs {
	ticks := func(s float64) int64 { return max(2, int64(math.Ceil(s*float64(rate)))) }
	return runs{
		silence: ticks(silenceSeconds), held: ticks(heldSeconds), gap: ticks(gapSeconds),
		upper: top{value: math.Inf(-1)}, lower: top{value: math.Inf(1)},
	}
}

func (r *runs) add(x []float64) {
	for _, v := range x {
		if v == r.last && r.length > 0 {
			r.length++
			continue
		}
		r.turn(v)
	}
}

// turn ends the running run, since the next sample is v.
func (r *runs) turn(v float64) {
	if r.length > 0 {
		r.end(v)
		r.before, r.begun = r.last, true
	}
	r.last, r.length = v, 1
}

// end books the run that stops before the sample next.
func (r *runs) end(next float64) {
	r.upper.book(r.last, r.length, r.last > r.upper.value)
	r.lower.book(r.last, r.length, r.last < r.lower.value)
	if r.last != 0 {
		if r.length >= r.held {
			r.holds.count(r.length)
		}
		return
	}
	r.zeros += r.length
	if r.length >= r.silence {
		r.silences.count(r.length)
	}
	if r.length >= r.gap && r.begun && math.Abs(r.before) > gapEdge && math.Abs(next) > gapEdge {
		r.gaps.count(r.length)
	}
}

// book takes a run of n samples at v; beyond says that v is a new extreme.
func (t *top) book(v float64, n int64, beyond bool) {
	if beyond {
		*t = top{value: v}
	}
	if v != t.value {
		return
	}
	t.samples += n
	if n > 1 {
		t.flat.count(n)
	}
}

// closed is r with the running run booked; the end of the channel is no loud
// edge.
func (r runs) closed() runs {
	if r.length > 0 {
		r.end(0)
	}
	return r
}
