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
	tables  []*pairTable      // of each design, for 16-bit in and out; nil otherwise
}

// pairTable maps word w at position w + 32768 to reconstruction and error: one
// look finds both.
type pairTable [1 << 16][2]int16

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
			a.tables = append(a.tables, newPairTable(d.grid))
		}
	}
	return a, nil
}

// newPairTable gives, for each 16-bit word, the reconstruction and the error on
// the same grid, rounded away from zero.
func newPairTable(g codec.Grid) *pairTable {
	t := new(pairTable)
	for i, k := range g.Index {
		v := g.Values[k]
		t[i] = [2]int16{word(v), word(float64(i-32768)/32768 - v)}
	}
	return t
}

// word rounds to the 16-bit grid, halves away from zero, within its range.
func word(v float64) int16 {
	return int16(min(max(math.Round(v*32768), -32768), 32767))
}

// write codes one chunk into every file.
func (a *audio) write(p planes, start int64) error {
	if a.tables != nil {
		return a.writeWords(p.words, start)
	}
	for i, w := range a.outs {
		if _, err := w.WriteAt(a.reals(p, i), start); err != nil {
			return fmt.Errorf("writing audio: %w", err)
		}
	}
	return nil
}

// writeWords is write for 16 bits in and out.
func (a *audio) writeWords(in [][]int16, start int64) error {
	var out [2]planes
	for i := range out {
		for _, words := range in {
			out[i].words = append(out[i].words, plane(&spareWords, int64(len(words))))
		}
		defer out[i].done()
	}
	for d, table := range a.tables {
		for c, words := range in {
			table.look(out[0].words[c], out[1].words[c], words)
		}
		for i := range out {
			if err := a.outs[2*d+i].WriteWordsAt(out[i].words, start); err != nil {
				return fmt.Errorf("writing audio: %w", err)
			}
		}
	}
	return nil
}

// look looks every word up.
func (t *pairTable) look(y, e, words []int16) {
	y, e = y[:len(words)], e[:len(words)]
	for i, w := range words {
		pair := &t[uint16(w)^0x8000]
		y[i], e[i] = pair[0], pair[1]
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
