package fault

import (
	"fmt"
	"math"
)

const (
	// dcEffect is the move of a figure, in dB, from which DC draws a warning
	// (this project's definition).
	dcEffect = 0.05
	// rangeDB is how far below the active level a frame still counts as in
	// range (the default of this project).
	rangeDB = 30
	// dcSure is how many standard errors the mean must be off to count in the
	// quiet frames: the mean of sound is never exactly zero.
	dcSure = 5
)

// offCentre reports DC that moves the level, or the energy of the quietest
// frames that segmental figures count, by more than dcEffect. A mean within one
// step of the grid is left alone: no recording does better.
func offCentre(s *Scan, c Context) []Finding {
	dc2 := c.DC * c.DC
	level := -10 * math.Log10(1-dc2/math.Pow(10, c.LevelDBov/10))
	frame := 10 * math.Log10(1+dc2/math.Pow(10, (c.ActiveDBov-rangeDB)/10))
	if !(math.Abs(c.DC) > dcSure*s.means.deviation()) {
		frame = 0
	}
	if !(math.Abs(level) <= math.MaxFloat64) || !(math.Abs(c.DC) > s.lsb(c)) || !(level > dcEffect || frame > dcEffect) {
		return nil
	}
	f := Finding{
		Kind: "dc", Severity: Warning, Value: c.DC, Unit: "full scale",
		Advice: "remove it with --dc remove: it pushes quiet speech to one side of a quantizer's zero",
	}
	f.Sentence = fmt.Sprintf("DC of %.5f of full scale (%.1f dBov) raises the level by %.2f dB", c.DC, 10*math.Log10(dc2), level)
	if frame > dcEffect {
		f.Sentence += fmt.Sprintf(" and the quietest frames in range by up to %.1f dB", frame)
	}
	return one(f)
}
