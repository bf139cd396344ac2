// Package report renders the results of a run (bench.Results, bench.Traces)
// for people: a table for the terminal, CSV, JSON, one self-contained HTML
// page and its pictures as files. It measures, fits and designs nothing: every
// number shown is one of the results, at most rounded, and every sentence is
// made from them.
//
// The page needs no network: pictures are static SVG, the script is our own,
// audio stays beside it under audio/<clip>/<design>.wav. Series are told apart
// by dash and marker as well as by colour; the hues are those of M. Okabe and
// K. Ito, Color Universal Design (2008), with lightness moved to keep contrast
// on both backgrounds.
package report
