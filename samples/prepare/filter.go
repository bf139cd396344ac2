package prepare

import (
	"fmt"
	"math"
)

// The resampler's design: stop-band attenuation in dB, with 10 dB to spare over
// what is promised, and the edge of the pass band re the lower Nyquist
// frequency, where the stop band begins.
const (
	attenuation = 110.0
	passEdge    = 0.90
)

// maxTaps bounds the filter, and the input that it needs at a time: 32 MB each.
const maxTaps = 1 << 22

// filter is a polyphase interpolator by up and decimator by down: output m is
// the sum over k of phases[p][k] x[first+k], with m*down = q*up + p.
type filter struct {
	up, down int64
	taps     int // of a phase
	back     int // samples before q where a phase begins
	phases   [][]float64
}

// newFilter designs for a change of rate in Hz of so many channels.
func newFilter(from, to, channels int) (*filter, error) {
	g := gcd(from, to)
	f := &filter{up: int64(to / g), down: int64(from / g)}
	// The prototype runs at from*up; widths and edges in radians a sample there.
	nyquist := math.Pi * float64(min(from, to)) / (float64(from) * float64(f.up))
	width := nyquist * (1 - passEdge)
	n := (attenuation-7.95)/(2.285*width) + 1
	if n+float64(2*f.up) > maxTaps || n/float64(f.up)*float64(channels) > maxTaps {
		return nil, fmt.Errorf("from %d to %d Hz is %d/%d, which needs a filter of %.2g taps on %d channels: choose a rate in a simpler ratio",
			from, to, f.up, f.down, n, channels)
	}
	half := int64(math.Ceil(n / 2)) // the prototype is h[-half] ... h[half]
	h := kaiser(half, nyquist*(1+passEdge)/2)
	f.split(h, half)
	return f, nil
}

// kaiser is the windowed low-pass of cutoff radians a sample, 2 half + 1 taps,
// its sum the interpolation factor times 1 (set by split).
func kaiser(half int64, cutoff float64) []float64 {
	beta := 0.1102 * (attenuation - 8.7)
	h := make([]float64, 2*half+1)
	for i := range h {
		n := float64(int64(i) - half)
		r := n / float64(half+1)
		h[i] = sinc(cutoff*n) * besselI0(beta*math.Sqrt(1-r*r))
	}
	return h
}

// split deals the prototype out to the phases. For output time t = q*up + p the
// sample k of the input weighs h[t - k*up]: k runs from q-back on.
func (f *filter) split(h []float64, half int64) {
	sum := 0.0
	for _, v := range h {
		sum += v
	}
	f.back = int(half / f.up)
	f.taps = f.back + 1 + int((half+f.up-1)/f.up)
	f.phases = grid[float64](int(f.up), f.taps)
	for p, phase := range f.phases {
		for k := range phase {
			if n := int64(p) - int64(k-f.back)*f.up; n >= -half && n <= half {
				phase[k] = h[half+n] * float64(f.up) / sum
			}
		}
	}
}

// length is how many outputs n inputs give: those at times before the n-th.
func (f *filter) length(n int64) int64 {
	// n*up may pass 63 bits only beyond 2^41 samples a phase.
	return (n*f.up + f.down - 1) / f.down
}

func sinc(x float64) float64 {
	if x == 0 {
		return 1
	}
	return math.Sin(x) / x
}

// besselI0 is the modified Bessel function of order 0, by its power series
// (Abramowitz and Stegun 9.6.12).
func besselI0(x float64) float64 {
	sum, term := 1.0, 1.0
	for k := 1.0; term > 1e-17*sum; k++ {
		term *= x / (2 * k) * x / (2 * k)
		sum += term
	}
	return sum
}

func gcd(a, b int) int {
	for b != 0 {
		a, b = b, a%b
	}
	return a
}
