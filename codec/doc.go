// Package codec holds what a memoryless scalar quantizer is and does: the
// Staircase (sorted decision thresholds, one reconstruction value per cell,
// the meaning of its indices), and the classic laws that are closed forms:
// uniform, mu-law and A-law companding and the cells of ITU-T G.711.
//
// Amplitudes are float64 with full scale = 1.0. How a staircase is found for
// a density or for data is the business of codec/design; which designs can be
// asked for by name, that of codec/family.
//
// Sources: ITU-T Rec. G.711 (11/1988); B. Smith, "Instantaneous companding of
// quantized signals", Bell Syst. Tech. J. 36 (1957); N. S. Jayant, P. Noll,
// Digital Coding of Waveforms (1984), ch. 4.
package codec
