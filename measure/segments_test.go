package measure

import (
	"math"
	"testing"
)

// TestExactFrames: e = k x gives every frame -20 log10 |k|; frames of equal
// error and signal energies 4:1 average to the first less 3.0103 dB; an output
// of zero gives 0 dB (closed forms).
func TestExactFrames(t *testing.T) {
	for _, c := range []struct {
		name   string
		frames [][2]float64 // signal, error
		want   float64
		upper  int64
	}{
		{"k = 0.1", [][2]float64{{1, 0.01}, {3, 0.03}, {0.02, 0.0002}}, 20, 0},
		{"k = 0.01", [][2]float64{{1, 1e-4}, {2, 2e-4}}, 35, 2},
		{"4:1", [][2]float64{{4, 0.04}, {1, 0.04}}, 20 - 20*math.Log10(2)/2, 0},
		{"output zero", [][2]float64{{0.3, 0.3}, {2, 2}}, 0, 0},
		{"no error", [][2]float64{{1, 0}}, 35, 1},
		{"noise above", [][2]float64{{1, 1e9}}, -10, 0},
	} {
		var tally Tally
		for _, f := range c.frames {
			AddFrame(&tally, Frame{Samples: 160, Signal: f[0], Error: f[1], InRange: true}, CustomaryLimits)
		}
		s := &tally.Segmental[SegInRange]
		near(t, c.name, s.Mean(), c.want, 1e-12)
		if s.AtUpper != c.upper || s.Frames != int64(len(c.frames)) {
			t.Errorf("%s: %d of %d at the upper limit, want %d", c.name, s.AtUpper, s.Frames, c.upper)
		}
	}
}

func TestFramesByKind(t *testing.T) {
	var tally Tally
	floor := FloorOf(160, 1.0/32768)
	for _, f := range []Frame{
		{Samples: 160, Signal: 0, Error: 3, InRange: false, Floor: floor},                  // silent
		{Samples: 160, Signal: 1e-3, Error: 1e-4, InRange: false, Floor: floor},            // quiet: 10 dB
		{Samples: 160, Signal: 1, Error: 1e-2, InRange: true, Floor: floor},                // 20 dB
		{Samples: 160, Signal: 1, Error: 0, InRange: true, Floor: floor},                   // floored
		{Samples: 160, Signal: 1, Error: 1e-5, InRange: true, Floor: floor},                // 50 dB
		{Samples: 160, Signal: 1e-3, Error: 1e3, InRange: true, Floor: floor},              // below -10
		{Samples: 160, Signal: 1, Error: floor * 1.0000001, InRange: true, Floor: floor},   // just not floored
		{Samples: 160, Signal: 1e4, Error: floor * 0.9999999, InRange: true, Floor: floor}, // floored, beyond 100
	} {
		AddFrame(&tally, f, CustomaryLimits)
	}
	atFloor := -10 * math.Log10(160/math.Pow(2, 30)/12) // 79.1 dB
	near(t, "in range", tally.Segmental[SegInRange].Mean(), (20+35+35-10+35+35)/6.0, 1e-12)
	near(t, "all", tally.Segmental[SegAll].Mean(), (10+20+35+35-10+35+35)/7.0, 1e-12)
	near(t, "open", tally.Segmental[SegOpen].Mean(), (20+2*atFloor+50-10+100)/6, 1e-6)
	open := tally.Segmental[SegOpen]
	if open.Floored != 2 || open.AtUpper != 1 || open.AtLower != 1 || tally.Segmental[SegInRange].AtUpper != 4 {
		t.Errorf("open %+v, limited %+v", open, tally.Segmental[SegInRange])
	}
	if tally.FramesIn != 6 || tally.FramesOut != 1 || tally.FramesSilent != 1 {
		t.Errorf("frames %d in, %d out, %d silent", tally.FramesIn, tally.FramesOut, tally.FramesSilent)
	}
	near(t, "quiet SNR", quietSNR.Of(&tally), 10, 1e-12)
	near(t, "open value of one frame", OpenSNR(Frame{Signal: 1, Floor: floor}, CustomaryLimits), atFloor, 1e-9)
}

// TestRange: a frame exactly at the threshold is not above it; an undefined
// active level puts no frame in range.
func TestRange(t *testing.T) {
	th := RangeThreshold(-20, 30)
	near(t, "threshold", th, 1e-5, 1e-20)
	if InRange(th*160, 160, th) || !InRange(th*160*1.0001, 160, th) || InRange(1, 160, RangeThreshold(math.NaN(), 30)) {
		t.Error("a frame is in range where it should not be, or the reverse")
	}
}

// TestDeviation: of the values 10 and 20 dB, by hand 7.0711.
func TestDeviation(t *testing.T) {
	var tally Tally
	for _, e := range []float64{0.1, 0.01} {
		AddFrame(&tally, Frame{Signal: 1, Error: e, InRange: true}, CustomaryLimits)
	}
	near(t, "deviation", tally.Segmental[SegInRange].Deviation(), math.Sqrt(50), 1e-9)
}
