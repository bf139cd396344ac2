package measure

import "math"

// fineSide is the number of bins of a Fine on either side of 0.
const fineSide = 1 << 17

// fineUnit divides a bin: offsets from its middle are kept in whole parts.
const fineUnit = 1 << 16

// Fine counts samples finer than 16 bits in up to 262,145 bins of equal width
// that reach the recordings' own peak, and keeps the first two moments within
// each bin. It takes 7 MB. Sums are whole numbers, so they do not depend on
// the order in which stretches are merged.
type Fine struct {
	width   float64
	counts  []int64
	sum, sq []int64 // of offsets from the bin's middle, in width/fineUnit
	first   []int16 // offset of the first sample
	mixed   bool    // some bin holds two values, or one between two offsets
}

// NewFine takes the largest |x| that will be added, full scale = 1.0; the bins'
// width is the power of two that just reaches it.
func NewFine(peak float64) *Fine {
	if !(peak >= 0 && peak <= math.MaxFloat64) {
		panic("measure: NewFine: peak is not finite and at least 0")
	}
	f := &Fine{width: 1. / fineSide}
	if peak > 0 {
		f.width = math.Exp2(math.Ceil(math.Log2(peak / fineSide)))
	}
	n := 2*fineSide + 1
	f.counts, f.sum, f.sq, f.first = make([]int64, n), make([]int64, n), make([]int64, n), make([]int16, n)
	return f
}

// Width is that of a bin, full scale = 1.0.
func (f *Fine) Width() float64 { return f.width }

// Add counts samples; one beyond the peak is a caller's bug.
func (f *Fine) Add(x []float64) {
	for _, v := range x {
		k := math.Round(v / f.width)
		part := (v/f.width - k) * fineUnit
		q := min(math.Round(part), fineUnit/2-1) // k rounds away from 0: the end +1/2 is that of negative bins
		f.mixed = f.mixed || q != part
		i, o := int(k)+fineSide, int64(q)
		if f.counts[i] == 0 {
			f.first[i] = int16(o)
		} else if int64(f.first[i]) != o {
			f.mixed = true
		}
		f.counts[i]++
		f.sum[i] += o
		f.sq[i] += o * o
	}
}

// Merge adds o, made for the same peak.
func (f *Fine) Merge(o *Fine) {
	if f.width != o.width {
		panic("measure: Fine.Merge: bins of different width")
	}
	f.mixed = f.mixed || o.mixed
	for i, n := range o.counts {
		if n == 0 {
			continue
		}
		if f.counts[i] == 0 {
			f.first[i] = o.first[i]
		} else if f.first[i] != o.first[i] {
			f.mixed = true
		}
		f.counts[i] += n
		f.sum[i] += o.sum[i]
		f.sq[i] += o.sq[i]
	}
}

// Reset empties f.
func (f *Fine) Reset() {
	clear(f.counts)
	clear(f.sum)
	clear(f.sq)
	f.mixed = false
}

// Bins returns, for each bin that holds samples, ascending, the centroid
// (full scale = 1.0), the count and the mean squared distance to the centroid.
// Centroids are right to 2^-17 of a bin's width.
func (f *Fine) Bins() (centroids, counts, within []float64) {
	part := f.width / fineUnit
	for i, n := range f.counts {
		if n == 0 {
			continue
		}
		mean := float64(f.sum[i]) / float64(n)
		centroids = append(centroids, float64(i-fineSide)*f.width+mean*part)
		counts = append(counts, float64(n))
		within = append(within, max(0, float64(f.sq[i])/float64(n)-mean*mean)*part*part)
	}
	return centroids, counts, within
}

// Exact reports whether every bin holds one value only, so that the bins are
// the samples themselves.
func (f *Fine) Exact() bool { return !f.mixed }
