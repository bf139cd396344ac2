package bench

import (
	"context"
	"math"
	"strings"
	"testing"
)

// TestSavingsAreTheInterpolation: read off the pooled figures by hand, a
// straight line between two numbers of bits; none where the family does not
// reach that far.
func TestSavingsAreTheInterpolation(t *testing.T) {
	p := planFor(t, t.TempDir(), recordings(t), "uniform:4", "uniform:6", "uniform:8", "mu-law:4", "mu-law:8", "a-law:5", "a-law:8")
	p.Audio = false
	r, _, err := Run(context.Background(), p)
	if err != nil {
		t.Fatal(err)
	}
	at := func(spec string) float64 { return pooledOf(r, spec, r.Leading) }
	line := func(spec, low, high string, bits, step, own float64) float64 {
		if at(spec) < at(low) || at(spec) > at(high) {
			return math.NaN()
		}
		return bits + step*(at(spec)-at(low))/(at(high)-at(low)) - own
	}
	want := map[string]float64{}
	enter := func(key string, saved float64) {
		if !math.IsNaN(saved) {
			want[key] = saved
		}
	}
	enter("mu-law:4 uniform", line("mu-law:4", "uniform:4", "uniform:6", 4, 2, 4))
	enter("mu-law:4 uniform", line("mu-law:4", "uniform:6", "uniform:8", 6, 2, 4))
	enter("a-law:5 mu-law", line("a-law:5", "mu-law:4", "mu-law:8", 4, 4, 5))
	enter("a-law:5 uniform", line("a-law:5", "uniform:6", "uniform:8", 6, 2, 5))
	enter("uniform:6 mu-law", line("uniform:6", "mu-law:4", "mu-law:8", 4, 4, 6))
	enter("mu-law:8 uniform", line("mu-law:8", "uniform:6", "uniform:8", 6, 2, 8))
	if len(want) != 3 || len(r.Savings) != len(want) {
		t.Errorf("%d savings of %v", len(r.Savings), want)
	}
	for _, s := range r.Savings {
		w, ok := want[s.Design+" "+s.Against]
		if !ok || math.Abs(float64(s.Bits)-w) > 1e-9 {
			t.Errorf("%+v, want %v", s, w)
		}
		if s.Interval[0] > s.Bits || s.Interval[1] < s.Bits || s.Observations != len(r.Clips) {
			t.Errorf("%+v", s)
		}
	}
}

// TestBitsSavedAreBitsNeeded: what a family saves is the difference of what
// the two need, whatever the figure, and the interval holds it.
func TestBitsSavedAreBitsNeeded(t *testing.T) {
	inputs := recordings(t)
	for _, c := range []struct {
		figure string
		target float64
		clips  int
	}{{"segsnr", 15, 6}, {"snr", 20, 6}, {"open", 15, 2}} {
		var designs []string
		for _, bits := range []string{"3", "4", "5", "6", "7", "8", "9", "10"} {
			designs = append(designs, "uniform:"+bits, "mu-law:"+bits)
		}
		p := planFor(t, t.TempDir(), inputs[:c.clips], designs...)
		run, err := NeedBits(context.Background(), p, c.figure, c.target)
		if err != nil {
			t.Fatal(err)
		}
		if len(run.Against) != 1 || run.Against[0].Family != "mu-law" || run.Against[0].Against != "uniform" {
			t.Fatalf("%+v", run.Against)
		}
		s, want := run.Against[0], run.Families[0].Bits-run.Families[1].Bits
		if math.Abs(float64(s.Bits-want)) > 1e-9 || !(s.Interval[0] < s.Bits && s.Bits < s.Interval[1]) {
			t.Errorf("%s: %+v, need %v", c.figure, s, want)
		}
		if !strings.HasPrefix(s.Sentence(), "mu-law saves ") || run.Method == "" {
			t.Errorf("%q, %q", s.Sentence(), run.Method)
		}
	}
}

// TestBetween: an end beyond the bits measured is no number.
func TestBetween(t *testing.T) {
	none := Num(math.NaN())
	for want, v := range map[string][2]Num{
		"95 %: -0.50 to +1.25": {-0.5, 1.25}, "95 %: +0.10 or more": {0.1, none}, "95 %: +2.00 or less": {none, 2},
		"95 %: any number of the bits measured": {none, none},
	} {
		if got := between(v, 5, 2); got != want {
			t.Errorf("%q, want %q", got, want)
		}
	}
	if got := between([2]Num{none, none}, 1, 2); !strings.Contains(got, "one recording") {
		t.Errorf("%q", got)
	}
}
