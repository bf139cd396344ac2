package model_test

import (
	"bufio"
	"encoding/json"
	"fmt"
	"math"
	"os"
	"strconv"
	"strings"
	"testing"

	"gonum.org/v1/gonum/stat/distuv"

	"fewbits/measure/model"
)

// suite is one model of every kind, log-convex and log-concave.
func suite(t testing.TB) []model.Model {
	var out []model.Model
	for _, m := range []struct {
		name         string
		shape, scale float64
	}{
		{"laplacian", 0, 1}, {"laplacian", 0, 0.02}, {"gaussian", 0, 0.3}, {"gamma", 0, 0.07},
		{"free-gamma", 0.05, 0.4}, {"free-gamma", 0.3, 1}, {"free-gamma", 1, 0.5}, {"free-gamma", 3, 2},
		{"generalized-gaussian", 0.2, 1e-5}, {"generalized-gaussian", 0.6, 0.03}, {"generalized-gaussian", 1, 0.5},
		{"generalized-gaussian", 2, 1}, {"generalized-gaussian", 7, 0.9},
	} {
		d, err := model.New(m.name, m.shape, m.scale)
		if err != nil {
			t.Fatal(err)
		}
		out = append(out, d)
	}
	return append(out, table(t, triangle), table(t, shifted))
}

func label(m model.Model) string {
	shape, scale := m.Parameters()
	return fmt.Sprintf("%s(%g, %g)", m.Name(), shape, scale)
}

func near(got, want, rel float64) bool { return math.Abs(got-want) <= rel*math.Abs(want) }

// TestCells compares with cells computed independently in 60-digit arithmetic
// (see the head of the file): remote, narrow to 1e-10 of x, straddling 0,
// endless.
func TestCells(t *testing.T) {
	f, err := os.Open("testdata/cells.csv")
	if err != nil {
		t.Fatal(err)
	}
	defer f.Close()
	rows := 0
	for sc := bufio.NewScanner(f); sc.Scan(); {
		if strings.HasPrefix(sc.Text(), "#") {
			continue
		}
		col := strings.Split(sc.Text(), ",")
		v := make([]float64, len(col))
		for i, s := range col[1:] {
			if v[i+1], err = strconv.ParseFloat(s, 64); err != nil {
				t.Fatal(err)
			}
		}
		scale := 1.0
		if col[0] == "gaussian" {
			scale = math.Sqrt2 / 2
		}
		m, err := model.New(col[0], v[1], scale)
		if err != nil {
			t.Fatal(err)
		}
		p, off, about := m.Cell(v[2], v[3])
		if !near(p, v[4], 1e-13) || !near(about, v[6], 3e-12) || !near(off, v[5], 1e-12) && math.Abs(off-v[5]) > 1e-22 {
			t.Errorf("%s: p %.17g (off by %.1e), offset %.17g (%.1e), about %.17g (%.1e)", sc.Text(), p, p/v[4]-1, off, off/v[5]-1, about, about/v[6]-1)
		}
		rows++
	}
	if rows != 185 {
		t.Errorf("%d rows: want 185", rows)
	}
}

// TestSuite is what every model must do.
func TestSuite(t *testing.T) {
	for _, m := range suite(t) {
		t.Run(label(m), func(t *testing.T) {
			lo, hi := m.Support()
			p, mean, second := m.Cell(lo, hi)
			if lo > 0 {
				mean += lo
			}
			if !near(p, 1, 1e-13) || !near(math.Sqrt(second+mean*mean), m.RMS(), 1e-12) || m.Even() && math.Abs(mean) > 1e-13*m.RMS() {
				t.Errorf("integral %.17g, mean %g, rms %.15g, want %.15g", p, mean, math.Sqrt(second+mean*mean), m.RMS())
			}
			quantiles(t, m)
			densities(t, m)
			cellsAddUp(t, m)
		})
	}
}

