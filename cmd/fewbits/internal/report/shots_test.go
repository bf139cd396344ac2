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

// widths: at three widths, light and dark, nothing sticks out sideways. With
// -artifacts, screenshots and a print are kept for the eye.
func widths(t *testing.T, b *browser) {
	keep := flag.Lookup("test.artifacts").Value.String() == "true"
	for _, width := range []int64{380, 820, 1280} {
		for _, scheme := range []string{"light", "dark"} {
			b.prefer(t, scheme)
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

// prefer sets what the reader's system asks for: a colour scheme, and always
// no moving about.
func (b *browser) prefer(t *testing.T, scheme string) {
	t.Helper()
	media := emulation.SetEmulatedMediaParams{Features: []*emulation.MediaFeature{
		{Name: "prefers-color-scheme", Value: scheme}, {Name: "prefers-reduced-motion", Value: "reduce"},
	}}
	if _, err := chromedp.Call(b, emulation.SetEmulatedMedia, media); err != nil {
		t.Fatal(err)
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
