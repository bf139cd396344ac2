package bench

import (
	"fmt"
	"math"

	"fewbits/codec"
	"fewbits/samples"
)

// audio writes a clip's reconstructions and errors while it is measured:
// chunks arrive in any order, each at its own place.
type audio struct {
	designs []made
	outs    []*samples.Writer // reconstruction and error of each design in turn
	words   [][]int16         // tables of both for 16-bit in and out; nil otherwise
}

// openAudio creates two files a design.
func (e *engine) openAudio(s *survey, designs []made) (*audio, error) {
	a := &audio{designs: designs}
	for _, d := range designs {
		for _, suffix := range []string{".wav", ".error.wav"} {
			path, err := e.plan.Place("audio", s.clip.Name, d.Name+suffix)
			if err != nil {
				a.abort()
				return nil, err
			}
			w, err := samples.Create(path, s.clip.RateHz, s.clip.Channels, s.clip.Samples, samples.Depth(e.plan.Depth))
			if err != nil {
				a.abort()
				return nil, err
			}
			a.outs = append(a.outs, w)
		}
		if e.plan.Depth == "16" && s.rec.Words() {
			y, err := wordTables(d.grid)
			a.words = append(a.words, y, err)
		}
	}
	return a, nil
}

// wordTables gives, for each 16-bit word, the reconstruction and the error on
// the same grid, rounded away from zero.
func wordTables(g codec.Grid) (y, e []int16) {
	y, e = make([]int16, len(g.Index)), make([]int16, len(g.Index))
	for i, k := range g.Index {
		v := g.Values[k]
		y[i] = word(v)
		e[i] = word(float64(i-32768)/32768 - v)
	}
	return y, e
}

// word rounds to the 16-bit grid, halves away from zero, within its range.
func word(v float64) int16 {
	return int16(min(max(math.Round(v*32768), -32768), 32767))
}

// write codes one chunk into every file.
func (a *audio) write(p planes, start int64) error {
	for i, w := range a.outs {
		var err error
		switch {
		case a.words != nil:
			err = w.WriteWordsAt(mapWords(p.words, a.words[i]), start)
		default:
			_, err = w.WriteAt(a.reals(p, i), start)
		}
		if err != nil {
			return fmt.Errorf("writing audio: %w", err)
		}
	}
	return nil
}

// mapWords looks every word up.
func mapWords(in [][]int16, table []int16) [][]int16 {
	out := make([][]int16, len(in))
	for c, words := range in {
		out[c] = make([]int16, len(words))
		for i, w := range words {
			out[c][i] = table[int(w)+32768]
		}
	}
	return out
}

// reals computes the reconstruction (even i) or the error (odd) of a chunk.
func (a *audio) reals(p planes, i int) [][]float64 {
	stair := a.designs[i/2].stair
	out := make([][]float64, max(len(p.words), len(p.reals)))
	for c := range out {
		out[c] = make([]float64, p.samples())
		for j := range out[c] {
			x := p.at(c, j)
			y := stair.Quantize(x)
			if i%2 == 1 {
				y = x - y
			}
			out[c][j] = y
		}
	}
	return out
}

// at is sample j of channel c, full scale = 1.0.
func (p planes) at(c, j int) float64 {
	if p.words != nil {
		return float64(p.words[c][j]) / 32768
	}
	return p.reals[c][j]
}

// commit makes all files appear; abort none.
func (a *audio) commit() error {
	for i, w := range a.outs {
		if err := w.Commit(); err != nil {
			a.outs = a.outs[i:]
			a.abort()
			return err
		}
	}
	return nil
}

func (a *audio) abort() {
	for _, w := range a.outs {
		w.Abort()
	}
}
