package bench

import (
	"context"
	"math"
	"strings"
	"testing"

	"fewbits/measure"
)

// TestIntervalsAreAboutThePooledFigure: Student's t lies about the figure of
// the table itself, whether clips weigh by their frames in range or blocks do;
// and so does what stands for the pooled SNR.
func TestIntervalsAreAboutThePooledFigure(t *testing.T) {
	inputs := recordings(t)
	for clips, unit := range map[int]string{7: "Student's t on 7 clips, each", 1: "on 16 blocks of frames, each"} {
		p := planFor(t, t.TempDir(), inputs[:clips], "mu-law:4", "uniform:4", "lloyd-max:8")
		p.Audio = false
		r, _, err := Run(context.Background(), p)
		if err != nil {
			t.Fatal(err)
		}
		if !strings.Contains(r.IntervalMethod, unit) {
			t.Errorf("%d clips: %q", clips, r.IntervalMethod)
		}
		for _, q := range r.Pooled {
			if mid := float64(q.Interval[0]+q.Interval[1]) / 2; !(math.Abs(mid-float64(q.Figures[r.Leading])) < 1e-9) {
				t.Errorf("%d clips, %s: the middle is %g, the figure %g", clips, q.Design, mid, float64(q.Figures[r.Leading]))
			}
		}
		for d, m := range measure.Compare(r.units([]int{0, 1, 2}, SNR), 1).Means {
			if want := float64(r.Pooled[d].Figures[SNR]); !(math.Abs(m-want) < 1e-9) {
				t.Errorf("%d clips, %s: SNR %g, pooled %g", clips, r.Designs[d].Spec, m, want)
			}
		}
	}
}
