package report

import (
	"context"
	"encoding/binary"
	"fmt"
	"math"
	"os"
	"os/exec"
	"path/filepath"
	"strings"
	"sync"
	"testing"
	"time"

	"github.com/chromedp/cdproto/log"
	"github.com/chromedp/cdproto/network"
	"github.com/chromedp/cdproto/runtime"
	"github.com/chromedp/chromedp"
	"github.com/chromedp/chromedp/kb"

	"fewbits/cmd/fewbits/internal/bench"
)

// browser is a headless Chromium with what it complained of and asked for.
type browser struct {
	context.Context
	mu       sync.Mutex
	console  []string
	requests []string
}

// browse starts Chromium, or skips where there is none.
func browse(t *testing.T) *browser {
	t.Helper()
	if testing.Short() {
		t.Skip("a browser takes seconds")
	}
	path := ""
	for _, name := range []string{"chromium", "chromium-browser", "google-chrome"} {
		if found, err := exec.LookPath(name); err == nil {
			path = found
			break
		}
	}
	if path == "" {
		t.Skip("no chromium in PATH: install one to check the page in a browser")
	}
	opts := append(chromedp.DefaultExecAllocatorOptions[:], chromedp.ExecPath(path), chromedp.NoSandbox, chromedp.DisableGPU,
		chromedp.UserDataDir(t.TempDir()), chromedp.Flag("disable-quic", true), chromedp.Flag("disable-component-update", true),
		chromedp.Flag("autoplay-policy", "no-user-gesture-required"), chromedp.Flag("mute-audio", true))
	allocator, stop := chromedp.NewExecAllocator(context.Background(), opts...)
	t.Cleanup(stop)
	ctx, cancel := chromedp.NewContext(allocator)
	t.Cleanup(cancel)
	ctx, cancel = context.WithTimeout(ctx, 90*time.Second)
	t.Cleanup(cancel)
	b := &browser{Context: ctx}
	if err := chromedp.Listen(ctx, b.note); err != nil {
		t.Fatal(err)
	}
	return b
}

// note keeps complaints and requests.
func (b *browser) note(ev any) {
	b.mu.Lock()
	defer b.mu.Unlock()
	switch e := ev.(type) {
	case *network.EventRequestWillBeSent:
		if !strings.HasPrefix(e.Request.URL, "data:") { // the player's own buttons
			b.requests = append(b.requests, e.Request.URL)
		}
	case *runtime.EventConsoleAPICalled:
		b.console = append(b.console, fmt.Sprint(e.Type, " from the script"))
	case *runtime.EventExceptionThrown:
		b.console = append(b.console, e.ExceptionDetails.Text+" "+e.ExceptionDetails.Exception.Description)
	case *log.EventEntryAdded:
		b.console = append(b.console, e.Entry.Text)
	}
}

func (b *browser) do(t *testing.T, steps ...chromedp.Action[chromedp.Void]) {
	t.Helper()
	if err := chromedp.Do(b, steps...); err != nil {
		t.Fatal(err)
	}
}

// ask evaluates a script expression.
func ask[T any](t *testing.T, b *browser, expression string) T {
	t.Helper()
	v, err := chromedp.Run(b, chromedp.Evaluate[T](expression, chromedp.EvalAwaitPromise))
	if err != nil {
		t.Fatalf("%s: %v", expression, err)
	}
	return v
}

// await waits until an expression is true.
func await(t *testing.T, b *browser, expression string) {
	t.Helper()
	for range 200 {
		if ask[bool](t, b, expression) {
			return
		}
		time.Sleep(25 * time.Millisecond)
	}
	t.Fatalf("never true: %s", expression)
}

// leave writes a report with its audio into a folder and returns the page's
// address.
func leave(t *testing.T, r *bench.Results, traces *bench.Traces) string {
	t.Helper()
	dir := t.TempDir()
	for _, c := range r.Clips {
		if err := os.MkdirAll(filepath.Join(dir, "audio", c.Name), 0o777); err != nil {
			t.Fatal(err)
		}
		for _, d := range r.Designs {
			for _, kind := range []string{".wav", ".error.wav"} {
				path := filepath.Join(dir, "audio", c.Name, d.Name+kind)
				if err := os.WriteFile(path, tone(c.RateHz, c.Seconds), 0o666); err != nil {
					t.Fatal(err)
				}
			}
		}
	}
	file, err := os.Create(filepath.Join(dir, "report.html"))
	if err != nil {
		t.Fatal(err)
	}
	defer file.Close()
	if err := HTML(file, r, traces, Options{Audio: true}); err != nil {
		t.Fatal(err)
	}
	return "file://" + filepath.ToSlash(file.Name())
}

