package model

import (
	"fmt"
	"math"
	"sort"
)

// bins are the data as the likelihood needs them: |x| in LSBs and shares of
// all samples. Above groupFrom, neighbours are replaced by two points that
// have their moments up to the third (the Gauss rule of two nodes): ln of a
// cell's probability is smooth there, and 32,768 bins become about 500.
type bins struct {
	x, share []float64 // |x| >= 0 ascending
	end      []float64 // |x| whose cells run to infinity
	endShare []float64
	samples  int64
	mean     float64 // of |x|
	square   float64 // mean of x^2
	log      float64 // mean of ln |x|, a zero counting as uniform in its cell
	zeros    float64 // share of |x| < 1/2
}

const (
	groupFrom  = 64.0
	groupRatio = 1 + 1.0/32
)

func (d Data) check() error {
	if len(d.Values) != len(d.Counts) {
		return fmt.Errorf("%d values and %d counts: want as many", len(d.Values), len(d.Counts))
	}
	if !(d.LSB > 0 && d.LSB <= math.MaxFloat64) {
		return fmt.Errorf("lsb %g: want a finite number above 0", d.LSB)
	}
	if !(d.Lo < d.Hi || d.Lo == 0 && d.Hi == 0) {
		return fmt.Errorf("ends %g and %g: want the lower first, or both 0", d.Lo, d.Hi)
	}
	for i, x := range d.Values {
		if !(math.Abs(x) <= 1e15*d.LSB) || i > 0 && !(x > d.Values[i-1]) {
			return fmt.Errorf("value %d (%g) is not finite, within 1e15 lsb and above its neighbour", i, x)
		}
		if d.Counts[i] < 0 {
			return fmt.Errorf("count %d of value %g: want at least 0", d.Counts[i], x)
		}
	}
	return nil
}

// Samples is the sum of the counts.
func (d Data) Samples() (n int64) {
	for _, c := range d.Counts {
		n += c
	}
	return n
}

// Zeros is the share of exact zeros; NaN without samples.
func (d Data) Zeros() float64 {
	var zeros int64
	for i, x := range d.Values {
		if x == 0 {
			zeros = d.Counts[i]
		}
	}
	return float64(zeros) / float64(d.Samples())
}

// ended reports whether the cell of x runs to infinity.
func (d Data) ended(x float64) bool {
	return (d.Lo != 0 || d.Hi != 0) && (x <= d.Lo || x >= d.Hi)
}

func newBins(d Data) (*bins, error) {
	if err := d.check(); err != nil {
		return nil, err
	}
	b := &bins{samples: d.Samples()}
	if b.samples == 0 {
		return b, nil
	}
	x, count := d.fold(b)
	for i := 0; i < len(x); {
		j := i + 1
		for x[i] > groupFrom && j < len(x) && x[j] < x[i]*groupRatio {
			j++
		}
		b.group(x[i:j], count[i:j])
		i = j
	}
	return b, nil
}

// fold merges both signs, in LSBs, endless cells apart, and sums the moments.
func (d Data) fold(b *bins) (x, count []float64) {
	n := float64(b.samples)
	x, count = make([]float64, 0, len(d.Values)), make([]float64, 0, len(d.Values))
	d.ascending(func(v float64, inner, ended int64) {
		b.moments(v, float64(inner+ended)/n)
		if inner > 0 {
			x, count = append(x, v), append(count, float64(inner))
		}
		if ended > 0 {
			b.end, b.endShare = append(b.end, v), append(b.endShare, float64(ended)/n)
		}
	})
	return x, count
}

// ascending calls f with each |x| in LSBs and how often it occurs in cells
// that end and in endless ones.
func (d Data) ascending(f func(v float64, inner, ended int64)) {
	n := len(d.Values)
	right := sort.SearchFloat64s(d.Values, 0)
	left := right - 1
	for left >= 0 || right < n {
		size := math.Inf(1)
		if right < n {
			size = d.Values[right]
		}
		if left >= 0 {
			size = math.Min(size, -d.Values[left])
		}
		var counts [2]int64
		take := func(i int) {
			k := 0
			if d.ended(d.Values[i]) {
				k = 1
			}
			counts[k] += d.Counts[i]
		}
		if left >= 0 && -d.Values[left] == size {
			take(left)
			left--
		}
		if right < n && d.Values[right] == size {
			take(right)
			right++
		}
		f(size/d.LSB, counts[0], counts[1])
	}
}

// moments adds a value to the moments.
func (b *bins) moments(v, share float64) {
	b.mean += share * v
	b.square += share * v * v
	if v < 0.5 {
		b.zeros += share
		b.log += share * (math.Log(0.5) - 1)
		return
	}
	b.log += share * math.Log(v)
}

// group adds neighbours, as they are or as two points with their moments.
func (b *bins) group(x, count []float64) {
	n := float64(b.samples)
	if len(x) <= 2 {
		for i := range x {
			b.x, b.share = append(b.x, x[i]), append(b.share, count[i]/n)
		}
		return
	}
	var w, mean, two, three float64
	for i := range x {
		w += count[i]
		mean += count[i] * (x[i] - x[0])
	}
	mean = x[0] + mean/w
	for i := range x {
		d := x[i] - mean
		two += count[i] * d * d
		three += count[i] * d * d * d
	}
	sd := math.Sqrt(two / w)
	half := three / w / (sd * sd * sd) / 2 // of the skewness
	r := math.Hypot(1, half)
	upper := (r - half) / (2 * r)
	b.x = append(b.x, mean+sd*(half-r), mean+sd*(half+r))
	b.share = append(b.share, w/n*(1-upper), w/n*upper)
}

// undefined says why no model can be fitted, "" where one can.
func (b *bins) undefined() string {
	switch {
	case b.samples == 0:
		return "no samples"
	case b.zeros == 1:
		return "all samples are exact zeros (digital silence)"
	case len(b.x) == 0:
		return "all samples are at the ends of the number format"
	}
	return ""
}
