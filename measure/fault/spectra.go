package fault

import (
	"math"

	"gonum.org/v1/gonum/dsp/fourier"
	"gonum.org/v1/gonum/dsp/window"
)

const (
	// segmentSeconds is the least length of a spectral segment, rounded up to
	// a power of two.
	segmentSeconds = 0.021
	// bandBins is the width of a band in bins of the transform.
	bandBins = 4
	// highest bounds a density, so that no sum of them overflows.
	highest = 1e30
	// maxSegments is how many segments are kept, evenly spread.
	maxSegments = 512
)

// spectra keeps the band levels of segments spread evenly over the channel,
// half overlapping while they are few. When maxSegments are full every other
// one is dropped and the distance doubled, so that memory stays constant and
// the number of transforms grows with the logarithm of the duration.
type spectra struct {
	rate     int
	fft      *fourier.FFT
	window   []float64
	scale    float64 // squared magnitude to one-sided density
	buf      []float64
	filled   int
	skip     int // samples before the next segment
	stride   int
	work     []float64
	coeff    []complex128
	segments [][]float32 // density of each band, full scale^2/Hz
}

func newSpectra(rate int) *spectra {
	n := segmentLength(rate)
	s := &spectra{rate: rate, fft: fourier.NewFFT(n), window: make([]float64, n),
		buf: make([]float64, n), work: make([]float64, n), coeff: make([]complex128, n/2+1), stride: n / 2}
	for i := range s.window {
		s.window[i] = 1
	}
	window.Nuttall(s.window)
	var energy float64
	for _, w := range s.window {
		energy += w * w
	}
	s.scale = 2 / (energy * float64(rate))
	return s
}

// Segments says which segments a scan of n samples (one channel) at rate Hz
// keeps: samples at i*stride to i*stride + length for i from 0 to count - 1.
// Feed them to AddSegment where the samples are joined in parts.
func Segments(rate int, n int64) (count int, stride, length int64) {
	length = int64(segmentLength(rate))
	if n < length {
		return 0, length / 2, length
	}
	for stride = length / 2; ; stride *= 2 {
		if whole := (n-length)/stride + 1; whole < maxSegments {
			return int(whole), stride, length
		}
	}
}

// AddSegment takes the next segment of Segments.
func (s *Scan) AddSegment(x []float64) {
	copy(s.spectra.buf, x)
	s.spectra.segments = append(s.spectra.segments, s.spectra.bands())
}

// segmentLength is that of a segment in samples, a power of two.
func segmentLength(rate int) int {
	n := 64
	for float64(n) < segmentSeconds*float64(rate) && n < 1<<14 {
		n *= 2
	}
	return n
}

func (s *spectra) add(x []float64) {
	for len(x) > 0 {
		if s.skip > 0 {
			n := min(s.skip, len(x))
			s.skip -= n
			x = x[n:]
			continue
		}
		n := copy(s.buf[s.filled:], x)
		s.filled += n
		x = x[n:]
		if s.filled == len(s.buf) {
			s.take()
		}
	}
}

// take keeps the full segment and moves on by the stride.
func (s *spectra) take() {
	s.segments = append(s.segments, s.bands())
	if s.stride < len(s.buf) {
		s.filled = copy(s.buf, s.buf[s.stride:])
	} else {
		s.filled, s.skip = 0, s.stride-len(s.buf)
	}
	if len(s.segments) < maxSegments {
		return
	}
	for i := range maxSegments / 2 {
		s.segments[i] = s.segments[2*i]
	}
	clear(s.segments[maxSegments/2:])
	s.segments = s.segments[:maxSegments/2]
	s.stride *= 2
}

// bands is the mean density of each band of the segment in the buffer.
func (s *spectra) bands() []float32 {
	for i, v := range s.buf {
		s.work[i] = v * s.window[i]
	}
	s.fft.Coefficients(s.coeff, s.work)
	out := make([]float32, len(s.buf)/2/bandBins)
	for j := range out {
		var sum float64
		for _, c := range s.coeff[j*bandBins : (j+1)*bandBins] {
			sum += real(c)*real(c) + imag(c)*imag(c)
		}
		if sum *= s.scale / bandBins; !(sum <= highest) {
			sum = highest // absurd float samples
		}
		out[j] = float32(sum)
	}
	return out
}

// hertz is the lower edge of band j.
func (s *spectra) hertz(j int) float64 {
	return float64(j*bandBins) * float64(s.rate) / float64(len(s.buf))
}

// sounding lists the segments that are not digital silence.
func (s *spectra) sounding() [][]float32 {
	var out [][]float32
	for _, seg := range s.segments {
		for _, p := range seg {
			if p > 0 {
				out = append(out, seg)
				break
			}
		}
	}
	return out
}

// rounding is the density in dB of the rounding noise lsb^2/12, white up to
// half the rate.
func (s *spectra) rounding(lsb float64) float64 {
	return 10 * math.Log10(lsb*lsb/12/(float64(s.rate)/2))
}

// average is the Welch spectrum by bands, in dB, never below ground.
func (s *spectra) average(segments [][]float32, ground float64) []float64 {
	out := make([]float64, len(s.buf)/2/bandBins)
	for _, seg := range segments {
		for j, p := range seg {
			out[j] += float64(p)
		}
	}
	for j := range out {
		out[j] = math.Max(10*math.Log10(out[j]/float64(len(segments))), ground)
	}
	return out
}
