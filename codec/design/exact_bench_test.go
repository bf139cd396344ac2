package design

import (
	"math"
	"math/rand/v2"
	"slices"
	"testing"
)

// benchHistogram is Laplacian counts on all 65,536 words, every bin filled.
func benchHistogram(count float64) Histogram {
	var h Histogram
	for w := -32768; w < 32768; w++ {
		h.Values = append(h.Values, float64(w)/32768)
		h.Weights = append(h.Weights, 1+math.Floor(count*math.Exp(-math.Abs(float64(w))/2500)))
	}
	return h
}

func benchmarkExact(b *testing.B, n int, sym Symmetry) {
	benchmarkExactOn(b, benchHistogram(1e4), n, sym)
}

func benchmarkExactOn(b *testing.B, h Histogram, n int, sym Symmetry) {
	b.ReportAllocs()
	var s Solution
	for b.Loop() {
		s, _ = ExactData(h, n, sym)
	}
	b.ReportMetric(float64(s.Rounds), "passes")
}

func BenchmarkExact65536Free16(b *testing.B)     { benchmarkExact(b, 16, Free) }
func BenchmarkExact65536Free256(b *testing.B)    { benchmarkExact(b, 256, Free) }
func BenchmarkExact65536Free4096(b *testing.B)   { benchmarkExact(b, 4096, Free) }
func BenchmarkExact65536Mirror16(b *testing.B)   { benchmarkExact(b, 16, Mirror) }
func BenchmarkExact65536Mirror256(b *testing.B)  { benchmarkExact(b, 256, Mirror) }
func BenchmarkExact65536Mirror4096(b *testing.B) { benchmarkExact(b, 4096, Mirror) }

// BenchmarkExactReal65536Free256 has weights off any grid: pairs of floats.
func BenchmarkExactReal65536Free256(b *testing.B) {
	h := benchHistogram(1e4)
	for i := range h.Weights {
		h.Weights[i] *= math.Pi
	}
	benchmarkExactOn(b, h, 256, Free)
}

// roughHistogram has holes, spikes and heavy tails, as a recording has.
func roughHistogram() Histogram {
	var h Histogram
	r := rand.New(rand.NewPCG(7, 7))
	for w := -32768; w < 32768; w++ {
		e := r.ExpFloat64()
		if c := math.Floor(1e4 * e * e * e * math.Exp(-math.Abs(float64(w))/1500)); c > 0 || w%7 == 0 {
			h.push(float64(w)/32768, 1+c)
		}
	}
	return h
}

func BenchmarkExactRough16(b *testing.B)   { benchmarkExactOn(b, roughHistogram(), 16, Free) }
func BenchmarkExactRough256(b *testing.B)  { benchmarkExactOn(b, roughHistogram(), 256, Free) }
func BenchmarkExactRough4096(b *testing.B) { benchmarkExactOn(b, roughHistogram(), 4096, Free) }

// Rivals at a size they can bear: 2,048 bins, 16 free levels.
func smallBench() Histogram {
	var h Histogram
	for w := -1024; w < 1024; w++ {
		h.push(float64(w)/32768, 1+math.Floor(1e4*math.Exp(-math.Abs(float64(w))/100)))
	}
	return h
}

func BenchmarkRivalPlainDP2048(b *testing.B) {
	h := smallBench()
	for b.Loop() {
		plainDP(h, 16)
	}
}

// BenchmarkRivalLloyd100Starts2048 is no optimum, only the best of 100.
func BenchmarkRivalLloyd100Starts2048(b *testing.B) {
	h := smallBench()
	for b.Loop() {
		r := rand.New(rand.NewPCG(1, 1))
		for range 100 {
			values := make([]float64, 16)
			for k, i := range r.Perm(len(h.Values))[:16] {
				values[k] = h.Values[i]
			}
			slices.Sort(values)
			if _, err := RefineData(h, Solution{Values: values, Thresholds: midpoints(values)}, Free, 1e6); err != nil {
				b.Fatal(err)
			}
		}
	}
}

func BenchmarkExact2048(b *testing.B) {
	benchmarkExactOn(b, smallBench(), 16, Free)
}
