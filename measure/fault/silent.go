package fault

import "fmt"

const (
	// zeroShare is the share of all samples in runs of zeros of 10 ms and more
	// that draws a note; loudly, from zeroMuch on.
	zeroShare = 0.005
	zeroMuch  = 0.05
)

// silent reports digital silence and values held still.
func silent(s *Scan, c Context) []Finding {
	r, n := s.runs.closed(), float64(s.grid.total)
	if n == 0 {
		return nil
	}
	if r.zeros == s.grid.total {
		return one(Finding{
			Kind: "silence", Severity: Severe, Value: 1, Unit: "share",
			Sentence: "every sample is exactly zero",
			Advice:   "check the cable, the channel and the file: there is nothing to measure",
		})
	}
	var out []Finding
	if share := float64(r.silences.samples) / n; share > zeroShare {
		f := Finding{
			Kind: "silence", Severity: Note, Value: share, Unit: "share",
			Sentence: fmt.Sprintf("digital silence: %s of the samples are exact zeros, %s in %s of 10 ms or more, the longest %.2f s",
				percent(float64(r.zeros)/n), percent(share), plural(r.silences.runs, "run"), float64(r.silences.longest)/float64(s.rate)),
			Advice: "trim with --from and --to, or trust the fits over in-range frames only: exact zeros pull a fitted model to a peak at zero",
		}
		if share > zeroMuch {
			f.Severity = Warning
		}
		out = append(out, f)
	}
	if share := float64(r.holds.samples) / n; share > zeroShare {
		out = append(out, Finding{
			Kind: "held", Severity: Warning, Value: share, Unit: "share",
			Sentence: fmt.Sprintf("the value stands still other than at zero in %s of 20 ms or more, %s of the samples, the longest %.2f s",
				plural(r.holds.runs, "run"), percent(share), float64(r.holds.longest)/float64(s.rate)),
			Advice: "look for a muted or stuck converter, or for silence coded off zero; cut these stretches out with --from and --to",
		})
	}
	return out
}

// cutOut reports gaps of zeros with loud edges, as lost packets leave them.
func cutOut(s *Scan, _ Context) []Finding {
	g := s.runs.closed().gaps
	if g.runs == 0 {
		return nil
	}
	return one(Finding{
		Kind: "cut-out", Severity: Warning, Value: float64(g.runs), Unit: "runs",
		Sentence: fmt.Sprintf("cut out: %s of zeros in the middle of sound, the longest %.1f ms, as lost packets or buffers leave them",
			plural(g.runs, "run"), 1000*float64(g.longest)/float64(s.rate)),
		Advice: "record again, or leave the stretch out with --from and --to",
	})
}
