package firmware

import (
	"encoding/binary"
	"fmt"
	"hash/fnv"
	"math"
	"math/bits"
	"slices"
	"sort"

	"fewbits/codec"
)

// Table is a quantizer for 16-bit words in integers. It is made by Export and
// not to be changed.
type Table struct {
	// First is the lowest cell that a word reaches, First+len(Decisions) the
	// highest.
	First int
	// Decisions are words, not descending: the cell of w is First plus the
	// number of decisions that are <= w. Equal ones enclose a cell no word
	// reaches.
	Decisions []int16
	// Levels are the values of all cells in Q15 (full scale = 32768), rounded
	// half away from zero and held within -32768 to 32767 (see Loss.Held).
	Levels []int16
	// Codes are the code words of all cells.
	Codes []uint16
	// Assignment is never Usual.
	Assignment Assignment
	// Loss is what rounding the values costs.
	Loss Loss

	values []int16 // by code word, 2^Bits; unused code words give 0
}

// Options are the choices of an export.
type Options struct {
	Assignment Assignment
	// Weights has 65,536 entries >= 0, that of word w at w + 32768, for the
	// loss; nil weighs all words alike.
	Weights []float64
}

// Export makes the table of s. It refuses a broken staircase, an unknown or
// unfit assignment, and weights that are not 65,536 finite numbers >= 0 with a
// sum above 0.
func Export(s *codec.Staircase, o Options) (Table, error) {
	if err := s.Check(); err != nil {
		return Table{}, err
	}
	codes, assignment, err := codesOf(s, o.Assignment)
	if err != nil {
		return Table{}, err
	}
	t := Table{Codes: codes, Assignment: assignment}
	index := s.Grid().Index
	t.decide(index)
	t.round(s.Values)
	t.Loss, err = lossOf(s, &t, index, o.Weights)
	return t, err
}

// decide finds the decision words: the lowest word above each cell.
func (t *Table) decide(index []uint16) {
	t.First = int(index[0])
	t.Decisions = make([]int16, 0, int(index[len(index)-1])-t.First)
	for i, k := range index {
		for t.First+len(t.Decisions) < int(k) {
			t.Decisions = append(t.Decisions, int16(i-32768))
		}
	}
}

// round sets the levels and lays them out by code word.
func (t *Table) round(values []float64) {
	t.Levels = make([]int16, len(values))
	t.values = make([]int16, 1<<bits.Len16(slices.Max(t.Codes)))
	for k, y := range values {
		t.Levels[k] = int16(math.Max(-32768, math.Min(32767, math.Round(y*32768))))
		t.values[t.Codes[k]] = t.Levels[k]
	}
}

// Cells is the number of cells.
func (t *Table) Cells() int { return len(t.Levels) }

// Bits is the length of a code word.
func (t *Table) Bits() int { return bits.Len(uint(len(t.values)) - 1) }

// Cell is the cell of a word.
func (t *Table) Cell(word int16) int {
	return t.First + sort.Search(len(t.Decisions), func(i int) bool { return t.Decisions[i] > word })
}

// Index is the code word of a word.
func (t *Table) Index(word int16) int { return int(t.Codes[t.Cell(word)]) }

// Value is the level of a code word in Q15. Bits above the code word's length
// are ignored, as the exported C does; an unused code word gives 0.
func (t *Table) Value(code int) int16 { return t.values[code&(len(t.values)-1)] }

// Span is the range of words of a cell; ok is false if no word reaches it.
func (t *Table) Span(cell int) (from, to int16, ok bool) {
	k := cell - t.First
	if k < 0 || k > len(t.Decisions) {
		return 0, 0, false
	}
	lo, hi := -32768, 32767
	if k > 0 {
		lo = int(t.Decisions[k-1])
	}
	if k < len(t.Decisions) {
		hi = int(t.Decisions[k]) - 1
	}
	return int16(lo), int16(hi), lo <= hi
}

// Checksum is FNV-1a (32 bits) over all words from -32768 up: of each the code
// word, then the level it decodes to, low byte first.
func (t *Table) Checksum() uint32 {
	h := fnv.New32a()
	var b [4]byte
	for i := range 1 << 16 {
		code := t.Index(int16(i - 32768))
		binary.LittleEndian.PutUint16(b[:], uint16(code))
		binary.LittleEndian.PutUint16(b[2:], uint16(t.Value(code)))
		h.Write(b[:])
	}
	return h.Sum32()
}

// String names the table in a line.
func (t *Table) String() string {
	return fmt.Sprintf("%d cells, %d-bit code words (%s)", t.Cells(), t.Bits(), t.Assignment)
}
