package measure

import "math"

// Constants of ITU-T Rec. P.56 (12/2011) method B, clause 8.3; from memory.
const (
	envelopeSeconds = 0.03
	hangoverSeconds = 0.2
	marginDB        = 15.9
	thresholds56    = 15 // 2^-15 ... 2^-1 of full scale
)

// Activity measures the active speech level of one channel by ITU-T P.56
// method B, block by block.
//
// The envelope is smoothed twice, p = g p + (1-g)|x|, q = g q + (1-g) p with
// g = exp(-1/(0.03 s rate)); for each threshold the samples with q at or above
// it are counted, and the ceil(0.2 s rate) samples after each. Counting is
// lazy: a threshold costs work only when q crosses it.
type Activity struct {
	g, h     float64 // h = 1-g
	hangover int64

	p, q float64
	top  int   // thresholds met by q: those below top
	now  int64 // samples seen, warm-up included

	// from is the first sample not yet counted for each threshold, until the
	// end of the hangover of those not met.
	from, until [thresholds56]int64
	count       [thresholds56]int64
	samples     int64
	squares     energy
}

// NewActivity starts at silence; rate is in Hz and must be positive.
func NewActivity(rate float64) *Activity {
	if !(rate > 0) || math.IsInf(rate, 1) {
		panic("measure: NewActivity with a rate that is not positive and finite")
	}
	g := math.Exp(-1 / (envelopeSeconds * rate))
	return &Activity{g: g, h: 1 - g, hangover: int64(math.Ceil(hangoverSeconds * rate))}
}

// threshold56 is the j-th threshold, ascending; endless at both ends.
func threshold56(j int) float64 {
	switch {
	case j < 0:
		return math.Inf(-1)
	case j >= thresholds56:
		return math.Inf(1)
	}
	return math.Ldexp(1, j-thresholds56)
}

// WarmUpSeconds of preceding samples put the state of a chunk where a run
// from the start would have it: 67 time constants forget all but 1e-26.
const WarmUpSeconds = 2

// WarmWords runs over the samples that precede a chunk without counting them.
func (a *Activity) WarmWords(words []int16) {
	a.runWords(words)
	a.forget()
}

// Warm is WarmWords for float samples.
func (a *Activity) Warm(x []float64) {
	a.run(x)
	a.forget()
}

// forget drops all counts and keeps the state.
func (a *Activity) forget() {
	a.settle()
	a.count, a.samples, a.squares = [thresholds56]int64{}, 0, energy{}
}

// AddWords adds 16-bit samples, full scale = 32768.
func (a *Activity) AddWords(words []int16) {
	a.runWords(words)
	a.samples += int64(len(words))
	a.squares.addWordSquares(sumSquares(words))
}

// Add adds samples, full scale = 1.0, finite.
func (a *Activity) Add(x []float64) {
	a.run(x)
	a.samples += int64(len(x))
	for _, v := range x {
		a.squares.float += float64(v * v)
	}
}

// runWords is run for words. The scale 2^-15 is exact, so both give the same
// bits.
func (a *Activity) runWords(words []int16) {
	g, h, hw := a.g, a.h, a.h/32768
	for len(words) > 0 {
		block := words[:min(len(words), flushEvery)]
		words = words[len(block):]
		p, q := a.p, a.q
		low, high := threshold56(a.top-1), threshold56(a.top)
		for i, w := range block {
			v := int32(w)
			s := v >> 31
			v = (v ^ s) - s
			p = float64(g*p) + float64(hw*float64(v))
			q = float64(g*q) + float64(h*p)
			if q < low || q >= high {
				low, high = a.cross(q, a.now+int64(i))
			}
		}
		a.leave(p, q, len(block))
	}
}

func (a *Activity) run(x []float64) {
	g, h := a.g, a.h
	for len(x) > 0 {
		block := x[:min(len(x), flushEvery)]
		x = x[len(block):]
		p, q := a.p, a.q
		low, high := threshold56(a.top-1), threshold56(a.top)
		for i, v := range block {
			p = float64(g*p) + float64(h*math.Abs(v))
			q = float64(g*q) + float64(h*p)
			if q < low || q >= high {
				low, high = a.cross(q, a.now+int64(i))
			}
		}
		a.leave(p, q, len(block))
	}
}

// flushEvery bounds how long a decaying envelope may take part in subnormal
// arithmetic, which is slow; below tiny it can't reach a threshold any more.
const (
	flushEvery = 4096
	tiny       = 1e-100
)

func (a *Activity) leave(p, q float64, n int) {
	if p < tiny {
		p = 0
	}
	if q < tiny {
		q = 0
	}
	a.p, a.q = p, q
	a.now += int64(n)
}
