// Package prepare changes recordings by the book before anything is measured:
// a stretch cut out, channels chosen or mixed, DC removed, the sampling rate
// changed, a gain. Steps run in that order; each is reported in words. The
// samples are made as they are read, but for a change of rate, whose result is
// kept in a temporary file: memory stays constant.
//
// The resampler is a polyphase filter with a Kaiser window: J. F. Kaiser and
// R. W. Schafer, "On the use of the I0-sinh window for spectrum analysis", IEEE
// Trans. ASSP 28 (1980), and A. V. Oppenheim and R. W. Schafer, "Discrete-Time
// Signal Processing", sections 4.6 and 7.5.3 (from memory).
package prepare
