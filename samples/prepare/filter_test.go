package prepare

import (
	"math"
	"testing"
)

// response is the prototype's gain at f Hz, from its definition.
func (f *filter) response(hz, from float64) float64 {
	re, im := 0.0, 0.0
	for p, phase := range f.phases {
		for k, h := range phase {
			w := 2 * math.Pi * hz / (from * float64(f.up)) * float64(int64(p)-int64(k-f.back)*f.up)
			re += h * math.Cos(w)
			im += h * math.Sin(w)
		}
	}
	return math.Hypot(re, im) / float64(f.up)
}

// TestFilterResponse: flat to 0.90 of the lower Nyquist frequency, 100 dB down
// beyond it, by the discrete-time Fourier transform of the filter as stored.
// Ripple: a Kaiser design has the same ripple in both bands, 10^(-110/20).
func TestFilterResponse(t *testing.T) {
	for _, c := range []struct{ from, to, taps int }{
		// Taps a phase for 110 dB by Kaiser's formula N = (A-7.95)/(2.285 dw)+1
		// (Oppenheim and Schafer, section 7.5.3).
		{48000, 8000, 855}, {48000, 16000, 429}, {44100, 16000, 394}, {8000, 48000, 143}, {16000, 8000, 286}, {11025, 8000, 197},
	} {
		f, err := newFilter(c.from, c.to, 1)
		if err != nil {
			t.Fatal(err)
		}
		if d := f.taps - c.taps; d < -2 || d > 4 {
			t.Errorf("%d to %d Hz: %d taps a phase, %d expected", c.from, c.to, f.taps, c.taps)
		}
		nyquist := float64(min(c.from, c.to)) / 2
		for x := 0.0; x <= passEdge; x += 0.0899 {
			if g := f.response(x*nyquist, float64(c.from)); math.Abs(g-1) > 1.2e-5 {
				t.Errorf("%d to %d Hz: gain %g at %g of the Nyquist frequency", c.from, c.to, g, x)
			}
		}
		top := float64(c.from) * float64(f.up) / 2
		for hz := nyquist; hz < top; hz += math.Max((top-nyquist)/30, nyquist*0.013) {
			if g := f.response(hz, float64(c.from)); g > 1e-5 {
				t.Errorf("%d to %d Hz: %.1f dB at %.0f Hz", c.from, c.to, 20*math.Log10(g), hz)
			}
		}
	}
}

// TestBesselI0: I0(1), I0(5), I0(10), from memory (Abramowitz and Stegun tabulate
// e^-x I0(x) in table 9.8).
func TestBesselI0(t *testing.T) {
	for x, want := range map[float64]float64{0: 1, 1: 1.2660658777520084, 5: 27.239871823604442, 10: 2815.716628466254} {
		if got := besselI0(x); math.Abs(got/want-1) > 1e-15 {
			t.Errorf("I0(%g) = %.17g, want %.17g", x, got, want)
		}
	}
}

// TestAbsurdRatios are refused before memory is taken.
func TestAbsurdRatios(t *testing.T) {
	for _, c := range [][2]int{{44100, 44101}, {999983, 999979}, {1_000_000, 999_983}} {
		if f, err := newFilter(c[0], c[1], 1); err == nil {
			t.Errorf("%d to %d Hz accepted with %d phases of %d taps", c[0], c[1], f.up, f.taps)
		}
	}
	if _, err := newFilter(100_000, 100, 1); err != nil {
		t.Error(err)
	}
	if _, err := newFilter(100_000, 100, 256); err == nil {
		t.Error("256 channels of 140,000 taps accepted")
	}
}
