package listening

import (
	"slices"
	"strings"
	"testing"
)

func TestOrderIsBalancedAndSeeded(t *testing.T) {
	for n := range 25 {
		for seed := range uint64(20) {
			got, swapped := order(n, seed), 0
			if !slices.Equal(got, order(n, seed)) {
				t.Fatal("one seed gives two orders")
			}
			for _, s := range got {
				if s {
					swapped++
				}
			}
			if d := 2*swapped - n; d < -1 || d > 1 {
				t.Fatalf("%d of %d pairs are swapped", swapped, n)
			}
		}
	}
}

// TestOrderIsFair: over many seeds each place is swapped half the time, within
// five standard deviations, also where n is odd.
func TestOrderIsFair(t *testing.T) {
	const seeds, n = 4000, 5
	var swapped [n]int
	for seed := range uint64(seeds) {
		for i, s := range order(n, seed) {
			if s {
				swapped[i]++
			}
		}
	}
	for i, k := range swapped {
		if d := k - seeds/2; d < -158 || d > 158 {
			t.Errorf("place %d is swapped in %d of %d sets", i, k, seeds)
		}
	}
}

// TestOrderStays pins the draw: a set made anew years later must fit its sheets.
func TestOrderStays(t *testing.T) {
	var text strings.Builder
	for _, s := range order(16, 7) {
		text.WriteString(map[bool]string{false: "A", true: "B"}[s])
	}
	if want := "BBAAABBBAAABBBAA"; text.String() != want {
		t.Errorf("seed 7 draws %s, once it drew %s", text.String(), want)
	}
}
