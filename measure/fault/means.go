package fault

import "math"

// meanSeconds is the length of the blocks whose means are compared.
const meanSeconds = 0.1

// means keeps the mean of blocks of 100 ms, to tell DC from the chance that a
// sum of sound does not come out at zero.
type means struct {
	size, filled int
	sum          float64
	blocks       float64
	first, m, m2 float64 // shift, and sums of block means less the shift
}

func newMeans(rate int) means { return means{size: max(1, int(meanSeconds*float64(rate)))} }

func (m *means) add(x []float64) {
	for len(x) > 0 {
		n := min(m.size-m.filled, len(x))
		sum := m.sum
		for _, v := range x[:n] {
			sum += v
		}
		m.sum, m.filled, x = sum, m.filled+n, x[n:]
		if m.filled == m.size {
			m.close()
		}
	}
}

func (m *means) close() {
	mean := m.sum / float64(m.size)
	if m.blocks == 0 {
		m.first = mean
	}
	m.blocks++
	m.m += mean - m.first
	m.m2 += (mean - m.first) * (mean - m.first)
	m.sum, m.filled = 0, 0
}

// deviation is the standard error of the overall mean as the scatter of the
// block means shows it; infinite with fewer than 4 blocks.
func (m *means) deviation() float64 {
	if m.blocks < 4 {
		return math.Inf(1)
	}
	scatter := (m.m2 - m.m*m.m/m.blocks) / (m.blocks - 1)
	return math.Sqrt(math.Max(scatter, 0) / m.blocks)
}
