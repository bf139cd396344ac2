package bench

import (
	"math"

	"fewbits/measure"
)

// Classes of frame level.
const (
	quiet = iota
	middle
	loud
	classes
)

var classNames = [classes]string{"quiet", "middle", "loud"}

// spreadBins: frame SNR from -10 to 100 dB in steps of 0.25 dB.
const (
	spreadStep = 0.25
	spreadBins = int((measure.OpenUpper-measure.OpenLower)/spreadStep) + 1
)

// spread counts the frames of each design by class and SNR.
type spread struct{ counts [][classes][spreadBins]int64 }

func newSpread(designs int) *spread {
	return &spread{make([][classes][spreadBins]int64, designs)}
}

// add counts a frame of a class.
func (s *spread) add(design, class int, db float64) {
	db = max(measure.OpenLower, min(measure.OpenUpper, db))
	s.counts[design][class][int((db-measure.OpenLower)/spreadStep)]++
}

// class says where a frame's level lies: quiet is out of range, middle below
// the channel's active level.
func (s *survey) class(signal float64, ch int) int {
	switch {
	case !measure.InRange(signal, s.frame, s.inRange[ch]):
		return quiet
	case signal/float64(s.frame) < s.activeSq[ch]:
		return middle
	}
	return loud
}

func (s *spread) merge(b *spread) {
	for d := range s.counts {
		for c := range classes {
			for i, n := range b.counts[d][c] {
				s.counts[d][c][i] += n
			}
		}
	}
}

// rows turns the counts into quantiles.
func (s *spread) rows(designs []Design, pooled []Pooled) []Spread {
	var out []Spread
	for d := range designs {
		for c := range classes {
			row := Spread{Design: designs[d].Spec, Class: classNames[c], IdleDBov: pooled[d].Figures["idle_dbov"]}
			for _, n := range s.counts[d][c] {
				row.Frames += n
			}
			for q, share := range []float64{0.05, 0.25, 0.5, 0.75, 0.95} {
				row.Quantiles[q] = Num(quantile(s.counts[d][c][:], row.Frames, share))
			}
			out = append(out, row)
		}
	}
	return out
}

// quantile is the middle of the bin that holds a share of the counts.
func quantile(counts []int64, total int64, share float64) float64 {
	want, sum := share*float64(total), int64(0)
	for i, n := range counts {
		if sum += n; n > 0 && float64(sum) >= want {
			return measure.OpenLower + (float64(i)+0.5)*spreadStep
		}
	}
	return math.NaN()
}
