package firmware

import (
	"fmt"
	"math"

	"fewbits/codec"
)

// Loss compares the integer table with the real-valued one over the 65,536
// words. The cells are the same, so only the rounding of the values counts.
type Loss struct {
	// Weighted says that the means are weighted, not over all words alike.
	Weighted bool
	// RealMSE and TableMSE are mean squared errors, full scale = 1.0.
	RealMSE, TableMSE float64
	// DB is 10 log10(TableMSE/RealMSE): 0 for no loss, negative where
	// rounding happens to help; NaN where RealMSE is 0 and TableMSE is not.
	DB float64
	// Largest is the largest change of a value, full scale = 1.0.
	Largest float64
	// Held counts the values beyond the 16-bit range that were held at its
	// end; Unreached the cells that no word reaches; Merged the cells whose
	// level equals their lower neighbour's though the values differ.
	Held, Unreached, Merged int
}

// lossOf measures t against s.
func lossOf(s *codec.Staircase, t *Table, index []uint16, weights []float64) (Loss, error) {
	total, err := weigh(weights)
	if err != nil {
		return Loss{}, err
	}
	var l Loss
	for i, k := range index {
		w := 1.0
		if weights != nil {
			w = weights[i]
		}
		x := float64(i-32768) / 32768
		e, q := x-s.Values[k], x-float64(t.Levels[k])/32768
		l.RealMSE += float64(w*e) * e
		l.TableMSE += float64(w*q) * q
	}
	l.RealMSE /= total
	l.TableMSE /= total
	l.DB = decibels(l.RealMSE, l.TableMSE)
	l.inspect(s, t)
	l.Weighted = weights != nil
	return l, nil
}

func decibels(before, after float64) float64 {
	switch {
	case after == before:
		return 0
	case before == 0:
		return math.NaN()
	}
	return 10 * math.Log10(after/before)
}

// weigh checks the weights and returns their sum.
func weigh(weights []float64) (float64, error) {
	if weights == nil {
		return 1 << 16, nil
	}
	if len(weights) != 1<<16 {
		return 0, fmt.Errorf("%d weights: want one for each of the 65536 words", len(weights))
	}
	total := 0.0
	for i, w := range weights {
		if !(w >= 0 && w <= math.MaxFloat64) {
			return 0, fmt.Errorf("weight %g of word %d: want a finite number of 0 or more", w, i-32768)
		}
		total += w
	}
	if !(total > 0 && total <= math.MaxFloat64) {
		return 0, fmt.Errorf("weights sum to %g: want a finite number above 0", total)
	}
	return total, nil
}

// inspect counts what became of the cells.
func (l *Loss) inspect(s *codec.Staircase, t *Table) {
	for k, y := range s.Values {
		l.Largest = math.Max(l.Largest, math.Abs(y-float64(t.Levels[k])/32768))
		if r := math.Round(y * 32768); r < -32768 || r > 32767 {
			l.Held++
		}
		if _, _, ok := t.Span(k); !ok {
			l.Unreached++
		}
		if k > 0 && t.Levels[k] == t.Levels[k-1] && y != s.Values[k-1] {
			l.Merged++
		}
	}
}

// Sentence sums the loss up in words, no full stop.
func (l Loss) Sentence() string {
	over := "over all words alike"
	if l.Weighted {
		over = "over words as they occurred"
	}
	s := fmt.Sprintf("%+.4f dB of noise %s", l.DB, over)
	if l.DB != l.DB {
		s = fmt.Sprintf("mean squared error 0 becomes %.3g of full scale squared %s", l.TableMSE, over)
	}
	for _, c := range []struct {
		n    int
		what string
	}{{l.Held, "levels held at full scale"}, {l.Merged, "neighbouring levels became equal"}, {l.Unreached, "cells no word reaches"}} {
		if c.n > 0 {
			s += fmt.Sprintf(", %s: %d", c.what, c.n)
		}
	}
	return s
}
