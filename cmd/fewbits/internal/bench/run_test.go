package bench

import (
	"bytes"
	"context"
	"crypto/sha256"
	"encoding/json"
	"errors"
	"io/fs"
	"math"
	"math/rand/v2"
	"os"
	"path/filepath"
	"slices"
	"testing"

	"fewbits/codec/family"
	"fewbits/measure"
	"fewbits/samples"
	"fewbits/samples/demo"
)

// planFor compares designs on recordings and writes under dir.
func planFor(t testing.TB, dir string, inputs []string, designs ...string) Plan {
	t.Helper()
	p := Plan{Inputs: inputs, Level: math.NaN(), Audio: true, Workers: 2, Settings: Settings{
		FrameSeconds: 0.02, RangeDB: 30, LimitsDB: [2]float64{-10, 35}, OpenLimitsDB: [2]float64{-10, 100}, Depth: "16", Seed: 1,
	}}
	for _, d := range designs {
		s, err := family.Parse(d)
		if err != nil {
			t.Fatal(err)
		}
		p.Specs = append(p.Specs, s)
	}
	p.Place = func(names ...string) (string, error) {
		path := filepath.Join(append([]string{dir}, names...)...)
		return path, os.MkdirAll(filepath.Dir(path), 0o777)
	}
	return p
}

// recordings are the demo clips, a stereo 24-bit file and a float one.
func recordings(t testing.TB) []string {
	t.Helper()
	dir := t.TempDir()
	paths, err := demo.WriteTo(dir)
	if err != nil {
		t.Fatal(err)
	}
	for name, depth := range map[string]samples.Depth{"deep.wav": samples.Depth24, "real.wav": samples.Depth32F} {
		path := filepath.Join(dir, name)
		w, err := samples.Create(path, 8000, 2, 20000, depth)
		if err != nil {
			t.Fatal(err)
		}
		r := rand.New(rand.NewPCG(5, 6))
		planes := [][]float64{make([]float64, 20000), make([]float64, 20000)}
		for i := range planes[0] {
			level := 0.002 + 0.1*math.Pow(math.Sin(float64(i)/1500), 4)
			planes[0][i], planes[1][i] = level*r.NormFloat64(), 0.3*level*r.NormFloat64()
		}
		if _, err := w.WriteAt(planes, 0); err != nil {
			t.Fatal(err)
		}
		if err := w.Commit(); err != nil {
			t.Fatal(err)
		}
		paths = append(paths, path)
	}
	return paths
}

// digests hashes every file below dir.
func digests(t *testing.T, dir string) map[string][32]byte {
	out := map[string][32]byte{}
	err := filepath.WalkDir(dir, func(path string, d fs.DirEntry, err error) error {
		if err != nil || d.IsDir() {
			return err
		}
		b, err := os.ReadFile(path)
		rel, _ := filepath.Rel(dir, path)
		out[rel] = sha256.Sum256(b)
		return err
	})
	if err != nil {
		t.Fatal(err)
	}
	return out
}

// TestBytesDoNotDependOnWorkers runs with 1, 2 and 7.
func TestBytesDoNotDependOnWorkers(t *testing.T) {
	inputs := recordings(t)
	var want map[string][32]byte
	for _, workers := range []int{1, 2, 7} {
		dir := t.TempDir()
		p := planFor(t, dir, inputs, "mu-law:4", "lloyd-max:6,from=data", "lloyd-max:4,from=data,aim=segsnr", "g711-a")
		p.Workers, p.FramesCSV = workers, true
		r, tr, err := Run(context.Background(), p)
		if err != nil {
			t.Fatal(err)
		}
		for name, v := range map[string]any{"results.json": r, "traces.json": tr} {
			b, err := json.Marshal(v)
			if err != nil {
				t.Fatal(err)
			}
			if err := os.WriteFile(filepath.Join(dir, name), b, 0o666); err != nil {
				t.Fatal(err)
			}
		}
		got := digests(t, dir)
		if want == nil {
			want = got
		}
		for name, sum := range want {
			if got[name] != sum {
				t.Errorf("%d workers: %s differs", workers, name)
			}
		}
		if len(got) != len(want) || len(got) < 50 {
			t.Errorf("%d workers: %d files, want %d", workers, len(got), len(want))
		}
	}
}

// TestAudioIsTheStaircase decodes what was written: within half a step of the
// depth's grid it is the staircase's output, and the error what is missing.
func TestAudioIsTheStaircase(t *testing.T) {
	inputs := recordings(t)
	for depth, step := range map[string]float64{"16": 1.0 / (1 << 15), "24": 1.0 / (1 << 23), "32f": 1.0 / (1 << 23)} {
		dir := t.TempDir()
		p := planFor(t, dir, inputs[3:6], "mu-law:6", "lloyd-max:4")
		p.Depth = depth
		r, _, err := Run(context.Background(), p)
		if err != nil {
			t.Fatal(err)
		}
		for _, c := range r.Clips {
			for _, d := range r.Designs {
				x := all(t, c.File)
				base := filepath.Join(dir, "audio", c.Name, d.Name)
				y, e := all(t, base+".wav"), all(t, base+".error.wav")
				search := measure.NewSearch(d.Thresholds, d.Values, float64(d.Lo), float64(d.Hi), d.Family == "mu-law")
				for ch := range x {
					for i, v := range x[ch] {
						q := search.Quantize(v)
						want := math.Min(q, 1-step)
						if math.Abs(y[ch][i]-want) > step/2+1e-12 || math.Abs(e[ch][i]-(v-q)) > step/2+1e-12 {
							t.Fatalf("%s %s at %s: sample %d of %g gives %g and error %g, want %g", c.File, d.Spec, depth, i, v, y[ch][i], e[ch][i], q)
						}
					}
				}
			}
		}
	}
}

