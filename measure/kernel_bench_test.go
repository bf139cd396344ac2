package measure

import (
	"math"
	"math/rand/v2"
	"testing"
)

// speechLike are Laplacian words with a slowly varying level, about 26 dB
// below full scale: invented data with the crest factor of speech.
func speechLike(n int, seed uint64) []int16 {
	r := rand.New(rand.NewPCG(seed, 1))
	out := make([]int16, n)
	for i := range out {
		level := 400 * math.Exp(1.8*math.Sin(float64(i)/2900)+0.9*math.Sin(float64(i)/701))
		v := r.ExpFloat64() * level
		if r.Uint64()&1 == 0 {
			v = -v
		}
		out[i] = int16(max(-32768, min(32767, math.Round(v))))
	}
	return out
}

// uniformLookup is a mid-rise quantizer of the given cells over [-v, v].
func uniformLookup(cells int, v float64) Lookup {
	l := Lookup{Index: make([]uint16, words16), Values: make([]float64, cells), Lo: -v, Hi: v}
	step := 2 * v / float64(cells)
	for k := range l.Values {
		l.Values[k] = -v + (float64(k)+0.5)*step
	}
	for i := range l.Index {
		k := math.Floor((float64(i-32768)/32768 + v) / step)
		l.Index[i] = uint16(max(0, min(float64(cells-1), k)))
	}
	return l
}

func someDesigns(n int) []Lookup {
	out := make([]Lookup, n)
	for i := range out {
		out[i] = uniformLookup(16<<(i%5), 1/float64(1+i/5))
	}
	return out
}

func BenchmarkKernel(b *testing.B) {
	words := speechLike(480000, 7)
	const designs, frame = 12, 160
	k := NewKernel(someDesigns(designs))
	signal := make([]float64, len(words)/frame)
	errs := make([]float64, designs*len(signal))
	b.Run("frames", func(b *testing.B) {
		for b.Loop() {
			k.Frames(words, frame, signal, errs)
		}
		perSecond(b, len(words)*designs, "sample-designs/s")
	})
	// bare is the limit of the machine for this table: the same walk, no
	// frames, no signal energy, nothing stored.
	b.Run("bare", func(b *testing.B) {
		for b.Loop() {
			bareLoop(k.table, words)
		}
		perSecond(b, len(words)*designs, "sample-designs/s")
	})
	for _, d := range []int{1, 5, 8, 18, 40} {
		k := NewKernel(someDesigns(d))
		errs := make([]float64, d*len(signal))
		b.Run("designs="+string(rune('0'+d/10))+string(rune('0'+d%10)), func(b *testing.B) {
			for b.Loop() {
				k.Frames(words, frame, signal, errs)
			}
			perSecond(b, len(words)*d, "sample-designs/s")
		})
	}
}

func perSecond(b *testing.B, n int, unit string) {
	b.ReportMetric(float64(n)*float64(b.N)/b.Elapsed().Seconds(), unit)
	b.ReportMetric(0, "ns/op")
}

//go:noinline
func bareLoop(table []float64, words []int16) float64 {
	var s0, s1, s2, s3, s4, s5, s6, s7, s8, s9, s10, s11 float64
	for _, w := range words {
		r := (*[12]float64)(table[(int(w)+32768)*12:])
		s0 += r[0]
		s1 += r[1]
		s2 += r[2]
		s3 += r[3]
		s4 += r[4]
		s5 += r[5]
		s6 += r[6]
		s7 += r[7]
		s8 += r[8]
		s9 += r[9]
		s10 += r[10]
		s11 += r[11]
	}
	return s0 + s1 + s2 + s3 + s4 + s5 + s6 + s7 + s8 + s9 + s10 + s11
}

func BenchmarkActivityWords(b *testing.B) {
	words := speechLike(480000, 7)
	a := NewActivity(8000)
	for b.Loop() {
		a.AddWords(words)
	}
	perSecond(b, len(words), "samples/s")
}

