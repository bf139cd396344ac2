package model

import "math"

// stacy is the half line x >= 0 of the even density
//
//	f(x) = c x^(kappa-1) exp(-x^beta), c = beta / (2 Gamma(kappa/beta)),
//
// the generalized gamma of E. W. Stacy (Ann. Math. Stat. 33, 1962) folded out
// to two sides; the Gaussian, both gammas and the generalized Gaussian are
// cases of it. x is in units of the scale.
type stacy struct {
	kappa, beta float64
	c, logC     float64
	kind        kind
}

// kind picks the cheapest form of the fall f(a+u)/f(a).
type kind uint8

const (
	general   kind = iota // kappa = 1, any beta
	freeGamma             // beta = 1, any kappa
	halfGamma             // beta = 1, kappa = 1/2
	normal                // beta = 2, kappa = 1
)

// gammaHalfLine has beta 1, so that x is gamma distributed.
func gammaHalfLine(shape float64) stacy {
	d := stacy{kappa: shape, beta: 1, c: 0.5 / math.Gamma(shape), kind: freeGamma}
	if shape == 0.5 {
		d.kind = halfGamma
	}
	d.logC = math.Log(d.c)
	return d
}

// generalHalfLine has kappa 1, so that x^beta is gamma distributed.
func generalHalfLine(shape float64) stacy {
	d := stacy{kappa: 1, beta: shape, c: 0.5 * shape / math.Gamma(1/shape)}
	if shape == 2 {
		d.kind = normal
	}
	d.logC = math.Log(d.c)
	return d
}

var normalHalfLine = generalHalfLine(2)

// pdf is f(x); +Inf at 0 where kappa < 1.
func (d *stacy) pdf(x float64) float64 {
	switch d.kind {
	case normal:
		return d.c * math.Exp(-x*x)
	case halfGamma:
		return d.c * math.Exp(-x) / math.Sqrt(x)
	case freeGamma:
		return d.c * math.Exp(-x) * math.Pow(x, d.kappa-1)
	}
	return d.c * math.Exp(-math.Pow(x, d.beta))
}

// logPDF is ln f(x).
func (d *stacy) logPDF(x float64) float64 {
	l := d.logC - d.power(x)
	if d.kappa != 1 {
		l += (d.kappa - 1) * math.Log(x)
	}
	return l
}

// power is x^beta.
func (d *stacy) power(x float64) float64 {
	switch d.beta {
	case 1:
		return x
	case 2:
		return x * x
	}
	return math.Pow(x, d.beta)
}

// root is y^(1/beta).
func (d *stacy) root(y float64) float64 {
	switch d.beta {
	case 1:
		return y
	case 2:
		return math.Sqrt(y)
	}
	return math.Pow(y, 1/d.beta)
}

// fall sets f to f(a+u)/f(a) at the nodes u of a panel [at, at+h], for a > 0;
// y is a^beta.
func (d *stacy) fall(r *rule, a, y, at, h float64, f *[maxNodes]float64) {
	switch d.kind {
	case normal:
		for i, x := range r.x {
			u := at + h*x
			f[i] = math.Exp(-u * (2*a + u))
		}
	case halfGamma:
		for i, x := range r.x {
			u := at + h*x
			f[i] = math.Exp(-u) / math.Sqrt(1+u/a)
		}
	case freeGamma:
		for i, x := range r.x {
			u := at + h*x
			f[i] = math.Exp((d.kappa-1)*math.Log1p(u/a) - u)
		}
	default:
		for i, x := range r.x {
			u := at + h*x
			f[i] = math.Exp(-y * math.Expm1(d.beta*math.Log1p(u/a)))
		}
	}
}

// cell integrates from a >= 0 over a width w that may be infinite: a power
// series from 0, Gauss-Legendre panels elsewhere.
func (d *stacy) cell(a, w float64) moments {
	if a > 0 {
		return d.panels(a, w)
	}
	near := math.Min(w, d.root(2))
	m := d.series(near)
	if near < w {
		r := d.panels(near, w-near)
		m.add(r.p, near+r.off, r.about)
	}
	return m
}

// panels integrates from a > 0.
func (d *stacy) panels(a, w float64) moments {
	m := d.relative(a, w)
	edge := d.pdf(a)
	m.p *= edge
	m.about *= edge
	return m
}

// relative integrates f(x)/f(a) from a > 0 outwards until the rest no longer
// counts. The centroid is right even where f underflows.
func (d *stacy) relative(a, w float64) (m moments) {
	var f [maxNodes]float64
	y := d.power(a)
	for at := 0.0; at < w; {
		h, r := d.stride(a+at, w-at)
		before := m
		d.fall(r, a, y, at, h, &f)
		m.panel(r, at, h, &f)
		if at += h; r == &rules[3] && m.about-before.about < 1e-17*m.about && m.p-before.p < 1e-17*m.p {
			break
		}
	}
	return m
}

// logMass is ln of the probability from a >= 0 over a width w; it does not
// underflow.
func (d *stacy) logMass(a, w float64) float64 {
	if a == 0 {
		return math.Log(d.cell(0, w).p)
	}
	h, r := d.stride(a, w)
	if h < w {
		return d.logPDF(a) + math.Log(d.relative(a, w).p)
	}
	var f [maxNodes]float64
	d.fall(r, a, d.power(a), 0, w, &f)
	var s float64
	for i, wt := range r.w {
		s += wt * f[i]
	}
	return d.logPDF(a) + math.Log(s*w)
}

// stride picks the next panel from x, at most limit wide, and its rule: along
// a panel f must not fall by more than exp(-4), nor x grow by more than 2.5
// times where f is not smooth at 0.
func (d *stacy) stride(x, limit float64) (float64, *rule) {
	smooth := d.kind == normal
	if limit < x/4 {
		// Narrow: y changes by about beta y h/x, by more at the far end.
		y := d.power(x) * d.beta * limit / x
		far := y * math.Max(1, 1+(d.beta-1)*limit/x*1.2)
		switch {
		case far < 0.06 && (smooth || limit < 0.05*x):
			return limit, &rules[0]
		case far < 0.6:
			return limit, &rules[1]
		case far < 2.4:
			return limit, &rules[2]
		case far < 4:
			return limit, &rules[3]
		}
	}
	y := d.power(x)
	h := d.root(y+4) - x
	if !smooth {
		h = math.Min(h, 1.5*x)
	}
	h = math.Max(h, 1e-15*x)
	if limit <= h {
		return limit, &rules[3]
	}
	return h, &rules[3]
}

// series integrates from 0 to b by the power series of the lower incomplete
// gamma function (M. Abramowitz, I. Stegun, Handbook of Mathematical
// Functions, 6.5.29), whose terms are positive.
func (d *stacy) series(b float64) moments {
	y := d.power(b)
	var sum [3]float64
	for j := range sum {
		s := (d.kappa + float64(j)) / d.beta
		term := 1 / s
		for n := 1; term > 1e-17*sum[j]; n++ {
			sum[j] += term
			term *= y / (s + float64(n))
		}
	}
	m := moments{p: math.Exp(-y) / d.beta * d.c * sum[0] * math.Pow(b, d.kappa)}
	m.off = b * (sum[1] / sum[0])
	m.about = m.p * b * b * (sum[2]/sum[0] - (sum[1]/sum[0])*(sum[1]/sum[0]))
	return m
}
