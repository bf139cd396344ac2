package wave

// muWords and aWords expand G.711 codes to the 16-bit grid: the Recommendation's
// 14-bit mu-law values times 4 (value/8192 = word/2^15) and its 13-bit A-law
// values times 8 (value/4096 = word/2^15).
var muWords, aWords = expandG711()

func expandG711() (mu, a [256]int16) {
	for code := range 256 {
		u := ^code
		v := (2*(u&15)+33)<<(u>>4&7) - 33
		if u&0x80 != 0 {
			v = -v
		}
		mu[code] = int16(4 * v)

		u = code ^ 0x55
		v = 2*(u&15) + 1
		if e := u >> 4 & 7; e > 0 {
			v = (2*(u&15) + 33) << (e - 1)
		}
		if u&0x80 == 0 {
			v = -v
		}
		a[code] = int16(8 * v)
	}
	return mu, a
}
