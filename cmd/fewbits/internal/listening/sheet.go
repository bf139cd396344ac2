package listening

import (
	"fmt"
	"io"
)

// sheetHead is the printable answer sheet's instructions. The weekly allowance
// is that of ITU-T H.870 / WHO-ITU "Safe listening devices and systems" (2019),
// second-hand.
const sheetHead = `<!doctype html>
<html lang="en"><head><meta charset="utf-8"><title>Answer sheet</title>
<style>
body{font:12pt/1.4 Georgia,serif;max-width:17cm;margin:1cm auto;padding:0 .5cm;color:#111;background:#fff}
table{border-collapse:collapse;width:100%} td,th{border:1px solid #666;padding:.28cm;text-align:left}
.box{display:inline-block;width:.42cm;height:.42cm;border:1px solid #111;margin-right:.2cm;vertical-align:-.05cm}
@page{size:A4;margin:1.5cm}
</style></head><body>
<h1>Which of the two do you prefer?</h1>
<p>Each file holds one message twice, with half a second of silence between. Play a
file as often as you like, then mark which version you would rather work with
all day. Mark "no difference" if you hear none; please do not guess.</p>
<p><b>Playback level.</b> Start with the volume low. Set it once, on the first file, to
where speech is comfortable; keep it for all files; never raise it for a quiet
passage. Take a break when you tire. For orientation, safe listening guidance
names 80 dB(A) for 40 hours a week for adults (WHO-ITU 2019, second-hand); your
local rules and the advice of qualified people come first.</p>
<p>Listener: ____________________ &nbsp; Date: ______________ &nbsp; Headphones or loudspeaker: ______________</p>
<table><tr><th>File</th><th>First</th><th>Second</th><th>No difference</th><th>Remark</th></tr>
`

// sheet writes an answer sheet for n pairs.
func sheet(w io.Writer, n int) error {
	if _, err := io.WriteString(w, sheetHead); err != nil {
		return err
	}
	for i := range n {
		_, err := fmt.Fprintf(w, "<tr><td>pair-%02d</td><td><span class=box></span></td><td><span class=box></span></td>"+
			"<td><span class=box></span></td><td style=\"width:35%%\"></td></tr>\n", i+1)
		if err != nil {
			return err
		}
	}
	_, err := io.WriteString(w, "</table></body></html>\n")
	return err
}