func BenchmarkActivityFloat(b *testing.B) {
	x := toFloat(speechLike(480000, 7))
	a := NewActivity(8000)
	for b.Loop() {
		a.Add(x)
	}
	perSecond(b, len(x), "samples/s")
}

func BenchmarkHistogram(b *testing.B) {
	words := speechLike(480000, 7)
	var h Histogram
	for b.Loop() {
		h.AddWords(words)
	}
	perSecond(b, len(words), "samples/s")
}

func BenchmarkLevelsWords(b *testing.B) {
	words := speechLike(480000, 7)
	var l Levels
	for b.Loop() {
		l.AddWords(words)
	}
	perSecond(b, len(words), "samples/s")
}

func BenchmarkSearch(b *testing.B) {
	x := toFloat(speechLike(480000, 7))
	mu, muValues := g711Cells(true)
	fine, fineValues := smoothCells(12, expandMu)
	for name, s := range map[string]*Search{
		"g711": NewSearch(mu, muValues, -1, 1, true), "12-bit-mu-law": NewSearch(fine, fineValues, -1, 1, true),
	} {
		b.Run("add/"+name, func(b *testing.B) {
			var tally Tally
			for b.Loop() {
				s.Add(&tally, x)
			}
			perSecond(b, len(x), "samples/s")
		})
		b.Run("indices/"+name, func(b *testing.B) {
			dst := make([]uint16, len(x))
			for b.Loop() {
				s.Indices(dst, x)
			}
			perSecond(b, len(x), "samples/s")
		})
	}
}

func toFloat(words []int16) []float64 {
	out := make([]float64, len(words))
	for i, w := range words {
		out[i] = float64(w) / 32768
	}
	return out
}

func BenchmarkTallyHistogram(b *testing.B) {
	var h Histogram
	h.AddWords(speechLike(480000, 7))
	l := uniformLookup(256, 1)
	for b.Loop() {
		TallyHistogram(&h, l)
	}
}

func BenchmarkAddFrame(b *testing.B) {
	var t Tally
	for b.Loop() {
		AddFrame(&t, Frame{Samples: 160, Signal: 0.1, Error: 1e-4, InRange: true, Floor: 1e-9}, CustomaryLimits)
	}
}

// BenchmarkToggles: quiet frames, up to 600 of 32,768; all designs have few
// cells there (eight lanes), or one has many (four).
func BenchmarkToggles(b *testing.B) {
	words := within(speechLike(480000, 7), 600)
	for name, cells := range map[string]int{"eight": 256, "four": 1 << 15} {
		designs := append(someDesigns(11), uniformLookup(cells, 1))
		k := NewToggles(designs, 600)
		changes := make([]int64, len(designs))
		b.Run(name, func(b *testing.B) {
			for b.Loop() {
				for f := 0; f+160 <= len(words); f += 160 {
					k.Add(words[f:f+160], changes)
				}
			}
			perSecond(b, len(words)*len(designs), "sample-designs/s")
		})
	}
}

func BenchmarkSweepPoint(b *testing.B) {
	var h Histogram
	h.AddWords(speechLike(480000, 7))
	values, counts := h.Sparse()
	th, v := smoothCells(8, expandMu)
	s := NewSearch(th, v, -1, 1, true)
	for b.Loop() {
		s.SNRAt(values, counts, -7)
	}
	b.ReportMetric(float64(len(values)), "values")
}

func BenchmarkCompare(b *testing.B) {
	for _, n := range []int{29, 100} {
		v := make([][]float64, 12)
		r := rand.New(rand.NewPCG(1, 1))
		for d := range v {
			for range n {
				v[d] = append(v[d], r.NormFloat64())
			}
		}
		name := "t"
		if n >= BootstrapFrom {
			name = "bootstrap"
		}
		b.Run(name, func(b *testing.B) {
			for b.Loop() {
				Compare(Units{Values: v}, 1)
			}
		})
	}
}
