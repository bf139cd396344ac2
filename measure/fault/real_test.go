package fault

import (
	"encoding/binary"
	"math"
	"os"
	"path/filepath"
	"testing"
)

// recordings finds files of the Debian packages pocketsphinx-testdata and
// alsa-utils, or copies of them under FEWBITS_RECORDINGS.
func recordings(t testing.TB, pattern string) []string {
	t.Helper()
	for _, root := range []string{"/usr/share/pocketsphinx/test/data", "/usr/share/sounds", os.Getenv("FEWBITS_RECORDINGS")} {
		if found, _ := filepath.Glob(filepath.Join(root, pattern)); root != "" && len(found) > 0 {
			return found
		}
	}
	t.Skipf("no %s: install pocketsphinx-testdata and alsa-utils or set FEWBITS_RECORDINGS", pattern)
	return nil
}

// readWords reads a plain 16-bit mono WAV file.
func readWords(t testing.TB, path string) (words []int16, rate int) {
	t.Helper()
	b, err := os.ReadFile(path)
	if err != nil {
		t.Fatal(err)
	}
	rate = int(binary.LittleEndian.Uint32(b[24:]))
	for i := 12; i+8 <= len(b); {
		n := int(binary.LittleEndian.Uint32(b[i+4:]))
		if string(b[i:i+4]) == "data" {
			for k := i + 8; k+1 < min(i+8+n, len(b)); k += 2 {
				words = append(words, int16(binary.LittleEndian.Uint16(b[k:])))
			}
			return words, rate
		}
		i += 8 + n + n%2
	}
	t.Fatalf("%s: no data chunk", path)
	return nil, 0
}

// What an engineer finds in these files by ear, by editor and by their
// provenance: librivox comes from a 64 kbit/s MP3 (its file names say so) and
// stands off centre; cards and alsa were never coded.
func TestDebianRecordings(t *testing.T) {
	for _, tc := range []struct {
		pattern    string
		want, none []string
	}{
		{"librivox/*.wav", []string{"lossy-source", "dc"}, []string{"clipped", "coarse", "companded", "silence", "empty-above", "unused-bits"}},
		{"cards/00[123].wav", []string{"short"}, []string{"clipped", "lossy-source", "dc", "coarse", "companded", "silence", "empty-above", "held", "cut-out"}},
		{"cards/004.wav", []string{"clipped", "hot"}, []string{"lossy-source", "dc", "coarse", "companded", "silence", "empty-above"}},
		{"cards/005.wav", []string{"clipped", "hot"}, []string{"lossy-source", "dc", "coarse", "companded", "silence", "empty-above"}},
		{"alsa/Front_*.wav", []string{"silence", "empty-above"}, []string{"clipped", "lossy-source", "dc", "coarse", "companded", "held", "cut-out"}},
		{"alsa/Rear_*.wav", []string{"silence", "empty-above"}, []string{"clipped", "lossy-source", "dc", "coarse", "companded", "held", "cut-out"}},
		{"alsa/Side_*.wav", []string{"empty-above"}, []string{"clipped", "lossy-source", "dc", "coarse", "companded", "held", "cut-out"}},
		{"alsa/Noise.wav", []string{"empty-above"}, []string{"clipped", "lossy-source", "dc", "coarse", "companded", "silence", "held"}},
	} {
		t.Run(tc.pattern, func(t *testing.T) {
			for _, path := range recordings(t, tc.pattern) {
				words, rate := readWords(t, path)
				s := NewScan(rate)
				s.AddWords(words)
				got := s.Findings(contextOf(amplitudes(words), rate))
				for _, f := range got {
					t.Logf("%s: %s: %s", filepath.Base(path), f.Severity, f.Sentence)
				}
				expect(t, filepath.Base(path), got, tc.want, tc.none)
			}
		})
	}
}

// The clipped samples of cards/004 and 005, counted by an editor: 21 and 5.
func TestDebianClipCounts(t *testing.T) {
	for name, want := range map[string]float64{"cards/004.wav": 21, "cards/005.wav": 5} {
		words, rate := readWords(t, recordings(t, name)[0])
		s := NewScan(rate)
		s.AddWords(words)
		f := find(s.Findings(contextOf(amplitudes(words), rate)), "clipped")
		if f == nil || f.Value != want {
			t.Errorf("%s: %+v, want %g clipped samples", name, f, want)
		}
	}
}

func amplitudes(words []int16) []float64 {
	x := make([]float64, len(words))
	for i, w := range words {
		x[i] = float64(w) / (1 << 15)
	}
	return x
}

// contextOf works the context out; the active level is taken 2 dB above the
// level, which is about right for read speech.
func contextOf(x []float64, rate int) Context {
	var sum, energy, peak float64
	for _, v := range x {
		sum += v
		energy += v * v
		peak = math.Max(peak, math.Abs(v))
	}
	n := float64(len(x))
	level := 10 * math.Log10(energy/n)
	return Context{
		LSB: 0x1p-15, Bits: 16, ActiveDBov: level + 2, LevelDBov: level,
		PeakDB: 20 * math.Log10(peak), DC: sum / n, Seconds: n / float64(rate), InRangeShare: 0.6,
	}
}

func find(all []Finding, kind string) *Finding {
	for i := range all {
		if all[i].Kind == kind {
			return &all[i]
		}
	}
	return nil
}

func expect(t *testing.T, name string, got []Finding, want, none []string) {
	t.Helper()
	for _, k := range want {
		if find(got, k) == nil {
			t.Errorf("%s: %s not found", name, k)
		}
	}
	for _, k := range none {
		if f := find(got, k); f != nil {
			t.Errorf("%s: false alarm: %s", name, f.Sentence)
		}
	}
}
