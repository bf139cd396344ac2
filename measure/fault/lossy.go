package fault

import (
	"fmt"
	"slices"
)

const (
	// holeDepth is how far below its own background, in dB, a band must fall
	// to be a hole. The background is the level it stays above in three
	// quarters of the segments with sound; noise averaged over the 8 bins of a
	// band falls that far less than once in 10,000 times.
	holeDepth = 18.0
	// holeFloor is the frequency in Hz above which holes are looked for:
	// below, the harmonics of a voice leave gaps of their own.
	holeFloor = 2000.0
	// holeQuiet: in a segment whose median band is this far below its
	// background, in dB, everything is down, as in a fade or behind a gate.
	holeQuiet = 4.0
	// holeCount and holeShare are the least number of holes and their least
	// share of the band-segments looked at. Measured on recorded speech never
	// coded: at most 0.0021, on synthetic speech 0.0033; after perceptual coders
	// at low rates up to 0.05.
	holeCount, holeShare = 5, 0.004
	// holeSegments and holeBands are the least to judge by.
	holeSegments, holeBands = 20, 4
)

// lossySource reports bands that drop out for moments while their neighbours
// sound on: a perceptual coder codes a band as nothing where it deems it
// masked, and no microphone does.
func lossySource(s *Scan, c Context) []Finding {
	h := s.spectra.holes(s.spectra.rounding(s.lsb(c)))
	share := float64(h.found) / float64(max(h.looked, 1))
	if h.found < holeCount || share < holeShare {
		return nil
	}
	return one(Finding{
		Kind: "lossy-source", Severity: Warning, Value: share, Unit: "share",
		Sentence: fmt.Sprintf("lossy source suspected: single bands above %s fall %.0f dB or more under their own background for moments while the others sound on (%d times, %s of the places looked at, most often at %s), as perceptual coders leave them",
			hertz(holeFloor), holeDepth, h.found, percent(share), hertz(h.worst)),
		Advice: "take an uncoded recording if there is one; a strong noise suppressor leaves such holes too. Level and amplitude figures suffer little, noise in the holes is heard but not masked",
	})
}

// census is what looking for holes found.
type census struct {
	found, looked int
	worst         float64 // Hz, the middle of the band with most holes
}

// holes looks for holes in pairs of bands that stand far enough above the
// ground (rounding noise, dB).
func (s *spectra) holes(ground float64) census {
	segments := s.sounding()
	if len(segments) < holeSegments {
		return census{}
	}
	first := 0
	for s.hertz(2*first) < holeFloor {
		first++
	}
	rows, usable := relative(segments, first, ground+holeDepth+3)
	if usable < holeBands {
		return census{}
	}
	var h census
	perBand := make([]int, len(rows[0]))
	for _, row := range rows {
		if median(row) < -holeQuiet {
			continue
		}
		for j, v := range row {
			if v != v { // a band not looked at
				continue
			}
			h.looked++
			if v < -holeDepth {
				h.found++
				perBand[j]++
			}
		}
	}
	most := slices.Index(perBand, slices.Max(perBand))
	h.worst = (s.hertz(2*(first+most)) + s.hertz(2*(first+most+1))) / 2
	return h
}
