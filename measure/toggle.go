package measure

import "fmt"

// Toggles counts how often the output of each of several designs changes from
// one sample to the next: on quiet frames, what idle noise is made of.
//
// Cells stand side by side in 64-bit words, value-major, and are compared all
// at once: eight where no design has more than 256 cells within the peak, else
// four. Cells that share a value count as one: G.711 mu-law's two zeros sound
// alike.
type Toggles struct {
	designs, stride int
	peak            int
	bits            int // of a lane
	low, top        uint64
	table           []uint64
}

// NewToggles tabulates the designs for words of a magnitude of at most peak, 0
// to 32,768: quiet frames reach no further (PeakOf), so that the table is
// small.
func NewToggles(designs []Lookup, peak int) *Toggles {
	if peak < 0 || peak > words16/2 {
		panic(fmt.Sprintf("measure: NewToggles with a peak of %d, want 0 to %d", peak, words16/2))
	}
	t := &Toggles{designs: len(designs), peak: peak, bits: 8, low: 0x7F7F_7F7F_7F7F_7F7F, top: 0x8080_8080_8080_8080}
	cells := make([][]uint16, len(designs))
	for d := range designs {
		cells[d] = t.cells(&designs[d])
		if cells[d][len(cells[d])-1] > 0xFF {
			t.bits, t.low, t.top = 16, 0x7FFF_7FFF_7FFF_7FFF, 0x8000_8000_8000_8000
		}
	}
	lanes := 64 / t.bits
	t.stride = (len(designs) + lanes - 1) / lanes
	t.table = make([]uint64, t.rows()*t.stride)
	for d, column := range cells {
		for i, k := range column {
			t.table[i*t.stride+d/lanes] |= uint64(k) << (t.bits * (d % lanes))
		}
	}
	return t
}

func (t *Toggles) rows() int { return min(2*t.peak+1, words16) }

// cells numbers the outputs of a design within the peak, from 0 on.
func (t *Toggles) cells(l *Lookup) []uint16 {
	l.check()
	out := make([]uint16, t.rows())
	row := l.Index[words16/2-t.peak:][:len(out)]
	for i := 1; i < len(out); i++ {
		out[i] = out[i-1]
		if row[i] != row[i-1] && l.Values[row[i]] != l.Values[row[i-1]] {
			out[i]++
		}
	}
	return out
}

// Add adds the changes within words (one frame: the step into it is not
// counted) to changes[d] for every design. No word exceeds the peak.
func (t *Toggles) Add(words []int16, changes []int64) {
	changes = changes[:t.designs]
	room, lanes := 1<<t.bits, 64/t.bits
	for len(words) > 1 {
		n := min(len(words), room)
		for s := range t.stride {
			c := t.column(words[:n], s)
			for d := lanes * s; d < min(t.designs, lanes*(s+1)); d++ {
				changes[d] += int64(c & uint64(room-1))
				c >>= t.bits
			}
		}
		words = words[n-1:]
	}
}

// column counts the changes of the designs of one column, a lane each.
func (t *Toggles) column(words []int16, s int) (count uint64) {
	table, stride, low, top := t.table[s:], t.stride, t.low, t.top
	shift := t.bits - 1
	last := table[(int(words[0])+t.peak)*stride]
	for _, w := range words[1:] {
		now := table[(int(w)+t.peak)*stride]
		x := now ^ last
		// The top bit of a lane is set where any bit of it differs.
		count += ((x&low + low) | x) & top >> shift
		last = now
	}
	return count
}

// AddToggles adds to the tally of one design the changes within a quiet frame
// of n samples.
func (t *Tally) AddToggles(changes int64, n int) {
	t.Toggled += changes
	t.Steps += int64(max(0, n-1))
}

var toggleShare = Measure{
	Name: "idle_toggling", Unit: "share",
	Means: "share of samples whose output differs from the one before, within the frames of idle_dbov",
	Of:    func(t *Tally) float64 { return share(t.Toggled, t.Steps) },
}
