//go:build race

package main

// underRace: the race detector makes whole runs ten times slower.
const underRace = true
