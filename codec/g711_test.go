package codec

import (
	"bufio"
	"fmt"
	"math"
	"os"
	"slices"
	"testing"

	"github.com/zaf/g711"
)

type cell711 struct{ code, low, high, out int }

// published711 reads the 256 cells in 16-bit units. Source: ITU-T Rec. G.711
// (11/1988), Tables 1a/1b and 2a/2b, rebuilt from the segment rules by an
// independent program.
func published711(t *testing.T, law string) []cell711 {
	f, err := os.Open("testdata/g711_" + law + ".csv")
	if err != nil {
		t.Fatal(err)
	}
	defer f.Close()
	var cells []cell711
	for lines := bufio.NewScanner(f); lines.Scan(); {
		var c cell711
		if n, _ := fmt.Sscanf(lines.Text(), "%d,%d,%d,%d", &c.code, &c.low, &c.high, &c.out); n == 4 {
			cells = append(cells, c)
		}
	}
	if len(cells) != 256 {
		t.Fatalf("%d cells in the table: want 256", len(cells))
	}
	return cells
}

func laws711() map[string]*Staircase {
	return map[string]*Staircase{"ulaw": G711Mu(), "alaw": G711A()}
}

func TestG711CellsAreTheRecommendations(t *testing.T) {
	for law, s := range laws711() {
		if err := s.Check(); err != nil {
			t.Fatalf("%s: %v", law, err)
		}
		at := map[int]int{}
		for k, c := range s.Codes {
			at[int(c)] = k
		}
		for _, c := range published711(t, law) {
			k, ok := at[c.code]
			if !ok {
				t.Fatalf("%s: code %#02x is missing", law, c.code)
			}
			if got := s.Values[k] * 32768; got != float64(c.out) {
				t.Errorf("%s: code %#02x decodes to %g, want %d", law, c.code, got, c.out)
			}
			lo, hi := s.Lo, s.Hi
			if k > 0 {
				lo = s.Thresholds[k-1]
			}
			if k < 255 {
				hi = s.Thresholds[k]
			}
			if lo*32768 != float64(c.low) || hi*32768 != float64(c.high) {
				t.Errorf("%s: code %#02x covers [%g, %g], want [%d, %d]", law, c.code, lo*32768, hi*32768, c.low, c.high)
			}
		}
	}
}

// TestG711AgainstLibrary codes all 65,536 words and explains every difference
// from an independent general-purpose library (github.com/zaf/g711 v1.4.0).
// Its encoders take the one's complement of negative words, ours the
// magnitude on the real amplitude with ties outwards. They may differ only
// where a negative word's magnitude is one of the 127 decision values, and
// then by one cell.
func TestG711AgainstLibrary(t *testing.T) {
	encode := map[string]func(int16) uint8{"ulaw": g711.EncodeUlawFrame, "alaw": g711.EncodeAlawFrame}
	decode := map[string]func(uint8) int16{"ulaw": g711.DecodeUlawFrame, "alaw": g711.DecodeAlawFrame}
	for law, s := range laws711() {
		cell := map[uint8]int{}
		for k, c := range s.Codes {
			cell[uint8(c)] = k
			if got := decode[law](uint8(c)); float64(got) != s.Values[k]*32768 {
				t.Errorf("%s: code %#02x: library decodes %d, we %g", law, c, got, s.Values[k]*32768)
			}
		}
		differ := 0
		for w := -32768; w <= 32767; w++ {
			x := float64(w) / 32768
			ours, theirs := s.Index(x), cell[encode[law](int16(w))]
			if ours == theirs {
				continue
			}
			differ++
			if w > 0 || abs(ours-theirs) != 1 || !onDecision(s, x) {
				t.Errorf("%s: word %d: cell %d, library %d: not explained", law, w, ours, theirs)
			}
		}
		if differ != 127 {
			t.Errorf("%s: %d words differ, want 127", law, differ)
		}
	}
}

// onDecision reports whether x is a decision value.
func onDecision(s *Staircase, x float64) bool {
	_, found := slices.BinarySearch(s.Thresholds, x)
	return found
}

func abs(n int) int { return max(n, -n) }

// TestMilliwatt decodes the digital milliwatt of clause 5 (Tables 5 and 6) and
// finds the load capacity printed there: +3.14 dBm0 (A-law), +3.17 dBm0
// (mu-law). Code sequences from memory, confirmed by the printed capacity.
func TestMilliwatt(t *testing.T) {
	for _, row := range []struct {
		s     *Staircase
		codes []uint16
		tmax  float64
	}{
		{G711Mu(), []uint16{0x1E, 0x0B, 0x0B, 0x1E, 0x9E, 0x8B, 0x8B, 0x9E}, 3.17},
		{G711A(), []uint16{0x34, 0x21, 0x21, 0x34, 0xB4, 0xA1, 0xA1, 0xB4}, 3.14},
	} {
		var energy float64
		for _, c := range row.codes {
			for k := range row.s.Codes {
				if row.s.Codes[k] == c {
					energy += row.s.Values[k] * row.s.Values[k]
				}
			}
		}
		amplitude := math.Sqrt(2 * energy / float64(len(row.codes)))
		if got := 20 * math.Log10(row.s.Hi/amplitude); math.Abs(got-row.tmax) > 0.005 {
			t.Errorf("load capacity %.4f dBm0, the Recommendation prints %+.2f", got, row.tmax)
		}
	}
}
