package bench

import (
	"fmt"
	"math"
	"os"
	"strings"

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
	return densityOf(from, rms, how)
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
