package design

import "math"

// PanterDite is the constant c of the least mean squared error at many levels,
// c/n^2: c = (integral p^(1/3))^3 / 12, squared amplitude units (P. F. Panter,
// W. Dite, Proc. IRE 39, 1951). The error approaches it as n grows, for the
// densities of speech from below.
func PanterDite(d Density) float64 {
	s := integral(d, math.Cbrt)
	return s * s * s / 12
}

// CompanderPrediction is the high-rate error of n levels whose density follows
// p^power, Bennett's integral (integral p^power)^2 (integral p^(1-2 power)) /
// (12 n^2) (W. R. Bennett, Bell Syst. Tech. J. 27, 1948); Panter and Dite's at
// power 1/3. +Inf where it diverges: power 1/2 and more on an endless support.
func CompanderPrediction(d Density, n int, power float64) float64 {
	lo, hi := d.Support()
	if power >= 0.5 && (math.IsInf(lo, -1) || math.IsInf(hi, 1)) {
		return math.Inf(1)
	}
	s := integral(d, toThe(power))
	rest := integral(d, func(p float64) float64 {
		if p == 0 {
			return 0
		}
		return math.Pow(p, 1-2*power)
	})
	return s * s * rest / (12 * float64(n) * float64(n))
}

// DifferentialEntropy is -integral p log2 p in bits: d's own Entropy() where
// it has one, by quadrature otherwise.
func DifferentialEntropy(d Density) float64 {
	if e, ok := d.(interface{ Entropy() float64 }); ok {
		return e.Entropy()
	}
	return integral(d, func(p float64) float64 { return -plogp(p) })
}

// ShannonBound is the least mean squared error of any code of that many bits a
// sample, independent samples: 2^(2h - 2 bits) / (2 pi e), h the differential
// entropy in bits (C. E. Shannon, IRE Nat. Conv. Rec. 4, 1959). A bound, not
// always attainable.
func ShannonBound(d Density, bits float64) float64 {
	return math.Exp2(2*(DifferentialEntropy(d)-bits)) / (2 * math.Pi * math.E)
}

// Decibels is 10 log10(a/b).
func Decibels(a, b float64) float64 { return 10 * math.Log10(a/b) }

// Power is the mean square of d.
func Power(d Density) float64 {
	lo, hi := d.Support()
	_, power := About(d, lo, hi, 0)
	return power
}

// SNRAt is the SNR in dB of a staircase made for d where the real signal is d
// louder by db (negative: quieter).
func SNRAt(d Density, thresholds, values []float64, db float64) float64 {
	k := math.Pow(10, -db/20)
	mse, _ := EvaluateDensity(d, times(thresholds, k), times(values, k))
	return Decibels(Power(d), mse)
}

func times(x []float64, k float64) []float64 {
	out := make([]float64, len(x))
	for i := range x {
		out[i] = x[i] * k
	}
	return out
}

// integral of g(p(x)) over the support.
func integral(d Density, g func(p float64) float64) float64 {
	if even(d) {
		return 2 * newLaw(d, true, g).total()
	}
	return newLaw(d, false, g).total()
}
