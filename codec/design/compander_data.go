package design

import (
	"fmt"
	"math"
	"sort"
)

// CompanderData returns the n-level compander whose slope follows p^power, p
// the smoothed density of |x| in h: power 1/3 is least mean squared error at
// many levels (Panter, Dite 1951), larger powers serve loud samples less.
// Even n: mid-rise; odd n: mid-tread, its middle level at 0. The overload
// point is the largest |x|; values are the expansion of the compressed cells'
// middles. segments > 0 replaces the law by that many chords a side, each
// with an equal share of the levels, the form hardware uses; 0 keeps it.
//
// Smoothing: p is constant between quantiles of |x|, at most 64 stretches of
// equal weight, the upper half of the last one halved again and again, so
// that each holds many samples and the tail stays resolved.
func CompanderData(h Histogram, n int, power float64, segments int) (Solution, error) {
	if err := h.check(); err != nil {
		return Solution{}, err
	}
	if n < 2 || n > 1<<16 {
		return Solution{}, fmt.Errorf("%d levels: want 2 to 65536", n)
	}
	if !(power > 0 && power <= 1) {
		return Solution{}, fmt.Errorf("power %g: want above 0, at most 1", power)
	}
	if segments < 0 || segments > n/2 {
		return Solution{}, fmt.Errorf("%d segments for %d levels a side: want 0 (smooth) to %d", segments, n/2, n/2)
	}
	half := h.Fold()
	if half.Values[len(half.Values)-1] == 0 {
		return Solution{}, fmt.Errorf("all values are 0: no slope to follow")
	}
	law := dataLaw(half, power)
	s := Solution{Proof: Closed}
	if segments > 0 {
		law = law.chords(segments)
		if k := len(law.x) - 1; k < segments {
			s.Notes = append(s.Notes, fmt.Sprintf("the data tell only %d chords apart, %d were asked for", k, segments))
		}
	}
	values, thresholds := law.table(n)
	s.Values, s.Thresholds = unfold(values, thresholds, n%2 == 1)
	s.MSE, s.Entropy = EvaluateData(h, s.Thresholds, s.Values)
	return s, nil
}

// chordLaw is a piecewise linear compressor: x ascending from 0 to the
// overload point, u ascending from 0 to 1.
type chordLaw struct{ x, u []float64 }

// dataLaw integrates p^power over the stretches of the folded histogram.
func dataLaw(half Histogram, power float64) chordLaw {
	knots, mass := stretches(half)
	law := chordLaw{x: knots, u: make([]float64, len(knots))}
	for i := range mass {
		d := knots[i+1] - knots[i]
		law.u[i+1] = law.u[i] + math.Pow(mass[i], power)*math.Pow(d, 1-power)
	}
	last := law.u[len(law.u)-1]
	for i := range law.u {
		law.u[i] /= last
	}
	law.u[len(law.u)-1] = 1
	return law
}

// stretches cuts [0, largest value] at quantiles; each stretch holds mass > 0.
func stretches(half Histogram) (knots, mass []float64) {
	const body, tail = 64, 12
	total := half.Total()
	var cuts []float64
	for k := 1; k < body; k++ {
		cuts = append(cuts, total*float64(k)/body)
	}
	for k := 1; k < tail; k++ {
		cuts = append(cuts, total*(1-math.Ldexp(1, -k)/body))
	}
	cuts = append(cuts, total)
	knots = []float64{0}
	var sum, before float64
	for i, x := range half.Values {
		sum += half.Weights[i]
		if last := i == len(half.Values)-1; (last || sum >= cuts[0]) && x > knots[len(knots)-1] {
			knots, mass = append(knots, x), append(mass, sum-before)
			before = sum
			cuts = cuts[min(sort.SearchFloat64s(cuts, math.Nextafter(sum, math.Inf(1))), len(cuts)-1):]
		}
	}
	return knots, mass
}

// chords replaces the law by k chords of equal rise (and so of equally many
// levels), with the corners that cost least: l is the least-error law for a
// density proportional to the cube of its slope (Panter, Dite 1951), under
// which a chord of width d costs its mass times d^2. Corners are sought among
// the quarters of the stretches, by dynamic programming.
func (l chordLaw) chords(k int) chordLaw {
	x, mass := l.corners()
	m := len(x)
	k = min(k, m-1)
	best, from := make([]float64, m), make([][]int32, k)
	for j := range best {
		best[j] = math.Inf(1)
	}
	best[0] = 0
	for c := range k {
		next := make([]float64, m)
		from[c] = make([]int32, m)
		for j := range next {
			next[j] = math.Inf(1)
			for i := c; i < j; i++ {
				d := x[j] - x[i]
				if e := best[i] + (mass[j]-mass[i])*d*d; e < next[j] {
					next[j], from[c][j] = e, int32(i)
				}
			}
		}
		best = next
	}
	out := chordLaw{x: make([]float64, k+1), u: make([]float64, k+1)}
	for c, j := k, m-1; c >= 0; c-- {
		out.x[c], out.u[c] = x[j], float64(c)/float64(k)
		if c > 0 {
			j = int(from[c-1][j])
		}
	}
	return out
}

// corners are the candidates, with the mass of the cubed slope below them.
func (l chordLaw) corners() (x, mass []float64) {
	x, mass = []float64{0}, []float64{0}
	for i := range l.x[1:] {
		d := (l.x[i+1] - l.x[i]) / 4
		slope := (l.u[i+1] - l.u[i]) / (4 * d)
		for q := 1; q <= 4; q++ {
			x = append(x, l.x[i]+float64(q)*d)
			mass = append(mass, mass[len(mass)-1]+slope*slope*slope*d)
		}
		x[len(x)-1] = l.x[i+1]
	}
	return x, mass
}

// expand is the inverse of the compressor.
func (l chordLaw) expand(u float64) float64 {
	i := min(max(sort.SearchFloat64s(l.u, u), 1), len(l.u)-1)
	t := (u - l.u[i-1]) / (l.u[i] - l.u[i-1])
	return l.x[i-1] + t*(l.x[i]-l.x[i-1])
}

// table returns the values and thresholds above 0 of n cells that are even in
// the compressed domain (the middle value 0 included for odd n).
func (l chordLaw) table(n int) (values, thresholds []float64) {
	for k := 1 - n%2; k < n; k += 2 {
		values = append(values, l.expand(float64(k)/float64(n)))
	}
	for k := 2 - n%2; k < n; k += 2 {
		thresholds = append(thresholds, l.expand(float64(k)/float64(n)))
	}
	return values, thresholds
}
