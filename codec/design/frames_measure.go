package design

import (
	"math"
	"slices"
)

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
