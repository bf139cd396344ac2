package fault

import "fmt"

// beyondFull reports samples of a float recording that no integer file holds.
func beyondFull(s *Scan, c Context) []Finding {
	if s.grid.over == 0 {
		return nil
	}
	return one(Finding{
		Kind: "beyond-full-scale", Severity: Warning, Value: float64(s.grid.over), Unit: "samples",
		Sentence: fmt.Sprintf("%s beyond full scale (%s of all), the peak at %+.2f dB",
			plural(s.grid.over, "sample"), percent(float64(s.grid.over)/float64(s.grid.total)), c.PeakDB),
		Advice: "bring it down with --level -26: every table ends at full scale or before, and these count as overload",
	})
}
