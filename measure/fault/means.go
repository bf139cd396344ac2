package fault

import "math"

// meanSeconds is the length of the blocks whose means are compared.
const meanSeconds = 0.1

// means keeps the mean of blocks of 100 ms, to tell DC from the chance that a
// sum of sound does not come out at zero. Blocks count from the channel's
// start; a part that begins within one keeps the end of that block apart.
type means struct {
	size             int
	head, headFilled float64 // sum and samples of the block begun before
	headSize         float64
	sum, filled      float64 // of the running block
	blocks, mean, m2 float64 // of the block means; m2 sums squares about the mean
}

func newMeans(rate int, start int64) means {
	size := int64(max(1, int(meanSeconds*float64(rate))))
	return means{size: int(size), headSize: float64((size - start%size) % size)}
}

// room is how many samples the head or the running block still take.
func (m *means) room() int {
	if m.headFilled < m.headSize {
		return int(m.headSize - m.headFilled)
	}
	return m.size - int(m.filled)
}

func (m *means) add(x []float64) {
	for len(x) > 0 {
		n := min(m.room(), len(x))
		sum := 0.0
		for _, v := range x[:n] {
			sum += v
		}
		m.take(sum, float64(n))
		x = x[n:]
	}
}

func (m *means) addWords(words []int16) {
	for len(words) > 0 {
		n := min(m.room(), len(words))
		sum := int64(0)
		for _, w := range words[:n] {
			sum += int64(w)
		}
		m.take(float64(sum)/(1<<15), float64(n))
		words = words[n:]
	}
}

// take adds a sum of n samples that fit into the head or the running block.
func (m *means) take(sum, n float64) {
	if m.headFilled < m.headSize {
		m.head, m.headFilled = m.head+sum, m.headFilled+n
		return
	}
	m.sum, m.filled = m.sum+sum, m.filled+n
	if int(m.filled) == m.size {
		m.pool(1, m.sum/m.filled, 0)
		m.sum, m.filled = 0, 0
	}
}

// pool adds n block means of that mean and sum of squares about it. Source:
// T. F. Chan, G. H. Golub, R. J. LeVeque, Amer. Statist. 37 (1983), eq. 2.1.
func (m *means) pool(n, mean, m2 float64) {
	if n == 0 {
		return
	}
	all := m.blocks + n
	d := mean - m.mean
	m.m2 += m2 + d*d*m.blocks*n/all
	m.mean += d * n / all
	m.blocks = all
}

// join appends the means of the part that follows.
func (m *means) join(o *means) {
	if o.headFilled > 0 {
		m.take(o.head, o.headFilled)
	}
	m.pool(o.blocks, o.mean, o.m2)
	if o.filled > 0 {
		m.take(o.sum, o.filled)
	}
}

// deviation is the standard error of the overall mean as the scatter of the
// block means shows it; infinite with fewer than 4 blocks.
func (m *means) deviation() float64 {
	if m.blocks < 4 {
		return math.Inf(1)
	}
	return math.Sqrt(m.m2 / (m.blocks - 1) / m.blocks)
}
