package samples

import (
	"math"
	"os"
	"os/exec"
	"path/filepath"
	"testing"

	"github.com/go-audio/wav"
)

// sox gives the general-purpose decoder and encoder of Debian's package sox, or
// skips.
func sox(t *testing.T, args ...string) {
	t.Helper()
	if _, err := exec.LookPath("sox"); err != nil {
		t.Skip("sox is not installed (Debian package sox): no second decoder to compare with")
	}
	if out, err := exec.Command("sox", args...).CombinedOutput(); err != nil {
		t.Fatalf("sox %v: %v: %s", args, err, out)
	}
}

// read opens a file and reads it whole.
func read(t testing.TB, path string) (*Recording, [][]float64) {
	t.Helper()
	r, err := Open(path)
	if err != nil {
		t.Fatal(err)
	}
	t.Cleanup(func() { r.Close() })
	planes := make([][]float64, r.Info().Channels)
	for c := range planes {
		planes[c] = make([]float64, r.Info().Frames)
	}
	if err := r.Read(planes, 0); err != nil {
		t.Fatal(err)
	}
	return r, planes
}

// TestAgainstSox: sox encodes two channels of noise and tones in many ways and
// decodes each again to 32-bit integers; ours must be the same values. sox works
// in 32-bit integers inside, so float samples may differ by its rounding.
func TestAgainstSox(t *testing.T) {
	dir := t.TempDir()
	source := filepath.Join(dir, "source.wav")
	sox(t, "-R", "-n", "-r", "16000", "-c", "2", "-b", "32", source, "synth", "0.7", "sine", "300-3000", "pinknoise", "gain", "-3")
	for _, c := range []struct {
		name  string
		args  []string
		ext   string
		exact bool
	}{
		{"WAV, PCM 8-bit", []string{"-b", "8", "-e", "unsigned-integer"}, "wav", true},
		{"WAV, PCM 16-bit", []string{"-b", "16"}, "wav", true},
		{"WAV, PCM 24-bit", []string{"-b", "24"}, "wav", true},
		{"WAV, PCM 32-bit", []string{"-b", "32"}, "wav", true},
		{"WAV, float 32", []string{"-b", "32", "-e", "floating-point"}, "wav", false},
		{"WAV, float 64", []string{"-b", "64", "-e", "floating-point"}, "wav", false},
		{"WAV, G.711 mu-law", []string{"-e", "mu-law"}, "wav", true},
		{"WAV, G.711 A-law", []string{"-e", "a-law"}, "wav", true},
		{"WAV, PCM 16-bit", []string{"-b", "16", "-c", "1"}, "wav", true},
		{"WAV, PCM 24-bit", []string{"-b", "24", "-c", "6"}, "wav", true},
		{"WAV, PCM 16-bit", []string{"-b", "16", "-r", "8000"}, "wav", true},
		{"WAV, PCM 8-bit", []string{"-b", "8", "-c", "1", "-r", "11025"}, "wav", true},
		{"WAV, PCM 16-bit", []string{"-t", "wavpcm", "-b", "16"}, "wav", true},
		{"FLAC, PCM 8-bit", []string{"-b", "8", "-C", "8"}, "flac", true},
		{"FLAC, PCM 16-bit", []string{"-b", "16", "-C", "0"}, "flac", true},
		{"FLAC, PCM 16-bit", []string{"-b", "16", "-C", "8"}, "flac", true},
		{"FLAC, PCM 16-bit", []string{"-b", "16", "-C", "5", "-c", "1", "-r", "24000"}, "flac", true},
		{"FLAC, PCM 24-bit", []string{"-b", "24", "-C", "8"}, "flac", true},
		{"FLAC, PCM 24-bit", []string{"-b", "24", "-C", "3", "-c", "4"}, "flac", true},
	} {
		coded, raw := filepath.Join(dir, "coded."+c.ext), filepath.Join(dir, "decoded.s32")
		sox(t, append(append([]string{"-R", "-D", source}, c.args...), coded)...)
		sox(t, "-D", coded, "-t", "raw", "-e", "signed-integer", "-b", "32", "-L", raw)
		r, planes := read(t, coded)
		if f := r.Info().Format(); f != c.name || len(r.Info().Warnings) > 0 {
			t.Errorf("%v: %s, warnings %q", c.args, f, r.Info().Warnings)
		}
		if r.Words() {
			sameWords(t, r, planes)
		}
		compare(t, c.name, raw, planes, c.exact)
	}
}

