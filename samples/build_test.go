package samples

import (
	"bytes"
	"encoding/binary"
	"math"
	"os"
	"path/filepath"
	"testing"

	lib "github.com/mewkiz/flac"
	"github.com/mewkiz/flac/frame"
	"github.com/mewkiz/flac/meta"
)

// Pieces of WAV files, right and wrong.

func le16(v int) []byte    { return binary.LittleEndian.AppendUint16(nil, uint16(v)) }
func le32(v uint32) []byte { return binary.LittleEndian.AppendUint32(nil, v) }
func le64(v uint64) []byte { return binary.LittleEndian.AppendUint64(nil, v) }

func cat(parts ...[]byte) []byte { return bytes.Join(parts, nil) }

// claim is a chunk that claims a size of its own, unpadded.
func claim(id string, size uint32, body []byte) []byte { return cat([]byte(id), le32(size), body) }

// ck is a right chunk.
func ck(id string, body []byte) []byte {
	b := claim(id, uint32(len(body)), body)
	if len(body)%2 == 1 {
		b = append(b, 0)
	}
	return b
}

// riff is a right file of these chunks.
func riff(chunks ...[]byte) []byte {
	body := cat(chunks...)
	return cat([]byte("RIFF"), le32(uint32(4+len(body))), []byte("WAVE"), body)
}

// fmtOf is the body of a plain fmt chunk.
func fmtOf(tag, channels, rate, align, bits int) []byte {
	return cat(le16(tag), le16(channels), le32(uint32(rate)), le32(uint32(rate*align)), le16(align), le16(bits))
}

var tail = []byte{0, 0, 0, 0, 0x10, 0, 0x80, 0, 0, 0xAA, 0, 0x38, 0x9B, 0x71}

// extensible is the body of an extensible fmt chunk.
func extensible(tag, channels, rate, align, bits, valid int) []byte {
	return cat(fmtOf(0xFFFE, channels, rate, align, bits), le16(22), le16(valid), le32(0), le16(tag), tail)
}

// Four frames of 16-bit mono at 8 kHz, and their fmt chunk.
var (
	mono16 = ck("fmt ", fmtOf(1, 1, 8000, 2, 16))
	four   = cat(le16(100), le16(-200), le16(300), le16(-400))
	list   = ck("LIST", []byte("INFOICMT\x04\x00\x00\x00abcd"))
)

func floats32(x ...float64) (b []byte) {
	for _, v := range x {
		b = append(b, le32(math.Float32bits(float32(v)))...)
	}
	return b
}

func floats64(x ...float64) (b []byte) {
	for _, v := range x {
		b = append(b, le64(math.Float64bits(v))...)
	}
	return b
}

// flacOf encodes planes with an encoder of the library; info may be changed
// before, the header's checksum is left out where sum is false.
func flacOf(t testing.TB, bits, rate int, planes ...[]int32) []byte {
	t.Helper()
	path := filepath.Join(t.TempDir(), "x.flac")
	file, err := os.Create(path)
	if err != nil {
		t.Fatal(err)
	}
	e, err := lib.NewEncoder(file, &meta.StreamInfo{BlockSizeMin: 4096, BlockSizeMax: 4096, SampleRate: uint32(rate),
		NChannels: uint8(len(planes)), BitsPerSample: uint8(bits), NSamples: uint64(len(planes[0]))})
	if err != nil {
		t.Fatal(err)
	}
	channels := map[int]frame.Channels{1: frame.ChannelsMono, 2: frame.ChannelsLR, 3: frame.ChannelsLRC}[len(planes)]
	for at := 0; at < len(planes[0]); at += 4096 {
		end := min(at+4096, len(planes[0]))
		f := &frame.Frame{Header: frame.Header{HasFixedBlockSize: true, BlockSize: uint16(end - at), SampleRate: uint32(rate),
			Channels: channels, BitsPerSample: uint8(bits), Num: uint64(at / 4096)}}
		for _, p := range planes {
			f.Subframes = append(f.Subframes, &frame.Subframe{SubHeader: frame.SubHeader{Pred: frame.PredVerbatim},
				Samples: append([]int32(nil), p[at:end]...), NSamples: end - at})
		}
		if err := e.WriteFrame(f); err != nil {
			t.Fatal(err)
		}
	}
	if err := e.Close(); err != nil { // closes the file, too
		t.Fatal(err)
	}
	b, err := os.ReadFile(path)
	if err != nil {
		t.Fatal(err)
	}
	return b
}

// noise is seeded, bits wide.
func noise(n, bits int, seed uint32) []int32 {
	x := make([]int32, n)
	for i := range x {
		seed = seed*1664525 + 1013904223
		x[i] = int32(seed) >> (32 - bits)
	}
	return x
}

func put(t testing.TB, name string, b []byte) string {
	t.Helper()
	path := filepath.Join(t.TempDir(), name)
	if err := os.WriteFile(path, b, 0o666); err != nil {
		t.Fatal(err)
	}
	return path
}
