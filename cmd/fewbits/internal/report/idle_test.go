package report

import (
	"math"
	"strings"
	"testing"

	"fewbits/cmd/fewbits/internal/bench"
)

// TestIdleWords: silence and the unknown are told apart, and neither is a
// number.
func TestIdleWords(t *testing.T) {
	r, traces := synthetic(5, 5)
	set := func(spec string, level, out bench.Num) {
		for i := range r.Pooled {
			if f := r.Pooled[i].Figures; r.Pooled[i].Design == spec {
				f[idleOut], f[idleOver], f["frames_out_of_range"], f["frames_left_out"] = level, bench.Num(nan), out, 0
			}
		}
	}
	set("g711-mu", bench.Num(nan), 40)
	set("a-law:8", bench.Num(nan), 0)
	b := open(r)
	if got := b.pauses("g711-mu"); got != silent || !math.IsInf(b.pausesAt("g711-mu"), -1) {
		t.Errorf("silent in the pauses: %q", got)
	}
	if got := b.pauses("a-law:8"); got != dash {
		t.Errorf("no pauses: %q", got)
	}
	if got := tried(b.design["g711-mu"], b.design["g711-mu"].IdleZero); got != silent {
		t.Errorf("silent at zero: %q", got)
	}
	if got := tried(&bench.Design{}, 0); got != dash {
		t.Errorf("never tried: %q", got)
	}
	said := strings.Join(b.idleSentences(), " ")
	if !strings.Contains(said, "The quietest is g711-mu: silent in the pauses. The loudest is uniform:8: \u221264.0 dBov") {
		t.Errorf("%q", said)
	}
	table := between(t, pageOf(t, r, traces), `id="grid-idle"`, "</table>")
	if n := strings.Count(table, ">silent<"); n != 3 {
		t.Errorf("%d times silent: %s", n, table)
	}
	if strings.Contains(table, "Inf") || strings.Contains(table, "NaN") {
		t.Error("an undefined number is shown")
	}
}

// TestIdleOnlyWhereItDecides: designs that idle alike need no table, and
// results without the figures have none.
func TestIdleOnlyWhereItDecides(t *testing.T) {
	r, traces := synthetic(5, 5)
	for i := range r.Pooled {
		r.Pooled[i].Figures[idleOut] = -60 - bench.Num(i)/20
	}
	if got := open(r).idlers(); len(got) != 0 {
		t.Errorf("%d designs", len(got))
	}
	for i := range r.Pooled {
		r.Designs[i].IdleLSB, r.Pooled[i].Figures[idleOut] = 0, bench.Num(nan)
		r.Pooled[i].Figures["frames_out_of_range"], r.Pooled[i].Figures["frames_left_out"] = 0, 0
	}
	if strings.Contains(pageOf(t, r, traces), `id="idle"`) {
		t.Error("a part on nothing")
	}
}
