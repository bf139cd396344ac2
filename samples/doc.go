// Package samples is what goes in and comes out: recordings opened for random
// access by frame index, and writers of new ones that appear whole or not at
// all. A frame is one sample of every channel; planes are one slice a channel,
// all of the same length; full scale is 1.0. Memory stays constant whatever the
// length: samples are read from the file, or from a temporary one where the
// file is compressed, as they are asked for.
//
// The value of a stored sample: two's complement PCM s/2^(bits-1), 8-bit PCM
// (u-128)/2^7, floats as they are, G.711 by the Recommendation's tables with
// mu-law's 14-bit values over 8192 and A-law's 13-bit values over 4096.
package samples
