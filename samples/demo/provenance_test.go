package demo

import (
	"math"
	"os"
	"path/filepath"
	"strconv"
	"strings"
	"testing"

	"fewbits/samples"
)

// decode writes a clip to disk and reads it with the project's reader.
func decode(t *testing.T, c Clip) (samples.Info, []float64) {
	t.Helper()
	path := filepath.Join(t.TempDir(), c.Name)
	if err := os.WriteFile(path, c.Data, 0o666); err != nil {
		t.Fatal(err)
	}
	r, err := samples.Open(path)
	if err != nil {
		t.Fatal(err)
	}
	defer r.Close()
	x := make([]float64, r.Info().Frames)
	if err := r.Read([][]float64{x}, 0); err != nil {
		t.Fatal(err)
	}
	return r.Info(), x
}

// provenance reads the table's numbers: Hz, seconds, level, active level, peak.
func provenance(t *testing.T) map[string][5]float64 {
	t.Helper()
	text, err := os.ReadFile("PROVENANCE.md")
	if err != nil {
		t.Fatal(err)
	}
	rows := map[string][5]float64{}
	for line := range strings.Lines(string(text)) {
		f := strings.Split(line, "|")
		if len(f) != 10 || !strings.HasPrefix(f[1], " `") {
			continue
		}
		var row [5]float64
		for i, column := range []int{2, 4, 5, 6, 7} {
			if row[i], err = strconv.ParseFloat(strings.TrimSpace(f[column]), 64); err != nil {
				t.Fatalf("%q: %v", line, err)
			}
		}
		rows[strings.Trim(f[1], " `")+".wav"] = row
	}
	return rows
}

// TestProvenance measures the clips again and compares with the table.
func TestProvenance(t *testing.T) {
	rows := provenance(t)
	if len(rows) != len(Clips()) {
		t.Fatalf("%d rows for %d clips", len(rows), len(Clips()))
	}
	for _, c := range Clips() {
		info, x := decode(t, c)
		if info.Channels != 1 || info.Bits != 16 || info.Encoding != "PCM" || len(info.Warnings) != 0 {
			t.Errorf("%s: %s, %d channels, %q", c.Name, info.Format(), info.Channels, info.Warnings)
		}
		got := [5]float64{float64(info.Rate), info.Seconds(), level(x), activeLevel(x, float64(info.Rate)), 20 * math.Log10(peak(x))}
		for i, want := range rows[c.Name] {
			if tolerance := []float64{0, 0.0051, 0.051, 0.051, 0.051}[i]; !(math.Abs(got[i]-want) <= tolerance) {
				t.Errorf("%s: column %d is %.4f, the table says %g", c.Name, i, got[i], want)
			}
		}
	}
}

// TestWhatTheyAreFor: levels as intended (-26 dBov active is the customary level
// of speech material, ITU-T P.800), room at the top, a live floor, real pauses.
func TestWhatTheyAreFor(t *testing.T) {
	aims := map[string]float64{"faint-launch.wav": -46, "crane-hot.wav": -14}
	rates, pauses := map[int]bool{}, 0
	for _, c := range Clips() {
		info, x := decode(t, c)
		rates[info.Rate] = true
		aim, ok := aims[c.Name]
		if !ok {
			aim = -26
		}
		if a := activeLevel(x, float64(info.Rate)); !(math.Abs(a-aim) < 2.5) {
			t.Errorf("%s: active level %.1f dBov, want about %g", c.Name, a, aim)
		}
		if p := peak(x); p > 0.99 {
			t.Errorf("%s: peak %g is at full scale", c.Name, p)
		}
		if n := longestZero(x); float64(n) > 0.02*float64(info.Rate) {
			t.Errorf("%s: %d samples of digital silence in a row", c.Name, n)
		}
		pauses += quietFrames(x, info.Rate)
	}
	if !rates[8000] || !rates[16000] || len(rates) != 2 {
		t.Errorf("rates %v: want 8 and 16 kHz", rates)
	}
	if pauses < 50 {
		t.Errorf("%d frames of 20 ms lie 25 dB below the active level: want a second of pauses", pauses)
	}
}

func peak(x []float64) (p float64) {
	for _, v := range x {
		p = math.Max(p, math.Abs(v))
	}
	return p
}

// level in dBov: 10 log10(mean x^2), ITU-T G.100.1.
func level(x []float64) float64 {
	sum := 0.0
	for _, v := range x {
		sum += v * v
	}
	return 10 * math.Log10(sum/float64(len(x)))
}

// longestZero is the longest run of exact zeros.
func longestZero(x []float64) (longest int) {
	run := 0
	for _, v := range x {
		if run++; v != 0 {
			run = 0
		}
		longest = max(longest, run)
	}
	return longest
}

// quietFrames counts frames of 20 ms more than 25 dB below the active level.
func quietFrames(x []float64, rate int) (n int) {
	limit := activeLevel(x, float64(rate)) - 25
	for size := rate / 50; len(x) >= size; x = x[size:] {
		if level(x[:size]) < limit {
			n++
		}
	}
	return n
}

// activeLevel is ITU-T P.56 method B, slow and straight from its description:
// an envelope of two smoothings of 30 ms, thresholds an octave of amplitude
// apart, a hangover of 200 ms, a margin of 15.9 dB (constants from memory).
func activeLevel(x []float64, rate float64) float64 {
	g, hang := math.Exp(-1/(0.03*rate)), int(math.Ceil(0.2*rate))
	sum := 0.0
	for _, v := range x {
		sum += v * v
	}
	lastA, lastD := math.NaN(), math.NaN()
	for j := 15; j >= 1; j-- {
		c, p, q, active, left := math.Ldexp(1, -j), 0.0, 0.0, 0, 0
		for _, v := range x {
			p = g*p + (1-g)*math.Abs(v)
			q = g*q + (1-g)*p
			if q >= c {
				active, left = active+1, hang
			} else if left > 0 {
				active, left = active+1, left-1
			}
		}
		a := 10 * math.Log10(sum/float64(active))
		d := a - 20*math.Log10(c)
		if d <= 15.9 {
			return lastA + (a-lastA)*(lastD-15.9)/(lastD-d)
		}
		lastA, lastD = a, d
	}
	return math.NaN()
}
