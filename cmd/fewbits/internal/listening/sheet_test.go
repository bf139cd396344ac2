package listening

import (
	"strings"
	"testing"
)

// TestSheet: a row a pair, and the caution with the pair to set the level on.
func TestSheet(t *testing.T) {
	var b strings.Builder
	r := Report{Reference: "pair-03.wav", Files: []string{"pair-01.wav", "pair-02.wav", "pair-03.wav"}}
	if err := sheet(&b, r); err != nil {
		t.Fatal(err)
	}
	text := strings.Join(strings.Fields(b.String()), " ")
	for _, want := range []string{
		"<tr><td>pair-01</td>", "<tr><td>pair-02</td>", "<tr><td>pair-03</td>",
		"Start with the volume low. Play pair-03,", "never raise it", "80 dB(A) for 40 hours a week", "second-hand", "Local rules", "@page{size:A4",
	} {
		if !strings.Contains(text, want) {
			t.Errorf("the sheet lacks %q", want)
		}
	}
	if strings.Contains(text, "%!") || strings.Contains(text, "<script") || strings.Contains(text, "http:") {
		t.Error("the sheet is malformed, or not self-contained")
	}
}
