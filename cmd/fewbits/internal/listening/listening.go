// Package listening turns a run's reconstructions into blind material for
// listening in a room: level-matched pairs under neutral names, an answer sheet
// to print, a table for the answers and a key kept apart; and it scores the
// answers with the exact sign test (Dixon and Mood, "The Statistical Sign Test",
// J. Am. Stat. Assoc. 41, 1946).
//
// Both sides of a pair play at 1/b, b = <x,y>/<x,x> over the frames in range: the
// part of the reconstruction that is the recording then has the recording's own
// level, and idle noise counts for nothing.
package listening

import (
	"fmt"
	"math"
	"strings"

	"fewbits/samples"
)

// The files beside the pairs.
const (
	SheetFile   = "answers.html" // to print and fill in by hand
	AnswersFile = "answers.csv"  // to type the answers into
	KeyFile     = "key.csv"      // which side is which design; written last
)

// Pair is one clip coded by two designs A and B.
type Pair struct {
	Clip         string  // as the run names it
	PathA, PathB string  // reconstructions: same rate, channels and frames
	B1, B2       float64 // b of A and of B, above 0 and finite
}

// Report says what was made and what was done to all files of the set.
type Report struct {
	AttenuationDB float64  // by how much all files went down so that none clips, 0 or more
	LargestGainDB float64  // the largest gain that a side plays at, AttenuationDB taken off
	Reference     string   // the loudest pair: the one to set the playback level on
	Files         []string // the pairs' names in order
}

// Write makes pair-01.wav and so on, 24-bit: one side, half a second of silence,
// the other; then the answer sheet, the table for answers and the key. dir is
// there already. B goes first as often as A, up to one, in an order drawn from
// the seed; same input, same bytes. Where a sample would pass full scale all
// files go down by the same factor. Nothing is replaced: a file in the way
// matches fs.ErrExist. Each file appears whole; on failure none stays.
//
// It panics without pairs and where both designs have one name.
func Write(dir, nameA, nameB string, pairs []Pair, seed uint64) (Report, error) {
	if len(pairs) == 0 || nameA == nameB {
		panic(fmt.Sprintf("listening: %d pairs of %q and %q", len(pairs), nameA, nameB))
	}
	set, err := arrange(nameA, nameB, pairs, seed)
	if err != nil {
		return Report{}, err
	}
	m := material{dir: dir}
	if err := m.write(set, seed); err != nil {
		m.remove()
		return Report{}, err
	}
	return set.report, nil
}

// set is the material before it is written.
type set struct {
	items  []item
	report Report
}

// item is one pair in playing order.
type item struct {
	file, clip    string
	order         string // "AB" or "BA"
	first, second side
	info          samples.Info // of either side
}

// side is one half of a pair.
type side struct {
	path, design string
	gain         float64
}

// arrange draws the order and finds the gains.
func arrange(nameA, nameB string, pairs []Pair, seed uint64) (set, error) {
	var s set
	sides := make([]soundOf, len(pairs))
	for i, p := range pairs {
		var err error
		if sides[i], err = examine(p); err != nil {
			return s, err
		}
	}
	common := commonGain(sides)
	s.report = Report{LargestGainDB: math.Inf(-1)}
	if common < 1 {
		s.report.AttenuationDB = -decibels(common)
	}
	loudest := math.Inf(-1)
	swapped := order(len(pairs), seed)
	for i, p := range pairs {
		a, b := side{p.PathA, nameA, common / p.B1}, side{p.PathB, nameB, common / p.B2}
		it := item{file: fileName(i, len(pairs)), clip: p.Clip, order: "AB", first: a, second: b, info: sides[i].info}
		if swapped[i] {
			it.order, it.first, it.second = "BA", b, a
		}
		s.items = append(s.items, it)
		s.report.Files = append(s.report.Files, it.file)
		s.report.LargestGainDB = max(s.report.LargestGainDB, decibels(a.gain), decibels(b.gain))
		if sides[i].power > loudest {
			loudest, s.report.Reference = sides[i].power, it.file
		}
	}
	return s, nil
}

// fileName gives names that sort as they are numbered.
func fileName(i, n int) string {
	return fmt.Sprintf("pair-%0*d.wav", max(2, len(fmt.Sprint(n))), i+1)
}

func decibels(gain float64) float64 { return 20 * math.Log10(gain) }

// stem is a pair's name without its ending, as sheets and tables show it.
func stem(file string) string { return strings.TrimSuffix(file, ".wav") }
