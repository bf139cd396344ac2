package drawing

import "unicode/utf8"

// withKey is the figure on paper with title above and key beneath, for files.
func (f *Figure) withKey() *Figure {
	const head, row = 26, 20
	g := &Figure{Name: f.Name, Title: f.Title, Text: f.Text, W: f.W}
	rows := f.keyRows(16, head+f.H+12, row)
	g.H = head + f.H + 8
	if n := len(rows); n > 0 {
		g.H = rows[n-1].y + 14
	}
	g.Rect(Ink{Role: "paper"}, 0, 0, g.W, g.H)
	g.Words("head", 16, 18, Start, f.Title)
	for _, s := range f.shapes {
		moved := s
		moved.points = nil
		for _, p := range s.points {
			moved.points = append(moved.points, Point{p.X, p.Y + head})
		}
		g.shapes = append(g.shapes, moved)
	}
	for _, r := range rows {
		g.Line(Stroke(r.Series), Point{r.x, r.y - 4}, Point{r.x + 34, r.y - 4})
		g.Marker(r.Series, r.x+17, r.y-4)
		g.Words("label", r.x+40, r.y, Start, r.Label)
	}
	return g
}

type keyRow struct {
	Entry
	x, y float64
}

// keyRows flows the entries from left to right in rows.
func (f *Figure) keyRows(left, top, row float64) (out []keyRow) {
	x, y := left, top+8
	for _, e := range f.Key {
		w := 40 + 6.6*float64(utf8.RuneCountInString(e.Label)) + 18
		if x > left && x+w > f.W {
			x, y = left, y+row
		}
		out = append(out, keyRow{e, x, y})
		x += w
	}
	return out
}
