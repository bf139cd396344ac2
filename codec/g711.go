package codec

// segments711 lists (number of cells, width) from zero outwards, positive
// side, in the Recommendation's units. Source: ITU-T Rec. G.711 (11/1988),
// decision values x_n of Tables 2a/2b (mu-law, 14-bit units) and 1a/1b
// (A-law, 13-bit units); the tables were rebuilt from the segment rules from
// memory and agree with every value seen in print.
var (
	segmentsMu = [][2]int{{1, 1}, {15, 2}, {16, 4}, {16, 8}, {16, 16}, {16, 32}, {16, 64}, {16, 128}, {16, 256}}
	segmentsA  = [][2]int{{32, 2}, {16, 4}, {16, 8}, {16, 16}, {16, 32}, {16, 64}, {16, 128}}
)

// G711Mu returns the 256 cells of ITU-T G.711 mu-law on the real amplitude,
// full scale = 8192 of its 14-bit units. Cells 127 and 128 are the two zeros,
// both with value 0. Overload beyond the virtual decision value 8159. Codes
// carry the Recommendation's inversion of all magnitude bits.
func G711Mu() *Staircase {
	s := lay(segmentsMu, 1.0/8192, true)
	for n := range 128 {
		s.Codes[128+n] = uint16(0xFF - n)
		s.Codes[127-n] = uint16(0x7F - n)
	}
	return s
}

// G711A returns the 256 cells of ITU-T G.711 A-law on the real amplitude, full
// scale = 4096 of its 13-bit units. There is no zero value: silence decodes to
// one unit. Codes carry the inversion of the even bits.
func G711A() *Staircase {
	s := lay(segmentsA, 1.0/4096, false)
	for n := range 128 {
		s.Codes[128+n] = uint16((0x80 | n) ^ 0x55)
		s.Codes[127-n] = uint16(n ^ 0x55)
	}
	return s
}

// lay lays the segments out: outputs are cell middles, except the mu-law
// innermost cell, whose output is 0.
func lay(segments [][2]int, unit float64, zeroOut bool) *Staircase {
	s := &Staircase{
		Thresholds: make([]float64, 255),
		Values:     make([]float64, 256),
		Codes:      make([]uint16, 256),
		Tie:        TieOut,
	}
	n, x := 0, 0
	for _, seg := range segments {
		for range seg[0] {
			y := float64(2*x+seg[1]) / 2
			if n == 0 && zeroOut {
				y = 0
			}
			s.Values[128+n] = y * unit
			if y != 0 {
				s.Values[127-n] = -y * unit
			}
			s.Thresholds[127+n] = float64(x) * unit
			if x != 0 {
				s.Thresholds[127-n] = -float64(x) * unit
			}
			n, x = n+1, x+seg[1]
		}
	}
	s.Lo, s.Hi = -float64(x)*unit, float64(x)*unit
	return s
}
