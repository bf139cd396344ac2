package main

import (
	"bytes"
	"strings"
	"testing"
	"time"

	"fewbits/cmd/fewbits/internal/bench"
)

func TestProgressLine(t *testing.T) {
	for _, c := range []struct {
		step bench.Step
		rate float64
		want string
	}{
		{bench.Step{Pass: "reading", Unit: "samples", Done: 30e6, Total: 120e6}, 45e6, "fewbits: reading: 25 % of 120 million samples, 45 a second, 2 s left"},
		{bench.Step{Pass: "designing", Unit: "designs", Done: 9, Total: 60}, 0.5, "fewbits: designing: 15 % of 60 designs, 0.5 a second, 102 s left"},
	} {
		if got := progressLine(c.step, c.rate); got != c.want {
			t.Errorf("%q, want %q", got, c.want)
		}
	}
}

// TestLogHearsOfLongRuns: off a terminal a pass is told of once it has lasted,
// never at its end.
func TestLogHearsOfLongRuns(t *testing.T) {
	var log bytes.Buffer
	p := newProgress(&log)
	p.step(bench.Step{Pass: "designing", Unit: "designs", Total: 4})
	p.step(bench.Step{Pass: "designing", Unit: "designs", Done: 1, Total: 4})
	if log.Len() > 0 {
		t.Errorf("said %q at once", log.String())
	}
	p.begun, p.said = p.begun.Add(-2*quietFor), p.said.Add(-2*quietFor)
	p.step(bench.Step{Pass: "designing", Unit: "designs", Done: 2, Total: 4})
	p.said = time.Time{}
	p.step(bench.Step{Pass: "designing", Unit: "designs", Done: 4, Total: 4})
	p.stop()
	if got := strings.Count(log.String(), "\n"); got != 1 || !strings.Contains(log.String(), "50 % of 4 designs") {
		t.Errorf("log %q", log.String())
	}
}
