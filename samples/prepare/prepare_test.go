package prepare

import (
	"errors"
	"math"
	"path/filepath"
	"strings"
	"testing"

	"pgregory.net/rapid"

	"fewbits/samples"
)

// record writes planes to a file and opens it.
func record(t testing.TB, rate int, depth samples.Depth, planes ...[]float64) *samples.Recording {
	t.Helper()
	path := filepath.Join(t.TempDir(), "a.wav")
	w, err := samples.Create(path, rate, len(planes), int64(len(planes[0])), depth)
	if err != nil {
		t.Fatal(err)
	}
	if _, err := w.WriteAt(planes, 0); err != nil {
		t.Fatal(err)
	}
	if err := w.Commit(); err != nil {
		t.Fatal(err)
	}
	r, err := samples.Open(path)
	if err != nil {
		t.Fatal(err)
	}
	return r
}

func apply1(t testing.TB, r *samples.Recording, p Plan) (*samples.Recording, []string) {
	t.Helper()
	made, done, err := Apply(r, p)
	if err != nil {
		t.Fatal(err)
	}
	t.Cleanup(func() { made.Close() })
	return made, done
}

func all(t testing.TB, r *samples.Recording) [][]float64 {
	t.Helper()
	planes := grid[float64](r.Info().Channels, int(r.Info().Frames))
	if err := r.Read(planes, 0); err != nil {
		t.Fatal(err)
	}
	return planes
}

func tone(n, rate int, hz, phase float64) []float64 {
	x := make([]float64, n)
	for i := range x {
		x[i] = 0.5 * math.Sin(2*math.Pi*hz*float64(i)/float64(rate)+phase)
	}
	return x
}

// TestResampleTones: in the pass band a tone comes out as the same tone at the
// new rate, with no delay; beyond the new Nyquist frequency nothing comes out.
// Closed form; bound from the filter's ripple, both edges left out.
func TestResampleTones(t *testing.T) {
	for _, c := range []struct{ from, to int }{{48000, 8000}, {48000, 16000}, {44100, 16000}, {8000, 48000}, {16000, 8000}, {11025, 16000}, {8000, 8001}} {
		nyquist := float64(min(c.from, c.to)) / 2
		for _, x := range []float64{0.01, 0.899} {
			hz := x * nyquist
			r, done := apply1(t, record(t, c.from, samples.Depth32F, tone(c.from/2, c.from, hz, 0.3)), Plan{Rate: c.to})
			if i := r.Info(); i.Rate != c.to || i.Frames != int64((c.to+1)/2) || len(done) != 1 {
				t.Fatalf("%d to %d Hz: %+v, %q", c.from, c.to, i, done)
			}
			got, want := all(t, r)[0], tone((c.to+1)/2, c.to, hz, 0.3)
			for i := c.to / 10; i < c.to/2-c.to/10; i++ {
				if math.Abs(got[i]-want[i]) > 3e-6 {
					t.Errorf("%d to %d Hz: %.0f Hz: sample %d is %g, want %g", c.from, c.to, hz, i, got[i], want[i])
					break
				}
			}
		}
		if c.to >= c.from {
			continue
		}
		for _, hz := range []float64{nyquist, nyquist * 1.01, nyquist*2 - 100} {
			r, _ := apply1(t, record(t, c.from, samples.Depth32F, tone(c.from/2, c.from, math.Min(hz, float64(c.from)/2-1), 0.3)), Plan{Rate: c.to})
			for i, v := range all(t, r)[0][c.to/10 : c.to/2-c.to/10] {
				if math.Abs(v) > 0.5e-5 {
					t.Errorf("%d to %d Hz: %.1f dB of a tone at %.0f Hz at %d", c.from, c.to, 20*math.Log10(math.Abs(v)/0.5), hz, i)
					break
				}
			}
		}
	}
}

// TestResampleBlocks: a recording of many blocks comes out as by the definition,
// a sum over all inputs.
func TestResampleBlocks(t *testing.T) {
	n := 200_000
	x := make([]float64, n)
	for i := range x {
		x[i] = math.Round(16384*math.Sin(float64(i*i%7919))) / 32768
	}
	r, _ := apply1(t, record(t, 44100, samples.Depth16, x), Plan{Rate: 16000})
	f, _ := newFilter(44100, 16000, 1)
	got := all(t, r)[0]
	for _, m := range []int{0, 1, 23770, 23771, 23772, 23780, 47543, len(got) - 1} {
		at := int64(m) * f.down
		want := 0.0
		for k := range f.taps {
			if i := int(at/f.up) - f.back + k; i >= 0 && i < n {
				want += f.phases[at%f.up][k] * x[i]
			}
		}
		if math.Abs(got[m]-want) > 1e-14 {
			t.Errorf("sample %d is %.17g, want %.17g", m, got[m], want)
		}
	}
}

