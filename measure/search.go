package measure

import (
	"math"
	"sort"
)

// Search finds the cell of any sample, 24-bit or float, for one quantizer. A
// table of evenly spaced buckets leads to within a few cells, comparison with
// the thresholds themselves decides: exact at every threshold.
type Search struct {
	thresholds []float64
	values     []float64
	lo, hi     float64
	tieOut     bool

	bounded []float64 // thresholds and +Inf
	first   []uint16  // lowest cell of each bucket
	zero    float64   // where the buckets begin
	scale   float64   // buckets per unit
	last    float64   // number of the last bucket
	single  bool      // no bucket holds more than one threshold
}

// maxBuckets bounds a bucket table to 256 KB.
const maxBuckets = 1 << 17

// NewSearch takes N-1 ascending finite thresholds, N values (at most 65,536)
// and the bounds of the range without overload, full scale = 1.0. A value on a
// threshold belongs to the upper cell; with tieOut to the cell of larger
// magnitude, zero to the positive one.
func NewSearch(thresholds, values []float64, lo, hi float64, tieOut bool) *Search {
	if len(values) != len(thresholds)+1 || len(values) > words16 || !sort.Float64sAreSorted(thresholds) {
		panic("measure: NewSearch with thresholds and values that do not fit")
	}
	s := &Search{thresholds: thresholds, values: values, lo: lo, hi: hi, tieOut: tieOut}
	s.bounded = append(append(make([]float64, 0, len(values)), thresholds...), math.Inf(1))
	s.first = make([]uint16, buckets(thresholds))
	s.last = float64(len(s.first) - 1)
	if n := len(thresholds); n > 1 {
		s.zero = thresholds[0]
		s.scale = s.last / (thresholds[n-1] - s.zero)
	}
	s.fill()
	return s
}

// buckets is enough for one threshold each where that is affordable: companders
// crowd them near zero.
func buckets(thresholds []float64) int {
	n := len(thresholds)
	if n < 2 {
		return 1
	}
	gap := math.Inf(1)
	for k := 1; k < n; k++ {
		gap = min(gap, thresholds[k]-thresholds[k-1])
	}
	want := 2 * (thresholds[n-1] - thresholds[0]) / gap
	return int(max(float64(2*n), min(want, maxBuckets)))
}

// fill writes the lowest cell of each bucket: the number of thresholds in
// earlier ones.
func (s *Search) fill() {
	s.single = true
	b, before := 0, -1
	for k, t := range s.thresholds {
		at := s.bucket(t)
		s.single = s.single && at != before
		before = at
		for ; b <= at; b++ {
			s.first[b] = uint16(k)
		}
	}
	for ; b < len(s.first); b++ {
		s.first[b] = uint16(len(s.thresholds))
	}
}

// bucket never falls as x rises, whatever the rounding: that makes first exact.
func (s *Search) bucket(x float64) int {
	at := (x - s.zero) * s.scale
	if !(at > 0) {
		return 0
	}
	if at >= s.last {
		return len(s.first) - 1
	}
	return int(at)
}

// Cells is the number of cells N.
func (s *Search) Cells() int { return len(s.values) }

// Index returns the cell of x, 0 to N-1; x is not NaN.
func (s *Search) Index(x float64) int {
	b := s.bucket(x)
	k := int(s.first[b])
	if !s.single {
		k = s.within(b, k, x)
	} else if s.bounded[k] <= x {
		k++
	}
	return s.settleTie(k, x)
}

// within finds the cell in a bucket of several thresholds; k is its lowest.
func (s *Search) within(b, k int, x float64) int {
	end := len(s.thresholds)
	if b+1 < len(s.first) {
		end = int(s.first[b+1])
	}
	for end-k > 4 {
		if m := (k + end) / 2; s.thresholds[m] <= x {
			k = m + 1
		} else {
			end = m
		}
	}
	for k < end && s.thresholds[k] <= x {
		k++
	}
	return k
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
	// Changes counts the samples coded otherwise than the one before them in
	// the block; 0 where the order is not known (a histogram).
	Changes int64
}

// Add codes x, adds the global figures (samples, energies, overload, indices)
// to t and returns the energies of this block alone.
func (s *Search) Add(t *Tally, x []float64) Energies {
	t.grow(len(s.values))
	var b Energies
	var granular, overload, last float64
	if len(x) > 0 {
		last = s.Quantize(x[0])
	}
	for _, v := range x {
		k := s.Index(v)
		y := s.values[k]
		if y != last {
			b.Changes++
		}
		last = y
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
