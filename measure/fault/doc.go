// Package fault finds what is wrong with a recording before anyone trusts a
// table made from it: clipped, off-centre, silent or cut out, coarser than its
// file says, companded or lossily coded before, up-sampled, too quiet, too
// hot, too short.
//
// A Scan reads one channel once, in blocks of any size, in constant memory
// (about 1 MB); Findings then judges what was gathered. A new kind of fault is
// one file with a judge and one line in the list of judges.
//
// Amplitudes are float64 with full scale = 1.0, levels are dBov (ITU-T
// G.100.1), frequencies Hz, spectral densities dB re full scale squared per Hz.
//
// Methods: averaged periodograms with half overlap, P. D. Welch, IEEE Trans.
// Audio Electroacoust. AU-15 (1967); window by A. H. Nuttall, IEEE Trans. ASSP
// 29 (1981), through gonum; staircases of ITU-T Rec. G.711 (11/1988); rounding
// noise lsb^2/12, W. R. Bennett, Bell Syst. Tech. J. 27 (1948). The limits at
// which a judge speaks are conventions of this project, named constants beside
// each judge.
package fault
