package flac

import (
	"bytes"
	"crypto/md5"
	"encoding/binary"
	"errors"
	"io"
	"log"
	"runtime"
	"strings"
	"testing"

	"fewbits/samples/wave"
)

// stream is a FLAC file of blocks with right checksums, laid out by RFC 9639.
func stream(rate uint64, channels, bits int, count uint64, sum [md5.Size]byte, blocks ...[]byte) []byte {
	b := []byte("fLaC\x80\x00\x00\x22\x00\x10\xff\xff\x00\x00\x00\x00\x00\x00")
	b = binary.BigEndian.AppendUint64(b, rate<<44|uint64(channels-1)<<41|uint64(bits-1)<<36|count)
	b = append(b, sum[:]...)
	return append(b, bytes.Join(blocks, nil)...)
}

// block is a block whose header and body get their checksums.
func block(header, body []byte) []byte {
	b := append(append([]byte(nil), header...), crc8(header))
	b = append(b, body...)
	return binary.BigEndian.AppendUint16(b, crc16(b))
}

// crc8 has the polynomial x^8+x^2+x+1, crc16 x^16+x^15+x^2+1 (RFC 9639, sections
// 9.1.8 and 9.3).
func crc8(b []byte) (c byte) {
	for _, v := range b {
		c ^= v
		for range 8 {
			c = c<<1 ^ c>>7*7
		}
	}
	return c
}

func crc16(b []byte) (c uint16) {
	for _, v := range b {
		c ^= uint16(v) << 8
		for range 8 {
			c = c<<1 ^ c>>15*0x8005
		}
	}
	return c
}

// constant is a block of n equal 16-bit samples in one channel; the sample size
// and, with rate 0, the rate are the stream's.
func constant(n int, number byte, value int16) []byte {
	header := []byte{0xFF, 0xF8, 0x70, 0x00, number, byte((n - 1) >> 8), byte(n - 1)}
	return block(header, []byte{0, byte(value >> 8), byte(value)})
}

// TestStreamsBits: a block that takes its sample size from the stream, which the
// library leaves to its caller.
func TestStreamsBits(t *testing.T) {
	var out bytes.Buffer
	in := bytes.Repeat([]byte{0x39, 0x30}, 1000) // 12345
	b := stream(16000, 1, 16, 1000, md5.Sum(in), constant(600, 0, 12345), constant(400, 1, 12345))
	f, err := Decode(bytes.NewReader(b), int64(len(b)), &out)
	if err != nil {
		t.Fatal(err)
	}
	if f.Rate != 16000 || f.Frames != 1000 || len(f.Warnings) > 0 || !bytes.Equal(out.Bytes(), in) {
		t.Errorf("%+v, % x ...", f, out.Bytes()[:8])
	}
}

// TestBomb: a small file of silence cannot fill the disk.
func TestBomb(t *testing.T) {
	defer func(b int64) { base = b }(base)
	base = 1 << 20
	var blocks [][]byte
	for i := range 100 {
		blocks = append(blocks, constant(65535, byte(i), 0))
	}
	b := stream(8000, 1, 16, 0, [md5.Size]byte{}, blocks...)
	var before, after runtime.MemStats
	runtime.ReadMemStats(&before)
	_, err := Decode(bytes.NewReader(b), int64(len(b)), io.Discard)
	runtime.ReadMemStats(&after)
	if err == nil || !strings.Contains(err.Error(), "unpacks to more than 1 MiB and 1200 times its size: convert it") {
		t.Errorf("%v", err)
	}
	if used := after.TotalAlloc - before.TotalAlloc; used > 32<<20 {
		t.Errorf("%d bytes allocated", used)
	}
}

// TestQuiet: the library's remark on 24 kHz stays off the standard logger; other
// lines pass.
func TestQuiet(t *testing.T) {
	var said bytes.Buffer
	if _, err := (sieve{&said}).Write([]byte("frame: The flac library test cases do not yet include any ...\n")); err != nil || said.Len() > 0 {
		t.Errorf("%v, %q", err, said.String())
	}
	(sieve{&said}).Write([]byte("something else\n"))
	if said.String() != "something else\n" {
		t.Errorf("%q", said.String())
	}
	quieten()
	if _, ok := log.Writer().(sieve); !ok {
		t.Error("the standard logger is not sieved")
	}
}

