package measure

import "math"

var matchGain = Measure{
	Name: "match_b", Unit: "",
	Means: "gain b = <x,y>/<x,x> that the design gives the signal over the frames in range: playing at 1/b matches levels",
	Of: func(t *Tally) float64 {
		if !(t.SignalIn > 0) {
			return math.NaN()
		}
		return t.CrossIn / t.SignalIn
	},
}