// TestSteps carries out each step on a recording whose answer is plain.
func TestSteps(t *testing.T) {
	left, right := []float64{0.5, 0.25, -0.25, 0, 0.125, 0.25, 0.5, 0.5}, []float64{-0.5, 0, 0.25, 0.5, 0, 0, 0, 0}
	for _, c := range []struct {
		name  string
		plan  Plan
		want  [][]float64
		words bool
		done  string
	}{
		{"nothing", Plan{}, [][]float64{left, right}, true, ""},
		{"cut", Plan{From: 0.01, To: 0.03}, [][]float64{{0.25, -0.25}, {0, 0.25}}, true, "cut to 0.01 ... 0.03 s"},
		{"cut to the end", Plan{From: 0.07, To: 99}, [][]float64{{0.5}, {0}}, true, "cut to 0.07 ... 0.08 s"},
		{"first", Plan{Channel: "first"}, [][]float64{left}, true, "first of 2 channels"},
		{"each", Plan{Channel: "each"}, [][]float64{left, right}, true, ""},
		{"mix", Plan{Channel: "mix", To: 0.02}, [][]float64{{0, 0.125}}, false, "cut to 0 ... 0.02 s|mean of 2 channels"},
		{"dc", Plan{RemoveDC: true, To: 0.02}, [][]float64{{0.125, -0.125}, {-0.25, 0.25}}, false, "cut to 0 ... 0.02 s|DC of +0.375, -0.25 removed"},
		{"gain", Plan{GainDB: 20 * math.Log10(4), Channel: "first", To: 0.04}, [][]float64{{2, 1, -1, 0}}, false,
			"cut to 0 ... 0.04 s|first of 2 channels|gain of +12.04 dB"},
	} {
		r, done := apply1(t, record(t, 100, samples.Depth16, left, right), c.plan)
		if got := strings.Join(done, "|"); got != c.done {
			t.Errorf("%s: did %q", c.name, got)
		}
		if r.Words() != c.words || r.Info().Frames != int64(len(c.want[0])) || r.Info().Channels != len(c.want) {
			t.Errorf("%s: %+v, words %v", c.name, r.Info(), r.Words())
			continue
		}
		for k, plane := range all(t, r) {
			for i, v := range plane {
				if math.Abs(v-c.want[k][i]) > 1e-15 {
					t.Errorf("%s: channel %d sample %d is %g, want %g", c.name, k, i, v, c.want[k][i])
				}
			}
		}
		if c.name == "gain" && (len(r.Info().Warnings) != 1 || !strings.Contains(r.Info().Warnings[0], "takes 1 samples beyond")) {
			t.Errorf("gain: warnings %q", r.Info().Warnings)
		}
	}
}

// TestViews: any stretch of what is made as it is read is that part of the whole,
// also over the borders of blocks and when steps are carried out one by one.
func TestViews(t *testing.T) {
	const n = 30_000
	planes := grid[float64](3, n)
	for i := range n {
		planes[0][i], planes[1][i], planes[2][i] = float64(i%8192)/32768, -float64(i%1000)/32768, float64(i%77)/32768
	}
	mean := 0.0
	for i := 800; i < 24000; i++ {
		mean += (planes[0][i] + planes[1][i] + planes[2][i]) / 3 / 23200
	}
	first, _ := apply1(t, record(t, 8000, samples.Depth16, planes...), Plan{Channel: "first", From: 0.1})
	mix, _ := apply1(t, record(t, 8000, samples.Depth24, planes...), Plan{Channel: "mix", From: 0.1, To: 3, RemoveDC: true})
	mix, _ = apply1(t, mix, Plan{From: 1, GainDB: 20 * math.Log10(2)})
	if !first.Words() || mix.Words() || first.Info().Frames != n-800 || mix.Info().Frames != 23200-8000 {
		t.Fatalf("%+v, %+v", first.Info(), mix.Info())
	}
	rapid.Check(t, func(t *rapid.T) {
		start := rapid.IntRange(0, 15200).Draw(t, "start")
		length := rapid.IntRange(0, 15200-start).Draw(t, "length")
		words, reals, mixed := grid[int16](1, length), grid[float64](1, length), grid[float64](1, length)
		if err := errors.Join(first.ReadWords(words, int64(start)), first.Read(reals, int64(start)), mix.Read(mixed, int64(start))); err != nil {
			t.Fatal(err)
		}
		for i := range length {
			at := 800 + start + i
			if x := planes[0][at]; reals[0][i] != x || float64(words[0][i])/32768 != x {
				t.Fatalf("first: frame %d is %g and %d, want %g", at, reals[0][i], words[0][i], x)
			}
			at += 8000
			if x := 2 * ((planes[0][at]+planes[1][at]+planes[2][at])/3 - mean); math.Abs(mixed[0][i]-x) > 1e-12 {
				t.Fatalf("mix: frame %d is %g, want %g", at, mixed[0][i], x)
			}
		}
	})
	sum, err := mix.SHA256()
	if err != nil || len(sum) != 64 {
		t.Errorf("%q, %v", sum, err)
	}
}

// TestRefused: settings that cannot be carried out.
func TestRefused(t *testing.T) {
	nan := math.NaN()
	r := record(t, 8000, samples.Depth16, make([]float64, 8000))
	defer r.Close()
	for _, p := range []Plan{
		{From: -1}, {From: nan}, {From: math.Inf(1)}, {From: 1}, {From: 2, To: 1}, {To: -1}, {To: nan}, {From: 0.5, To: 0.5}, {To: 1e-5},
		{Channel: "second"}, {Rate: -8000}, {Rate: 1}, {Rate: 2_000_000}, {Rate: 7999999}, {Rate: 999_983}, {GainDB: nan}, {GainDB: math.Inf(-1)}, {GainDB: 300},
	} {
		if _, _, err := Apply(r, p); err == nil {
			t.Errorf("%+v accepted", p)
		}
	}
}

func BenchmarkResample48to8(b *testing.B) {
	v := newView(record(b, 48000, samples.Depth16, tone(1<<20, 48000, 440, 0)), "", 0, 1<<20)
	f, err := newFilter(48000, 8000, 1)
	if err != nil {
		b.Fatal(err)
	}
	b.SetBytes(2 << 20)
	for b.Loop() {
		if err := f.resample(v, func([][]float64) error { return nil }); err != nil {
			b.Fatal(err)
		}
	}
}
