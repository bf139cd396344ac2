//go:build !race

package bench

const underRace = false
