package design_test

import (
	"math"
	"testing"

	"fewbits/codec"
	"fewbits/codec/design"
	"fewbits/measure/model"
)

// TestG711OnGamma holds the exact SNR of the cells of ITU-T G.711 for gamma
// input against values computed independently by exact integrals, printed to
// 0.01 dB; 0 dBm0 is the rms of the digital milliwatt of the same law.
func TestG711OnGamma(t *testing.T) {
	levels := []float64{3, 0, -3, -6, -10, -12, -15, -20, -25, -27, -30, -34, -35, -40, -45, -50, -55, -60}
	for _, row := range []struct {
		name string
		s    *codec.Staircase
		zero float64
		want []float64
	}{
		{"mu-law", codec.G711Mu(), 4004.1899305602 / 8192, []float64{
			6.44, 8.95, 12.41, 17.20, 26.34, 31.81, 36.78, 37.12, 36.78, 36.57, 36.16, 35.34, 35.07, 33.23, 30.46, 26.77, 22.43, 17.80,
		}},
		{"A-law", codec.G711A(), 2017.3963418228 / 4096, []float64{
			6.42, 8.92, 12.37, 17.14, 26.26, 31.78, 36.95, 37.46, 37.21, 36.98, 36.35, 34.67, 34.06, 30.06, 25.12, 19.92, 14.63, 9.26,
		}},
	} {
		for i, level := range levels {
			rms := row.zero * math.Pow(10, level/20)
			m, err := model.OfRMS("gamma", rms)
			if err != nil {
				t.Fatal(err)
			}
			mse, _ := design.EvaluateDensity(m, row.s.Thresholds, row.s.Values)
			if got := 10 * math.Log10(rms*rms/mse); math.Abs(got-row.want[i]) > 0.0051 {
				t.Errorf("%s at %g dBm0: %.4f dB, want %.2f", row.name, level, got, row.want[i])
			}
		}
	}
}

// TestSmoothLawsOnGamma does so for the smooth companders at 8 bits, level in
// dB re full scale.
func TestSmoothLawsOnGamma(t *testing.T) {
	mu, err := codec.Companded(256, codec.MuLaw{Mu: 255}, 1, codec.MidRise)
	if err != nil {
		t.Fatal(err)
	}
	a, err := codec.Companded(256, codec.ALaw{A: 87.6}, 1, codec.MidRise)
	if err != nil {
		t.Fatal(err)
	}
	for _, row := range []struct {
		name string
		s    *codec.Staircase
		want []float64 // -5, -10, ... -60 dB
	}{
		{"mu-law", mu, []float64{7.82, 13.49, 23.17, 35.91, 37.70, 37.42, 36.90, 35.97, 34.38, 31.90, 28.47, 24.30}},
		{"A-law", a, []float64{7.82, 13.49, 23.18, 36.10, 38.10, 37.88, 37.12, 35.01, 31.17, 26.31, 21.13, 15.86}},
	} {
		for i, want := range row.want {
			rms := math.Pow(10, float64(-5-5*i)/20)
			m, err := model.OfRMS("gamma", rms)
			if err != nil {
				t.Fatal(err)
			}
			mse, _ := design.EvaluateDensity(m, row.s.Thresholds, row.s.Values)
			if got := 10 * math.Log10(rms*rms/mse); math.Abs(got-want) > 0.0051 {
				t.Errorf("%s at %d dB: %.4f dB, want %.2f", row.name, -5-5*i, got, want)
			}
		}
	}
}
