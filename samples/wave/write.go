package wave

import "encoding/binary"

var le = binary.LittleEndian

// Header is the start of a new file up to its first sample, and whether a pad
// byte follows the last one. Samples are PCM16, PCM24, PCM32, Float32 or
// Float64, of 1 to MaxChannels channels. Where the sizes pass 32 bits it is an
// RF64 header. It panics where there can be no such samples.
func Header(e Encoding, rate, channels int, frames int64) (head []byte, pad bool) {
	if rate < 1 || channels < 1 || channels > MaxChannels || frames < 0 {
		panic("wave: header of impossible samples")
	}
	data := frames * int64(channels*e.Bytes())
	pad = data%2 == 1
	head = chunk("fmt ", fmtBody(e, rate, channels))
	if e.Float() { // whatever is not PCM tells its length in a fact chunk
		head = append(head, chunk("fact", le.AppendUint32(nil, uint32(min(frames, streamed))))...)
	}
	size := int64(len("WAVE")+len(head)+len("data")+4) + data + data%2
	if size < streamed {
		head = append(append(le.AppendUint32([]byte("RIFF"), uint32(size)), "WAVE"...), head...)
		return append(head, le.AppendUint32([]byte("data"), uint32(data))...), pad
	}
	body := le.AppendUint64(nil, uint64(size+8+28)) // and the ds64 chunk itself
	body = le.AppendUint64(body, uint64(data))
	body = le.AppendUint64(body, uint64(frames))
	body = le.AppendUint32(body, 0) // no table of other chunks
	start := append(le.AppendUint32([]byte("RF64"), streamed), "WAVE"...)
	head = append(append(start, chunk("ds64", body)...), head...)
	return append(head, le.AppendUint32([]byte("data"), streamed)...), pad
}

// fmtBody is the body of the fmt chunk.
func fmtBody(e Encoding, rate, channels int) []byte {
	tag, frame := uint16(tagPCM), channels*e.Bytes()
	if e.Float() {
		tag = tagFloat
	}
	b := le.AppendUint16(nil, tag)
	b = le.AppendUint16(b, uint16(channels))
	b = le.AppendUint32(b, uint32(rate))
	b = le.AppendUint32(b, uint32(int64(rate)*int64(frame)))
	b = le.AppendUint16(b, uint16(frame))
	b = le.AppendUint16(b, uint16(e.Bits()))
	if e.Float() { // whatever is not PCM tells the length of its extension
		b = le.AppendUint16(b, 0)
	}
	return b
}

// chunk puts a name and a size before a body of even length.
func chunk(id string, body []byte) []byte {
	return append(le.AppendUint32([]byte(id), uint32(len(body))), body...)
}
