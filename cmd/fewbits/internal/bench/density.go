package bench

import (
	"fmt"
	"math"
	"os"
	"slices"
	"strings"

	"fewbits/codec/design"
	"fewbits/measure/model"
)

// Models satisfy what designers consume.
var _ design.Density = model.Model(nil)

// density is a family.Material's Density: the model named from, scaled to the
// pooled recordings.
func (p *pool) density(from, scale string) (design.Density, string, error) {
	if scale != "fit" && slices.Contains(model.Names(), from) || strings.HasSuffix(strings.ToLower(from), ".csv") {
		rms, how, err := p.rms(scale)
		if err != nil {
			return nil, "", err
		}
		return densityOf(from, rms, how)
	}
	m, how, err := p.fit(from)
	if err != nil || scale == "fit" {
		return m, how, err
	}
	rms, scaled, err := p.rms(scale)
	if err != nil {
		return nil, "", err
	}
	shape, _ := m.Parameters()
	m, err = model.OfShape(m.Name(), shape, rms)
	return m, fmt.Sprintf("%s, %s (%.1f dBov)", how, scaled, 20*math.Log10(rms)), err
}

// densityOf is the model named from, or the density table of that file, at an
// rms.
func densityOf(from string, rms float64, how string) (design.Density, string, error) {
	how = fmt.Sprintf("%s %s (%.1f dBov)", from, how, 20*math.Log10(rms))
	if !strings.HasSuffix(strings.ToLower(from), ".csv") {
		m, err := model.OfRMS(from, rms)
		return m, how, err
	}
	f, err := os.Open(from)
	if err != nil {
		return nil, "", err
	}
	defer f.Close()
	table, err := model.ParseTable(f)
	if err != nil {
		return nil, "", fmt.Errorf("%s: %w", from, err)
	}
	table, err = table.Stretched(rms / table.RMS())
	return table, how, err
}
