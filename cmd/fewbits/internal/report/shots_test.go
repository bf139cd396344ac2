package report

import (
	"flag"
	"fmt"
	"os"
	"path/filepath"
	"testing"

	"github.com/chromedp/cdproto/emulation"
	"github.com/chromedp/chromedp"
)

// TestWidths: at three widths, light and dark, nothing sticks out sideways.
// With -artifacts, screenshots and a print are kept for the eye.
func TestWidths(t *testing.T) {
	r, traces := synthetic(5, 1500)
	b := browse(t)
	b.do(t, chromedp.Navigate(leave(t, r, traces)))
	keep := flag.Lookup("test.artifacts").Value.String() == "true"
	for _, width := range []int64{380, 820, 1280} {
		for _, scheme := range []string{"light", "dark"} {
			media := emulation.SetEmulatedMediaParams{Features: []*emulation.MediaFeature{{Name: "prefers-color-scheme", Value: scheme}}}
			if _, err := chromedp.Call(b, emulation.SetEmulatedMedia, media); err != nil {
				t.Fatal(err)
			}
			b.do(t, chromedp.EmulateViewport(width, 900))
			if got := ask[int64](t, b, `document.documentElement.scrollWidth`); got > width {
				t.Errorf("%d wide, %s: the page is %d wide", width, scheme, got)
			}
			if keep {
				picture(t, b, fmt.Sprintf("page-%d-%s.png", width, scheme), chromedp.FullScreenshot(100))
			}
		}
	}
	if keep {
		picture(t, b, "page.pdf", chromedp.PrintToPDF())
	}
}

func picture(t *testing.T, b *browser, name string, take chromedp.Action[[]byte]) {
	t.Helper()
	data, err := chromedp.Run(b, take)
	if err != nil {
		t.Fatal(err)
	}
	if err := os.WriteFile(filepath.Join(t.ArtifactDir(), name), data, 0o666); err != nil {
		t.Fatal(err)
	}
}
