package measure

import "math"

// Reach is where a family's curve over its numbers of bits is as good as a
// design.
type Reach struct {
	// Bits is where the family's mean figure first reaches the design's, linear
	// between the numbers of bits measured; NaN where it does not within them.
	Bits float64
	// Lo and Hi bound it with 95 % confidence; NaN where the interval runs
	// beyond the numbers of bits measured, or below two observations.
	Lo, Hi       float64
	Method       string // in words
	Observations int
}

// MatchBits finds at how many bits a family is as good as a design. u holds
// the family at each of bits (ascending), then the design, as the last.
//
// The interval holds every number of bits around the best one at which the
// mean difference between the family, interpolated, and the design is within
// its own 95 % interval of zero (a confidence set by inverting a test: E. C.
// Fieller, J. R. Stat. Soc. B 16, 1954, from memory, for straight lines). So
// no unit is left out because it reaches the figure nowhere.
func MatchBits(bits []float64, u Units, seed uint64) Reach {
	if len(u.Values) != len(bits)+1 {
		panic("measure: MatchBits with bits and designs that do not fit")
	}
	means, values := u.observations()
	m := matcher{bits: bits, means: means, values: values}
	r := Reach{Bits: math.NaN(), Lo: math.NaN(), Hi: math.NaN(), Observations: len(values[0])}
	r.Bits = m.crossing()
	if math.IsNaN(r.Bits) || r.Observations < 2 {
		r.Method = "one observation: no interval"
		return r
	}
	at := m.difference(r.Bits)
	if r.Method, m.factor = "Student's t", studentFactor(r.Observations); r.Observations >= BootstrapFrom {
		own, _ := newSpread([][]float64{at}).bootstrap(seed, draws)
		r.Method, m.factor = "studentised bootstrap", own[0]
	}
	r.Lo, r.Hi = m.end(r.Bits, -1), m.end(r.Bits, 1)
	return r
}

// matcher holds the observations of a family and of a design.
type matcher struct {
	bits   []float64
	means  []float64
	values [][]float64
	factor float64 // on the standard error
}

func (m *matcher) crossing() float64 {
	want := m.means[len(m.bits)]
	for i := 1; i < len(m.bits); i++ {
		if a, b := m.means[i-1], m.means[i]; a <= want && want <= b && a < b {
			return m.bits[i-1] + (want-a)/(b-a)*(m.bits[i]-m.bits[i-1])
		}
	}
	return math.NaN()
}

// difference is the design's figure less the family's at so many bits, for
// each observation.
func (m *matcher) difference(bits float64) []float64 {
	i := 1
	for i < len(m.bits)-1 && m.bits[i] < bits {
		i++
	}
	part := (bits - m.bits[i-1]) / (m.bits[i] - m.bits[i-1])
	out := make([]float64, len(m.values[0]))
	for k, v := range m.values[len(m.bits)] {
		out[k] = v - (1-part)*m.values[i-1][k] - part*m.values[i][k]
	}
	return out
}

// holds reports whether so many bits are as good as the design, for all that
// can be told.
func (m *matcher) holds(bits float64) bool {
	d := m.difference(bits)
	var mean float64
	for _, v := range d {
		mean += v / float64(len(d))
	}
	return math.Abs(mean) <= m.factor*standardError(d, nil)
}

// end walks from the best number of bits to where it holds no more; NaN where
// it still holds at the last one measured.
func (m *matcher) end(from, sign float64) float64 {
	const step = 1.0 / 32
	last := m.bits[0]
	if sign > 0 {
		last = m.bits[len(m.bits)-1]
	}
	in := from
	for in != last {
		out := in + sign*step
		if (last-out)*sign < 0 {
			out = last
		}
		if !m.holds(out) {
			return m.between(in, out)
		}
		in = out
	}
	return math.NaN()
}

// between bisects to a millionth of a bit.
func (m *matcher) between(in, out float64) float64 {
	for math.Abs(out-in) > 1e-6 {
		if mid := (in + out) / 2; m.holds(mid) {
			in = mid
		} else {
			out = mid
		}
	}
	return in
}
