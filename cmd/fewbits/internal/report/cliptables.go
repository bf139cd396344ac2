package report

import (
	"strconv"
	"strings"

	"fewbits/cmd/fewbits/internal/bench"
)

// clipsTable is what each recording is.
func (b *book) clipsTable() gridTable {
	t := gridTable{ID: "clips", Caption: "The recordings", Note: "As measured, after preparation. Levels re full scale; noise: level of the frames out of range."}
	t.Head = append(words("recording"), headCell{Text: "format", Words: true}, headCell{Text: "preparation", Words: true})
	for _, h := range [][2]string{
		{"rate", "Hz"}, {"channels", ""}, {"length", "s"}, {"samples", "per channel"}, {"level", "dBov"}, {"active level", "dBov"},
		{"activity", "%"}, {"peak", "dB"}, {"crest", "dB"}, {"DC", ""}, {"lsb", ""}, {"effective bits", ""},
		{"noise", "dBov"}, {"zeros", "%"}, {"frames", ""}, {"in range", ""}, {"warnings", ""},
	} {
		t.Head = append(t.Head, headCell{Text: h[0], Unit: h[1]})
	}
	for i := range b.Clips {
		t.Rows = append(t.Rows, clipRow(&b.Clips[i]))
	}
	return t
}

func clipRow(c *bench.Clip) []cell {
	return []cell{
		said(c.File), said(c.Format), said(strings.Join(c.Preparation, ", ")), integer(int64(c.RateHz)), integer(int64(c.Channels)),
		number(c.Seconds, trim(c.Seconds)), integer(c.Samples), decimal(c.LevelDBov, 1), decimal(c.ActiveDBov, 1),
		number(float64(c.Activity), percent(c.Activity)), decimal(c.PeakDB, 1), decimal(c.CrestDB, 1), decimal(c.DC, 5),
		number(c.LSB, strconv.FormatFloat(c.LSB, 'g', 3, 64)), integer(int64(c.EffectiveBits)), decimal(c.NoiseDBov, 1),
		number(float64(c.ZeroShare), percent(c.ZeroShare)), integer(c.Frames), integer(c.FramesInRange), integer(int64(len(c.Warnings))),
	}
}

// modelsTable is the models fitted to all clips together.
func modelsTable(t *bench.Traces) gridTable {
	g := gridTable{ID: "models", Caption: "Models fitted to all clips together", Note: fitNote}
	g.Head = fitHead()
	for _, m := range t.Models {
		g.Rows = append(g.Rows, fitRow(&m.Fit))
	}
	return g
}

const fitNote = "Design loss: SNR that a table made for the fitted model loses against the best table for the data, dB. Log-likelihood in nats a sample; KS: largest distance of the distribution functions."

func fitHead() []headCell {
	return append(words("model", "fitted to"), headCell{Text: "design loss", Unit: "dB"}, headCell{Text: "shape"}, headCell{Text: "± s.e."},
		headCell{Text: "scale"}, headCell{Text: "± s.e."}, headCell{Text: "rms"}, headCell{Text: "log-likelihood", Unit: "nats"},
		headCell{Text: "AIC"}, headCell{Text: "KS"}, headCell{Text: "samples"})
}

func fitRow(f *bench.Fit) []cell {
	four := func(v bench.Num) cell { return number(float64(v), strconv.FormatFloat(float64(v), 'g', 4, 64)) }
	return []cell{
		said(f.Model), said(f.Over), decimal(f.DesignLossDB, 2), four(f.Shape), four(f.ShapeSE), four(f.Scale), four(f.ScaleSE),
		four(f.RMS), decimal(f.LogLik, 4), decimal(f.AIC, 0), decimal(f.KS, 4), integer(f.Samples),
	}
}

// fitsTable is the models fitted to each clip, with as many digits as tell.
func (b *book) fitsTable() gridTable {
	g := gridTable{ID: "fits", Caption: "Models fitted to each recording", Note: fitNote + " More digits: results.json."}
	g.Head = append(words("recording"), fitHead()...)
	for i := range b.Clips {
		for j := range b.Clips[i].Fits {
			row := append([]cell{said(b.Clips[i].File)}, fitRow(&b.Clips[i].Fits[j])...)
			for k := range row {
				row[k].V = "" // long: 8 lines a clip
			}
			g.Rows = append(g.Rows, row)
		}
	}
	return g
}

// matrix is one figure for every clip and design; the page's script puts the
// other figures in its place.
func (b *book) matrix(name string) gridTable {
	g := gridTable{ID: "each", Caption: "Each recording with each design", Note: "Five digits; every digit is in results.json and summary.csv."}
	g.Head = words("recording")
	for _, d := range b.Designs {
		g.Head = append(g.Head, headCell{Text: d.Spec})
	}
	values := b.figureCells(name)
	for i, c := range b.Clips {
		row := []cell{said(c.File)}
		for j := range b.Designs {
			row = append(row, said(five(values[i*len(b.Designs)+j])))
		}
		g.Rows = append(g.Rows, row)
	}
	return g
}

// figureCells is a figure by clip, then design; NaN where there is none.
func (b *book) figureCells(name string) []bench.Num {
	at := map[[2]string]bench.Num{}
	for _, x := range b.Results.Results {
		at[[2]string{x.Clip, x.Design}] = valueOr(x.Figures, name)
	}
	var out []bench.Num
	for _, c := range b.Clips {
		for _, d := range b.Designs {
			v, ok := at[[2]string{c.File, d.Spec}]
			if !ok {
				v = bench.Num(nan)
			}
			out = append(out, v)
		}
	}
	return out
}

// five prints five significant digits, a dash where undefined.
func five(v bench.Num) string {
	if !v.Defined() {
		return dash
	}
	return strconv.FormatFloat(float64(v), 'g', 5, 64)
}

// findingsTable is what was found wrong with the recordings.
func (b *book) findingsTable() gridTable {
	g := gridTable{ID: "findings", Caption: "What was found on the recordings"}
	g.Head = append(words("recording", "weight", "kind"), headCell{Text: "channel"}, headCell{Text: "value"}, headCell{Text: "unit", Words: true},
		headCell{Text: "finding", Words: true, Long: true}, headCell{Text: "advice", Words: true, Long: true})
	for _, c := range b.Clips {
		for _, f := range c.Findings {
			g.Rows = append(g.Rows, []cell{
				said(c.File), said(f.Severity), said(f.Kind), integer(int64(f.Channel)),
				number(f.Value, strconv.FormatFloat(f.Value, 'g', 4, 64)), said(f.Unit), said(f.Sentence), said(f.Advice),
			})
		}
	}
	return g
}
