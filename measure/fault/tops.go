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

func (t *tops) add(x []float64) {
	for _, v := range x {
		b := math.Float64bits(v)
		key := int(b>>topShift&topMask) - topBase
		t.bins[b>>63][min(max(key, 0), topBins-1)]++
	}
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
