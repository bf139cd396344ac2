// Package listening turns a run's reconstructions into blind material for
// listening in a room: level-matched pairs under neutral names, an answer sheet
// to print and a key kept apart; and it scores the answers.
package listening

import (
	"crypto/sha256"
	"encoding/csv"
	"encoding/hex"
	"fmt"
	"io"
	"math"
	"math/rand/v2"
	"os"
	"path/filepath"
	"strconv"

	"fewbits/samples"
)

// gapSeconds of silence part the two sides of a pair.
const gapSeconds = 0.5

// Pair is one clip coded by two designs A and B. B1 and B2 are b = <x,y>/<x,x>
// of A and B over the frames in range, above 0: each side is matched by 1/b.
type Pair struct {
	Clip         string
	PathA, PathB string
	B1, B2       float64
}

// Report says what was done to all files of a set.
type Report struct {
	// AttenuationDB is by how much all went down so that none clips; 0 or more.
	AttenuationDB float64
	Files         []string
}

// Write makes pair-01.wav and so on, answers.html and key.csv in a folder that
// is there. The order is balanced over the pairs and drawn from the seed.
func Write(dir, nameA, nameB string, pairs []Pair, seed uint64) (Report, error) {
	swapped := order(len(pairs), seed)
	peak := 0.0
	for _, p := range pairs {
		for _, side := range []struct {
			path string
			b    float64
		}{{p.PathA, p.B1}, {p.PathB, p.B2}} {
			v, err := peakOf(side.path)
			if err != nil {
				return Report{}, err
			}
			peak = math.Max(peak, v/side.b)
		}
	}
	gain := 1.0
	if peak > mostPeak {
		gain = mostPeak / peak
	}
	rep := Report{AttenuationDB: -20 * math.Log10(gain)}
	if gain == 1 {
		rep.AttenuationDB = 0
	}
	key := [][]string{{"pair", "clip", "first", "second", "gain_first_db", "gain_second_db", "seed", "sha256"}}
	for i, p := range pairs {
		name := fmt.Sprintf("pair-%02d.wav", i+1)
		first, second := side{p.PathA, nameA, gain / p.B1}, side{p.PathB, nameB, gain / p.B2}
		if swapped[i] {
			first, second = second, first
		}
		path := filepath.Join(dir, name)
		if err := writePair(path, first, second); err != nil {
			return rep, err
		}
		sum, err := digest(path)
		if err != nil {
			return rep, err
		}
		rep.Files = append(rep.Files, name)
		key = append(key, []string{
			strconv.Itoa(i + 1), p.Clip, first.name, second.name, decibels(first.gain), decibels(second.gain),
			strconv.FormatUint(seed, 10), sum,
		})
	}
	if err := samples.WriteFile(filepath.Join(dir, "answers.html"), func(w io.Writer) error { return sheet(w, len(pairs)) }); err != nil {
		return rep, err
	}
	return rep, samples.WriteFile(filepath.Join(dir, "key.csv"), func(w io.Writer) error { return csv.NewWriter(w).WriteAll(key) })
}

// mostPeak leaves a step of the 24-bit grid below full scale.
const mostPeak = 1 - 1.0/(1<<20)

// side is one half of a pair.
type side struct {
	path, name string
	gain       float64
}

func decibels(gain float64) string { return strconv.FormatFloat(20*math.Log10(gain), 'f', 4, 64) }

// order says for each pair whether B comes first: as often as not, up to one.
func order(n int, seed uint64) []bool {
	r := rand.New(rand.NewPCG(seed, 0x6c697374656e))
	out := make([]bool, n)
	odd := n%2 == 1 && r.IntN(2) == 1
	for i := range n / 2 {
		out[i] = true
	}
	if odd {
		out[n/2] = true
	}
	r.Shuffle(n, func(i, j int) { out[i], out[j] = out[j], out[i] })
	return out
}

// blockFrames is how much is read at a time.
const blockFrames = 1 << 16

// blocks walks a recording.
func blocks(path string, f func(planes [][]float64, start int64) error) (samples.Info, error) {
	r, err := samples.Open(path)
	if err != nil {
		return samples.Info{}, fmt.Errorf("%w; the run must have written audio (no --no-audio)", err)
	}
	defer r.Close()
	info := r.Info()
	for at := int64(0); at < info.Frames; at += blockFrames {
		planes := make([][]float64, info.Channels)
		for c := range planes {
			planes[c] = make([]float64, min(blockFrames, info.Frames-at))
		}
		if err := r.Read(planes, at); err != nil {
			return info, err
		}
		if err := f(planes, at); err != nil {
			return info, err
		}
	}
	return info, nil
}

func peakOf(path string) (peak float64, err error) {
	_, err = blocks(path, func(planes [][]float64, _ int64) error {
		for _, p := range planes {
			for _, x := range p {
				peak = math.Max(peak, math.Abs(x))
			}
		}
		return nil
	})
	return peak, err
}

// writePair writes one file: first, silence, second, 24 bits.
func writePair(path string, first, second side) error {
	a, err := infoOf(first.path)
	if err != nil {
		return err
	}
	b, err := infoOf(second.path)
	if err != nil {
		return err
	}
	if a.Rate != b.Rate || a.Channels != b.Channels {
		return fmt.Errorf("%s and %s differ in rate or channels: they are not from one run", first.path, second.path)
	}
	gap := int64(math.Round(gapSeconds * float64(a.Rate)))
	w, err := samples.Create(path, a.Rate, a.Channels, a.Frames+gap+b.Frames, samples.Depth24)
	if err != nil {
		return err
	}
	defer w.Abort()
	if err := put(w, first, 0); err != nil {
		return err
	}
	silence := make([][]float64, a.Channels)
	for c := range silence {
		silence[c] = make([]float64, gap)
	}
	if _, err := w.WriteAt(silence, a.Frames); err != nil {
		return err
	}
	if err := put(w, second, a.Frames+gap); err != nil {
		return err
	}
	return w.Commit()
}

func infoOf(path string) (samples.Info, error) {
	r, err := samples.Open(path)
	if err != nil {
		return samples.Info{}, fmt.Errorf("%w; the run must have written audio (no --no-audio)", err)
	}
	defer r.Close()
	return r.Info(), nil
}

// put copies one side to its place, with its gain.
func put(w *samples.Writer, s side, at int64) error {
	_, err := blocks(s.path, func(planes [][]float64, start int64) error {
		for _, p := range planes {
			for i := range p {
				p[i] *= s.gain
			}
		}
		_, err := w.WriteAt(planes, at+start)
		return err
	})
	return err
}

func digest(path string) (string, error) {
	f, err := os.Open(path)
	if err != nil {
		return "", err
	}
	defer f.Close()
	h := sha256.New()
	if _, err := io.Copy(h, f); err != nil {
		return "", err
	}
	return hex.EncodeToString(h.Sum(nil)), nil
}
