package main

import (
	"fmt"
	"io"
	"os"
	"sync"
	"time"

	"github.com/vbauerster/mpb/v8"
	"github.com/vbauerster/mpb/v8/decor"
	"golang.org/x/term"

	"fewbits/cmd/fewbits/internal/bench"
)

// quietFor is how long a run may take before a log hears of it.
const quietFor = 5 * time.Second

// progress shows how far a run is: a bar with rate and time left on a
// terminal, a plain line every few seconds in a log.
type progress struct {
	mu    sync.Mutex
	log   io.Writer
	bars  *mpb.Progress // nil off a terminal
	bar   *mpb.Bar
	pass  string
	begun time.Time
	said  time.Time
}

func newProgress(w io.Writer) *progress {
	p := &progress{log: w}
	if f, ok := w.(*os.File); ok && term.IsTerminal(int(f.Fd())) {
		p.bars = mpb.New(mpb.WithOutput(f), mpb.WithWidth(40))
	}
	return p
}

// step is a bench.Plan's Progress.
func (p *progress) step(s bench.Step) {
	p.mu.Lock()
	defer p.mu.Unlock()
	now := time.Now()
	if s.Pass != p.pass {
		p.next(s, now)
	}
	if p.bar != nil {
		p.bar.SetCurrent(s.Done)
		return
	}
	if p.bars == nil && now.Sub(p.said) >= quietFor && s.Done > 0 && s.Done < s.Total {
		p.said = now
		spent := now.Sub(p.begun).Seconds()
		rate := float64(s.Done) / spent
		fmt.Fprintln(p.log, progressLine(s, rate))
	}
}

// progressLine says how far a pass is at rate samples or designs a second.
func progressLine(s bench.Step, rate float64) string {
	unit, per := "million samples", 1e6
	if s.Unit == "designs" {
		unit, per = "designs", 1
	}
	return fmt.Sprintf("fewbits: %s: %.0f %% of %.4g %s, %.3g a second, %.0f s left",
		s.Pass, 100*float64(s.Done)/float64(s.Total), float64(s.Total)/per, unit, rate/per, float64(s.Total-s.Done)/rate)
}

// next begins a pass.
func (p *progress) next(s bench.Step, now time.Time) {
	p.end()
	p.pass, p.begun, p.said = s.Pass, now, now
	if p.bars != nil && s.Total > 0 {
		p.bar = p.bars.AddBar(s.Total,
			mpb.BarRemoveOnComplete(),
			mpb.PrependDecorators(decor.Name(s.Pass+" ", decor.WC{W: 12})),
			mpb.AppendDecorators(decor.Percentage(), decor.Name("  "),
				decor.AverageSpeed(0, "%.3g "+s.Unit+"/s  "), decor.AverageETA(decor.ET_STYLE_GO), decor.Name(" left")))
	}
}

func (p *progress) end() {
	if p.bar != nil {
		p.bar.Abort(true)
		p.bar = nil
	}
}

// stop ends the display.
func (p *progress) stop() {
	p.mu.Lock()
	p.end()
	p.mu.Unlock()
	if p.bars != nil {
		p.bars.Wait()
	}
}
