package fault

import "math"

// tops is a histogram of magnitudes for each sign with 128 bins an octave, so
// that the surroundings of the peak can be seen whatever the peak is.
type tops struct{ bins [2][topBins]int64 }

const (
	topShift = 52 - 7                       // keeps 7 bits of the mantissa
	topBase  = (1023 - 24) << 7             // key of 2^-24
	topBins  = 32 << 7                      // 2^-24 to 2^8
	topMask  = uint64(1)<<(63-topShift) - 1 // without the sign
)

// add counts n samples at v.
func (t *tops) add(v float64, n int64) {
	b := math.Float64bits(v)
	key := int(b>>topShift&topMask) - topBase
	t.bins[b>>63][min(max(key, 0), topBins-1)] += n
}

// join adds the counts of o.
func (t *tops) join(o *tops) {
	for sign := range t.bins {
		for i, n := range o.bins[sign] {
			t.bins[sign][i] += n
		}
	}
}

// magnitudes are all samples, on the 16-bit grid and off it.
func (s *Scan) magnitudes() *tops {
	if s.crowns == nil {
		s.crowns = new(tops)
		*s.crowns = s.tops
		for i, n := range s.grid.counts {
			if n > 0 {
				s.crowns.add(float64(i-1<<15)/(1<<15), n)
			}
		}
	}
	return s.crowns
}

// crown counts the samples of one sign (0 positive, 1 negative) in the three
// bins at the peak (the top 1 to 2.4 %), and in the twelve below.
func (t *tops) crown(sign int) (top, below int64) {
	h := &t.bins[sign]
	last := topBins - 1
	for last > 0 && h[last] == 0 {
		last--
	}
	for i := range 15 {
		switch k := last - i; {
		case k < 0:
		case i < 3:
			top += h[k]
		default:
			below += h[k]
		}
	}
	return top, below
}
