package report

import (
	"bytes"
	"testing"
)

// TestPageSize: 50 recordings and 12 designs stay below a megabyte.
func TestPageSize(t *testing.T) {
	r, traces := synthetic(50, 2000)
	var out bytes.Buffer
	if err := HTML(&out, r, traces, Options{Audio: true}); err != nil {
		t.Fatal(err)
	}
	t.Logf("%d bytes", out.Len())
	if out.Len() > 1e6 {
		t.Errorf("%d bytes", out.Len())
	}
}
