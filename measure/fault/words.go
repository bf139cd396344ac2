package fault

import (
	"fmt"
	"math"
)

// one wraps a single finding.
func one(f Finding) []Finding { return []Finding{f} }

// hertz prints a frequency as an engineer would.
func hertz(f float64) string {
	if f >= 1000 {
		return fmt.Sprintf("%.3g kHz", f/1000)
	}
	return fmt.Sprintf("%.0f Hz", f)
}

// percent prints a share; a small one keeps two digits.
func percent(share float64) string {
	if share < 0.001 {
		return fmt.Sprintf("%.2g %%", 100*share)
	}
	return fmt.Sprintf("%.1f %%", 100*share)
}

// plural prints a count with its noun.
func plural(n int64, noun string) string {
	if n == 1 {
		return "1 " + noun
	}
	return fmt.Sprintf("%d %ss", n, noun)
}

// decibel rounds to hundredths, so that no "-0.00" is printed.
func decibel(v float64) float64 {
	if r := math.Round(100*v) / 100; r != 0 {
		return r
	}
	return 0
}
