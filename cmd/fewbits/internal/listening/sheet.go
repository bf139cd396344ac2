package listening

import (
	"fmt"
	"io"
)

// sheetHead is the printable answer sheet's instructions. Pauses and noting the
// level: ITU-T P.800; the weekly allowance: WHO-ITU "Safe listening devices and
// systems" (2019), ITU-T H.870; all second-hand.
const sheetHead = `<!doctype html>
<html lang="en"><head><meta charset="utf-8">
<meta http-equiv="Content-Security-Policy" content="default-src 'none'; style-src 'unsafe-inline'">
<meta name="viewport" content="width=device-width, initial-scale=1">
<title>Answer sheet</title>
<style>
:root{color-scheme:light}
body{font:11pt/1.4 Georgia,serif;max-width:17cm;margin:1cm auto;padding:0 .5cm;color:#111;background:#fff}
h1{font-size:16pt;margin:0 0 .3cm} h2{font-size:12pt;margin:.4cm 0 .1cm} p{margin:.1cm 0 .25cm}
.level{border-left:.12cm solid #111;padding-left:.35cm}
.who{line-height:2} .who span{display:inline-block;border-bottom:1px solid #111;min-width:3.2cm;height:1em;margin:0 .3cm 0 .1cm;vertical-align:-.1cm}
table{border-collapse:collapse;width:100%%} th,td{border:1px solid #666;padding:.2cm;text-align:left}
thead{display:table-header-group} tr{break-inside:avoid} td:last-child{width:32%%}
i{display:inline-block;width:.42cm;height:.42cm;border:1px solid #111}
@page{size:A4;margin:1.5cm}
@media print{body{margin:0;padding:0 .05cm;max-width:none}}
</style></head><body>
<h1>Which of the two do you prefer?</h1>
<p>Each file holds one message twice, with half a second of silence between. Play a
file as often as you like, then mark the version that you would rather work with
all day. Mark "no difference" if you hear none; do not guess. Answer on your own,
and leave the key closed until every sheet is in. Take a break after 20 minutes.</p>
<h2>Playback level</h2>
<p class="level">Start with the volume low. Play %[1]s, the loudest of the set, and turn up
only until its speech is comfortable. Keep that setting for all files: never raise it
for a faint message or a quiet passage. Stop if it hurts or your ears ring. Safe
listening guidance allows adults 80 dB(A) for 40 hours a week, children and sensitive
ears 75 dB(A), and half the time for every 3 dB more (WHO-ITU 2019, ITU-T H.870;
second-hand). Local rules and the advice of qualified people come first.</p>
<p class="who">Listener<span></span> Date<span></span> Headphones or loudspeaker<span></span>
Volume setting<span></span> Level if measured, dB(A)<span></span></p>
<table><thead><tr><th>File</th><th>First</th><th>Second</th><th>No difference</th><th>Remark</th></tr></thead>
<tbody>
`

// sheet writes an answer sheet; it holds nothing that tells the designs.
func sheet(w io.Writer, r Report) error {
	if _, err := fmt.Fprintf(w, sheetHead, stem(r.Reference)); err != nil {
		return err
	}
	for _, file := range r.Files {
		if _, err := fmt.Fprintf(w, "<tr><td>%s</td><td><i></i></td><td><i></i></td><td><i></i></td><td></td></tr>\n", stem(file)); err != nil {
			return err
		}
	}
	_, err := io.WriteString(w, "</tbody></table>\n</body></html>\n")
	return err
}
