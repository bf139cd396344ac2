package fault

import (
	"math"
	"slices"
)

// relative gives for each segment the level in dB of every pair of bands from
// pair first on, relative to that pair's background; NaN where the background
// is not above least (dB). usable counts the pairs above it.
func relative(segments [][]float32, first int, least float64) (rows [][]float64, usable int) {
	pairs := len(segments[0])/2 - first
	if pairs < 1 {
		return nil, 0
	}
	rows = make([][]float64, len(segments))
	for i, seg := range segments {
		rows[i] = make([]float64, pairs)
		for j := range rows[i] {
			k := 2 * (first + j)
			rows[i][j] = 10 * math.Log10((float64(seg[k])+float64(seg[k+1]))/2+1e-30)
		}
	}
	column := make([]float64, len(rows))
	for j := range pairs {
		for i := range rows {
			column[i] = rows[i][j]
		}
		slices.Sort(column)
		back := column[len(column)/4]
		if back > least {
			usable++
		} else {
			back = math.NaN()
		}
		for i := range rows {
			rows[i][j] -= back
		}
	}
	return rows, usable
}

// median of the numbers in row, leaving NaN out; row holds at least one.
func median(row []float64) float64 {
	var kept []float64
	for _, v := range row {
		if v == v {
			kept = append(kept, v)
		}
	}
	slices.Sort(kept)
	return kept[len(kept)/2]
}
