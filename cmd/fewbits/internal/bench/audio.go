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
	words   []*wordTable      // tables of both for 16-bit in and out; nil otherwise
}

// wordTable maps word w at position w + 32768.
type wordTable [1 << 16]int16

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
func wordTables(g codec.Grid) (y, e *wordTable) {
	y, e = new(wordTable), new(wordTable)
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
	var out planes
	if a.words != nil {
		for range p.words {
			out.words = append(out.words, plane(&spareWords, int64(p.samples())))
		}
		defer out.done()
	}
	for i, w := range a.outs {
		var err error
		if a.words != nil {
			a.words[i].look(out.words, p.words)
			err = w.WriteWordsAt(out.words, start)
		} else {
			_, err = w.WriteAt(a.reals(p, i), start)
		}
		if err != nil {
			return fmt.Errorf("writing audio: %w", err)
		}
	}
	return nil
}

// look looks every word up.
func (t *wordTable) look(out, in [][]int16) {
	for c, words := range in {
		to := out[c][:len(words)]
		for i, w := range words {
			to[i] = t[uint16(w)^0x8000]
		}
	}
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
