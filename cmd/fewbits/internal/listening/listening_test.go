package listening

import (
	"encoding/csv"
	"errors"
	"io/fs"
	"math"
	"os"
	"path/filepath"
	"strconv"
	"strings"
	"testing"

	"fewbits/samples"
)

const (
	testRate   = 8000
	testFrames = 4000
)

// tone writes a sine, the same on each channel but for its sign, and returns
// its path.
func tone(t testing.TB, amplitude float64, channels int) string {
	t.Helper()
	return toneOf(t, amplitude, channels, testFrames)
}

func toneOf(t testing.TB, amplitude float64, channels, frames int) string {
	t.Helper()
	path := filepath.Join(t.TempDir(), "tone.wav")
	w, err := samples.Create(path, testRate, channels, int64(frames), samples.Depth32F)
	if err != nil {
		t.Fatal(err)
	}
	planes := make([][]float64, channels)
	for c := range planes {
		planes[c] = make([]float64, frames)
		for i := range frames {
			planes[c][i] = amplitude * math.Sin(2*math.Pi*441*float64(i)/testRate) * float64(1-2*(c%2))
		}
	}
	if _, err := w.WriteAt(planes, 0); err != nil {
		t.Fatal(err)
	}
	if err := w.Commit(); err != nil {
		t.Fatal(err)
	}
	return path
}

// tones makes n pairs whose sides differ in level by b.
func tones(t testing.TB, n int) (pairs []Pair) {
	for i := range n {
		x, b := 0.05+0.02*float64(i), 0.5+0.1*float64(i)
		pairs = append(pairs, Pair{Clip: "clip-" + strconv.Itoa(i), PathA: tone(t, x, 1), PathB: tone(t, x*b, 1), B1: 1, B2: b})
	}
	return pairs
}

// frames reads part of a file.
func frames(t *testing.T, path string, start int64, n int) [][]float64 {
	t.Helper()
	r, err := samples.Open(path)
	if err != nil {
		t.Fatal(err)
	}
	defer r.Close()
	planes := make([][]float64, r.Info().Channels)
	for c := range planes {
		planes[c] = make([]float64, n)
	}
	if err := r.Read(planes, start); err != nil {
		t.Fatal(err)
	}
	return planes
}

// keyRows reads the key as a table of column names.
func keyRows(t *testing.T, dir string) (rows []map[string]string) {
	t.Helper()
	f, err := os.Open(filepath.Join(dir, KeyFile))
	if err != nil {
		t.Fatal(err)
	}
	defer f.Close()
	all, err := csv.NewReader(f).ReadAll()
	if err != nil {
		t.Fatal(err)
	}
	for _, line := range all[1:] {
		row := map[string]string{}
		for i, cell := range line {
			row[all[0][i]] = cell
		}
		rows = append(rows, row)
	}
	return rows
}

