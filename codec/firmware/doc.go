// Package firmware turns a staircase into integer tables for 16-bit audio:
// decision words, Q15 values and code words, with the loss that rounding
// brings; as a table to run here, and as C99, CSV and JSON to take away.
//
// A word w stands for the amplitude w/32768. Every one of the 65,536 words
// lands in the very cell that codec.Staircase.Index names, ties included, so
// only the values are rounded.
//
// Sources: ISO/IEC 9899:1999 for what C promises; F. Gray, US patent 2632058
// (1953), for the reflected code; N. S. Jayant, P. Noll, Digital Coding of
// Waveforms (1984), ch. 4, for folded codes (from memory); the checksum is FNV-1a
// with 32 bits (G. Fowler, L. C. Noll, K.-P. Vo; as in Go's hash/fnv).
package firmware