// tone is a soft sine as 16-bit PCM WAV.
func tone(rate int, seconds float64) []byte {
	n := int(float64(rate) * seconds)
	out := []byte("RIFF")
	u32 := func(v int) { out = binary.LittleEndian.AppendUint32(out, uint32(v)) }
	u16 := func(v int) { out = binary.LittleEndian.AppendUint16(out, uint16(v)) }
	u32(36 + 2*n)
	out = append(out, "WAVEfmt "...)
	u32(16)
	u16(1)
	u16(1)
	u32(rate)
	u32(2 * rate)
	u16(2)
	u16(16)
	out = append(out, "data"...)
	u32(2 * n)
	for i := range n {
		u16(int(uint16(int16(1000 * math.Sin(2*math.Pi*440*float64(i)/float64(rate))))))
	}
	return out
}

// TestInBrowser: the page works from the disk, asks for nothing but its audio,
// and complains of nothing.
func TestInBrowser(t *testing.T) {
	r, traces := synthetic(5, 1500)
	b := browse(t)
	address := leave(t, r, traces)
	b.prefer(t, "light")
	b.do(t, chromedp.Navigate(address))
	b.mu.Lock()
	if len(b.requests) != 1 || b.requests[0] != address {
		t.Errorf("loading asked for %q", b.requests)
	}
	b.mu.Unlock()
	t.Run("widths", func(t *testing.T) { widths(t, b) })
	t.Run("switches", func(t *testing.T) { switches(t, b) })
	t.Run("key", func(t *testing.T) { keyEntries(t, b) })
	t.Run("sorting", func(t *testing.T) { sorting(t, b, r) })
	t.Run("figure", func(t *testing.T) { otherFigure(t, b, r) })
	t.Run("over time", func(t *testing.T) { otherClip(t, b) })
	t.Run("player", func(t *testing.T) { playback(t, b) })
	b.mu.Lock()
	defer b.mu.Unlock()
	if len(b.console) > 0 {
		t.Errorf("console: %q", b.console)
	}
	base := strings.TrimSuffix(address, "report.html")
	for _, url := range b.requests[1:] {
		if !strings.HasPrefix(url, base+"audio/") {
			t.Errorf("asked for %s", url)
		}
	}
}

// shownTurn is the turn of the one visible picture of a set.
func shownTurn(set string) string {
	return `[...document.querySelectorAll('#set-` + set + ` figure')].filter(f => f.getClientRects().length).map(f => f.dataset.turn).join('|')`
}

func switches(t *testing.T, b *browser) {
	if got := ask[string](t, b, shownTurn("tradeoff")); got != "segsnr_open_db bits" {
		t.Fatalf("first shown: %q", got)
	}
	b.do(t, chromedp.Click(chromedp.CSS(`#set-tradeoff label:has(input[value="snr_db"])`)))
	if got := ask[string](t, b, shownTurn("tradeoff")); got != "snr_db bits" {
		t.Errorf("after a click: %q", got)
	}
	b.do(t, chromedp.Focus(chromedp.CSS(`#set-tradeoff input[value="bits"]`)), chromedp.KeyEvent(kb.ArrowRight))
	if got := ask[string](t, b, shownTurn("tradeoff")); got != "snr_db entropy_bits" {
		t.Errorf("after the arrow key: %q", got)
	}
	b.do(t, chromedp.Focus(chromedp.CSS(`#set-stairs input:checked`)), chromedp.KeyEvent(kb.ArrowRight))
	if got := ask[string](t, b, shownTurn("stairs")); got != "8" {
		t.Errorf("staircases after the arrow key: %q", got)
	}
}

func keyEntries(t *testing.T, b *browser) {
	const entry = `#set-spread figure:not([hidden]) .key button, #set-sweep figure:not([hidden]) .key button`
	hidden := `getComputedStyle(document.querySelector('#set-sweep figure:not([hidden]) [data-line]')).display`
	b.do(t, chromedp.Focus(chromedp.CSS(entry)), chromedp.KeyEvent(kb.Enter))
	if got := ask[string](t, b, hidden); got != "none" {
		t.Errorf("the line is still there: display %s", got)
	}
	b.do(t, chromedp.Click(chromedp.CSS(entry)))
	if got := ask[string](t, b, hidden); got == "none" {
		t.Error("the line did not come back")
	}
}

// column reads a column of the pooled table in its present order.
func column0(table string, index int) string {
	return fmt.Sprintf(`[...document.querySelectorAll('#grid-%s tbody tr')].map(r => r.cells[%d].dataset.v ?? r.cells[%d].textContent)`, table, index, index)
}

