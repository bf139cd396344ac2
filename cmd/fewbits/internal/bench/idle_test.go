package bench

import (
	"context"
	"encoding/json"
	"math"
	"strings"
	"testing"
)

// TestIdleChannelOfARun: a 4-bit mid-rise mu-law idles at +-53.2 words of 16
// bits, (256^(1/16) - 1)/255 of full scale, and so does its output over
// digital silence; mid-tread and G.711 mu-law (ITU-T G.711, Table 2: 0 decodes
// to 0) are silent, which is null in JSON.
func TestIdleChannelOfARun(t *testing.T) {
	p := planFor(t, t.TempDir(), recordings(t)[:1], "mu-law:4", "mu-law:4,shape=mid-tread", "g711-mu", "g711-a")
	p.Audio = false
	r, _, err := Run(context.Background(), p)
	if err != nil {
		t.Fatal(err)
	}
	want := 20 * math.Log10((math.Sqrt2-1)/255)
	for _, v := range []Num{r.Designs[0].IdleZero, r.Designs[0].IdleOneLSB} {
		if math.Abs(float64(v)-want) > 1e-9 {
			t.Errorf("mu-law:4 idles at %g dBov, want %g", float64(v), want)
		}
	}
	if words := math.Pow(10, float64(r.Designs[0].IdleOneLSB)/20) * 32768; math.Abs(words-53.2) > 0.05 {
		t.Errorf("that is %g words", words)
	}
	for i, silent := range []bool{false, true, true, false} {
		d := r.Designs[i]
		if d.IdleZero.Defined() == silent || d.IdleOneLSB.Defined() == silent || d.IdleLSB != 1.0/32768 {
			t.Errorf("%s: zero %v, one lsb %v at %g", d.Spec, d.IdleZero, d.IdleOneLSB, d.IdleLSB)
		}
		b, err := json.Marshal(d)
		if err != nil || strings.Contains(string(b), `"idle_zero_dbov":null`) != silent {
			t.Errorf("%s: %s (%v)", d.Spec, b, err)
		}
	}
	if q := r.Pooled[0].Figures["idle_toggling"]; !(q > 0.01 && q < 0.5) {
		t.Errorf("mu-law:4 toggles at %v of the quiet samples", q)
	}
}
