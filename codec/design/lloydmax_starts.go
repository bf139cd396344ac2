package design

import (
	"math"
	"slices"
)

// domain is where the values being solved live.
type domain struct {
	d      Density
	lo, hi float64
	mirror bool // values below 0 are mirror images
	odd    bool // mirror only: a value is fixed at 0
}

// whole is the whole support.
func whole(d Density) domain {
	lo, hi := d.Support()
	return domain{d: d, lo: lo, hi: hi}
}

// unfold returns the table of the values solved.
func (s domain) unfold(y []float64) []float64 {
	if !s.mirror {
		return slices.Clone(y)
	}
	out := make([]float64, 0, 2*len(y)+1)
	for k := range y {
		out = append(out, -y[len(y)-1-k])
	}
	if s.odd {
		out = append(out, 0)
	}
	return append(out, y...)
}

// startPowers are the companders tried first (1/2 sends Newton's method astray
// where tails are heavy): 1/3 is the optimum of many
// levels, 1/4 gives the tails more.
var startPowers = []float64{1. / 3, 0.25}

// powers are the starts a table deserves: one where the optimum is unique, or
// where so many levels follow the companding law closely.
func powers(d Density, n int) []float64 {
	if d.LogConcave() || n > 128 {
		return startPowers[:1]
	}
	return startPowers
}

// mirrorStarts are companders on the half line.
func mirrorStarts(d Density, n int) (tries []attempt) {
	_, hi := d.Support()
	half := domain{d: d, hi: hi, mirror: true, odd: n%2 == 1}
	for _, p := range powers(d, n) {
		tries = append(tries, attempt{half, upper(newLaw(d, true, toThe(p)), n, 1, false)})
	}
	return tries
}

// wholeStarts are companders on the whole support.
func wholeStarts(d Density, n int) (tries []attempt) {
	for _, p := range powers(d, n) {
		l := newLaw(d, false, toThe(p))
		y := make([]float64, n)
		for k := range y {
			y[k] = l.invert(float64(2*k+1)/float64(2*n), false)
		}
		tries = append(tries, attempt{whole(d), y})
	}
	return tries
}

// splitStarts are tables of an even density with more levels above 0 than
// below: with a cell that straddles 0, where a peaked density has its optimum
// (at even n one more above than below), and with a threshold near 0. Either
// side is a compander of its own.
func splitStarts(d Density, n int) (tries []attempt) {
	l := newLaw(d, true, math.Cbrt)
	for more := 1; more <= 3; more++ {
		middle := (n - more) % 2 // 1 where a cell straddles 0
		below := (n - more - middle) / 2
		if n <= more || middle == 0 && below == 0 {
			continue
		}
		y := make([]float64, middle, n)
		y = append(y, upper(l, 2*(below+more)+middle, 1, false)...)
		for _, x := range upper(l, 2*below+middle, 1, false) {
			y = append(y, -x)
		}
		slices.Sort(y)
		tries = append(tries, attempt{whole(d), y})
	}
	return tries
}
