package measure

import "math"

var idleLevel = Measure{
	Name: "idle_dbov", Unit: "dBov",
	Means: "level of the output over the whole frames that are not in range, the silent ones included; undefined where the output is silent too",
	Of:    idleDBov,
}

func idleDBov(t *Tally) float64 {
	if t.SamplesOut == 0 || !(t.OutputOut > 0) {
		return math.NaN()
	}
	return DB(t.OutputOut / float64(t.SamplesOut))
}

var idleGain = Measure{
	Name: "idle_gain_db", Unit: "dB",
	Means: "output level over the frames of idle_dbov less the input's there",
	Of:    func(t *Tally) float64 { return ratio(t.OutputOut, t.SignalOut) },
}
