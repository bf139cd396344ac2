package bench

import (
	"fmt"
	"math"

	"fewbits/codec/design"
	"fewbits/measure/model"
)

// Models satisfy what designers consume.
var _ design.Density = model.Model(nil)

// density is a family.Material's Density: the model named from, scaled to the
// pooled recordings.
func (p *pool) density(from, scale string) (design.Density, string, error) {
	rms, how, err := p.rms(scale)
	if err != nil {
		return nil, "", err
	}
	m, err := model.OfRMS(from, rms)
	if err != nil {
		return nil, "", err
	}
	return m, fmt.Sprintf("%s %s (%.1f dBov)", from, how, 20*math.Log10(rms)), nil
}
