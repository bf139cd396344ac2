// Package wave finds the samples in a RIFF/WAVE file and writes headers for new
// ones. It is the only code that meets such a file's untrusted bytes: Walk
// checks every size against the file before anything is read by it, so a small
// file cannot ask for large memory, and every file is settled in time linear in
// its length.
//
// Layouts: Microsoft and IBM, "Multimedia Programming Interface and Data
// Specifications 1.0" (1991), chapter 3; Microsoft, "Multiple Channel Audio
// Data and WAVE Files" (2007) for WAVE_FORMAT_EXTENSIBLE; EBU Tech 3306 (RF64)
// and ITU-R BS.2088 (BW64) for sizes beyond 4 GiB. G.711 codes are expanded by
// ITU-T G.711, tables 1a to 2b.
//
// The samples themselves are read at random from several goroutines, which a
// streaming decoder cannot do, so the bytes are converted here in bulk; a
// general-purpose library is the second opinion in the tests.
package wave
