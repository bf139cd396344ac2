package model

import (
	"fmt"
	"math"
	"sync"
)

// Data is what a model is fitted to: how often each value occurs.
type Data struct {
	// Values ascend strictly; amplitude, full scale = 1.0 for recordings.
	Values []float64
	// Counts are at least 0, one for each value.
	Counts []int64
	// LSB is the step the values are rounded to: a value x stands for the cell
	// x +- LSB/2.
	LSB float64
	// Lo and Hi, Lo < Hi, are the ends of the number format (-1 and 1 - LSB
	// for PCM): the cells of values there run to infinity. Both 0: no ends.
	Lo, Hi float64
}

// Fitted is a model fitted by interval likelihood.
type Fitted struct {
	Name string
	// Model is nil where the fit is undefined; then Undefined says why and the
	// figures are NaN.
	Model     Model
	Undefined string
	// Shape and Scale are in the notation of New; Parameters of them are free.
	Shape, Scale float64
	Parameters   int
	// ShapeError and ScaleError are standard errors from the observed
	// information, as if samples were independent: neighbouring samples of
	// speech are not, so read them as lower bounds. 0 for a shape that is not
	// free; NaN where the information is singular.
	ShapeError, ScaleError float64
	// LogLik is ln of the likelihood per sample in nats, as a density in the
	// unit of Values: the mean ln of the cells' probabilities, less ln LSB.
	LogLik float64
	// AIC is 2 Parameters - 2 Samples LogLik (H. Akaike 1974).
	AIC float64
	// KS is the largest distance of the distribution functions at the cells'
	// edges (Kolmogorov-Smirnov), a distance and no test.
	KS float64
	// RMS is the model's, to hold against the measured one.
	RMS     float64
	Samples int64
}

// Fit fits the model of that name, one of FitNames, by maximum likelihood of
// the cells' probabilities: exact zeros, where gamma densities are infinite,
// weigh no more than a cell does. A fit that has no maximum (digital silence;
// data that no finite shape suits) comes back with Undefined set; the error is
// for data that are no histogram and for an unknown name.
func Fit(name string, data Data) (Fitted, error) {
	c, ok := candidates[name]
	if !ok {
		return Fitted{}, fmt.Errorf("no model %q; models are %v", name, FitNames())
	}
	b, err := newBins(data)
	if err != nil {
		return Fitted{}, err
	}
	return fit(name, c, data, b), nil
}

// FitAll fits all of FitNames, in that order.
func FitAll(data Data) ([]Fitted, error) {
	b, err := newBins(data)
	if err != nil {
		return nil, err
	}
	names := FitNames()
	out := make([]Fitted, len(names))
	var group sync.WaitGroup
	for i, name := range names {
		group.Go(func() { out[i] = fit(name, candidates[name], data, b) })
	}
	group.Wait()
	return out, nil
}

func fit(name string, c candidate, data Data, b *bins) Fitted {
	nan := math.NaN()
	out := Fitted{Name: name, Shape: nan, Scale: nan, ShapeError: nan, ScaleError: nan, LogLik: nan, AIC: nan, KS: nan, RMS: nan, Samples: b.samples, Parameters: c.parameters}
	if out.Undefined = b.undefined(); out.Undefined != "" {
		return out
	}
	top, why := c.climb(b)
	if why != "" {
		out.Undefined = why
		return out
	}
	shape, scale := c.natural(top.at)
	m, err := New(name, shape, scale*data.LSB)
	if err != nil {
		out.Undefined = err.Error()
		return out
	}
	shapeError, scaleError := c.errors(top, b.samples)
	if shapeError > shape {
		out.Undefined = fmt.Sprintf("the data say too little about the shape: %.3g +- %.3g", shape, shapeError)
		return out
	}
	out.Model, out.Shape, out.Scale = m, shape, scale*data.LSB
	out.ShapeError, out.ScaleError = shapeError, scaleError*data.LSB
	out.LogLik = top.value - math.Log(data.LSB)
	out.AIC = 2*float64(c.parameters) - 2*float64(b.samples)*out.LogLik
	out.KS = ksDistance(data, m)
	out.RMS = m.RMS()
	return out
}
