// Package design finds staircases: for an amplitude density or for data, it
// returns the decision thresholds and reconstruction values that serve an aim
// best, and says how sure that is.
//
// It declares the small interfaces and plain data it consumes (Density,
// Histogram, Frames); measure/model satisfies the former, cmd hands over the
// latter.
package design

import "fmt"

// Proof says what is known about a Solution's optimality.
type Proof string

const (
	// Exact: the global optimum on the given histogram, by exhaustive dynamic
	// programming or an equivalent exact method.
	Exact Proof = "optimal, exact"
	// Unique: the only stationary point, by theorem for log-concave densities
	// (Fleischer 1964; Trushkin 1982).
	Unique Proof = "optimal, unique for a log-concave density"
	// Local: the best of several starts; no proof of global optimality.
	Local Proof = "local, best of k"
	// Closed: a closed form, nothing was searched.
	Closed Proof = "closed form"
)

// Solution is a designed quantizer and how it was reached.
type Solution struct {
	// Thresholds (N-1) and Values (N) ascend, in the units of the density or
	// the data (full scale = 1.0 for recordings).
	Thresholds, Values []float64
	// MSE is the mean squared error under the density or the data, in squared
	// amplitude units.
	MSE float64
	// Entropy is the first-order entropy of the indices under the density or
	// the data, in bits.
	Entropy float64
	// Aim is the figure reached where the aim is not the MSE (segmental aims:
	// mean frame SNR in dB); 0 otherwise.
	Aim float64
	// Rounds counts iterations; Residual is max |value - centroid| / cell
	// width (0 where exact; the outermost, endless cells use the width up to
	// the mirrored threshold, 2y - t).
	Rounds   int
	Residual float64
	// Proof says what is known of optimality; Starts is k for Local.
	Proof  Proof
	Starts int
	// Notes are sentences worth printing (what symmetry cost, what was tied).
	Notes []string
	// Trace is the convergence, one number a round; TraceOf says of what, with
	// its unit ("mean squared error"). Filled where asked for, or for free.
	Trace   []float64
	TraceOf string
}

// Claim is Proof in words to print, with the number of starts where that is
// what stands behind it.
func (s Solution) Claim() string {
	if s.Proof == Local {
		return fmt.Sprintf("local, best of %d", max(1, s.Starts))
	}
	return string(s.Proof)
}

// Symmetry says whether a table must be its own mirror image.
type Symmetry uint8

const (
	// Mirror: values[k] = -values[N-1-k].
	Mirror Symmetry = iota
	// Free: no constraint.
	Free
)

// Histogram is weighted data: distinct ascending values and the weight of
// each (> 0; counts, or counts times a weight).
type Histogram struct {
	Values  []float64
	Weights []float64
}
