package bench

import (
	"context"
	"math"
	"slices"
	"testing"
)

// TestSweepHonoursTheTraining: at the recordings' own level sweep and compare
// say the same, whatever the designs were made on; the curves in the report
// too. Plain, trained and held-out tables differ.
func TestSweepHonoursTheTraining(t *testing.T) {
	inputs := recordings(t)
	seen := map[Num]bool{}
	for name, change := range map[string]func(*Plan){
		"plain": func(*Plan) {}, "trained": func(p *Plan) { p.Train = inputs[3:5] }, "held out": func(p *Plan) { p.HoldOut = true },
	} {
		p := planFor(t, t.TempDir(), inputs[:3], "lloyd-max:4,from=data", "mu-law:4", "lloyd-max:8")
		p.Audio = false
		change(&p)
		r, tr, err := Run(context.Background(), p)
		if err != nil {
			t.Fatal(err)
		}
		run, err := SweepLevels(context.Background(), p, 10)
		if err != nil {
			t.Fatal(err)
		}
		for i, d := range run.Designs {
			at := slices.Index(d.LevelDB, 0)
			snr, seg := pooledOf(r, d.Spec, SNR), pooledOf(r, d.Spec, SegSNR)
			if math.Abs(float64(d.SNRDB[at])-snr) > 1e-9 || math.Abs(float64(d.SegSNRDB[at])-seg) > 1e-9 {
				t.Errorf("%s, %s: sweep %v and %v, compare %v and %v", name, d.Spec, d.SNRDB[at], d.SegSNRDB[at], snr, seg)
			}
			c := tr.Sweep[i]
			if got := c.SNRDB[slices.Index(c.LevelDB, 0)]; math.Abs(float64(got)-snr) > 1e-9 {
				t.Errorf("%s, %s: the report's curve has %v, compare %v", name, d.Spec, got, snr)
			}
			if d.MadeOn != r.Designs[i].MadeOn {
				t.Errorf("%s, %s: made on %q, in compare %q", name, d.Spec, d.MadeOn, r.Designs[i].MadeOn)
			}
		}
		seen[run.Designs[0].SNRDB[0]] = true
		if flattered := len(run.Warnings) > 0; flattered != (name == "plain") {
			t.Errorf("%s: %q", name, run.Warnings)
		}
	}
	if len(seen) != 3 {
		t.Errorf("the three are not told apart: %v", seen)
	}
}
