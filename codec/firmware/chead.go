package firmware

import (
	"bytes"
	"fmt"
	"io"
	"strings"
)

// C writes one C99 header: encode, decode, their tables, and under a macro a
// main that checks both over all 65,536 words against a checksum made here.
// Encode takes the same steps for every word: no branch depends on the data;
// nothing is allocated, and no behaviour is undefined or left to the
// implementation. Functions and macros start with Identifier(name);
// provenance goes into a comment, made safe.
func (t *Table) C(w io.Writer, name, provenance string) error {
	h := header{t: t, id: Identifier(name)}
	h.macro = "FEWBITS_" + strings.ToUpper(h.id)
	h.front(provenance)
	h.encode()
	h.decode()
	h.selfCheck()
	h.line("#endif")
	_, err := w.Write(h.out.Bytes())
	return err
}

// header is a C header being written.
type header struct {
	t         *Table
	id, macro string
	out       bytes.Buffer
}

func (h *header) line(format string, args ...any) {
	fmt.Fprintf(&h.out, format+"\n", args...)
}

// front writes comment, guard and the macros with the table's measures.
func (h *header) front(provenance string) {
	t := h.t
	h.line("/*")
	h.line(" * %s: %s, for 16-bit samples.", h.id, t)
	h.line(" *")
	h.line("%s", comment(provenance))
	h.line(" *")
	h.line(" * Levels are rounded to Q15; the cells are exact. Rounding: %s", t.Loss.Sentence())
	h.line(" * Self-check: compile this file as C with -D%s_SELF_CHECK and run it.", h.macro)
	h.line(" */")
	h.line("#ifndef %s_H", h.macro)
	h.line("#define %s_H", h.macro)
	h.line("")
	h.line("#include <stdint.h>")
	h.line("")
	h.line("#define %s_CELLS %d", h.macro, t.Cells())
	h.line("#define %s_BITS %d", h.macro, t.Bits())
	h.line("")
}

// array writes a static table, twelve numbers a line.
func (h *header) array(ctype, suffix string, n int, at func(i int) int) {
	h.line("static const %s %s_%s[%d] = {", ctype, h.id, suffix, n)
	for i := 0; i < n; i += 12 {
		var row []string
		for j := i; j < min(i+12, n); j++ {
			row = append(row, fmt.Sprintf("%d,", at(j)))
		}
		h.line("    %s", strings.Join(row, " "))
	}
	h.line("};")
	h.line("")
}

// selfCheck writes the main that recomputes Checksum.
func (h *header) selfCheck() {
	h.line("#ifdef %s_SELF_CHECK", h.macro)
	h.line("#include <stdio.h>")
	h.line("")
	h.line("static uint32_t %s_mix(uint32_t h, uint16_t v)", h.id)
	h.line("{")
	h.line("    h = (h ^ (uint32_t)(v & 0xFFu)) * UINT32_C(16777619);")
	h.line("    return (h ^ (uint32_t)(v >> 8)) * UINT32_C(16777619);")
	h.line("}")
	h.line("")
	h.line("int main(void)")
	h.line("{")
	h.line("    uint32_t h = UINT32_C(2166136261);")
	h.line("    int32_t x;")
	h.line("    for (x = -INT32_C(32768); x <= INT32_C(32767); x++) {")
	h.line("        const uint16_t code = %s_encode((int16_t)x);", h.id)
	h.line("        h = %s_mix(h, code);", h.id)
	h.line("        h = %s_mix(h, (uint16_t)%s_decode(code));", h.id, h.id)
	h.line("    }")
	h.line("    if (h != UINT32_C(%s)) {", hex32(h.t.Checksum()))
	h.line("        printf(\"%s: checksum 0x%%08lX, want %s\\n\", (unsigned long)h);", h.id, hex32(h.t.Checksum()))
	h.line("        return 1;")
	h.line("    }")
	h.line("    printf(\"%s: all 65536 words as designed\\n\");", h.id)
	h.line("    return 0;")
	h.line("}")
	h.line("#endif")
	h.line("")
}
