package design

import (
	"fmt"
	"math"
)

// Take is what one recording gives to a segmental design: its in-range frames
// as 16-bit words (amplitude = word / 32768) and its lsb (full scale = 1.0),
// whose rounding noise n lsb^2/12 is the least error the open value counts.
//
// Gains, in dB, take the frames once at each gain instead of as they are,
// saturating at the words' ends (see SpreadGains).
type Take struct {
	Frames [][]int16
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
	if len(t.Gains) == 0 {
		return []Take{t}, nil
	}
	var out []Take
	for _, db := range t.Gains {
		if !(math.Abs(db) <= 60) {
			return nil, fmt.Errorf("gain %g dB: want -60 to 60", db)
		}
		g := math.Pow(10, db/20)
		scaled := Take{LSB: math.Min(1, t.LSB*g)}
		for _, words := range t.Frames {
			louder := make([]int16, len(words))
			for i, w := range words {
				x := math.RoundToEven(float64(w) * g)
				louder[i] = int16(math.Max(math.MinInt16, math.Min(math.MaxInt16, x)))
			}
			scaled.Frames = append(scaled.Frames, louder)
		}
		out = append(out, scaled)
	}
	return out, nil
}

// Frames are the frames of one or more recordings on a common grid of values;
// 2 bytes a sample (ten minutes at 8 kHz: 10 MB).
type Frames struct {
	// Grid holds the distinct amplitudes, ascending, at most 65,536.
	Grid []float64
	// Bins are positions in Grid, frame after frame; frame f is
	// Bins[Starts[f]:Starts[f+1]].
	Bins   []uint16
	Starts []int
	// Signal is sum x^2 of each frame, > 0; Floor is n lsb^2/12.
	Signal, Floor []float64
	// Lower, Upper and OpenUpper limit a frame's SNR in dB: Upper for
	// segsnr_db, OpenUpper, with the floor, for segsnr_open_db.
	Lower, Upper, OpenUpper float64
}

// NewFrames gathers takes, with the customary limits -10, 35 and 100 dB.
// Frames without signal are left out; none with signal is an error.
func NewFrames(takes ...Take) (Frames, error) {
	f := Frames{Starts: []int{0}, Lower: -10, Upper: 35, OpenUpper: 100}
	var all []Take
	for i, t := range takes {
		if !(t.LSB >= 0 && t.LSB <= 1) {
			return Frames{}, fmt.Errorf("recording %d: lsb %g: want 0 to 1", i, t.LSB)
		}
		scaled, err := t.atGains()
		if err != nil {
			return Frames{}, fmt.Errorf("recording %d: %w", i, err)
		}
		all = append(all, scaled...)
	}
	bin := f.gridOf(all)
	for _, t := range all {
		for _, words := range t.Frames {
			f.push(words, bin, t.LSB)
		}
	}
	if len(f.Signal) == 0 {
		return Frames{}, fmt.Errorf("no frame in range with signal in %d recordings", len(takes))
	}
	return f, nil
}

// gridOf sets Grid to the words that occur and returns their positions.
func (f *Frames) gridOf(takes []Take) (bin []uint16) {
	used := make([]bool, 1<<16)
	samples := 0
	for _, t := range takes {
		for _, words := range t.Frames {
			samples += len(words)
			for _, w := range words {
				used[int(w)+1<<15] = true
			}
		}
	}
	f.Bins = make([]uint16, 0, samples)
	bin = make([]uint16, 1<<16)
	for i, u := range used {
		if u {
			bin[i] = uint16(len(f.Grid))
			f.Grid = append(f.Grid, float64(i-1<<15)/(1<<15))
		}
	}
	return bin
}

func (f *Frames) push(words []int16, bin []uint16, lsb float64) {
	var energy int64
	for _, w := range words {
		energy += int64(w) * int64(w)
	}
	if energy == 0 {
		return
	}
	for _, w := range words {
		f.Bins = append(f.Bins, bin[int(w)+1<<15])
	}
	f.Starts = append(f.Starts, len(f.Bins))
	f.Signal = append(f.Signal, float64(energy)/(1<<30))
	f.Floor = append(f.Floor, float64(len(words))*lsb*lsb/12)
}

// Len returns the number of frames.
func (f Frames) Len() int { return len(f.Signal) }

// Histogram pools the samples of all frames.
func (f Frames) Histogram() Histogram {
	counts := make([]float64, len(f.Grid))
	for _, b := range f.Bins {
		counts[b]++
	}
	var h Histogram
	for i, n := range counts {
		if n > 0 {
			h.push(f.Grid[i], n)
		}
	}
	return h
}