// TestGains measures what was written: gain = <written, source>/<source, source>
// must be the key's and, matched, give both sides the recording's level.
func TestGains(t *testing.T) {
	pairs, out := []Pair{
		{Clip: "one", PathA: tone(t, 0.2, 2), PathB: tone(t, 0.1, 2), B1: 1, B2: 0.5},
		{Clip: "two", PathA: tone(t, 0.9, 2), PathB: tone(t, 0.7, 2), B1: 0.8, B2: 0.8},
		{Clip: "three", PathA: tone(t, 0.3, 1), PathB: tone(t, 0.3, 1), B1: 1.25, B2: 1},
	}, t.TempDir()
	rep, err := Write(out, "A", "B", pairs, 3)
	if err != nil {
		t.Fatal(err)
	}
	if want := 20 * math.Log10(0.9/0.8); math.Abs(rep.AttenuationDB-want) > 1e-3 {
		t.Errorf("attenuation %.5f dB, want %.5f", rep.AttenuationDB, want)
	}
	if want := 20*math.Log10(2) - rep.AttenuationDB; math.Abs(rep.LargestGainDB-want) > 1e-9 {
		t.Errorf("largest gain %.5f dB, want %.5f", rep.LargestGainDB, want)
	}
	if rep.Reference != "pair-02.wav" {
		t.Errorf("the loudest is %q, want pair-02.wav", rep.Reference)
	}
	for i, row := range keyRows(t, out) {
		p, path := pairs[i], filepath.Join(out, rep.Files[i])
		for s, place := range []string{"first", "second"} {
			source, b := p.PathA, p.B1
			if row[place] == "B" {
				source, b = p.PathB, p.B2
			}
			x := frames(t, source, 0, testFrames)
			y := frames(t, path, int64(s)*(testFrames+testRate/2), testFrames)
			var xy, xx float64
			for c := range x {
				for k := range x[c] {
					xy, xx = xy+x[c][k]*y[c][k], xx+x[c][k]*x[c][k]
				}
			}
			got, want := decibels(xy/xx), -decibels(b)-rep.AttenuationDB
			if said, err := strconv.ParseFloat(row["gain_"+place+"_db"], 64); err != nil || math.Abs(got-want) > 1e-5 || math.Abs(said-want) > 1e-9 {
				t.Errorf("%s, %s: gain %.7f dB, the key says %.7f, want %.7f", row["pair"], place, got, said, want)
			}
		}
	}
}

// TestNeverClips: the loudest sample lands on full scale, not beyond, and a set
// with room stays as it is.
func TestNeverClips(t *testing.T) {
	for _, c := range []struct{ amplitude, b, peak, attenuation float64 }{
		{0.5, 1, 0.5, 0},
		{0.999, 1, 0.999, 0},
		{0.9, 0.45, 1, 6.0206},
		{3, 1, 1, 9.5424}, // a float file beyond full scale
	} {
		out := t.TempDir()
		rep, err := Write(out, "A", "B", []Pair{{Clip: "c", PathA: tone(t, c.amplitude, 1), PathB: tone(t, 0.01, 1), B1: c.b, B2: 1}}, 1)
		if err != nil {
			t.Fatal(err)
		}
		top, full := 0.0, 0
		for _, x := range frames(t, filepath.Join(out, "pair-01.wav"), 0, 2*testFrames+testRate/2)[0] {
			top = max(top, math.Abs(x))
			if math.Abs(x) >= most {
				full++
			}
		}
		if math.Abs(top-c.peak) > 1e-3 || math.Abs(rep.AttenuationDB-c.attenuation) > 1e-3 {
			t.Errorf("%+v: peak %.5f, attenuation %.4f dB", c, top, rep.AttenuationDB)
		}
		if full > 8 { // a sine's crest is there once in many periods, a clipped one each time
			t.Errorf("%+v: %d samples at full scale: clipped", c, full)
		}
	}
}

// TestShape: 24 bits, both sides whole, exactly half a second of exact silence.
func TestShape(t *testing.T) {
	out := t.TempDir()
	rep, err := Write(out, "A", "B", tones(t, 3), 1)
	if err != nil {
		t.Fatal(err)
	}
	for _, name := range rep.Files {
		r, err := samples.Open(filepath.Join(out, name))
		if err != nil {
			t.Fatal(err)
		}
		if i := r.Info(); i.Bits != 24 || i.Rate != testRate || i.Channels != 1 || i.Frames != 2*testFrames+testRate/2 || len(i.Warnings) != 0 {
			t.Errorf("%s: %+v", name, i)
		}
		r.Close()
		for i, x := range frames(t, filepath.Join(out, name), testFrames, testRate/2)[0] {
			if x != 0 {
				t.Fatalf("%s: sample %d of the silence is %g", name, i, x)
			}
		}
	}
}

