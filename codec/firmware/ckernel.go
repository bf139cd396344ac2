package firmware

import "slices"

// encode writes the search: halving the range in steps that are the same for
// every word, as a comparison times a constant.
func (h *header) encode() {
	t := h.t
	n := len(t.Decisions)
	if n > 0 {
		h.array("int16_t", "decisions", n, func(i int) int { return int(t.Decisions[i]) })
	}
	if t.Assignment == Standard {
		h.array(wordType(t.Codes), "codes", len(t.Codes), func(i int) int { return int(t.Codes[i]) })
	}
	h.line("/* The code word of a sample. */")
	h.line("static inline uint16_t %s_encode(int16_t x)", h.id)
	h.line("{")
	h.line("    unsigned k = 0u;")
	if n == 0 {
		h.line("    (void)x;")
	}
	for ; n > 0; n /= 2 {
		half := (n + 1) / 2
		h.line("    k += (unsigned)(x >= %s_decisions[k + %du]) * %du;", h.id, half-1, half)
	}
	if t.First > 0 {
		h.line("    k += %du;", t.First)
	}
	h.assign()
	h.line("}")
	h.line("")
}

// assign writes the step from the cell k to its code word.
func (h *header) assign() {
	n := h.t.Cells()
	switch h.t.Assignment {
	case Gray:
		h.line("    k ^= k >> 1;")
	case Folded:
		if n == 1 {
			break
		}
		h.line("    {")
		h.line("        const unsigned below = 0u - (unsigned)(k < %du); /* all ones below the middle */", n/2)
		if n%2 == 0 {
			h.line("        k = ((k - %du) ^ below) | (below & %du);", n/2, signBit(n))
		} else {
			h.line("        k = (((k - %du) ^ below) - below) | (below & %du);", n/2, signBit(n))
		}
		h.line("    }")
	case Standard:
		h.line("    k = %s_codes[k];", h.id)
	}
	h.line("    return (uint16_t)k;")
}

// wordType is the smallest unsigned type that holds all code words.
func wordType(codes []uint16) string {
	if slices.Max(codes) < 1<<8 {
		return "uint8_t"
	}
	return "uint16_t"
}

// decode writes the look-up by code word.
func (h *header) decode() {
	t := h.t
	h.array("int16_t", "levels", len(t.values), func(i int) int { return int(t.values[i]) })
	h.line("/* The level of a code word in Q15. Bits above the %d of a code word are", t.Bits())
	h.line(" * ignored; an unused code word gives 0. */")
	h.line("static inline int16_t %s_decode(uint16_t code)", h.id)
	h.line("{")
	h.line("    return %s_levels[code & %du];", h.id, len(t.values)-1)
	h.line("}")
	h.line("")
}
