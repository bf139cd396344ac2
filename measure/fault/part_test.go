package fault

import (
	"math"
	"reflect"
	"testing"

	"pgregory.net/rapid"
)

// plainRuns is the obvious way to what runs keeps, from the whole channel.
func plainRuns(x []float64, rate int) runs {
	r := newRuns(rate)
	for a := 0; a < len(x); {
		b := a
		for b < len(x) && x[b] == x[a] {
			b++
		}
		edge, next := a > 0 && math.Abs(x[max(a-1, 0)]) > gapEdge, 0.0
		if b < len(x) {
			next = x[b]
		}
		r.book(run{x[a], int64(b - a)}, edge, next)
		a = b
	}
	return r
}

// drawn is a channel with runs, zeros and extremes as faults have them.
func drawn(t *rapid.T) []int16 {
	var words []int16
	for range rapid.IntRange(1, 30).Draw(t, "stretches") {
		v := rapid.SampledFrom([]int16{0, 0, 1, -1, 700, -700, 32767, -32768, 900}).Draw(t, "value")
		for range rapid.SampledFrom([]int{1, 1, 1, 2, 3, 12, 85, 170, 330}).Draw(t, "length") {
			words = append(words, v)
		}
	}
	return words
}

// TestPartsJoin: however a channel is cut, what the judges read is the same,
// as words and as real numbers, and the runs are those of the obvious way.
func TestPartsJoin(t *testing.T) {
	rapid.Check(t, func(rt *rapid.T) {
		const rate = 8000
		words := drawn(rt)
		x := amplitudes(words)
		shift := rapid.SampledFrom([]float64{0, 0x1p-20}).Draw(rt, "off the 16-bit grid")
		for i := range x {
			x[i] += shift
		}
		whole := NewPart(rate, 0)
		whole.Add(x)
		joined, asWords := NewPart(rate, 0), NewPart(rate, 0)
		spare := NewPart(rate, 0)
		for a := 0; a < len(x); {
			b := min(len(x), a+rapid.IntRange(1, 900).Draw(rt, "cut"))
			spare.Reset(rate, int64(a))
			spare.Add(x[a:b])
			joined.Join(spare)
			spare.Reset(rate, int64(a))
			spare.AddWords(words[a:b])
			asWords.Join(spare)
			a = b
		}
		same(rt, "joined", joined, whole)
		if got, want := joined.runs.closed(), plainRuns(x, rate); !sameRuns(got, want) {
			rt.Errorf("runs %+v, want %+v", got, want)
		}
		if shift == 0 {
			same(rt, "words", asWords, whole)
		}
	})
}

func same(t *rapid.T, what string, got, want *Part) {
	if !reflect.DeepEqual(got.grid, want.grid) || got.tops != want.tops {
		t.Errorf("%s: counts differ", what)
	}
	if a, b := got.runs.closed(), want.runs.closed(); !sameRuns(a, b) {
		t.Errorf("%s: runs %+v, want %+v", what, a, b)
	}
	a, b := got.means.deviation(), want.means.deviation()
	if got.means.blocks != want.means.blocks || !(math.Abs(a-b) <= 1e-12*b+1e-15) && !(math.IsInf(a, 1) && math.IsInf(b, 1)) {
		t.Errorf("%s: means of %g blocks, deviation %g; want %g and %g", what, got.means.blocks, a, want.means.blocks, b)
	}
}

func sameRuns(a, b runs) bool {
	return a.zeros == b.zeros && a.silences == b.silences && a.holds == b.holds && a.gaps == b.gaps && a.upper == b.upper && a.lower == b.lower
}

// TestSegments: fed the segments that Segments names, a scan has the spectra
// of one that saw every sample.
func TestSegments(t *testing.T) {
	for _, rate := range []int{8000, 16000, 44100} {
		for _, seconds := range []float64{0, 0.01, 0.02, 0.5, 6, 30, 61.3} {
			x := amplitudes(talk(seconds*float64(rate)/testRate, 3))
			whole, some := NewScan(rate), NewScan(rate)
			whole.Add(x)
			count, stride, length := Segments(rate, int64(len(x)))
			for i := range int64(count) {
				some.AddSegment(x[i*stride : i*stride+length])
			}
			if !reflect.DeepEqual(whole.spectra.segments, some.spectra.segments) {
				t.Errorf("%d Hz, %g s: %d segments %d apart, the scan has %d", rate, seconds, count, stride, len(whole.spectra.segments))
			}
		}
	}
}

func BenchmarkPartWords(b *testing.B) {
	words := talk(60, 1)
	p := NewPart(testRate, 0)
	for b.Loop() {
		p.Reset(testRate, 0)
		p.AddWords(words)
	}
	b.ReportMetric(float64(len(words))*float64(b.N)/b.Elapsed().Seconds()/1e6, "Msamples/s")
}