// quantiles: Quantile inverts CDF, and CDF is the cell from the left.
func quantiles(t *testing.T, m model.Model) {
	lo, _ := m.Support()
	for _, p := range []float64{1e-12, 1e-6, 0.01, 0.3, 0.4999, 0.5, 0.51, 0.9, 0.999, 1 - 1e-9} {
		x := m.Quantile(p)
		rounding := 4e-16 * math.Abs(x) * m.PDF(x)
		if x == 0 {
			rounding = 0
		}
		if got := m.CDF(x); math.Abs(got-p) > 1e-12*p+rounding {
			t.Errorf("CDF(Quantile(%g)) = %.15g", p, got)
		}
		if got, _, _ := m.Cell(lo, x); math.Abs(got-p) > 1e-11*p+rounding {
			t.Errorf("cell left of quantile %g holds %.15g", p, got)
		}
	}
}

// densities: PDF is what a narrow cell holds, LogPDF its logarithm, and both
// give the entropy.
func densities(t *testing.T, m model.Model) {
	var entropy, last float64
	lo, hi := m.Support()
	last = lo
	_, _, second := m.Cell(lo, hi)
	const cells = 2000
	for i := 1; i < cells; i++ {
		x := m.Quantile(float64(i) / cells)
		if i%99 == 0 && x != 0 {
			h := 1e-5 * math.Min(math.Abs(x), math.Sqrt(second))
			p, _, _ := m.Cell(x, x+h)
			if f := m.PDF(x + h/2); !near(p/h, f, 1e-8) || math.Abs(math.Log(f)-m.LogPDF(x+h/2)) > 1e-12*math.Max(1, math.Abs(m.LogPDF(x))) {
				t.Errorf("at %g: cell/width %.12g, density %.12g, log density %.12g", x, p/h, f, m.LogPDF(x+h/2))
			}
		}
		if i > 1 && last < x {
			entropy -= math.Log2(1/float64(cells)/(x-last)) / cells
		}
		last = x
	}
	// The sum over equal-probability cells misses the tails and what the
	// density does within a cell.
	if math.Abs(entropy-m.Entropy()) > 0.05 {
		t.Errorf("entropy %.6g bits, cells give %.6g", m.Entropy(), entropy)
	}
}

// cellsAddUp: two neighbours and the cell of both agree by the parallel-axis
// theorem, also where the split is lopsided.
func cellsAddUp(t *testing.T, m model.Model) {
	at := func(p float64) float64 { return m.Quantile(p) }
	for _, c := range [][3]float64{{at(0.2), at(0.3), at(0.4)}, {at(0.55), at(0.5501), at(0.9)}, {at(0.1), at(0.45), at(0.8)}, {at(0.999), at(0.9991), math.Inf(1)}} {
		_, hi := m.Support()
		c[2] = math.Min(c[2], hi)
		p1, o1, q1 := m.Cell(c[0], c[1])
		p2, o2, q2 := m.Cell(c[1], c[2])
		p, o, q := m.Cell(c[0], c[2])
		c1, c2, c0 := o1+anchor(c[0], c[1]), o2+anchor(c[1], c[2]), o+anchor(c[0], c[2])
		d := c2 - c1
		if !near(p1+p2, p, 1e-13) || math.Abs((p1*c1+p2*c2)/p-c0) > 1e-12*(c[1]-c[0]+math.Abs(o)) || !near(q1+q2+p1*p2/p*d*d, q, 1e-11) {
			t.Errorf("cells %v do not add up: p %.15g %.15g, centroid %.15g %.15g, about %.15g %.15g", c, p1+p2, p, (p1*c1+p2*c2)/p, c0, q1+q2+p1*p2/p*d*d, q)
		}
	}
}

func anchor(a, b float64) float64 {
	switch {
	case a >= 0:
		return a
	case b <= 0:
		return b
	}
	return 0
}

