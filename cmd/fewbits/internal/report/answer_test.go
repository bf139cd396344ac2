package report

import (
	"math"
	"slices"
	"strings"
	"testing"

	"fewbits/cmd/fewbits/internal/bench"
)

// TestSavingSentences: the run's own savings with their intervals, and no
// number where it has none.
func TestSavingSentences(t *testing.T) {
	r, _ := synthetic(5, 5)
	r.Savings = []bench.Saving{
		{Design: "mu-law:4", Against: "uniform", Bits: 1.7, Interval: [2]bench.Num{1.2, 2.1}, Observations: 5},
		{Design: "mu-law:6", Against: "uniform", Bits: 1.9, Interval: [2]bench.Num{0.6, bench.Num(nan)}, Observations: 5},
	}
	b := open(r)
	for winner, want := range map[string]string{
		"mu-law:4": "For the same segsnr_open_db, mu-law:4 saves 1.70 bits a sample against uniform (95 %: +1.20 to +2.10).",
		"mu-law:6": "For the same segsnr_open_db, mu-law:6 saves 1.90 bits a sample against uniform (95 %: +0.60 or more).",
		"mu-law:8": "",
		"":         "",
	} {
		if got := strings.Join(b.savingSentences(winner), " "); got != want {
			t.Errorf("%q, want %q", got, want)
		}
	}
	var out strings.Builder
	if err := Terminal(&out, r, 0, false); err != nil || strings.Count(out.String(), "For the same segsnr_open_db") != 2 {
		t.Errorf("on the terminal: %v\n%s", err, out.String())
	}
}

// TestOutOfReach: where no design of more bits gets there, the page says so and
// names no saving.
func TestOutOfReach(t *testing.T) {
	r, _ := synthetic(5, 5)
	if _, ok := open(r).outOfReach("mu-law:6", "uniform"); ok {
		t.Error("uniform reaches 24.3 dB with 8 bits")
	}
	for i := range r.Pooled {
		if r.Pooled[i].Design == "mu-law:6" {
			r.Pooled[i].Figures[openSNR] = 26
		}
	}
	got := open(r).savingSentences("mu-law:6")
	if want := "No uniform design here reaches its segsnr_open_db, not even 8 bits."; !slices.Equal(got, []string{want}) {
		t.Errorf("%q", got)
	}
}

// TestLeadSentences: each standing of the leader has its words.
func TestLeadSentences(t *testing.T) {
	r, _ := synthetic(5, 5)
	b := open(r)
	v := bench.Verdict{Tied: []string{"mu-law:8", "a-law:8", "g711-mu"}}
	for lead, want := range map[string]string{"clear": "real", "shared": "shared with 2 others", "open": "2 others at this number", "": ""} {
		b.pooled["mu-law:8"].Lead = lead
		if got := b.leadSentence(v, "mu-law:8"); !strings.Contains(got, want) || want == "" && got != "" {
			t.Errorf("%s: %q", lead, got)
		}
	}
}

// TestHereOnly: intervals from few clips are headed so everywhere.
func TestHereOnly(t *testing.T) {
	r, traces := synthetic(2, 5)
	r.Warnings = append(r.Warnings, hereOnly+": with fewer than 5 clips ...")
	var out strings.Builder
	if err := Terminal(&out, r, 0, false); err != nil {
		t.Fatal(err)
	}
	if !strings.Contains(out.String(), "recordings only") || !strings.Contains(pageOf(t, r, traces), "dB, these recordings only") {
		t.Error("not headed")
	}
}

func TestKin(t *testing.T) {
	for spec, want := range map[string]string{
		"mu-law:8": "mu-law", "uniform:4,overload=optimal": "uniform,overload=optimal", "g711-mu": "g711-mu",
		"uniform,levels=17,shape=mid-tread": "uniform,shape=mid-tread", "uniform:4,overload=4rms": "uniform,overload=4rms",
	} {
		if got := kin(spec); got != want {
			t.Errorf("%s: %s", spec, got)
		}
	}
}

// TestRangeEnds: the marked range is where the curve crosses the stated SNR.
func TestRangeEnds(t *testing.T) {
	c := bench.Curve{RangeSNR: 20, LevelDB: []float64{-30, -20, -10, 0, 10}, SNRDB: []bench.Num{10, 18, 22, 30, 15}}
	lo, hi, ok := rangeEnds(c)
	if !ok || math.Abs(lo+15) > 1e-12 || math.Abs(hi-20.0/3) > 1e-12 {
		t.Errorf("%v to %v, %v; want -15 to 6.667", lo, hi, ok)
	}
}

func TestNumbersInText(t *testing.T) {
	for _, c := range []struct{ got, want string }{
		{fixed(-0.04, 1), "0.0"}, {fixed(bench.Num(nan), 1), dash}, {percent(0), "0"}, {percent(0.0000001), "<0.001"},
		{percent(0.00004), "0.004"}, {percent(0.123), "12.3"}, {span([2]bench.Num{1, bench.Num(nan)}), ""},
		{commandLine([]string{"fewbits", "a b", "it's"}), `fewbits 'a b' 'it'\''s'`}, {sentence("segsnr_db decides"), "segsnr_db decides."},
		{sentence("the end"), "The end."}, {lasting(28.24), "28.2 s"}, {lasting(600), "10.0 min"},
	} {
		if c.got != c.want {
			t.Errorf("%q, want %q", c.got, c.want)
		}
	}
}
