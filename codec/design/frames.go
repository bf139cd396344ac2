package design

import (
	"fmt"
	"math"
	"slices"
)

// Take is what one recording gives to a segmental design: its in-range frames
// as 16-bit words (amplitude = word / 32768) and its lsb (full scale = 1.0),
// whose rounding noise n lsb^2/12 is the least error the open value counts.
type Take struct {
	Frames [][]int16
	LSB    float64
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
	bin := f.gridOf(takes)
	for i, t := range takes {
		if !(t.LSB >= 0 && t.LSB <= 1) {
			return Frames{}, fmt.Errorf("recording %d: lsb %g: want 0 to 1", i, t.LSB)
		}
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

// Mean returns the mean limited SNR of the frames in dB, segsnr_db or, with
// open, segsnr_open_db, when coded with a staircase of the given thresholds
// and values (ties to the upper cell).
func (f Frames) Mean(thresholds, values []float64, open bool) float64 {
	return f.meanDB(f.errors(f.loss(thresholds, values), nil), open)
}

// loss is the squared error of each value of the grid.
func (f Frames) loss(thresholds, values []float64) []float64 {
	loss := make([]float64, len(f.Grid))
	k := 0
	for i, x := range f.Grid {
		for k < len(thresholds) && thresholds[k] <= x {
			k++
		}
		loss[i] = (x - values[k]) * (x - values[k])
	}
	return loss
}

// errors sums loss (squared error of each bin) over each frame.
func (f Frames) errors(loss, into []float64) []float64 {
	into = slices.Grow(into[:0], f.Len())[:f.Len()]
	for i := range into {
		var a, b float64
		bins := f.Bins[f.Starts[i]:f.Starts[i+1]]
		for len(bins) >= 2 {
			a += loss[bins[0]]
			b += loss[bins[1]]
			bins = bins[2:]
		}
		if len(bins) == 1 {
			a += loss[bins[0]]
		}
		into[i] = a + b
	}
	return into
}

// meanDB is the exact measure from the frames' error energies.
func (f Frames) meanDB(errors []float64, open bool) float64 {
	var sum float64
	for i, e := range errors {
		sum += f.frameDB(i, e, open)
	}
	return sum / float64(len(errors))
}

// frameDB is the limited SNR of frame i with error energy e.
func (f Frames) frameDB(i int, e float64, open bool) float64 {
	upper := f.Upper
	if open {
		upper, e = f.OpenUpper, math.Max(e, f.Floor[i])
	}
	if e == 0 {
		return upper
	}
	return math.Max(f.Lower, math.Min(upper, 10*math.Log10(f.Signal[i]/e)))
}

// folded returns the frames on |x|, with a bin for 0 even where none occurs.
func (f Frames) folded() Frames {
	half := f
	at := map[float64]uint16{0: 0}
	h := Histogram{Values: f.Grid, Weights: make([]float64, len(f.Grid))}.Fold()
	half.Grid = h.Values
	if h.Values[0] != 0 {
		half.Grid = append([]float64{0}, h.Values...)
	}
	for i, x := range half.Grid {
		at[x] = uint16(i)
	}
	to := make([]uint16, len(f.Grid))
	for i, x := range f.Grid {
		to[i] = at[math.Abs(x)]
	}
	half.Bins = make([]uint16, len(f.Bins))
	for i, b := range f.Bins {
		half.Bins[i] = to[b]
	}
	return half
}
