package measure

// Toggles counts how often the output of each of several designs changes from
// one sample to the next: on quiet frames, what idle noise is made of.
//
// Cells stand four to a 64-bit word, value-major, and are compared four at a
// time. Cells that share a value count as one: G.711 mu-law's two zeros sound
// alike.
type Toggles struct {
	designs, stride int
	table           []uint64
}

// NewToggles tabulates the designs, 128 KB each, rounded up to a multiple of
// four.
func NewToggles(designs []Lookup) *Toggles {
	t := &Toggles{designs: len(designs), stride: (len(designs) + lanes - 1) / lanes}
	t.table = make([]uint64, words16*t.stride)
	for d := range designs {
		l := &designs[d]
		l.check()
		same := firstOfValue(l.Values)
		for i, k := range l.Index {
			t.table[i*t.stride+d/lanes] |= uint64(same[k]) << (16 * (d % lanes))
		}
	}
	return t
}

// firstOfValue gives each cell the number of the first that shares its value;
// values ascend.
func firstOfValue(values []float64) []uint16 {
	out := make([]uint16, len(values))
	for k := 1; k < len(values); k++ {
		out[k] = uint16(k)
		if values[k] == values[k-1] {
			out[k] = out[k-1]
		}
	}
	return out
}

const (
	lanes    = 4
	lowBits  = 0x7FFF_7FFF_7FFF_7FFF
	topBits  = 0x8000_8000_8000_8000
	laneRoom = 1<<16 - 1 // changes a lane can count
)

// Add adds the changes within words (one frame: the step into it is not
// counted) to changes[d] for every design.
func (t *Toggles) Add(words []int16, changes []int64) {
	changes = changes[:t.designs]
	for len(words) > 1 {
		n := min(len(words), laneRoom+1)
		for s := range t.stride {
			c := t.column(words[:n], s)
			for d := lanes * s; d < min(t.designs, lanes*(s+1)); d++ {
				changes[d] += int64(c & 0xFFFF)
				c >>= 16
			}
		}
		words = words[n-1:]
	}
}

// column counts the changes of four designs, a lane of 16 bits each.
func (t *Toggles) column(words []int16, s int) (count uint64) {
	table, stride := t.table[s:], t.stride
	last := table[(int(words[0])+words16/2)*stride]
	for _, w := range words[1:] {
		now := table[(int(w)+words16/2)*stride]
		x := now ^ last
		// The top bit of a lane is set where any bit of it differs.
		count += ((x&lowBits + lowBits) | x) & topBits >> 15
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

// Toggles counts the changes of output within x, a frame of any samples.
func (s *Search) Toggles(x []float64) (changes int64) {
	for i := 1; i < len(x); i++ {
		if s.Quantize(x[i]) != s.Quantize(x[i-1]) {
			changes++
		}
	}
	return changes
}

var toggleShare = Measure{
	Name: "idle_toggling", Unit: "share",
	Means: "share of samples whose output differs from the one before, within the frames of idle_dbov",
	Of:    func(t *Tally) float64 { return share(t.Toggled, t.Steps) },
}
