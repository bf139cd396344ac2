package measure

import (
	"encoding/csv"
	"math"
	"os"
	"strconv"
	"strings"
	"testing"
)

// cellsOutward mirrors magnitudes: thresholds at 0 and +-edges, all but the
// last of them, values +-outs.
func cellsOutward(edges, outs []float64) (thresholds, values []float64) {
	n := len(outs)
	for i := n - 2; i >= 0; i-- {
		thresholds = append(thresholds, -edges[i])
	}
	thresholds = append(append(thresholds, 0), edges[:n-1]...)
	for i := n - 1; i >= 0; i-- {
		values = append(values, -outs[i])
	}
	return thresholds, append(values, outs...)
}

// g711Cells are the cells of ITU-T Rec. G.711 (11/1988), Tables 1 and 2: upper
// decision values by segment and outputs midway; mu-law's first output is 0.
func g711Cells(mu bool) (thresholds, values []float64) {
	unit, first := 4096.0, 2.0
	if mu {
		unit, first = 8192, 1
	}
	var edges, outs []float64
	x := 0.0
	for i := range 128 {
		width := first
		if mu && i > 0 {
			width = math.Ldexp(2, i/16)
		} else if !mu && i >= 32 {
			width = math.Ldexp(2, i/16-1)
		}
		out := x + width/2
		if mu && i == 0 {
			out = 0
		}
		x += width
		edges, outs = append(edges, x/unit), append(outs, out/unit)
	}
	return cellsOutward(edges, outs)
}

// smoothCells are mid-rise cells even in the compressed domain.
func smoothCells(bits int, expand func(u float64) float64) (thresholds, values []float64) {
	n := 1 << (bits - 1)
	var edges, outs []float64
	for i := range n {
		edges = append(edges, expand(float64(i+1)/float64(n)))
		outs = append(outs, expand((float64(i)+0.5)/float64(n)))
	}
	return cellsOutward(edges, outs)
}

func expandMu(u float64) float64 { return (math.Pow(256, u) - 1) / 255 }

func expandA(u float64) float64 {
	d := 1 + math.Log(87.6)
	if u*d < 1 {
		return u * d / 87.6
	}
	return math.Exp(u*d-1) / 87.6
}

// laplacianEnergies is what SineEnergies is, for Laplacian samples.
func laplacianEnergies(thresholds, values []float64, rms float64) Energies {
	scale := rms / math.Sqrt2
	return stimulus{
		lo: -90, hi: 90, smoothOver: 0.5,
		at:      func(u float64) float64 { return scale * u },
		inverse: func(x float64) float64 { return max(-90, min(90, x/scale)) },
		weight:  func(u float64) float64 { return math.Exp(-math.Abs(u)) / 2 },
		power:   rms * rms,
	}.through(thresholds, values)
}

// rms of the digital milliwatts: ITU-T Rec. G.711 Tables 5 and 6, code words
// 34 21 21 34 B4 A1 A1 B4 (A) and 1E 0B 0B 1E 9E 8B 8B 9E (mu), decoded.
var (
	milliwattMu = math.Sqrt((2207*2207+5215*5215)/2.0) / 8192
	milliwattA  = math.Sqrt((1120*1120+2624*2624)/2.0) / 4096
)

// TestSNRAgainstLevel: G.711 and the smooth companders for sine, Gaussian and
// Laplacian input. Source: testdata/snr_against_level.csv, computed
// independently with 60-digit arithmetic.
func TestSNRAgainstLevel(t *testing.T) {
	file, err := os.Open("testdata/snr_against_level.csv")
	if err != nil {
		t.Fatal(err)
	}
	defer file.Close()
	r := csv.NewReader(file)
	r.Comment = '#'
	rows, err := r.ReadAll()
	if err != nil || len(rows) < 300 {
		t.Fatalf("%d rows, %v", len(rows), err)
	}
	for _, row := range rows[1:] {
		bits, _ := strconv.Atoi(row[1])
		level, _ := strconv.ParseFloat(row[3], 64)
		want, _ := strconv.ParseFloat(row[4], 64)
		rms := math.Pow(10, level/20)
		var th, v []float64
		switch row[0] {
		case "g711-mu":
			th, v = g711Cells(true)
			rms *= milliwattMu
		case "g711-A":
			th, v = g711Cells(false)
			rms *= milliwattA
		case "mu255":
			th, v = smoothCells(bits, expandMu)
		case "A87.6":
			th, v = smoothCells(bits, expandA)
		default:
			t.Fatalf("law %q", row[0])
		}
		var got Energies
		switch row[2] {
		case "sine":
			got = SineEnergies(th, v, math.Sqrt2*rms)
		case "gaussian":
			got = GaussianEnergies(th, v, rms)
		case "laplacian":
			got = laplacianEnergies(th, v, rms)
		}
		near(t, strings.Join(row[:4], " "), got.SNR(), want, 1e-9)
	}
}

