package wave

import (
	"bytes"
	"fmt"
)

// Limits of our own: more is a damaged header rather than a recording.
const (
	MaxChannels = 256
	MinRate     = 100       // Hz
	MaxRate     = 1_000_000 // Hz
)

// guidTail follows the format tag in the sub-format GUID of an extensible
// header: xxxxxxxx-0000-0010-8000-00AA00389B71.
var guidTail = []byte{0, 0, 0, 0, 0x10, 0, 0x80, 0, 0, 0xAA, 0, 0x38, 0x9B, 0x71}

// header is a fmt chunk as it stands.
type header struct {
	at        int64 // offset of the chunk's body
	tag       uint16
	channels  int
	rate      int64
	align     int
	bits      int
	validBits int
}

// parseFmt reads a fmt chunk's body (its first 40 bytes at most), found at byte at.
func parseFmt(at int64, b []byte) (header, error) {
	if len(b) < 16 {
		return header{}, fault(at, damaged, "the fmt chunk has %d bytes and needs 16", len(b))
	}
	h := header{
		at: at, tag: le.Uint16(b), channels: int(le.Uint16(b[2:])), rate: int64(le.Uint32(b[4:])),
		align: int(le.Uint16(b[12:])), bits: int(le.Uint16(b[14:])),
	}
	h.validBits = h.bits
	if h.tag != tagExtensible {
		return h, nil
	}
	if len(b) < 40 || le.Uint16(b[16:]) < 22 {
		return h, fault(at, damaged, "the extensible fmt chunk has no room for its sub-format")
	}
	if v := int(le.Uint16(b[18:])); v != 0 {
		h.validBits = v
	}
	h.tag = le.Uint16(b[24:])
	if !bytes.Equal(b[26:40], guidTail) {
		return h, fault(at+24, convert, "the extensible sub-format % x is not known", b[24:40])
	}
	return h, nil
}

// encoding checks the header and settles the encoding.
func (h header) encoding() (Encoding, error) {
	e, err := h.byTag()
	switch {
	case err != nil:
		return 0, err
	case h.channels == 0:
		return 0, fault(h.at+2, damaged, "the header says 0 channels")
	case h.channels > MaxChannels:
		return 0, fault(h.at+2, damaged, "the header says %d channels; at most %d are read", h.channels, MaxChannels)
	case h.rate < MinRate || h.rate > MaxRate:
		return 0, fault(h.at+4, damaged, "the header says %d Hz; %d to %d Hz are read", h.rate, MinRate, MaxRate)
	case h.align != h.channels*e.Bytes():
		return 0, fault(h.at+12, damaged, "the header says %d bytes a frame where %d channels of %d bits take %d",
			h.align, h.channels, h.bits, h.channels*e.Bytes())
	case h.validBits > e.Bits() || h.validBits < 1:
		return 0, fault(h.at+18, damaged, "the header says %d valid bits in %d", h.validBits, e.Bits())
	}
	return e, nil
}

func (h header) byTag() (Encoding, error) {
	switch {
	case h.tag == tagPCM && h.bits >= 8 && h.bits <= 32:
		return pcm((h.bits + 7) / 8), nil
	case h.tag == tagFloat && h.bits == 32:
		return Float32, nil
	case h.tag == tagFloat && h.bits == 64:
		return Float64, nil
	case h.tag == tagMuLaw && h.bits == 8:
		return MuLaw, nil
	case h.tag == tagALaw && h.bits == 8:
		return ALaw, nil
	case h.tag == tagPCM || h.tag == tagFloat || h.tag == tagMuLaw || h.tag == tagALaw:
		return 0, fault(h.at+14, convert, "%s samples of %d bits are not read", tagName(h.tag), h.bits)
	}
	return 0, fault(h.at, convert, "the samples are coded as %s", tagName(h.tag))
}

func tagName(tag uint16) string {
	switch tag {
	case tagPCM:
		return "PCM"
	case tagFloat:
		return "float"
	case tagMuLaw:
		return "G.711 mu-law"
	case tagALaw:
		return "G.711 A-law"
	}
	if name, ok := codecs[tag]; ok {
		return name
	}
	return fmt.Sprintf("an unknown codec (format tag 0x%04x)", tag)
}
