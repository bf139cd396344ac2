package measure

import "sort"

// Search finds the cell of any sample, 24-bit or float, for one quantizer. A
// table of evenly spaced buckets leads to within a few cells, comparison with
// the thresholds themselves decides: exact at every threshold.
type Search struct {
	thresholds []float64
	values     []float64
	lo, hi     float64
	tieOut     bool

	first []uint16 // lowest cell of each bucket
	zero  float64  // where the buckets begin
	scale float64  // buckets per unit
}

// NewSearch takes N-1 ascending finite thresholds, N values (at most 65,536)
// and the bounds of the range without overload, full scale = 1.0. A value on a
// threshold belongs to the upper cell; with tieOut to the cell of larger
// magnitude, zero to the positive one.
func NewSearch(thresholds, values []float64, lo, hi float64, tieOut bool) *Search {
	if len(values) != len(thresholds)+1 || len(values) > words16 || !sort.Float64sAreSorted(thresholds) {
		panic("measure: NewSearch with thresholds and values that do not fit")
	}
	s := &Search{thresholds: thresholds, values: values, lo: lo, hi: hi, tieOut: tieOut}
	n := len(thresholds)
	s.first = make([]uint16, min(1<<17, max(64, 8*n)))
	if n == 0 {
		return s
	}
	s.zero = thresholds[0]
	if span := thresholds[n-1] - s.zero; span > 0 {
		s.scale = float64(len(s.first)-1) / span
	}
	b := 0
	for k, t := range thresholds {
		for ; b <= s.bucket(t); b++ {
			s.first[b] = uint16(k)
		}
	}
	for ; b < len(s.first); b++ {
		s.first[b] = uint16(n)
	}
	return s
}

// bucket never falls as x rises, whatever the rounding: that makes first exact.
func (s *Search) bucket(x float64) int {
	at := (x - s.zero) * s.scale
	switch last := len(s.first) - 1; {
	case !(at > 0):
		return 0
	case at >= float64(last):
		return last
	}
	return int(at)
}

// Cells is the number of cells N.
func (s *Search) Cells() int { return len(s.values) }

// Index returns the cell of x, 0 to N-1.
func (s *Search) Index(x float64) int {
	b := s.bucket(x)
	k, end := int(s.first[b]), len(s.thresholds)
	if b+1 < len(s.first) {
		end = min(end, int(s.first[b+1]))
	}
	t := s.thresholds
	for end-k > 4 {
		if m := (k + end) / 2; t[m] <= x {
			k = m + 1
		} else {
			end = m
		}
	}
	for k < end && t[k] <= x {
		k++
	}
	return s.settleTie(k, x)
}

// Quantize returns the reconstruction value of x.
func (s *Search) Quantize(x float64) float64 { return s.values[s.Index(x)] }

// Indices writes the cells of x to dst, which is at least as long.
func (s *Search) Indices(dst []uint16, x []float64) {
	dst = dst[:len(x)]
	for i, v := range x {
		dst[i] = uint16(s.Index(v))
	}
}

// Energies are the sums over a block of samples x coded as y, full scale =
// 1.0, in the order of the samples.
type Energies struct {
	Signal float64 // sum x^2
	Error  float64 // sum (x-y)^2
	Cross  float64 // sum x y
	Output float64 // sum y^2
}

// Add codes x, adds the global figures (samples, energies, overload, indices)
// to t and returns the energies of this block alone.
func (s *Search) Add(t *Tally, x []float64) Energies {
	t.grow(len(s.values))
	var b Energies
	var granular, overload float64
	for _, v := range x {
		k := s.Index(v)
		y := s.values[k]
		e := v - y
		ee := float64(e * e)
		b.Signal += float64(v * v)
		b.Error += ee
		b.Cross += float64(v * y)
		b.Output += float64(y * y)
		t.Indices[k]++
		if v < s.lo || v > s.hi {
			t.Overloaded++
			overload += ee
		} else {
			granular += ee
		}
	}
	t.Samples += int64(len(x))
	t.Signal += b.Signal
	t.Error += b.Error
	t.GranularErr += granular
	t.OverloadErr += overload
	return b
}
