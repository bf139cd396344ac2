package bench

import (
	"fmt"
	"math"
	"slices"

	"fewbits/measure"
)

// clipUnits takes each clip's figure as one observation, or each talker's,
// weighted by its frames, so that the leader is the winner of the table.
func clipUnits(r *Results, members []int, figure string) (u measure.Units) {
	for _, i := range members {
		var row []float64
		for c := range r.Clips {
			row = append(row, float64(r.Results[c*len(r.Designs)+i].Figures[figure]))
		}
		u.Values = append(u.Values, row)
	}
	for _, c := range r.Clips {
		u.Weights = append(u.Weights, float64(c.FramesInRange))
	}
	u.Groups = talkers(r)
	return u
}

// blockUnits takes each block of each clip as one, weighted by its frames;
// blocks have segmental figures only.
func blockUnits(outcomes []*outcome, members []int, figure string) (u measure.Units) {
	u.Blocks = true
	seg := measure.SegInRange
	if figure == OpenSNR {
		seg = measure.SegOpen
	}
	for _, i := range members {
		var row []float64
		u.Weights = nil
		for _, o := range outcomes {
			for _, b := range o.blocks {
				if n := b[i].Segmental[seg].Frames; n > 0 {
					row = append(row, b[i].Segmental[seg].Mean())
					u.Weights = append(u.Weights, float64(n))
				}
			}
		}
		u.Values = append(u.Values, row)
	}
	return u
}

// energyUnits takes each clip's part in the pooled SNR, which is a ratio of
// sums over clips, to first order: with G clips of energies S_c and E_c
//
//	SNR + 10/ln 10 * G (S_c / sum S - E_c / sum E)
//
// whose plain mean is the pooled SNR (the linearised ratio estimator of survey
// sampling; W. G. Cochran, Sampling Techniques, 3rd ed. 1977, ch. 6, from
// memory).
func energyUnits(r *Results, members []int) (u measure.Units) {
	n := float64(len(r.Clips))
	signal := make([]float64, len(r.Clips))
	for c, clip := range r.Clips {
		if clip.LevelDBov.Defined() {
			signal[c] = math.Pow(10, float64(clip.LevelDBov)/10) * clip.samples()
		}
	}
	for _, i := range members {
		noise := make([]float64, len(r.Clips))
		for c, clip := range r.Clips {
			noise[c] = float64(r.Results[c*len(r.Designs)+i].Figures["mse"]) * clip.samples()
		}
		s, e := total(signal), total(noise)
		row := make([]float64, len(r.Clips))
		for c := range row {
			row[c] = measure.DB(s/e) + 10/math.Ln10*n*(signal[c]/s-noise[c]/e)
		}
		u.Values = append(u.Values, row)
	}
	u.Groups = talkers(r)
	return u
}

// samples counts those of all channels.
func (c *Clip) samples() float64 { return float64(c.Samples) * float64(c.Channels) }

func total(x []float64) (sum float64) {
	for _, v := range x {
		sum += v
	}
	return sum
}

// talkers names each clip's; nil where none was told.
func talkers(r *Results) (names []string) {
	if !slices.ContainsFunc(r.Clips, func(c Clip) bool { return c.Talker != "" }) {
		return nil
	}
	for _, c := range r.Clips {
		name := c.Talker
		if name == "" {
			name = c.File
		}
		names = append(names, name)
	}
	return names
}

// methodWords tells how an interval of a figure was made and on what.
func methodWords(r *Results, figure, method string, observations int) string {
	unit, weighing := "clips", ", each weighing by its frames in range"
	if talkers(r) != nil {
		unit = "talkers"
	}
	if figure == SNR {
		weighing = ", each weighing by its energies"
	} else if len(r.Clips) < measure.FewClips {
		unit = "blocks of frames"
	}
	if observations < 2 {
		return method
	}
	return fmt.Sprintf("%s on %d %s%s", method, observations, unit, weighing)
}