// TestLongAndWide crosses the blocks that files are read in.
func TestLongAndWide(t *testing.T) {
	const channels, long = 7, 3*blockSamples/7 + 5
	a, out := toneOf(t, 0.3, channels, long), t.TempDir()
	if _, err := Write(out, "A", "B", []Pair{{Clip: "c", PathA: a, PathB: a, B1: 1, B2: 1}}, 1); err != nil {
		t.Fatal(err)
	}
	x := frames(t, a, 0, long)
	for _, start := range []int64{0, long + testRate/2} {
		y := frames(t, filepath.Join(out, "pair-01.wav"), start, long)
		for c := range x {
			for i := range x[c] {
				if math.Abs(x[c][i]-y[c][i]) > 1.0/(1<<24) {
					t.Fatalf("channel %d, frame %d: %g became %g", c, i, x[c][i], y[c][i])
				}
			}
		}
	}
}

// TestSeedDecidesAll: same seed, same bytes; another seed, another order.
func TestSeedDecidesAll(t *testing.T) {
	pairs := tones(t, 6)
	read := func(seed uint64) map[string]string {
		out, all := t.TempDir(), map[string]string{}
		if _, err := Write(out, "A", "B", pairs, seed); err != nil {
			t.Fatal(err)
		}
		entries, err := os.ReadDir(out)
		if err != nil {
			t.Fatal(err)
		}
		for _, e := range entries {
			b, err := os.ReadFile(filepath.Join(out, e.Name()))
			if err != nil {
				t.Fatal(err)
			}
			all[e.Name()] = string(b)
		}
		return all
	}
	one, again, other := read(7), read(7), read(8)
	if len(one) != 6+3 {
		t.Errorf("%d files, want 6 pairs, sheet, answers and key", len(one))
	}
	for name, b := range one {
		if again[name] != b {
			t.Errorf("%s differs from run to run", name)
		}
	}
	if one[KeyFile] == other[KeyFile] {
		t.Error("seeds 7 and 8 give one order")
	}
}

// TestBlind: nothing but the key names a design or a clip.
func TestBlind(t *testing.T) {
	out := t.TempDir()
	if _, err := Write(out, "mu-law:4", "a-law:4", tones(t, 4), 1); err != nil {
		t.Fatal(err)
	}
	entries, err := os.ReadDir(out)
	if err != nil {
		t.Fatal(err)
	}
	for _, e := range entries {
		b, err := os.ReadFile(filepath.Join(out, e.Name()))
		if err != nil {
			t.Fatal(err)
		}
		for _, secret := range []string{"-law", "clip-"} {
			if found := strings.Contains(string(b), secret); found != (e.Name() == KeyFile) {
				t.Errorf("%s holds %q: %v", e.Name(), secret, found)
			}
		}
	}
}

