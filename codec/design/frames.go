package design

import "fmt"

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
	unit := onOneGrid(all)
	bin := f.gridOf(all, unit)
	for _, t := range all {
		for _, words := range t.Frames {
			f.push(words, bin, unit, t.LSB)
		}
	}
	if len(f.Signal) == 0 {
		return Frames{}, fmt.Errorf("no frame in range with signal in %d recordings", len(takes))
	}
	return f, nil
}

// gridOf sets Grid to the words that occur and returns their positions.
func (f *Frames) gridOf(takes []Take, unit float64) (bin []uint16) {
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
			f.Grid = append(f.Grid, float64(i-1<<15)*unit)
		}
	}
	return bin
}

func (f *Frames) push(words []int16, bin []uint16, unit, lsb float64) {
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
	f.Signal = append(f.Signal, float64(energy)*unit*unit)
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
