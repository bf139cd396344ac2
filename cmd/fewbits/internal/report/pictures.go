package report

import (
	"fmt"
	"os"
	"path/filepath"

	"fewbits/cmd/fewbits/internal/bench"
)

// Pictures writes each picture of the report as a file of its own in dir,
// which exists: format is svg or png. Those over time show the same two
// designs as the page does first, a file per clip.
func Pictures(dir string, r *bench.Results, t *bench.Traces, format string) error {
	if format != "svg" && format != "png" {
		return fmt.Errorf("picture format %q: want svg or png", format)
	}
	if err := check(r, t); err != nil {
		return err
	}
	b := open(r)
	list := draw(b, t).all()
	if first, second := b.lead2(); first != nil {
		for i := range t.Clips {
			list = append(list, overTime(b, t, &t.Clips[i], first, second))
		}
	}
	for _, p := range list {
		data := []byte(p.File())
		if format == "png" {
			var err error
			if data, err = p.PNG(); err != nil {
				return fmt.Errorf("picture %s: %w", p.Name, err)
			}
		}
		if err := os.WriteFile(filepath.Join(dir, p.Name+"."+format), data, 0o666); err != nil {
			return err
		}
	}
	return nil
}
