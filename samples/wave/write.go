package wave

import "encoding/binary"

// Header is the start of a new file up to its first sample, and whether a pad
// byte follows the last one. Samples are PCM16, PCM24, PCM32, Float32 or
// Float64; channels * Bytes() must fit 16 bits, which 256 channels do. Where
// the sizes pass 32 bits it is an RF64 header.
func Header(e Encoding, rate, channels int, frames int64) (head []byte, pad bool) {
	if rate < 1 || channels < 1 || channels > MaxChannels || frames < 0 {
		panic("wave: header of impossible samples")
	}
	frame := channels * e.Bytes()
	data := frames * int64(frame)
	pad = data%2 == 1
	body := data + int64(data%2)

	le := binary.LittleEndian
	format := le.AppendUint16(nil, tagPCM)
	if e.Float() {
		format = le.AppendUint16(nil, tagFloat)
	}
	format = le.AppendUint16(format, uint16(channels))
	format = le.AppendUint32(format, uint32(rate))
	format = le.AppendUint32(format, uint32(int64(rate)*int64(frame)))
	format = le.AppendUint16(format, uint16(frame))
	format = le.AppendUint16(format, uint16(e.Bits()))
	var fact []byte
	if e.Float() { // anything but PCM says how long its extension is and has a fact chunk
		format = le.AppendUint16(format, 0)
		fact = le.AppendUint32(nil, uint32(min(frames, streamed)))
	}

	size := 4 + 8 + int64(len(format)) + 8 + body
	if fact != nil {
		size += 8 + int64(len(fact))
	}
	if size > streamed-1 {
		size += 8 + 28
		head = append(le.AppendUint32([]byte("RF64"), streamed), "WAVE"...)
		ds64 := le.AppendUint64(nil, uint64(size))
		ds64 = le.AppendUint64(ds64, uint64(data))
		ds64 = le.AppendUint64(ds64, uint64(frames))
		head = append(head, chunk("ds64", le.AppendUint32(ds64, 0))...)
	} else {
		head = append(le.AppendUint32([]byte("RIFF"), uint32(size)), "WAVE"...)
	}
	head = append(head, chunk("fmt ", format)...)
	if fact != nil {
		head = append(head, chunk("fact", fact)...)
	}
	if size > streamed-1 {
		data = streamed
	}
	return append(head, le.AppendUint32([]byte("data"), uint32(data))...), pad
}

// chunk puts a name and a size before a body of even length.
func chunk(id string, body []byte) []byte {
	return append(binary.LittleEndian.AppendUint32([]byte(id), uint32(len(body))), body...)
}