// all reads a whole recording.
func all(t *testing.T, path string) [][]float64 {
	r, err := samples.Open(path)
	if err != nil {
		t.Fatal(err)
	}
	defer r.Close()
	planes := make([][]float64, r.Info().Channels)
	for c := range planes {
		planes[c] = make([]float64, r.Info().Frames)
	}
	if err := r.Read(planes, 0); err != nil {
		t.Fatal(err)
	}
	return planes
}

// TestFiguresAreTheDefinitions computes a clip's figures again, slowly and
// straight from the definitions.
func TestFiguresAreTheDefinitions(t *testing.T) {
	p := planFor(t, t.TempDir(), recordings(t), "mu-law:5", "uniform:4,overload=0.1", "g711-mu")
	p.Audio = false
	r, _, err := Run(context.Background(), p)
	if err != nil {
		t.Fatal(err)
	}
	for _, res := range r.Results {
		clip := r.Clips[slices.IndexFunc(r.Clips, func(c Clip) bool { return c.File == res.Clip })]
		design := r.Designs[slices.IndexFunc(r.Designs, func(d Design) bool { return d.Spec == res.Design })]
		for name, want := range slowFigures(all(t, clip.File), clip, design) {
			if got := float64(res.Figures[name]); !(math.Abs(got-want) <= 1e-9*math.Max(1, math.Abs(want))) {
				t.Errorf("%s %s: %s = %.12g, by the definition %.12g", res.Clip, res.Design, name, got, want)
			}
		}
	}
}

// slowFigures follows the definitions word by word.
func slowFigures(x [][]float64, c Clip, d Design) map[string]float64 {
	n := int(math.Floor(float64(c.RateHz)*0.02 + 0.5))
	search := measure.NewSearch(d.Thresholds, d.Values, float64(d.Lo), float64(d.Hi), d.Family != "lloyd-max")
	var signal, noise, over, samples float64
	counts := make([]int64, len(d.Values))
	var limited, every, open []float64
	for ch := range x {
		a := measure.NewActivity(float64(c.RateHz))
		a.Add(x[ch])
		active, _ := a.Result()
		for _, v := range x[ch] {
			e := v - search.Quantize(v)
			signal, noise, samples = signal+v*v, noise+e*e, samples+1
			counts[search.Index(v)]++
			if v < float64(d.Lo) || v > float64(d.Hi) {
				over++
			}
		}
		for f := 0; (f+1)*n <= len(x[ch]); f++ {
			var s, e float64
			for _, v := range x[ch][f*n : (f+1)*n] {
				s, e = s+v*v, e+(v-search.Quantize(v))*(v-search.Quantize(v))
			}
			if s == 0 {
				continue
			}
			db := math.Max(-10, math.Min(35, 10*math.Log10(s/e)))
			every = append(every, db)
			if 10*math.Log10(s/float64(n)) > active-30 {
				limited = append(limited, db)
				floor := float64(n) * c.LSB * c.LSB / 12
				open = append(open, math.Max(-10, math.Min(100, 10*math.Log10(s/math.Max(e, floor)))))
			}
		}
	}
	return map[string]float64{
		"mse": noise / samples, "snr_db": 10 * math.Log10(signal/noise), "overload_fraction": over / samples,
		"entropy_bits": measure.Entropy(counts), "segsnr_db": mean(limited), "segsnr_all_db": mean(every),
		"segsnr_open_db": mean(open), "frames_used": float64(len(limited)),
	}
}

func mean(x []float64) (m float64) {
	for _, v := range x {
		m += v / float64(len(x))
	}
	return m
}

// TestResultsRoundTrip writes results.json, reads it and writes it again.
func TestResultsRoundTrip(t *testing.T) {
	p := planFor(t, t.TempDir(), recordings(t)[:2], "mu-law:4", "lloyd-max:4")
	p.Audio = false
	r, _, err := Run(context.Background(), p)
	if err != nil {
		t.Fatal(err)
	}
	first, err := json.Marshal(r)
	if err != nil {
		t.Fatal(err)
	}
	var back Results
	if err := json.Unmarshal(first, &back); err != nil {
		t.Fatal(err)
	}
	second, err := json.Marshal(back)
	if err != nil || !bytes.Equal(first, second) {
		t.Errorf("read and written again it differs (%v)", err)
	}
}

// TestInOrder: results come in order whatever the workers; the first error and
// a cancelled context end it.
func TestInOrder(t *testing.T) {
	for _, workers := range []int{1, 3, 16} {
		var got []int
		err := inOrder(context.Background(), 200, workers,
			func(i int) (int, error) { return i * i, nil },
			func(i, v int) error { got = append(got, v); return nil })
		if err != nil || len(got) != 200 || !slices.IsSorted(got) {
			t.Fatalf("%d workers: %d results, %v", workers, len(got), err)
		}
		bad := errors.New("bad")
		err = inOrder(context.Background(), 200, workers,
			func(i int) (int, error) {
				if i == 57 {
					return 0, bad
				}
				return i, nil
			}, func(int, int) error { return nil })
		if !errors.Is(err, bad) {
			t.Errorf("%d workers: error %v", workers, err)
		}
		ctx, cancel := context.WithCancel(context.Background())
		err = inOrder(ctx, 200, workers,
			func(i int) (int, error) { return i, nil },
			func(i, _ int) error {
				if i == 20 {
					cancel()
				}
				return nil
			})
		if !errors.Is(err, context.Canceled) {
			t.Errorf("%d workers: cancelled gives %v", workers, err)
		}
	}
}
