package report

import (
	"fmt"

	"fewbits/cmd/fewbits/internal/bench"
)

// check reports what does not fit together in results and traces, which may
// come from a file that someone edited: the rest of the package relies on it.
func check(r *bench.Results, t *bench.Traces) error {
	known := map[string]bool{}
	for _, d := range r.Designs {
		known[d.Spec] = true
		if n := len(d.Values); n > 0 && len(d.Thresholds) != n-1 {
			return fmt.Errorf("results: design %q has %d values and %d thresholds", d.Spec, n, len(d.Thresholds))
		}
	}
	for _, v := range r.Verdicts {
		for figure, spec := range v.Winners {
			if spec != "" && !known[spec] {
				return fmt.Errorf("results: the verdict on %d bits names %q by %s, which is not among the designs", v.Bits, spec, figure)
			}
		}
	}
	return checkTraces(t)
}

func checkTraces(t *bench.Traces) error {
	for _, c := range t.Clips {
		n := len(c.Max)
		if len(c.Min) != n || len(c.LevelDBov) != n || !(c.StepSeconds > 0) {
			return fmt.Errorf("traces: %q has %d maxima, %d minima, %d levels, steps of %g s", c.File, n, len(c.Min), len(c.LevelDBov), c.StepSeconds)
		}
		for spec, v := range c.SNR {
			if len(v) != n {
				return fmt.Errorf("traces: %q with %q has %d steps of %d", c.File, spec, len(v), n)
			}
		}
	}
	for _, set := range [][]bench.Curve{t.Sweep, t.Sine, t.Noise} {
		for _, c := range set {
			if n := len(c.LevelDB); n != len(c.SNRDB) || len(c.LimitDB) != 0 && len(c.LimitDB) != n {
				return fmt.Errorf("traces: a curve of %q has %d levels, %d values, %d limits", c.Design, n, len(c.SNRDB), len(c.LimitDB))
			}
		}
	}
	for _, m := range t.Models {
		if len(m.Magnitude) != len(m.Density) {
			return fmt.Errorf("traces: model %q has %d magnitudes and %d densities", m.Model, len(m.Magnitude), len(m.Density))
		}
	}
	for _, b := range t.Bounds {
		if len(b.Bits) != len(b.SNRDB) {
			return fmt.Errorf("traces: the bound of %q has %d bits and %d values", b.Model, len(b.Bits), len(b.SNRDB))
		}
	}
	return nil
}
