package codec

import (
	"math"
	"testing"

	"pgregory.net/rapid"
)

// obvious is the definition: the cell whose edges hold x, ties by the rule.
func obvious(s *Staircase, x float64) int {
	k := 0
	for _, t := range s.Thresholds {
		if x > t || x == t && (s.Tie == TieUp || t >= 0) {
			k++
		}
	}
	return k
}

func anyStaircase(t *rapid.T) *Staircase {
	n := rapid.IntRange(1, 40).Draw(t, "half")
	shape := rapid.SampledFrom([]Shape{MidRise, MidTread}).Draw(t, "shape")
	cells := 2*n + int(shape)
	v := rapid.SampledFrom([]float64{1, 0.5, 0.3, 2}).Draw(t, "v")
	var s *Staircase
	var err error
	switch rapid.IntRange(0, 2).Draw(t, "law") {
	case 0:
		s, err = Uniform(cells, v, shape)
	case 1:
		s, err = Companded(cells, MuLaw{255}, v, shape)
	default:
		s, err = Companded(cells, ALaw{87.6}, v, shape)
	}
	if err != nil {
		t.Fatal(err)
	}
	return s
}

func TestIndexIsTheDefinition(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		s := anyStaircase(t)
		var xs []float64
		for _, th := range s.Thresholds {
			xs = append(xs, th, math.Nextafter(th, -9), math.Nextafter(th, 9))
		}
		xs = append(xs, rapid.SliceOfN(rapid.Float64Range(-3, 3), 20, 20).Draw(t, "x")...)
		for _, x := range xs {
			if got, want := s.Index(x), obvious(s, x); got != want {
				t.Fatalf("Index(%g) = %d, want %d", x, got, want)
			}
		}
		if !s.IsMirror(0) {
			t.Fatal("not its own mirror image")
		}
	})
}

func TestGridIsIndex(t *testing.T) {
	u, _ := Uniform(16, 1, MidRise)
	odd, _ := Uniform(15, 1, MidTread)
	m, _ := Companded(64, MuLaw{255}, 1, MidRise)
	fine, _ := Uniform(65536, 1, MidRise)
	for _, s := range []*Staircase{u, odd, m, fine, G711Mu(), G711A()} {
		g := s.Grid()
		for i, k := range g.Index {
			if x := float64(i-32768) / 32768; int(k) != s.Index(x) {
				t.Fatalf("%d cells: word %d: %d, want %d", s.Cells(), i-32768, k, s.Index(x))
			}
		}
	}
}

// TestTies: outwards for both signs where the definition says so, zero to the
// positive cell; upwards for the mid-tread uniform staircase.
func TestTies(t *testing.T) {
	rise, _ := Uniform(4, 1, MidRise)
	tread, _ := Uniform(3, 1.5, MidTread)
	for _, row := range []struct {
		s    *Staircase
		x    float64
		want int
	}{
		{rise, 0, 2}, {rise, 0.5, 3}, {rise, -0.5, 0}, {rise, math.Nextafter(-0.5, 0), 1},
		{tread, 0.5, 2}, {tread, -0.5, 1}, {tread, 0, 1},
	} {
		if got := row.s.Index(row.x); got != row.want {
			t.Errorf("%d cells: Index(%g) = %d, want %d", row.s.Cells(), row.x, got, row.want)
		}
	}
}

// TestLawsAreInverse also pins A-law's slope at zero, A/(1+ln A): 24.09 dB at
// A = 87.6 and mu/ln(1+mu): 33.25 dB at mu = 255 (companding gain; Jayant and
// Noll 1984, from memory: printed 24.1 and 33.25).
func TestLawsAreInverse(t *testing.T) {
	for _, l := range []Law{MuLaw{255}, MuLaw{0.01}, ALaw{87.6}, ALaw{1}} {
		for i := range 1001 {
			x := float64(i) / 1000
			if got := l.Expand(l.Compress(x)); math.Abs(got-x) > 1e-14 {
				t.Fatalf("%#v: Expand(Compress(%g)) = %g", l, x, got)
			}
		}
	}
	const h = 1e-9
	for _, row := range []struct {
		l    Law
		want float64
	}{{MuLaw{255}, 33.2525}, {ALaw{87.6}, 24.0859}} {
		if got := 20 * math.Log10(row.l.Compress(h)/h); math.Abs(got-row.want) > 1e-4 {
			t.Errorf("%#v: companding gain %.4f dB, want %.4f", row.l, got, row.want)
		}
	}
}

// TestSixDecibels: a full-scale sine through B uniform bits has 6.0206 B +
// 1.7609 dB (Bennett 1948; common textbook form). The exact value swings about
// it by up to 0.15 dB, since a sine dwells at its peaks in single cells.
func TestSixDecibels(t *testing.T) {
	for bits := 8; bits <= 14; bits++ {
		s, err := Uniform(1<<bits, 1, MidRise)
		if err != nil {
			t.Fatal(err)
		}
		var sig, noise float64
		const n = 1 << 18
		for i := range n {
			x := math.Sin(2 * math.Pi * (float64(i) + 0.5) / n * (math.Sqrt(5) - 1) * 1000)
			e := x - s.Quantize(x)
			sig, noise = sig+x*x, noise+e*e
		}
		got, want := 10*math.Log10(sig/noise), 6.0206*float64(bits)+1.7609
		if math.Abs(got-want) > 0.2 {
			t.Errorf("%d bits: %.3f dB, want %.3f", bits, got, want)
		}
	}
}

func TestRefusals(t *testing.T) {
	nan := math.NaN()
	for _, row := range []struct {
		n int
		v float64
		s Shape
	}{
		{0, 1, MidRise}, {3, 1, MidRise}, {4, 1, MidTread}, {1 << 17, 1, MidRise},
		{4, nan, MidRise}, {4, 0, MidRise}, {4, -1, MidRise}, {4, math.Inf(1), MidRise},
	} {
		if _, err := Uniform(row.n, row.v, row.s); err == nil {
			t.Errorf("Uniform(%d, %g, %v) is accepted", row.n, row.v, row.s)
		}
		if _, err := Companded(row.n, MuLaw{255}, row.v, row.s); err == nil {
			t.Errorf("Companded(%d, mu, %g, %v) is accepted", row.n, row.v, row.s)
		}
	}
	bad := Staircase{Thresholds: []float64{0, nan}, Values: []float64{-1, 0, 1}}
	if bad.Check() == nil {
		t.Error("a NaN threshold is accepted")
	}
}

func FuzzIndex(f *testing.F) {
	s := G711Mu()
	f.Add(0.0)
	f.Add(-8159.0 / 8192)
	f.Fuzz(func(t *testing.T, x float64) {
		if k := s.Index(x); k < 0 || k > 255 {
			t.Fatalf("Index(%g) = %d", x, k)
		}
	})
}

func BenchmarkGrid(b *testing.B) {
	s := G711Mu()
	for b.Loop() {
		s.Grid()
	}
}
