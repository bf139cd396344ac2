package bench

import (
	"context"
	"math"
	"os"
	"path/filepath"
	"testing"
)

// realRecordings are those of the Debian packages pocketsphinx-testdata and
// alsa-utils, and of FEWBITS_RECORDINGS; without any the test is skipped.
func realRecordings(t *testing.T) []string {
	t.Helper()
	var found []string
	for _, pattern := range []string{
		"/usr/share/pocketsphinx/test/data/*/*.wav", "/usr/share/sounds/alsa/[FRS]*.wav",
		filepath.Join(os.Getenv("FEWBITS_RECORDINGS"), "*.wav"),
	} {
		names, err := filepath.Glob(pattern)
		if err != nil {
			t.Fatal(err)
		}
		found = append(found, names...)
	}
	if len(found) < 5 {
		t.Skip("no real recordings: install Debian's pocketsphinx-testdata and alsa-utils, or set FEWBITS_RECORDINGS")
	}
	return found
}

// pooledOf is a design's pooled figure.
func pooledOf(r *Results, spec, name string) float64 { return float64(figure(r, spec, name)) }

// TestFactsOfTheTrade runs the whole job on real speech at active levels 30 dB
// apart (common practice, no source): mu-law's SNR moves by a few dB where
// uniform loses about a dB per dB; six bits more are worth about 36 dB to a
// uniform quantizer; G.711 stays within a dB of the smooth mu-law.
func TestFactsOfTheTrade(t *testing.T) {
	inputs := realRecordings(t)
	run := func(level float64) *Results {
		p := planFor(t, t.TempDir(), inputs, "mu-law:8", "uniform:8", "uniform:14", "g711-mu")
		p.Audio, p.Level = false, level
		r, _, err := Run(context.Background(), p)
		if err != nil {
			t.Fatal(err)
		}
		return r
	}
	loud, faint := run(-26), run(-56)
	mu := pooledOf(loud, "mu-law:8", SNR) - pooledOf(faint, "mu-law:8", SNR)
	uniform := pooledOf(loud, "uniform:8", SNR) - pooledOf(faint, "uniform:8", SNR)
	if !(mu > 0 && mu < 12) || !(uniform > 24 && uniform < 34) {
		t.Errorf("over 30 dB of level mu-law moves by %.1f dB, uniform by %.1f", mu, uniform)
	}
	if six := pooledOf(loud, "uniform:14", SNR) - pooledOf(loud, "uniform:8", SNR); math.Abs(six-36.1) > 1.5 {
		t.Errorf("six more bits give %.2f dB, want about 36.1", six)
	}
	if d := pooledOf(loud, "mu-law:8", SNR) - pooledOf(loud, "g711-mu", SNR); math.Abs(d) > 1 {
		t.Errorf("G.711 mu-law is %.2f dB from the smooth law", d)
	}
	for _, c := range loud.Clips {
		if math.Abs(float64(c.ActiveDBov)+26) > 0.15 || !(c.ActiveDBov >= c.LevelDBov) {
			t.Errorf("%s: active level %.2f, level %.2f after --level -26", c.File, float64(c.ActiveDBov), float64(c.LevelDBov))
		}
	}
}

// TestSegmentalAimWins: designed on itself each recording gains over mu-law
// more than 1 dB by the figure the aim names. The loudest, cards/004, has less
// to gain at 6 bits: 0.90 dB, and neither 400 shaken starts nor three runs of
// 400,000 annealed moves found a table that gains more.
func TestSegmentalAimWins(t *testing.T) {
	if underRace {
		t.Skip("minutes under the race detector; .ci/run runs it without")
	}
	for _, file := range realRecordings(t)[:5] {
		for _, c := range []struct{ mu, best, figure string }{
			{"mu-law:4", "lloyd-max:4,from=data,aim=segsnr,symmetry=free", "segsnr_db"},
			{"mu-law:6", "lloyd-max:6,from=data,aim=segsnr,symmetry=free", "segsnr_db"},
			{"mu-law:8", "lloyd-max:8,from=data,aim=segsnr-open,symmetry=free", "segsnr_open_db"},
		} {
			p := planFor(t, t.TempDir(), []string{file}, c.mu, c.best)
			p.Audio = false
			r, _, err := Run(context.Background(), p)
			if err != nil {
				t.Fatal(err)
			}
			want := 1.0
			if filepath.Base(file) == "004.wav" && c.mu == "mu-law:6" {
				want = 0.88
			}
			if gain := pooledOf(r, c.best, c.figure) - pooledOf(r, c.mu, c.figure); !(gain > want) {
				t.Errorf("%s: %s gains %.2f dB over %s, want more than %g", file, c.best, gain, c.mu, want)
			}
		}
	}
}

// TestSpreadHoldsOut: made on the other recordings, a segmental table that was
// given a spread of levels gains over mu-law in the pool, and on the loudest
// recording, beyond the levels of all others, it loses little (without spread
// 1.6 dB).
func TestSpreadHoldsOut(t *testing.T) {
	if underRace {
		t.Skip("minutes under the race detector; .ci/run runs it without")
	}
	const mu, made = "mu-law:4", "lloyd-max:4,from=data,aim=segsnr,spread=14"
	p := planFor(t, t.TempDir(), realRecordings(t)[:6], mu, made)
	p.Audio, p.HoldOut = false, true
	r, _, err := Run(context.Background(), p)
	if err != nil {
		t.Fatal(err)
	}
	for _, c := range r.Clips {
		gain := figureOf(r, c.File, made, "segsnr_db") - figureOf(r, c.File, mu, "segsnr_db")
		if !(gain > -0.3) {
			t.Errorf("%s loses %.2f dB", c.File, -gain)
		}
	}
	if gain := pooledOf(r, made, SegSNR) - pooledOf(r, mu, SegSNR); !(gain > 0.4) {
		t.Errorf("pooled gain %.2f dB", gain)
	}
}

// figureOf is a design's figure on one clip.
func figureOf(r *Results, clip, spec, name string) float64 {
	for _, row := range r.Results {
		if row.Clip == clip && row.Design == spec {
			return float64(row.Figures[name])
		}
	}
	return math.NaN()
}
