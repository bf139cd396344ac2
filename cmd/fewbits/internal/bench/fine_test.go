package bench

import (
	"context"
	"math"
	"math/rand/v2"
	"path/filepath"
	"strings"
	"testing"

	"fewbits/samples"
)

// deep writes two seconds of 24-bit noise with a slow envelope.
func deep(t *testing.T, name string, peak float64) string {
	t.Helper()
	path := filepath.Join(t.TempDir(), name)
	w, err := samples.Create(path, 8000, 1, 16000, samples.Depth24)
	if err != nil {
		t.Fatal(err)
	}
	r := rand.New(rand.NewPCG(8, 9))
	x := make([]float64, 16000)
	for i := range x {
		x[i] = peak * math.Max(-1, math.Min(1, r.ExpFloat64()*math.Sin(float64(i)/700)/8*float64(2*r.IntN(2)-1)))
	}
	x[0] = peak
	if _, err := w.WriteAt([][]float64{x}, 0); err != nil {
		t.Fatal(err)
	}
	if err := w.Commit(); err != nil {
		t.Fatal(err)
	}
	return path
}

// TestFineRecordings: a table for 24-bit data is made on bins as fine as their
// peak allows. Where these are the samples it is the exact optimum, elsewhere
// it is called local; the same audio 36 dB down loses nothing by it, and the
// figure that is measured is the one designed for.
func TestFineRecordings(t *testing.T) {
	ctx := context.Background()
	design := "lloyd-max:8,from=data"
	segmental := "lloyd-max:6,from=data,aim=segsnr-open,spread=6"
	figures := map[string]float64{}
	for _, c := range []struct {
		name  string
		peak  float64
		proof string
	}{{"loud.wav", 0.9, "local, best of 1"}, {"faint.wav", 0.9 / 64, "optimal, exact"}} {
		p := planFor(t, t.TempDir(), []string{deep(t, c.name, c.peak)}, design, segmental, "mu-law:6,peak="+map[bool]string{true: "0.9", false: "0.0140625"}[c.peak > 0.5])
		p.Audio = false
		r, _, err := Run(ctx, p)
		if err != nil {
			t.Fatal(err)
		}
		if got := r.Designs[0].Proof; got != c.proof {
			t.Errorf("%s: %q, want %q", c.name, got, c.proof)
		}
		if told := strings.Contains(strings.Join(r.Designs[0].Notes, "\n"), "cuts no bin"); told != (c.peak > 0.5) {
			t.Errorf("%s: notes %q", c.name, r.Designs[0].Notes)
		}
		figures[c.name] = pooledOf(r, design, SNR)
		s, _, err := MakeStaircases(ctx, p, "laplacian", 0.1)
		if err != nil {
			t.Fatal(err)
		}
		if d := float64(s[0].SNRDB) - figures[c.name]; math.Abs(d) > 1e-4 {
			t.Errorf("%s: designed for %.6f dB, measured %.6f", c.name, float64(s[0].SNRDB), figures[c.name])
		}
		if gain := pooledOf(r, segmental, "segsnr_open_db") - pooledOf(r, p.Specs[2].Text, "segsnr_open_db"); !(gain > 0.5) {
			t.Errorf("%s: segmental aim gains %.2f dB over mu-law", c.name, gain)
		}
	}
	if d := figures["loud.wav"] - figures["faint.wav"]; math.Abs(d) > 0.01 {
		t.Errorf("faint copy differs by %.4f dB", d)
	}
}
