package prepare

import (
	"math"
	"os/exec"
	"path/filepath"
	"testing"

	"fewbits/samples"
)

// TestAgainstSox: the resampler of Debian's sox 14.4.2 at its best quality with
// linear phase gives the same samples of noise up to 0.6 of the lower Nyquist
// frequency, where sox is flat (at 0.81 a tone is off by 1e-5 there).
func TestAgainstSox(t *testing.T) {
	if _, err := exec.LookPath("sox"); err != nil {
		t.Skip("sox is not installed (Debian package sox): no second resampler to compare with")
	}
	dir := t.TempDir()
	for _, c := range []struct {
		from, to, band string
		rate           int
	}{{"48000", "8000", "-2400", 8000}, {"44100", "16000", "-4500", 16000}, {"8000", "48000", "-2400", 48000}, {"11025", "16000", "-3300", 16000}} {
		source, theirs := filepath.Join(dir, "source.wav"), filepath.Join(dir, "theirs.wav")
		for _, args := range [][]string{
			{"-R", "-n", "-r", c.from, "-c", "1", "-b", "32", source, "synth", "3", "whitenoise", "sinc", "-a", "140", "-t", "100", c.band, "gain", "-6"},
			{"-D", source, "-b", "32", theirs, "rate", "-v", "-L", c.to},
		} {
			if out, err := exec.Command("sox", args...).CombinedOutput(); err != nil {
				t.Fatalf("sox %v: %v: %s", args, err, out)
			}
		}
		open := func(path string) *samples.Recording {
			r, err := samples.Open(path)
			if err != nil {
				t.Fatal(err)
			}
			return r
		}
		ours, _ := apply1(t, open(source), Plan{Rate: c.rate})
		other := open(theirs)
		defer other.Close()
		if ours.Info().Frames != other.Info().Frames {
			t.Errorf("%s to %s Hz: %d samples, sox %d", c.from, c.to, ours.Info().Frames, other.Info().Frames)
			continue
		}
		x, y := all(t, ours)[0], all(t, other)[0]
		signal, diff := 0.0, 0.0
		for i := c.rate / 2; i < len(x)-c.rate/2; i++ {
			signal += y[i] * y[i]
			diff += (x[i] - y[i]) * (x[i] - y[i])
		}
		db := 10 * math.Log10(diff/signal)
		t.Logf("%s to %s Hz: difference %.1f dB", c.from, c.to, db)
		if !(db < -100) {
			t.Errorf("%s to %s Hz: differs from sox by %.1f dB", c.from, c.to, db)
		}
	}
}
