package model_test

import (
	"fmt"
	"math"
	"strings"
	"testing"

	"fewbits/measure/model"
)

const (
	triangle = "x,density\n-1,0\n0,1\n1,0\n"
	// A ramp up, a stretch of falling exponential, a ramp down; away from 0.
	shifted = "100 0\n101 3\n104 0.2 # tail\n\n104.5 0\n"
)

func table(t testing.TB, text string) *model.Tabulated {
	m, err := model.ParseTable(strings.NewReader(text))
	if err != nil {
		t.Fatal(err)
	}
	return m
}

// TestTriangle against closed forms: rms 1/sqrt 6, kurtosis 12/5, entropy 1/2
// nat.
func TestTriangle(t *testing.T) {
	m := table(t, triangle)
	if !near(m.RMS(), 1/math.Sqrt(6), 1e-15) || !near(m.Kurtosis(), 2.4, 1e-13) || !near(m.Entropy(), 0.5/math.Ln2, 1e-14) || !m.Even() || !m.LogConcave() {
		t.Errorf("rms %.17g, kurtosis %.17g, entropy %.17g, even %v, log-concave %v", m.RMS(), m.Kurtosis(), m.Entropy(), m.Even(), m.LogConcave())
	}
	p, off, about := m.Cell(0.25, 0.75) // density 1-x: p = 1/4, mean 11/24
	if !near(p, 0.25, 1e-15) || !near(off, 11.0/24-0.25, 1e-14) || !near(about, 0.25*(11.0/48-121.0/576), 1e-12) {
		t.Errorf("cell %.17g %.17g %.17g", p, off, about)
	}
}

// TestExponentialTable: three points of exp(-x) are the density cut to [0, 2].
func TestExponentialTable(t *testing.T) {
	text := fmt.Sprintf("0;1\n0.5;%.17g\n2;%.17g\n", math.Exp(-0.5), math.Exp(-2))
	m := table(t, text)
	whole := -math.Expm1(-2)
	for _, c := range [][2]float64{{0, 2}, {0.3, 0.7}, {1, 1 + 1e-9}, {-5, 0.1}, {1.9, 7}} {
		a, b := math.Max(0, c[0]), math.Min(2, c[1])
		p, off, _ := m.Cell(c[0], c[1])
		want := math.Exp(-a) * -math.Expm1(a-b) / whole
		centroid := 1 - (b-a)/math.Expm1(b-a) + a
		if b-a < 1e-6 {
			centroid = a + (b-a)/2
		}
		if !near(p, want, 1e-14) || math.Abs(anchor(c[0], c[1])+off-centroid) > 1e-15*10 {
			t.Errorf("cell %v: %.17g %.17g, want %.17g %.17g", c, p, off, want, centroid)
		}
	}
	if !m.LogConcave() || m.Even() {
		t.Errorf("log-concave %v, even %v", m.LogConcave(), m.Even())
	}
}

func TestTableShape(t *testing.T) {
	for _, c := range []struct {
		text          string
		even, concave bool
	}{
		{"0,1\n1,1\n", false, true},
		{"-1,1\n1,1\n", true, true},
		{"-2,1\n-1,0\n1,0\n2,1\n", true, false},
		{"-2,0\n-1,0\n0,3\n1,0\n2,0\n", true, true},
		{"-1,1\n0,0.1\n1,1\n", true, false},
		{"-1,1\n0,2\n2,1\n", false, true},
	} {
		if m := table(t, c.text); m.Even() != c.even || m.LogConcave() != c.concave {
			t.Errorf("%q: even %v, log-concave %v", c.text, m.Even(), m.LogConcave())
		}
	}
}

func TestStretched(t *testing.T) {
	m := table(t, shifted)
	s, err := m.Stretched(0.01)
	if err != nil || !near(s.RMS(), m.RMS()/100, 1e-13) || !near(s.Entropy(), m.Entropy()-math.Log2(100), 1e-12) {
		t.Errorf("rms %g of %g, entropy %g of %g: %v", s.RMS(), m.RMS(), s.Entropy(), m.Entropy(), err)
	}
	if _, err := m.Stretched(math.NaN()); err == nil {
		t.Error("stretched by NaN")
	}
}

func TestParseRefuses(t *testing.T) {
	for text, want := range map[string]string{
		"":                                 "line 0: the table ends with 0 points",
		"0,1\n":                            "line 1: the table ends with 1 points",
		"x,p\ny,q\n0,1\n":                  `line 2: value "y"`,
		"0,1\n\n0,2\n":                     `line 3: value "0" is not above the one before, 0`,
		"0,1\n1,-2\n":                      `line 2: density "-2"`,
		"0,1\n1,NaN\n":                     `line 2: density "NaN"`,
		"0,1\n1,1e999\n":                   `line 2: density "1e999"`,
		"0,1\ninf,1\n":                     `line 2: value "inf"`,
		"0,1\n1,2,3\n":                     "line 2: 3 columns",
		"0 1\n1\n":                         "line 2: 1 columns",
		"0,0\n1,0\n":                       "lines 1 to 2: all 2 densities are 0",
		"1,\n":                             `line 1: density ""`,
		"0,1\n" + strings.Repeat("9", 1e5): "line 2: ",
	} {
		if _, err := model.ParseTable(strings.NewReader(text)); err == nil || !strings.HasPrefix(err.Error(), want) {
			t.Errorf("%.20q: %v, want %s", text, err, want)
		}
	}
}

func FuzzParseTable(f *testing.F) {
	for _, s := range []string{triangle, shifted, "0;1\n1;1e-300\n2;1e300", "\ufeffa b\n-1e150 1\n1e150 1"} {
		f.Add(s)
	}
	f.Fuzz(func(t *testing.T, text string) {
		m, err := model.ParseTable(strings.NewReader(text))
		if err != nil {
			return
		}
		lo, hi := m.Support()
		p, _, about := m.Cell(lo, hi)
		if x := m.Quantile(0.5); !near(p, 1, 1e-9) || !(about >= 0) || !(x >= lo && x <= hi) {
			t.Errorf("probability %g, variance %g, median %g of [%g, %g]", p, about, x, lo, hi)
		}
	})
}

// TestSteepTable: a piece that falls by 308 decades has the scale 1/ln of that,
// and its mirror image has the same moments.
func TestSteepTable(t *testing.T) {
	for _, tiny := range []float64{1e-300, 1e-308, 1e-310} {
		for _, f := range [][]float64{{1, tiny}, {tiny, 1}} {
			m, err := model.NewTabulated([]float64{0, 1}, f)
			if err != nil {
				t.Fatal(err)
			}
			_, off, about := m.Cell(0, 1)
			if mid := m.PDF(0.5); !(mid > 0 && mid < 1) {
				t.Errorf("%v: density %g in the middle", f, mid)
			}
			if f[0] < 1 {
				off = 1 - off
			}
			f, e := math.Frexp(tiny)
			scale := -1 / (math.Log(f) + float64(e)*math.Ln2)
			if !near(off, scale, 1e-12) || !near(about, scale*scale, 1e-12) {
				t.Errorf("%g: centroid %.15g, variance %.15g; want scale %.15g", tiny, off, about, scale)
			}
		}
	}
}
