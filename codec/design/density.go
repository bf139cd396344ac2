package design

import (
	"math"
	"slices"
)

// Density is what a designer consumes of an amplitude density. Two optional
// methods help: Even() bool says p(-x) = p(x), which is probed otherwise;
// Knots() []float64 lists the points between which p is smooth, 0 otherwise.
type Density interface {
	// Cell integrates the density p over (a, b), a < b, infinite ends allowed:
	// prob is the probability; offset the centroid less the cell's anchor,
	// which is a where a >= 0, b where b <= 0, and 0 where the cell straddles
	// 0; about the second moment about the centroid, not divided by prob.
	// Relative to the anchor no digits are lost in narrow cells.
	Cell(a, b float64) (prob, offset, about float64)
	// PDF is p(x); +Inf is allowed at 0.
	PDF(x float64) float64
	// Quantile inverts the distribution function, 0 < p < 1.
	Quantile(p float64) float64
	// Support is where p may be above 0.
	Support() (lo, hi float64)
	// LogConcave reports whether log p is concave: then a stationary quantizer
	// is the only one (Fleischer 1964; Trushkin 1982).
	LogConcave() bool
}

// anchor is the point that a cell's offset counts from.
func anchor(a, b float64) float64 {
	switch {
	case a >= 0:
		return a
	case b <= 0:
		return b
	}
	return 0
}

// even reports whether p(-x) = p(x): as d says, else by probing.
func even(d Density) bool {
	if e, ok := d.(interface{ Even() bool }); ok {
		return e.Even()
	}
	lo, hi := d.Support()
	if lo != -hi {
		return false
	}
	for i := 1; i < 8; i++ {
		x := d.Quantile(0.5 + float64(i)/16)
		p, q := d.PDF(x), d.PDF(-x)
		if !(math.Abs(p-q) <= 1e-9*p) || math.Abs(d.Quantile(0.5-float64(i)/16)+x) > 1e-9*math.Abs(x) {
			return false
		}
	}
	return true
}

// breaks are the support's ends and the knots and 0 within, ascending.
func breaks(d Density) []float64 {
	lo, hi := d.Support()
	out := []float64{lo, hi}
	var knots []float64
	if k, ok := d.(interface{ Knots() []float64 }); ok {
		knots = k.Knots()
	}
	for _, x := range append([]float64{0}, knots...) {
		if x > lo && x < hi {
			out = append(out, x)
		}
	}
	slices.Sort(out)
	return slices.Compact(out)
}

// Figures are what a staircase does to a density.
type Figures struct {
	// MSE is the mean squared error, squared amplitude units; Granular and
	// Overload are its parts within and beyond the overload points.
	MSE, Granular, Overload float64
	// Entropy is that of the indices, bits.
	Entropy float64
	// Overloaded is the probability beyond the overload points: the outermost
	// thresholds mirrored at the outermost values, 2y - t (a convention).
	Overloaded float64
}

// Evaluate codes d with a staircase of N values (ascending) and N-1
// thresholds. With one value there is no overload point: all counts as
// granular.
func Evaluate(d Density, thresholds, values []float64) Figures {
	var f Figures
	f.MSE, f.Entropy = EvaluateDensity(d, thresholds, values)
	if n := len(values); n > 1 {
		lo, hi := d.Support()
		left, right := 2*values[0]-thresholds[0], 2*values[n-1]-thresholds[n-2]
		p, mse := About(d, lo, min(left, hi), values[0])
		q, more := About(d, max(right, lo), hi, values[n-1])
		f.Overloaded, f.Overload = p+q, mse+more
	}
	f.Granular = max(0, f.MSE-f.Overload)
	return f
}

// EvaluateDensity returns the mean squared error and the entropy in bits of a
// staircase under d.
func EvaluateDensity(d Density, thresholds, values []float64) (mse, entropy float64) {
	lo, hi := d.Support()
	for k, y := range values {
		a, b := lo, hi
		if k > 0 {
			a = max(a, thresholds[k-1])
		}
		if k < len(thresholds) {
			b = min(b, thresholds[k])
		}
		p, e := About(d, a, b, y)
		mse += e
		if p > 0 {
			entropy -= p * math.Log2(p)
		}
	}
	return mse, max(0, entropy)
}

// About returns the probability of (a, b) and its second moment about y; 0
// where a >= b.
func About(d Density, a, b, y float64) (prob, moment float64) {
	if !(a < b) {
		return 0, 0
	}
	p, off, about := d.Cell(a, b)
	if !(p > 0) {
		return 0, 0
	}
	e := off - (y - anchor(a, b))
	return p, about + p*e*e
}