// TestFailureLeavesNothing: whatever is wrong, nothing new is in the folder.
func TestFailureLeavesNothing(t *testing.T) {
	good := tones(t, 2)
	text := filepath.Join(t.TempDir(), "text.wav")
	if err := os.WriteFile(text, []byte("no recording"), 0o666); err != nil {
		t.Fatal(err)
	}
	for _, c := range []struct {
		name string
		bad  Pair
		want string
	}{
		{"missing", Pair{Clip: "c", PathA: "nowhere.wav", PathB: good[0].PathB, B1: 1, B2: 1}, "no-audio"},
		{"no recording", Pair{Clip: "c", PathA: good[0].PathA, PathB: text, B1: 1, B2: 1}, "text.wav"},
		{"zero", Pair{Clip: "harbour", PathA: good[0].PathA, PathB: good[0].PathB, B1: 0, B2: 1}, "harbour"},
		{"negative", Pair{Clip: "harbour", PathA: good[0].PathA, PathB: good[0].PathB, B1: 1, B2: -1}, "-1"},
		{"NaN", Pair{Clip: "harbour", PathA: good[0].PathA, PathB: good[0].PathB, B1: math.NaN(), B2: 1}, "NaN"},
		{"infinite", Pair{Clip: "harbour", PathA: good[0].PathA, PathB: good[0].PathB, B1: math.Inf(1), B2: 1}, "Inf"},
		{"vanishing", Pair{Clip: "harbour", PathA: good[0].PathA, PathB: good[0].PathB, B1: 1e-300, B2: 1}, "full scale"},
		{"other length", Pair{Clip: "c", PathA: good[0].PathA, PathB: toneOf(t, 0.1, 1, 100), B1: 1, B2: 1}, "100 frames"},
		{"other channels", Pair{Clip: "c", PathA: good[0].PathA, PathB: tone(t, 0.1, 2), B1: 1, B2: 1}, "2 channels"},
	} {
		out := t.TempDir()
		rep, err := Write(out, "A", "B", append(good[:2:2], c.bad), 1)
		if err == nil || !strings.Contains(err.Error(), c.want) || len(rep.Files) > 0 {
			t.Errorf("%s: %v, want %q", c.name, err, c.want)
		}
		if left, _ := os.ReadDir(out); len(left) > 0 {
			t.Errorf("%s: %s is left", c.name, left[0].Name())
		}
	}
	if _, err := Write(filepath.Join(t.TempDir(), "nowhere"), "A", "B", good, 1); err == nil {
		t.Error("a folder that is not there is no error")
	}
}

// TestRemovesWhatItMade: a failure after pairs were written takes them away.
func TestRemovesWhatItMade(t *testing.T) {
	s, err := arrange("A", "B", tones(t, 3), 1)
	if err != nil {
		t.Fatal(err)
	}
	if err := os.Remove(s.items[2].second.path); err != nil {
		t.Fatal(err)
	}
	m := material{dir: t.TempDir()}
	if err := m.write(s, 1); err == nil || len(m.made) != 2 {
		t.Fatalf("%d files made, %v: want 2 and an error", len(m.made), err)
	}
	m.remove()
	if left, _ := os.ReadDir(m.dir); len(left) > 0 {
		t.Errorf("%s is left", left[0].Name())
	}
}

// TestChangedSource: a reconstruction that grows or gets louder between the two
// passes is an error, not a clipped or torn file.
func TestChangedSource(t *testing.T) {
	for _, other := range []string{tone(t, 0.999, 1), toneOf(t, 0.1, 1, 2*testFrames), toneOf(t, 0.1, 1, 7)} {
		s, err := arrange("A", "B", []Pair{{Clip: "c", PathA: tone(t, 0.1, 1), PathB: tone(t, 0.05, 1), B1: 1, B2: 0.5}}, 1)
		if err != nil {
			t.Fatal(err)
		}
		s.items[0].second.path, s.items[0].second.gain = other, 2
		m := material{dir: t.TempDir()}
		if err := m.write(s, 1); err == nil || !strings.Contains(err.Error(), "changed") {
			t.Errorf("%v, want that it changed", err)
		}
		if left, _ := os.ReadDir(m.dir); len(left) > 0 {
			t.Errorf("%s is left", left[0].Name())
		}
	}
}

// TestNothingIsReplaced: a file in the way stays, and no other is made.
func TestNothingIsReplaced(t *testing.T) {
	for _, name := range []string{"pair-02.wav", SheetFile, AnswersFile, KeyFile} {
		out := t.TempDir()
		own := filepath.Join(out, name)
		if err := os.WriteFile(own, []byte("mine"), 0o666); err != nil {
			t.Fatal(err)
		}
		if _, err := Write(out, "A", "B", tones(t, 2), 1); !errors.Is(err, fs.ErrExist) {
			t.Errorf("%s in the way: %v", name, err)
		}
		if b, _ := os.ReadFile(own); string(b) != "mine" {
			t.Errorf("%s was replaced", name)
		}
		if left, _ := os.ReadDir(out); len(left) != 1 {
			t.Errorf("%s in the way: %d files are there", name, len(left))
		}
	}
}