// TestSpeechTable holds the figures of the densities in use for speech,
// computed independently in high precision; the gamma's rms, kurtosis 35/3 and
// E|x| as in Jayant and Noll (1984), from memory.
func TestSpeechTable(t *testing.T) {
	b, err := os.ReadFile("testdata/densities.json")
	if err != nil {
		t.Fatal(err)
	}
	var f struct {
		Rows []struct{ Beta, Alpha, MeanAbs, Kurtosis, EntropyBits float64 }
	}
	if err := json.Unmarshal(b, &f); err != nil {
		t.Fatal(err)
	}
	for _, r := range f.Rows {
		m, err := model.OfShape("generalized-gaussian", r.Beta, 1)
		if err != nil {
			t.Fatal(err)
		}
		_, alpha := m.Parameters()
		_, mean, _ := m.Cell(0, math.Inf(1))
		if !near(alpha, r.Alpha, 1e-13) || !near(mean, r.MeanAbs, 1e-12) || !near(m.Kurtosis(), r.Kurtosis, 1e-12) || math.Abs(m.Entropy()-r.EntropyBits) > 1e-12 {
			t.Errorf("shape %g: scale %.15g, E|x| %.15g, kurtosis %.15g, entropy %.15g; want %+v", r.Beta, alpha, mean, m.Kurtosis(), m.Entropy(), r)
		}
	}
	if len(f.Rows) != 14 {
		t.Errorf("%d rows: want 14", len(f.Rows))
	}
	m, _ := model.OfRMS("gamma", 1)
	_, mean, _ := m.Cell(0, math.Inf(1))
	if !near(mean, 1/math.Sqrt(3), 1e-13) || !near(m.Kurtosis(), 35.0/3, 1e-14) || !near(m.Entropy(), 1.338241246182, 1e-12) {
		t.Errorf("gamma: E|x| %.15g, kurtosis %.15g, entropy %.15g", mean, m.Kurtosis(), m.Entropy())
	}
}

// TestAgainstGonum takes gonum's distributions as a second opinion.
func TestAgainstGonum(t *testing.T) {
	lap, _ := model.New("laplacian", 0, 0.3)
	norm, _ := model.New("gaussian", 0, 0.3)
	gam, _ := model.New("free-gamma", 0.4, 0.3)
	other := distuv.Gamma{Alpha: 0.4, Beta: 1 / 0.3}
	for _, x := range []float64{-2, -0.5, -0.01, 0.001, 0.1, 0.7, 3} {
		if d := (distuv.Laplace{Mu: 0, Scale: 0.3}); !near(lap.PDF(x), d.Prob(x), 1e-13) || !near(lap.CDF(x), d.CDF(x), 1e-13) {
			t.Errorf("laplacian at %g", x)
		}
		if d := (distuv.Normal{Mu: 0, Sigma: 0.3}); !near(norm.PDF(x), d.Prob(x), 1e-13) || !near(norm.CDF(x), d.CDF(x), 1e-12) {
			t.Errorf("gaussian at %g", x)
		}
		if !near(gam.PDF(x), other.Prob(math.Abs(x))/2, 1e-13) || !near(gam.CDF(-math.Abs(x)), other.Survival(math.Abs(x))/2, 1e-12) {
			t.Errorf("free gamma at %g", x)
		}
	}
}

func TestRefused(t *testing.T) {
	inf, nan := math.Inf(1), math.NaN()
	for _, c := range []struct {
		name         string
		shape, scale float64
	}{
		{"cauchy", 0, 1}, {"laplacian", 2, 1}, {"laplacian", 0, 0}, {"laplacian", 0, nan}, {"gaussian", 0, inf}, {"gaussian", 1, 1},
		{"gamma", 1, 1}, {"free-gamma", 0, 1}, {"free-gamma", nan, 1}, {"free-gamma", 1e9, 1}, {"generalized-gaussian", 0, 1},
		{"generalized-gaussian", -1, 1}, {"generalized-gaussian", inf, 1}, {"gamma", 0, -1},
	} {
		if m, err := model.New(c.name, c.shape, c.scale); err == nil {
			t.Errorf("New(%q, %g, %g) = %v: want an error", c.name, c.shape, c.scale, m)
		}
		if _, err := model.OfShape(c.name, c.shape, c.scale); err == nil {
			t.Errorf("OfShape(%q, %g, %g): want an error", c.name, c.shape, c.scale)
		}
	}
}

func BenchmarkCell(b *testing.B) {
	for _, m := range suite(b) {
		x := m.Quantile(0.9)
		for _, w := range []float64{1e-3, 0.1} {
			b.Run(fmt.Sprintf("%s/%g", label(m), w), func(b *testing.B) {
				for b.Loop() {
					m.Cell(x, x*(1+w))
				}
			})
		}
	}
}
