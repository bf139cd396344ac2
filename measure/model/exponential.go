package model

import "math"

// fallCell gives, for the density e^(-x) on [0, w], the integral 1 - e^-w, the
// centroid 1 - w/(e^w - 1), and the variance 1 - (w/2 / sinh(w/2))^2, all as
// fractions of w, w and w^2. w may be negative (rising) or small: there the
// closed forms cancel and their series about 0 serve.
func fallCell(w float64) (area, centroid, variance float64) {
	if math.Abs(w) > 1.5 {
		e := math.Expm1(w)
		s := w / 2 / math.Sinh(w/2)
		return -math.Expm1(-w) / w, (1 - w/e) / w, (1 - s*s) / (w * w)
	}
	area = 1
	if w != 0 {
		area = -math.Expm1(-w) / w
	}
	// 1/w - 1/(e^w-1) = 1/2 - sum B_2k w^(2k-1)/(2k)!, and the variance is its
	// derivative with the sign turned (Abramowitz, Stegun 23.1.1).
	centroid = 0.5
	q := w * w
	t, x := w, 1.0
	for k, b := range bernoulli {
		centroid -= b * t
		variance += b * x * float64(2*k+1)
		t *= q
		x *= q
	}
	return area, centroid, variance
}

// bernoulli holds B_2k/(2k)!, k = 1..12 (Abramowitz, Stegun, Table 23.2).
var bernoulli = [12]float64{
	1. / 12, -1. / 720, 1. / 30240, -1. / 1209600, 1. / 47900160, -691. / 1307674368000,
	1. / 74724249600, -3617. / 10670622842880000, 43867. / 5109094217170944000,
	-174611. / 802857662698291200000, 77683. / 14101100039391805440000,
	-236364091. / 1693824136731743669452800000,
}
