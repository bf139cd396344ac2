package codec

import "math"

// Grid is a staircase on the 65,536 values of 16-bit audio: Index[w+32768] is
// the cell of the word w, whose amplitude is w/32768.
type Grid struct {
	Index  []uint16
	Values []float64
	Lo, Hi float64
}

// Grid tabulates s: one walk along the words and the thresholds.
func (s *Staircase) Grid() Grid {
	g := Grid{Index: make([]uint16, 1<<16), Values: s.Values, Lo: s.Lo, Hi: s.Hi}
	k := 0
	for i := range g.Index {
		x := float64(i-32768) / 32768
		for k < len(s.Thresholds) && s.Thresholds[k] <= x {
			k++
		}
		g.Index[i] = uint16(k)
		if s.Tie == TieOut && x < 0 && k > 0 && s.Thresholds[k-1] == x {
			g.Index[i]--
		}
	}
	return g
}

// IsMirror reports whether s is its own mirror image within rel of its
// outermost value.
func (s *Staircase) IsMirror(rel float64) bool {
	n := len(s.Values)
	tol := rel * math.Max(math.Abs(s.Values[0]), math.Abs(s.Values[n-1]))
	for k := range n / 2 {
		if !(math.Abs(s.Values[k]+s.Values[n-1-k]) <= tol) {
			return false
		}
	}
	for k := range (n - 1) / 2 {
		if !(math.Abs(s.Thresholds[k]+s.Thresholds[n-2-k]) <= tol) {
			return false
		}
	}
	return true
}