// TestFailingDisk: an error of reading or writing is given as it is.
func TestFailingDisk(t *testing.T) {
	b := stream(8000, 1, 16, 0, [md5.Size]byte{}, constant(600, 0, 1), constant(600, 1, 1))
	if _, err := Decode(bytes.NewReader(b), int64(len(b)), failing{}); !errors.Is(err, errDisk) {
		t.Errorf("writing: %v", err)
	}
	// Longer than a read-ahead buffer, so that reading fails in the middle.
	for i := range 8000 {
		b = append(b, constant(16, byte(i%128), 1)...)
	}
	if _, err := Decode(failing{b}, int64(len(b)), io.Discard); !errors.Is(err, errDisk) {
		t.Errorf("reading: %v", err)
	}
}

var errDisk = errors.New("disk gone")

type failing struct{ b []byte }

func (failing) Write([]byte) (int, error) { return 0, errDisk }

func (f failing) ReadAt(b []byte, at int64) (int, error) {
	if at >= 1<<16 {
		return 0, errDisk
	}
	return bytes.NewReader(f.b).ReadAt(b, at)
}

// count is a writer that keeps nothing.
type count struct{ n int64 }

func (c *count) Write(b []byte) (int, error) { c.n += int64(len(b)); return len(b), nil }
func (c *count) Len() int64                  { return c.n }

// accept decodes and checks that what is said agrees with what was written.
func accept(t *testing.T, b []byte) {
	var out count
	f, err := Decode(bytes.NewReader(b), int64(len(b)), &out)
	if err != nil {
		if _, ok := err.(*wave.Fault); !ok {
			t.Errorf("%T: %v", err, err)
		}
		if strings.Contains(err.Error(), "the decoder failed") {
			t.Logf("the library panicked: %v", err)
		}
		return
	}
	if f.Frames < 1 || f.Frames*int64(f.FrameBytes()) != out.Len() {
		t.Errorf("%+v, %d bytes", f, out.Len())
	}
}

// FuzzDecode: no file makes the decoder panic, hang, or say what is not so.
func FuzzDecode(f *testing.F) {
	f.Add(stream(8000, 1, 16, 0, [md5.Size]byte{}, constant(600, 0, 1)))
	f.Add(stream(24000, 1, 16, 20, [md5.Size]byte{1}, constant(20, 0, 1), constant(20, 1, 1)))
	f.Add(append([]byte("ID3\x04\x00\x00\x00\x00\x00\x02ab"), stream(8000, 2, 24, 600, [md5.Size]byte{})...))
	f.Fuzz(func(t *testing.T, b []byte) {
		if Is(bytes.NewReader(b)) {
			accept(t, b)
		}
	})
}

// FuzzBlock reaches what lies behind the checksums: it puts right ones on any
// header and body.
func FuzzBlock(f *testing.F) {
	f.Add(uint8(0), uint8(16), []byte{0xFF, 0xF8, 0x70, 0x00, 0, 0, 99}, []byte{0, 1, 2})                             // constant
	f.Add(uint8(1), uint8(16), []byte{0xFF, 0xF8, 0x70, 0x10, 0, 0, 3}, append([]byte{2}, make([]byte, 40)...))       // verbatim
	f.Add(uint8(1), uint8(12), []byte{0xFF, 0xF8, 0x70, 0xA4, 0, 0, 31}, append([]byte{0x14}, make([]byte, 200)...))  // fixed, mid and side
	f.Add(uint8(0), uint8(24), []byte{0xFF, 0xF8, 0x60, 0x0C, 0, 63}, append([]byte{0x44}, make([]byte, 300)...))     // linear prediction
	f.Add(uint8(0), uint8(8), []byte{0xFF, 0xF9, 0x70, 0x02, 0, 0, 15}, append([]byte{0x41, 0x20}, 0xF7, 1, 2, 3, 4)) // wasted bits
	f.Fuzz(func(t *testing.T, channels, bits uint8, header, body []byte) {
		accept(t, stream(8000, int(channels%8)+1, int(bits%32)+1, 0, [md5.Size]byte{}, block(header, body), block(header, body)))
	})
}
