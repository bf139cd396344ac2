//go:build race

package bench

// underRace: the race detector makes design searches ten times slower.
const underRace = true
