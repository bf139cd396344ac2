package design

// Density is what a designer consumes of an amplitude density.
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