// TestStimuliAgainstSamples: the energies are those of very many samples; a
// sum over 2^20 phases is itself off by some 1e-6 of what jumps at a threshold.
func TestStimuliAgainstSamples(t *testing.T) {
	th, v := smoothCells(4, expandMu)
	s := NewSearch(th, v, -1, 1, true)
	const n = 1 << 20
	x := make([]float64, n)
	for k := range x {
		x[k] = 0.3 * math.Sin(2*math.Pi*(float64(k)+0.5)/n)
	}
	want := s.Add(&Tally{}, x)
	got := SineEnergies(th, v, 0.3)
	near(t, "error", got.Error, want.Error/n, 3e-8)
	near(t, "cross", got.Cross, want.Cross/n, 1e-6)
	near(t, "output", got.Output, want.Output/n, 1e-6)
}

// TestTotalDistortion: a pure gain is no distortion though it is an error; a
// uniform fine quantizer's distortion is its error.
func TestTotalDistortion(t *testing.T) {
	pure := Energies{Signal: 1, Cross: 0.5, Output: 0.25, Error: 0.25}
	if got := pure.TotalDistortion(); !math.IsInf(got, 1) {
		t.Errorf("distortion of a pure gain %g dB", got)
	}
	// One bit, sine of amplitude 1 to +-1: fundamental 4/pi, rms^2 8/pi^2 of
	// total 1 (Fourier series of the square wave).
	one := SineEnergies([]float64{0}, []float64{-1, 1}, 1)
	share := 8 / (math.Pi * math.Pi)
	near(t, "square wave", one.TotalDistortion(), 10*math.Log10(share/(1-share)), 1e-12)
	for _, e := range []Energies{{}, {Signal: 1, Error: 1}} {
		if !math.IsNaN(e.TotalDistortion()) {
			t.Errorf("%+v: distortion %g", e, e.TotalDistortion())
		}
	}
}

// TestG712: ideal G.711 keeps the sine limits of ITU-T G.712 (as quoted by
// others) and by how much; sine values rounded as printed in the computed
// table: A-law 36.98, 37.36, 30.66, 25.26 dB at 0, -30, -40, -45 dBm0, mu-law
// 36.79, 36.59, 32.35, 29.28.
func TestG712(t *testing.T) {
	levels := []float64{0, -30, -40, -45}
	for _, c := range []struct {
		mu   bool
		zero float64
		want []float64
	}{
		{true, milliwattMu, []float64{36.79, 36.59, 32.35, 29.28}},
		{false, milliwattA, []float64{36.98, 37.36, 30.66, 25.26}},
	} {
		th, v := g711Cells(c.mu)
		for i, p := range SineTest(th, v, c.zero, levels) {
			near(t, "SNR of a sine", p.SNRDB, c.want[i], 0.005)
			// A meter takes the gain out: it may read more.
			if !(p.DB > p.SNRDB-0.01 && p.DB < p.SNRDB+0.7) {
				t.Errorf("mu %v at %g dBm0: %g dB by a meter, SNR %g", c.mu, p.LevelDBm0, p.DB, p.SNRDB)
			}
			if !(p.MarginDB > 0) || p.MarginDB != p.DB-p.LimitDB {
				t.Errorf("mu %v at %g dBm0: margin %g dB", c.mu, p.LevelDBm0, p.MarginDB)
			}
		}
		for _, p := range NoiseTest(th, v, c.zero, DistortionLevels) {
			if p.LevelDBm0 >= -55 && p.LevelDBm0 <= -3 && !(p.MarginDB > 2 && p.MarginDB < 11) {
				t.Errorf("mu %v, noise at %g dBm0: margin %g dB", c.mu, p.LevelDBm0, p.MarginDB)
			}
		}
	}
	near(t, "limit between points", SineLimit(-35), 30, 1e-12)
	if !math.IsNaN(SineLimit(3)) || !math.IsNaN(SineLimit(-46)) || !math.IsNaN(NoiseLimit(0)) {
		t.Error("a limit outside the mask")
	}
	// Load capacity from the milliwatts themselves: 3.17 and 3.14 dB.
	near(t, "0 dBm0 of mu-law", ZeroDBm0(8159.0/8192, LoadMu), milliwattMu, milliwattMu*3e-4)
	near(t, "0 dBm0 of A-law", ZeroDBm0(1, LoadA), milliwattA, milliwattA*3e-4)
}
