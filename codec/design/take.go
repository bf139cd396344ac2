package design

import (
	"fmt"
	"math"
	"slices"
)

// Take is what one recording gives to a segmental design: its in-range frames
// as 16-bit words, the amplitude of one word (Unit, a power of two; 0: 2^-15,
// full scale = 1.0) and its lsb (full scale = 1.0),
// whose rounding noise n lsb^2/12 is the least error the open value counts.
//
// Gains, in dB, take the frames once at each gain instead of as they are,
// saturating at the words' ends (see SpreadGains).
type Take struct {
	Frames [][]int16
	Unit   float64
	LSB    float64
	Gains  []float64
}

// SpreadGains are gains up to db (at least 0) up and down in even steps of at
// most 7 dB, 0 among them; none for 0. With them a table serves talkers louder
// or softer than those it was made on as well, for less on these themselves.
// On ten recordings, each coded by a table made on the other nine, 12 dB keep a
// half to two thirds of the mean gain over mu-law and take the worst loss, on
// the loudest, from 6.4 dB to 0.4; at 18 dB little but a logarithmic law is left.
func SpreadGains(db float64) []float64 {
	if !(db > 0) {
		return nil
	}
	steps := int(math.Ceil(db / 7))
	var out []float64
	for i := -steps; i <= steps; i++ {
		out = append(out, db*float64(i)/float64(steps))
	}
	return out
}

// atGains returns a take as it is, or one for each gain.
func (t Take) atGains() ([]Take, error) {
	if t.Unit == 0 {
		t.Unit = wordUnit
	}
	if len(t.Gains) == 0 {
		return []Take{t}, nil
	}
	var out []Take
	for _, db := range t.Gains {
		if !(math.Abs(db) <= 60) {
			return nil, fmt.Errorf("gain %g dB: want -60 to 60", db)
		}
		g := math.Pow(10, db/20)
		unit := t.louderUnit()
		scaled := Take{Unit: unit, LSB: math.Min(1, math.Max(unit, t.LSB*g))} // the words' own rounding earns nothing
		for _, words := range t.Frames {
			louder := make([]int16, len(words))
			for i, w := range words {
				x := math.RoundToEven(float64(w) * g * t.Unit / unit)
				louder[i] = int16(math.Max(math.MinInt16, math.Min(math.MaxInt16, x)))
			}
			scaled.Frames = append(scaled.Frames, louder)
		}
		out = append(out, scaled)
	}
	return out, nil
}

// wordUnit is the amplitude of one word of a 16-bit recording.
const wordUnit = 1. / (1 << 15)

// louderUnit is the unit at which the largest gain takes words to their ends
// at full scale, not before.
func (t Take) louderUnit() float64 {
	most := math.Pow(10, math.Max(0, slices.Max(t.Gains))/20)
	return math.Min(math.Max(wordUnit, t.Unit), t.Unit*math.Exp2(math.Ceil(math.Log2(most))))
}

// onOneGrid brings the words of all takes to the coarsest of their units, which
// it returns.
func onOneGrid(takes []Take) (unit float64) {
	for i := range takes {
		unit = math.Max(unit, takes[i].Unit)
	}
	for i, t := range takes {
		if t.Unit == unit {
			continue
		}
		coarse := make([][]int16, len(t.Frames))
		for k, words := range t.Frames {
			coarse[k] = make([]int16, len(words))
			for j, w := range words {
				coarse[k][j] = int16(math.RoundToEven(float64(w) * t.Unit / unit))
			}
		}
		takes[i].Frames = coarse
	}
	return unit
}