// compare holds planes against interleaved 32-bit integers.
func compare(t *testing.T, name, raw string, planes [][]float64, exact bool) {
	t.Helper()
	b, err := os.ReadFile(raw)
	if err != nil {
		t.Fatal(err)
	}
	if len(b) != 4*len(planes)*len(planes[0]) || len(planes[0]) < 1000 {
		t.Fatalf("%s: %d bytes for %d channels of %d", name, len(b), len(planes), len(planes[0]))
	}
	differ, bound := 0, 0.0
	if !exact {
		bound = 1.0 / (1 << 31)
	}
	for i := range planes[0] {
		for c := range planes {
			at := 4 * (i*len(planes) + c)
			want := float64(int32(uint32(b[at])|uint32(b[at+1])<<8|uint32(b[at+2])<<16|uint32(b[at+3])<<24)) / (1 << 31)
			if math.Abs(planes[c][i]-want) > bound {
				differ++
			}
		}
	}
	if differ > 0 {
		t.Errorf("%s: %d of %d samples differ", name, differ, len(b)/4)
	}
}

// TestAgainstGoAudio: what is written here is read alike by the library
// go-audio/wav where that reads right (PCM of an even number of bytes; it takes a
// pad byte for a sample).
func TestAgainstGoAudio(t *testing.T) {
	for _, depth := range []Depth{Depth16, Depth24} {
		path := filepath.Join(t.TempDir(), "a.wav")
		planes := [][]float64{make([]float64, 500), make([]float64, 500), make([]float64, 500)}
		for c := range planes {
			for i, v := range noise(500, 16, uint32(c)) {
				planes[c][i] = float64(v) / (1 << 15)
			}
		}
		w := create(t, path, 3, 500, depth)
		if _, err := w.WriteAt(planes, 0); err != nil {
			t.Fatal(err)
		}
		if err := w.Commit(); err != nil {
			t.Fatal(err)
		}
		file, err := os.Open(path)
		if err != nil {
			t.Fatal(err)
		}
		defer file.Close()
		d := wav.NewDecoder(file)
		got, err := d.FullPCMBuffer()
		if err != nil || d.NumChans != 3 || d.SampleRate != 8000 || len(got.Data) != 3*500 {
			t.Fatalf("%s: %v, %+v", depth, err, d)
		}
		scale := float64(int(1) << (d.BitDepth - 1))
		for i, v := range got.Data {
			if x := planes[i%3][i/3]; float64(v)/scale != x {
				t.Fatalf("%s: sample %d is %d, written %g", depth, i, v, x*scale)
			}
		}
	}
}

// TestSoxReadsOurs: sox decodes each depth to the values that were written, and
// finds nothing to complain about.
func TestSoxReadsOurs(t *testing.T) {
	dir := t.TempDir()
	for _, depth := range []Depth{Depth16, Depth24, Depth32F} {
		path, raw := filepath.Join(dir, "ours.wav"), filepath.Join(dir, "ours.s32")
		planes := [][]float64{make([]float64, 1501)}
		for i, v := range noise(1501, 16, 9) {
			planes[0][i] = float64(v) / (1 << 15)
		}
		w := create(t, path, 1, 1501, depth)
		if _, err := w.WriteAt(planes, 0); err != nil {
			t.Fatal(err)
		}
		if err := w.Commit(); err != nil {
			t.Fatal(err)
		}
		sox(t, "-D", path, "-t", "raw", "-e", "signed-integer", "-b", "32", "-L", raw)
		if out, _ := exec.Command("sox", path, "-n").CombinedOutput(); len(out) > 0 {
			t.Errorf("%s: sox says %s", depth, out)
		}
		compare(t, "depth "+string(depth), raw, planes, true)
	}
}

// TestRealRecordings opens the Debian packages' recordings: pocketsphinx-testdata
// (16 kHz mono) and alsa-utils (48 kHz mono), and those of FEWBITS_RECORDINGS.
func TestRealRecordings(t *testing.T) {
	var places []string
	for _, p := range []string{"/usr/share/pocketsphinx/test/data", "/usr/share/sounds/alsa", os.Getenv("FEWBITS_RECORDINGS")} {
		if _, err := os.Stat(p); err == nil {
			places = append(places, p)
		}
	}
	if len(places) == 0 {
		t.Skip("no recordings: install the Debian packages pocketsphinx-testdata and alsa-utils, or set FEWBITS_RECORDINGS to a folder")
	}
	files, refused, err := Find(places)
	if err != nil || len(files) == 0 || len(refused) > 0 {
		t.Fatalf("%d files, refused %v, %v", len(files), refused, err)
	}
	raw := filepath.Join(t.TempDir(), "decoded.s32")
	for _, path := range files {
		r, planes := read(t, path)
		if i := r.Info(); i.Rate < 8000 || i.Frames < 1000 || !r.Words() {
			t.Errorf("%s: %+v", path, i)
		}
		sameWords(t, r, planes)
		sox(t, "-D", path, "-t", "raw", "-e", "signed-integer", "-b", "32", "-L", raw)
		compare(t, path, raw, planes, true)
	}
}