func sorting(t *testing.T, b *browser, r *bench.Results) {
	head := `#grid-pooled thead th:nth-child(%d) button`
	at := ask[int](t, b, `[...document.querySelectorAll('#grid-pooled thead th')].findIndex(h => h.textContent.startsWith('snr_db'))`)
	ordered := func(up bool) {
		t.Helper()
		last := math.Inf(1)
		if up {
			last = math.Inf(-1)
		}
		list := ask[[]string](t, b, column0("pooled", at))
		if len(list) != len(r.Designs) {
			t.Fatalf("%d rows", len(list))
		}
		for _, text := range list {
			var v float64
			fmt.Sscan(text, &v)
			if up && v < last || !up && v > last {
				t.Errorf("%v after %v, ascending %v", v, last, up)
			}
			last = v
		}
	}
	b.do(t, chromedp.Click(chromedp.CSS(fmt.Sprintf(head, at+1))))
	ordered(false)
	b.do(t, chromedp.Focus(chromedp.CSS(fmt.Sprintf(head, at+1))), chromedp.KeyEvent(kb.Enter))
	ordered(true)
	if got := ask[string](t, b, `document.querySelector('#grid-pooled th[aria-sort]').getAttribute('aria-sort')`); got != "ascending" {
		t.Errorf("aria-sort %q", got)
	}
	b.do(t, chromedp.Click(chromedp.CSS(fmt.Sprintf(head, 1))))
	if list := ask[[]string](t, b, column0("pooled", 0)); list[0] != "a-law:8" {
		t.Errorf("by name: %q", list)
	}
}

func otherFigure(t *testing.T, b *browser, r *bench.Results) {
	ask[bool](t, b, `(s => { s.value = 'entropy_bits'; return s.dispatchEvent(new Event('change')); })(document.getElementById('pick-figure'))`)
	list := ask[[]string](t, b, column0("each", 2))
	for i, c := range r.Clips {
		want := five(r.Results[i*len(r.Designs)+1].Figures[entropy])
		if list[i] != want {
			t.Errorf("%s: %q, want %q", c.File, list[i], want)
		}
	}
}

func otherClip(t *testing.T, b *browser) {
	d := `document.querySelector('#time-picture [data-part="%s"]').getAttribute('d')`
	before := ask[string](t, b, fmt.Sprintf(d, "wave"))
	ask[bool](t, b, `(s => { s.value = '2'; return s.dispatchEvent(new Event('change')); })(document.getElementById('pick-clip'))`)
	if after := ask[string](t, b, fmt.Sprintf(d, "wave")); after == before || !strings.HasSuffix(after, "Z") {
		t.Error("the waveform is not another")
	}
	line := ask[string](t, b, fmt.Sprintf(d, "b"))
	ask[bool](t, b, `(s => { s.value = '0'; return s.dispatchEvent(new Event('change')); })(document.getElementById('pick-b'))`)
	if after := ask[string](t, b, fmt.Sprintf(d, "b")); after == line {
		t.Error("B is drawn as before")
	}
	if got := ask[string](t, b, `document.getElementById('player').getAttribute('src')`); !strings.HasPrefix(got, "audio/call-03/") {
		t.Errorf("would play %q", got)
	}
}

// playback: the cursor is where the sound is, while it plays and after a click.
func playback(t *testing.T, b *browser) {
	ask[bool](t, b, `(p => { p.volume = 0.1; p.play(); return true; })(document.getElementById('player'))`)
	const seconds = `Number(document.getElementById('time-picture').dataset.seconds)`
	const now = `document.getElementById('player').currentTime`
	for _, at := range []string{"0.2", "0.6"} {
		await(t, b, seconds+` > `+at)
		// In the frame's turn after the page's own: what is seen then.
		gap := ask[float64](t, b, `new Promise(r => requestAnimationFrame(() => r(Math.abs(`+seconds+` - `+now+`))))`)
		if gap > 0.05 {
			t.Errorf("past %s s the cursor is %g s from the sound", at, gap)
		}
	}
	x := ask[float64](t, b, `Number(document.querySelector('#time-picture [data-part="cursor"]').getAttribute('d').match(/^M([\d.]+)/)[1])`)
	if x <= timeLeft+10 || x > timeRight {
		t.Errorf("cursor at %g", x)
	}
	b.do(t, chromedp.Click(chromedp.CSS(`#hear label:has(input[value="be"])`)))
	await(t, b, `document.getElementById('player').currentSrc.endsWith('.error.wav') && !document.getElementById('player').paused && `+now+` > 0.5`)
	if v := ask[float64](t, b, `document.getElementById('player').volume`); v != 0.1 {
		t.Errorf("another sound changed the volume to %g", v)
	}
	ask[bool](t, b, `(p => { p.pause(); return true; })(document.getElementById('player'))`)
	b.do(t, chromedp.Click(chromedp.ID("time-picture")))
	await(t, b, `Math.abs(`+seconds+` - `+now+`) < 0.01 && `+seconds+` > 1`)
}
