package measure

import (
	"math"

	"gonum.org/v1/gonum/integrate/quad"
)

// stimulus is a test signal known by its amplitude distribution: x(u), rising,
// for u between lo and hi with density weight(u); inverse is that of x.
type stimulus struct {
	lo, hi     float64
	at         func(u float64) float64
	inverse    func(x float64) float64
	weight     func(u float64) float64
	smoothOver float64 // the quadrature is exact to rounding over this much of u
	power      float64 // mean x^2
}

// SineEnergies returns the mean energies of a sine of the given amplitude
// through a staircase, over all phases: what a 1020 Hz tone gives, whose
// samples at 8 kHz fall on ever new phases. thresholds ascend, len(values) =
// len(thresholds)+1, amplitude > 0, full scale = 1.0. The integral over each
// cell is by Gauss-Legendre quadrature, exact to rounding.
func SineEnergies(thresholds, values []float64, amplitude float64) Energies {
	return stimulus{
		lo: -math.Pi / 2, hi: math.Pi / 2, smoothOver: math.Pi / 8,
		at:      func(u float64) float64 { return amplitude * math.Sin(u) },
		inverse: func(x float64) float64 { return math.Asin(max(-1, min(1, x/amplitude))) },
		weight:  func(float64) float64 { return 1 / math.Pi },
		power:   amplitude * amplitude / 2,
	}.through(thresholds, values)
}

// gaussianReach standard deviations hold all but 1e-37 of the probability.
const gaussianReach = 13

// GaussianEnergies is SineEnergies for Gaussian noise of the given rms.
func GaussianEnergies(thresholds, values []float64, rms float64) Energies {
	return stimulus{
		lo: -gaussianReach, hi: gaussianReach, smoothOver: 0.5,
		at:      func(u float64) float64 { return rms * u },
		inverse: func(x float64) float64 { return max(-gaussianReach, min(gaussianReach, x/rms)) },
		weight:  func(u float64) float64 { return math.Exp(-u*u/2) / math.Sqrt(2*math.Pi) },
		power:   rms * rms,
	}.through(thresholds, values)
}

// nodes and weights of the quadrature on [-1, 1].
var nodes, nodeWeights = func() (x, w []float64) {
	x, w = make([]float64, 12), make([]float64, 12)
	quad.Legendre{}.FixedLocations(x, w, -1, 1)
	return x, w
}()

// through integrates over every cell.
func (s stimulus) through(thresholds, values []float64) Energies {
	e := Energies{Signal: s.power}
	from := s.lo
	for k, y := range values {
		to := s.hi
		if k < len(thresholds) {
			to = s.inverse(thresholds[k])
		}
		pieces := math.Ceil((to - from) / s.smoothOver)
		step := (to - from) / pieces
		for p := range int(max(0, pieces)) {
			s.piece(&e, y, from+float64(p)*step, step)
		}
		from = max(from, to)
	}
	return e
}

// piece adds the integral over [from, from+step] where the output is y.
func (s stimulus) piece(e *Energies, y, from, step float64) {
	for i, node := range nodes {
		u := from + step*(1+node)/2
		w := s.weight(u) * nodeWeights[i] * step / 2
		x := s.at(u)
		e.Error += float64(w * (x - y) * (x - y))
		e.Cross += float64(w * x * y)
		e.Output += float64(w * y * y)
	}
}

// SNR is 10 log10 of signal over error; +Inf without error, NaN without
// signal.
func (e Energies) SNR() float64 {
	if !(e.Signal > 0) {
		return math.NaN()
	}
	return DB(e.Signal / e.Error)
}

// TotalDistortion is what a distortion meter reads, dB: the part of the output
// that follows the input (power Cross^2/Signal, whatever its gain) over all
// the rest. NaN without signal or output, +Inf without distortion.
func (e Energies) TotalDistortion() float64 {
	if !(e.Signal > 0) || !(e.Output > 0) {
		return math.NaN()
	}
	wanted := e.Cross * e.Cross / e.Signal
	// The rest, Output - wanted, without the cancellation.
	excess := e.Cross - e.Signal
	rest := e.Error - excess*excess/e.Signal
	return DB(wanted / max(0, rest))
}
