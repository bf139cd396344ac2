package listening

import "testing"

// BenchmarkWrite makes one pair of ten seconds at 8 kHz a side.
func BenchmarkWrite(b *testing.B) {
	const frames = 10 * testRate
	pairs := []Pair{{Clip: "c", PathA: toneOf(b, 0.3, 1, frames), PathB: toneOf(b, 0.2, 1, frames), B1: 1, B2: 0.7}}
	b.SetBytes(2 * 3 * frames)
	b.ReportAllocs()
	for b.Loop() {
		dir := b.TempDir()
		if _, err := Write(dir, "A", "B", pairs, 1); err != nil {
			b.Fatal(err)
		}
	}
}
