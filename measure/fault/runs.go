package fault

import "math"

// runs follows stretches of equal samples: digital silence, cut-outs, held
// values, and flat tops at the extremes.
type runs struct {
	silence, held, gap int64 // shortest run that counts, in samples

	last   float64 // value of the running run
	length int64   // of the running run; 0 before the first sample
	before float64 // value of the run before it, where headed

	head   run // the first run, kept apart: it may go on from the part before
	second float64
	headed bool // head is complete, a second run began with the value second

	zeros        int64 // exact zeros, wherever
	silences     tally // runs of zeros of at least 10 ms
	holds        tally // runs of another value, at least 20 ms
	gaps         tally // zeros of at least 1 ms with loud edges
	upper, lower top
}

// run is a stretch of equal samples.
type run struct {
	value  float64
	length int64
}

// tally counts runs.
type tally struct{ runs, samples, longest int64 }

// join adds the runs of another part.
func (t *tally) join(o tally) {
	t.runs += o.runs
	t.samples += o.samples
	t.longest = max(t.longest, o.longest)
}

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
		r.one(v)
	}
}

// addWords is add for 16-bit words. Most runs are single samples between the
// extremes, of which nothing is kept but zeros.
func (r *runs) addWords(words []int16) {
	i := 0
	for ; i < len(words) && !r.headed; i++ {
		r.one(float64(words[i]) / (1 << 15))
	}
	for i < len(words) {
		last, length := int(r.last*(1<<15)), r.length
		low, high := r.lower.word(), r.upper.word()
		before := int(r.before * (1 << 15))
		for ; i < len(words); i++ {
			switch w := int(words[i]); {
			case w == last:
				length++
				continue
			case length == 1 && last > low && last < high && last != 0:
				before, last = last, w
				continue
			}
			break
		}
		r.last, r.length, r.before = float64(last)/(1<<15), length, float64(before)/(1<<15)
		if i < len(words) {
			r.one(float64(words[i]) / (1 << 15))
			i++
		}
	}
}

// one takes a sample.
func (r *runs) one(v float64) {
	if v == r.last && r.length > 0 {
		r.length++
		return
	}
	r.turn(v)
}

// turn ends the running run, since the next sample is v.
func (r *runs) turn(v float64) {
	if r.length > 0 {
		r.end(v)
	}
	r.last, r.length = v, 1
}

// end books the running run, which stops before the sample next; the first
// one is kept apart.
func (r *runs) end(next float64) {
	if !r.headed {
		r.head, r.second, r.headed = run{r.last, r.length}, next, true
	} else {
		r.book(run{r.last, r.length}, math.Abs(r.before) > gapEdge, next)
	}
	r.before = r.last
}

// book enters a whole run; edge says whether a loud sample stands before it.
func (r *runs) book(n run, edge bool, next float64) {
	r.upper.book(n.value, n.length, n.value > r.upper.value)
	r.lower.book(n.value, n.length, n.value < r.lower.value)
	if n.value != 0 {
		if n.length >= r.held {
			r.holds.count(n.length)
		}
		return
	}
	r.zeros += n.length
	if n.length >= r.silence {
		r.silences.count(n.length)
	}
	if n.length >= r.gap && edge && math.Abs(next) > gapEdge {
		r.gaps.count(n.length)
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

// word is the extreme as a 16-bit word, beyond all where there is none yet.
func (t *top) word() int {
	return int(math.Max(-1<<16, math.Min(1<<16, t.value*(1<<15))))
}

// join takes the extreme of another part.
func (t *top) join(o top, beyond bool) {
	switch {
	case beyond:
		*t = o
	case o.value == t.value:
		t.samples += o.samples
		t.flat.join(o.flat)
	}
}

// join appends the runs of the part that follows.
func (r *runs) join(o *runs) {
	switch {
	case o.length == 0:
		return
	case r.length == 0:
		*r = *o
		return
	}
	first := run{o.last, o.length}
	if o.headed {
		first = o.head
	}
	if r.last == first.value {
		r.length += first.length
	} else {
		r.turn(first.value)
		r.length = first.length
	}
	if o.headed {
		r.end(o.second)
		r.last, r.length, r.before = o.last, o.length, o.before
	}
	r.zeros += o.zeros
	r.silences.join(o.silences)
	r.holds.join(o.holds)
	r.gaps.join(o.gaps)
	r.upper.join(o.upper, o.upper.value > r.upper.value)
	r.lower.join(o.lower, o.lower.value < r.lower.value)
}

// closed is r with the first and the running run booked; the ends of the
// channel are no loud edges.
func (r runs) closed() runs {
	if r.headed {
		r.book(r.head, false, r.second)
	}
	if r.length > 0 {
		r.book(run{r.last, r.length}, r.headed && math.Abs(r.before) > gapEdge, 0)
	}
	return r
}
