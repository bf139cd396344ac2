package bench

import (
	"io"
	"os"
	"strings"
)

// joinRows makes frames.csv of the clips' parts, in order of the clips.
func (e *engine) joinRows(clips []*survey, designs []Design) error {
	if !e.plan.FramesCSV {
		return nil
	}
	path, err := e.plan.Place("frames.csv")
	if err != nil {
		return err
	}
	out, err := os.Create(path)
	if err != nil {
		return err
	}
	defer out.Close()
	var head strings.Builder
	head.WriteString("clip,channel,frame,start_s,level_dbov,in_range")
	for _, d := range designs {
		head.WriteString("," + string(csvField(d.Spec)))
	}
	if _, err := io.WriteString(out, head.String()+"\n"); err != nil {
		return err
	}
	for _, s := range clips {
		if err := e.joinPart(out, s.clip.Name); err != nil {
			return err
		}
	}
	return out.Close()
}

func (e *engine) joinPart(out io.Writer, name string) error {
	part, err := e.plan.Place(rowsPart(name)...)
	if err != nil {
		return err
	}
	in, err := os.Open(part)
	if err != nil {
		return err
	}
	defer os.Remove(part)
	defer in.Close()
	_, err = io.Copy(out, in)
	return err
}

// csvField quotes a field where RFC 4180 asks for it.
func csvField(s string) []byte {
	if !strings.ContainsAny(s, ",\"\r\n") {
		return []byte(s)
	}
	return []byte(`"` + strings.ReplaceAll(s, `"`, `""`) + `"`)
}
