package samples

import (
	"bytes"
	"math"
	"runtime"
	"strings"
	"testing"
	"time"
)

// row is a file and the one right outcome: an error that says as much, or so
// many frames with these warnings, each found once.
type row struct {
	name   string
	file   []byte
	err    string // contained in the error; "" where the file is read
	frames int64
	warn   []string
	format string
	first  float64 // the first sample
}

const wav16 = "WAV, PCM 16-bit"

var first = 100.0 / 32768

// decodes are files that are read, some with a warning.
var decodes = []row{
	{name: "right", file: riff(mono16, ck("data", four)), frames: 4, format: wav16, first: first},
	{name: "one sample", file: riff(mono16, ck("data", le16(100))), frames: 1, format: wav16, first: first},
	{name: "silence", file: riff(mono16, ck("data", make([]byte, 640))), frames: 320, format: wav16},
	{name: "LIST before data", file: riff(mono16, list, ck("data", four)), frames: 4, format: wav16, first: first},
	{name: "LIST after data", file: riff(mono16, ck("data", four), list), frames: 4, format: wav16, first: first},
	{name: "odd chunk before data", file: riff(ck("bext", []byte("abc")), mono16, ck("data", four)), frames: 4, format: wav16, first: first},
	{name: "odd chunk without pad byte", file: riff(mono16, claim("note", 3, []byte("abc")), ck("data", four)), frames: 4, format: wav16, first: first},
	{name: "odd unknown chunks without pad byte", file: riff(claim("note", 3, []byte("abc")), claim("memo", 36, make([]byte, 36)), mono16, ck("data", four)), frames: 4, format: wav16, first: first},
	{name: "data before fmt", file: riff(ck("data", four), mono16), frames: 4, format: wav16, first: first},
	{name: "fmt of 18 bytes", file: riff(ck("fmt ", cat(fmtOf(1, 1, 8000, 2, 16), le16(0))), ck("data", four)), frames: 4, format: wav16, first: first},
	{name: "unknown chunk of size 0", file: riff(mono16, ck("zero", nil), ck("data", four)), frames: 4, format: wav16, first: first},
	{name: "byte rate that lies", file: riff(ck("fmt ", cat(le16(1), le16(1), le32(8000), le32(7), le16(2), le16(16))), ck("data", four)), frames: 4, format: wav16, first: first},

	{name: "truncated data", file: riff(mono16, claim("data", 1000, four)), frames: 4, warn: []string{"byte 40: the data chunk claims 1000 bytes but the file ends after 8"}, format: wav16, first: first},
	{name: "truncated within a frame", file: riff(mono16, claim("data", 1000, four[:7])), frames: 3,
		warn: []string{"byte 40: the data chunk claims 1000 bytes", "byte 50: the samples end with 1 bytes of a frame of 2; left out"}, format: wav16, first: first},
	{name: "data size 0, streamed", file: riff(mono16, claim("data", 0, four)), frames: 4, warn: []string{"byte 40: the data chunk says 0 bytes, as streamed files do"}, format: wav16, first: first},
	{name: "data size 0xFFFFFFFF, streamed", file: riff(mono16, claim("data", math.MaxUint32, four)), frames: 4, warn: []string{"byte 40: the data chunk says 4294967295 bytes, as streamed files do"}, format: wav16, first: first},
	{name: "data size 0x7FFFFFFF", file: riff(mono16, claim("data", math.MaxInt32, four)), frames: 4, warn: []string{"byte 40: the data chunk says 2147483647 bytes, as streamed files do"}, format: wav16, first: first},
	{name: "sizes of 2 GiB less a page, streamed", file: cat([]byte("RIFF"), le32(0x7FFFF024), []byte("WAVE"), mono16, claim("data", 0x7FFFF000, four)), frames: 4,
		warn: []string{"byte 40: the data chunk says 2147479552 bytes, as streamed files do"}, format: wav16, first: first},
	{name: "both sizes beyond the file", file: cat([]byte("RIFF"), le32(9036), []byte("WAVE"), mono16, claim("data", 9000, four)), frames: 4,
		warn: []string{"byte 40: the data chunk claims 9000 bytes but the file ends after 8"}, format: wav16, first: first},
	{name: "both sizes streamed", file: cat([]byte("RIFF"), le32(math.MaxUint32), []byte("WAVE"), mono16, claim("data", math.MaxUint32, four)), frames: 4,
		warn: []string{"byte 40: the data chunk says 4294967295 bytes"}, format: wav16, first: first},
	{name: "RIFF size 0", file: cat([]byte("RIFF"), le32(0), []byte("WAVE"), mono16, ck("data", four)), frames: 4, warn: []string{"byte 4: the file says its size is 0"}, format: wav16, first: first},
	{name: "RIFF size beyond the file", file: cat([]byte("RIFF"), le32(9000), []byte("WAVE"), mono16, ck("data", four)), frames: 4, warn: []string{"byte 4: the file says it has 9008 bytes but ends at 52"}, format: wav16, first: first},
	{name: "RIFF size too small", file: cat([]byte("RIFF"), le32(4), []byte("WAVE"), mono16, ck("data", four)), frames: 4, format: wav16, first: first},
	{name: "half a frame at the end", file: riff(ck("fmt ", fmtOf(1, 2, 8000, 4, 16)), ck("data", four[:6])), frames: 1, warn: []string{"byte 48: the samples end with 2 bytes of a frame of 4"}, format: wav16, first: first},
	{name: "LIST that claims 4 GiB before data", file: riff(mono16, claim("LIST", math.MaxUint32, []byte("INFO")), ck("data", four)), frames: 4,
		warn: []string{`byte 36: the "LIST" chunk claims 4294967295 bytes but the file ends at 64; went on at the "data" chunk found at byte 48`}, format: wav16, first: first},
	{name: "unknown chunk beyond the file before fmt", file: riff(claim("junk", 1<<30, make([]byte, 5)), mono16, ck("data", four)), frames: 4,
		warn: []string{`byte 12: the "junk" chunk claims 1073741824 bytes but the file ends at 65; went on at the fmt chunk found at byte 25`}, format: wav16, first: first},
	{name: "LIST beyond the file after data", file: riff(mono16, ck("data", four), claim("LIST", 5000, []byte("INFO"))), frames: 4, warn: []string{`byte 52: the "LIST" chunk claims 5000 bytes but the file ends at 64; left out`}, format: wav16, first: first},
	{name: "bytes that are no chunk after data", file: cat(riff(mono16, ck("data", four)), make([]byte, 20)), frames: 4, warn: []string{"byte 52: 20 bytes that are no chunk; left out"}, format: wav16, first: first},
	{name: "bytes that are no chunk before data", file: riff(mono16, make([]byte, 20), ck("data", four)), frames: 4, warn: []string{`byte 36: 36 bytes that are no chunk; went on at the "data" chunk found at byte 56`}, format: wav16, first: first},
	{name: "two data chunks", file: riff(mono16, ck("data", four), ck("data", four[2:])), frames: 4, warn: []string{"byte 52: a second data chunk is left out"}, format: wav16, first: first},
	{name: "two fmt chunks", file: riff(mono16, ck("fmt ", fmtOf(1, 2, 16000, 4, 16)), ck("data", four)), frames: 4, warn: []string{"byte 36: a second fmt chunk is left out"}, format: wav16, first: first},

	{name: "8-bit, odd", file: riff(ck("fmt ", fmtOf(1, 1, 8000, 1, 8)), ck("data", []byte{192, 0, 255})), frames: 3, format: "WAV, PCM 8-bit", first: 0.5},
	{name: "24-bit", file: riff(ck("fmt ", fmtOf(1, 1, 8000, 3, 24)), ck("data", []byte{0, 0, 0xC0})), frames: 1, format: "WAV, PCM 24-bit", first: -0.5},
	{name: "32-bit", file: riff(ck("fmt ", fmtOf(1, 1, 8000, 4, 32)), ck("data", le32(1<<30))), frames: 1, format: "WAV, PCM 32-bit", first: 0.5},
	{name: "12 in 16, extensible", file: riff(ck("fmt ", extensible(1, 1, 8000, 2, 16, 12)), ck("data", le16(0x4000))), frames: 1, format: "WAV, PCM 12-bit in 16", first: 0.5},
	{name: "12 in 16, plain", file: riff(ck("fmt ", fmtOf(1, 1, 8000, 2, 12)), ck("data", le16(-0x4000))), frames: 1, format: "WAV, PCM 12-bit in 16", first: -0.5},
	{name: "20 in 24", file: riff(ck("fmt ", extensible(1, 1, 8000, 3, 24, 20)), ck("data", []byte{0, 0, 0x20})), frames: 1, format: "WAV, PCM 20-bit in 24", first: 0.25},
	{name: "24 in 32", file: riff(ck("fmt ", extensible(1, 1, 8000, 4, 32, 24)), ck("data", le32(1<<29))), frames: 1, format: "WAV, PCM 24-bit in 32", first: 0.25},
	{name: "extensible, valid bits 0", file: riff(ck("fmt ", extensible(1, 1, 8000, 2, 16, 0)), ck("data", four)), frames: 4, format: wav16, first: first},
	{name: "float beyond full scale", file: riff(ck("fmt ", fmtOf(3, 1, 8000, 4, 32)), ck("data", floats32(3.5, -2))), frames: 2, format: "WAV, float 32", first: 3.5},
	{name: "64-bit float", file: riff(ck("fmt ", fmtOf(3, 1, 8000, 8, 64)), ck("data", floats64(-0.1))), frames: 1, format: "WAV, float 64", first: -0.1},
	{name: "extensible float", file: riff(ck("fmt ", extensible(3, 1, 8000, 4, 32, 32)), ck("data", floats32(0.5))), frames: 1, format: "WAV, float 32", first: 0.5},
	// The loudest codes, G.711 tables 2a and 1a: 8031/8192 and 4032/4096.
	{name: "mu-law", file: riff(ck("fmt ", fmtOf(7, 1, 8000, 1, 8)), ck("data", []byte{0x80, 0x00})), frames: 2, format: "WAV, G.711 mu-law", first: 8031. / 8192},
	{name: "A-law", file: riff(ck("fmt ", fmtOf(6, 1, 8000, 1, 8)), ck("data", []byte{0xAA})), frames: 1, format: "WAV, G.711 A-law", first: 4032. / 4096},
	{name: "extensible mu-law", file: riff(ck("fmt ", extensible(7, 1, 8000, 1, 8, 8)), ck("data", []byte{0, 0})), frames: 2, format: "WAV, G.711 mu-law", first: -8031. / 8192},
	{name: "256 channels", file: riff(ck("fmt ", fmtOf(1, 256, 8000, 512, 16)), ck("data", bytes.Repeat(le16(100), 512))), frames: 2, format: wav16, first: first},

	{name: "RF64", file: rf64("RF64", 8, 4, math.MaxUint32, four), frames: 4, format: "RF64, PCM 16-bit", first: first},
	{name: "BW64", file: rf64("BW64", 8, 4, math.MaxUint32, four), frames: 4, format: "BW64, PCM 16-bit", first: first},
	{name: "RF64 with the size in the data chunk", file: rf64("RF64", 1<<40, 4, 8, four), frames: 4, format: "RF64, PCM 16-bit", first: first},
	{name: "RF64 truncated", file: rf64("RF64", 1<<62, 4, math.MaxUint32, four), frames: 4, warn: []string{"claims 4611686018427387904 bytes but the file ends after 8"}, format: "RF64, PCM 16-bit", first: first},
	{name: "RF64, ds64 of the largest size", file: rf64("RF64", math.MaxUint64, 4, math.MaxUint32, four), frames: 4, warn: []string{"claims 18446744073709551615 bytes"}, format: "RF64, PCM 16-bit", first: first},
	{name: "RF64 without ds64", file: cat([]byte("RF64"), le32(math.MaxUint32), []byte("WAVE"), mono16, claim("data", math.MaxUint32, four)), frames: 4, warn: []string{"as streamed files do"}, format: "RF64, PCM 16-bit", first: first},
	{name: "RF64, table of 4 billion entries", file: cat([]byte("RF64"), le32(math.MaxUint32), []byte("WAVE"), ck("ds64", cat(le64(0), le64(8), le64(4), le32(math.MaxUint32))), mono16, claim("data", math.MaxUint32, four)), frames: 4, format: "RF64, PCM 16-bit", first: first},
	{name: "RF64, another chunk's size in the table", file: cat([]byte("RF64"), le32(math.MaxUint32), []byte("WAVE"),
		ck("ds64", cat(le64(0), le64(8), le64(4), le32(1), []byte("axml"), le64(6))), mono16, claim("axml", math.MaxUint32, []byte("abcdef")), claim("data", math.MaxUint32, four)), frames: 4, format: "RF64, PCM 16-bit", first: first},
}

func rf64(id string, data, frames uint64, claimed uint32, body []byte) []byte {
	return cat([]byte(id), le32(math.MaxUint32), []byte("WAVE"),
		ck("ds64", cat(le64(100), le64(data), le64(frames), le32(0))), mono16, claim("data", claimed, body))
}

// refuses are files that cannot be used, with the byte and what to do.
var refuses = []row{
	{name: "empty", file: nil, err: "x.wav: the file is empty: record or copy it again"},
	{name: "one byte", file: []byte("R"), err: "byte 0: this is not a WAV or FLAC file: convert it to WAV with PCM samples first"},
	{name: "text", file: []byte("hello, world, this is text"), err: "byte 0: this is not a WAV or FLAC file"},
	{name: "RIFF alone", file: []byte("RIFF"), err: "byte 4: the file ends within its first header: the file is cut off"},
	{name: "RIFF and size", file: []byte("RIFF\x00\x00\x00\x00WA"), err: "byte 10: the file ends within its first header"},
	{name: "RIFX", file: append([]byte("RIFX"), riff(mono16, ck("data", four))[4:]...), err: "byte 0: this is a big-endian RIFF file (RIFX): convert"},
	{name: "AVI", file: []byte("RIFF\x00\x01\x00\x00AVI LIST"), err: "byte 8: this is an AVI video: extract the sound track"},
	{name: "another RIFF", file: []byte("RIFF\x00\x01\x00\x00RMIDdata"), err: `byte 8: this RIFF file holds "RMID" and not WAVE`},
	{name: "AIFF", file: []byte("FORM\x00\x00\x00\x00AIFFCOMM"), err: "this is an AIFF or other IFF file"},
	{name: "MP3 with a tag", file: []byte("ID3\x04\x00\x00\x00\x00\x00\x00rest of it"), err: "this is a tagged file, most likely MP3"},
	{name: "MP3", file: []byte("\xff\xfb\x90\x00abcdefgh"), err: "this is MPEG audio (MP3 or AAC)"},
	{name: "M4A", file: []byte("\x00\x00\x00\x20ftypM4A abcdefgh"), err: "this is an MP4 or M4A file"},
	{name: "Ogg", file: []byte("OggS\x00\x02abcdefgh"), err: "this is an Ogg file"},
	{name: "Wave64", file: []byte("riff\x2e\x91\xcf\x11\xa5\xd6\x28\xdb"), err: "this is a Wave64 file"},
	{name: "no chunks", file: riff(), err: "byte 12: no fmt chunk up to the end of the file: the file is cut off"},
	{name: "fmt cut off", file: riff(mono16)[:30], err: "byte 30: the file ends within its fmt chunk"},
	{name: "fmt of 14 bytes", file: riff(ck("fmt ", make([]byte, 14)), ck("data", four)), err: "byte 20: the fmt chunk has 14 bytes and needs 16: the header is damaged"},
	{name: "fmt of 0 bytes", file: riff(ck("fmt ", nil), ck("data", four)), err: "byte 20: the fmt chunk has 0 bytes"},
	{name: "no fmt", file: riff(ck("data", four)), err: "byte 28: no fmt chunk"},
	{name: "no data", file: riff(mono16), err: "byte 36: no data chunk"},
	{name: "no data but LIST", file: riff(mono16, list), err: "no data chunk"},
	{name: "LIST beyond the file and no data", file: riff(mono16, claim("LIST", math.MaxUint32, []byte("INFOdata"))), err: "no data chunk"},
	{name: "empty data", file: riff(mono16, ck("data", nil)), err: "byte 36: the data chunk holds no samples: record or export it again"},
	{name: "empty data and LIST", file: riff(mono16, ck("data", nil), list), err: "byte 36: the data chunk holds no samples"},
	{name: "less than a frame", file: riff(mono16, ck("data", []byte{1})), err: "byte 36: the data chunk holds no samples"},
	{name: "0 channels", file: riff(ck("fmt ", fmtOf(1, 0, 8000, 0, 16)), ck("data", four)), err: "byte 22: the header says 0 channels: the header is damaged"},
	{name: "65,535 channels", file: riff(ck("fmt ", fmtOf(1, 65535, 8000, 65535, 8)), ck("data", four)), err: "byte 22: the header says 65535 channels; at most 256 are read"},
	{name: "0 Hz", file: riff(ck("fmt ", fmtOf(1, 1, 0, 2, 16)), ck("data", four)), err: "byte 24: the header says 0 Hz; 100 to 1000000 Hz are read"},
	{name: "4 GHz", file: riff(ck("fmt ", fmtOf(1, 1, math.MaxUint32, 2, 16)), ck("data", four)), err: "byte 24: the header says 4294967295 Hz"},
	{name: "block align 0", file: riff(ck("fmt ", fmtOf(1, 1, 8000, 0, 16)), ck("data", four)), err: "byte 32: the header says 0 bytes a frame where 1 channels of 16 bits take 2"},
	{name: "block align that lies", file: riff(ck("fmt ", fmtOf(1, 2, 8000, 2, 16)), ck("data", four)), err: "byte 32: the header says 2 bytes a frame where 2 channels of 16 bits take 4"},
	{name: "0 bits", file: riff(ck("fmt ", fmtOf(1, 1, 8000, 2, 0)), ck("data", four)), err: "byte 34: PCM samples of 0 bits are not read"},
	{name: "64-bit PCM", file: riff(ck("fmt ", fmtOf(1, 1, 8000, 8, 64)), ck("data", four)), err: "byte 34: PCM samples of 64 bits are not read"},
	{name: "16-bit float", file: riff(ck("fmt ", fmtOf(3, 1, 8000, 2, 16)), ck("data", four)), err: "byte 34: float samples of 16 bits are not read"},
	{name: "16-bit mu-law", file: riff(ck("fmt ", fmtOf(7, 1, 8000, 2, 16)), ck("data", four)), err: "byte 34: G.711 mu-law samples of 16 bits are not read"},
	{name: "Microsoft ADPCM", file: riff(ck("fmt ", fmtOf(2, 1, 8000, 256, 4)), ck("data", four)), err: "byte 20: the samples are coded as Microsoft ADPCM: convert it to WAV with PCM samples first"},
	{name: "IMA ADPCM", file: riff(ck("fmt ", fmtOf(0x11, 1, 8000, 256, 4)), ck("data", four)), err: "coded as IMA ADPCM"},
	{name: "GSM", file: riff(ck("fmt ", fmtOf(0x31, 1, 8000, 65, 0)), ck("data", four)), err: "coded as GSM 06.10"},
	{name: "MP3 in WAV", file: riff(ck("fmt ", fmtOf(0x55, 1, 8000, 1, 0)), ck("data", four)), err: "coded as MP3"},
	{name: "unheard-of codec", file: riff(ck("fmt ", fmtOf(0x1234, 1, 8000, 2, 16)), ck("data", four)), err: "coded as an unknown codec (format tag 0x1234)"},
	{name: "extensible ADPCM", file: riff(ck("fmt ", extensible(2, 1, 8000, 2, 16, 16)), ck("data", four)), err: "coded as Microsoft ADPCM"},
	{name: "extensible without extension", file: riff(ck("fmt ", fmtOf(0xFFFE, 1, 8000, 2, 16)), ck("data", four)), err: "byte 20: the extensible fmt chunk has no room for its sub-format"},
	{name: "extensible, unknown sub-format", file: riff(ck("fmt ", append(extensible(1, 1, 8000, 2, 16, 16)[:26], make([]byte, 14)...)), ck("data", four)), err: "byte 44: the extensible sub-format 01 00 00"},
	{name: "17 valid bits in 16", file: riff(ck("fmt ", extensible(1, 1, 8000, 2, 16, 17)), ck("data", four)), err: "byte 38: the header says 17 valid bits in 16"},
	{name: "NaN", file: riff(ck("fmt ", fmtOf(3, 2, 8000, 8, 32)), ck("data", floats32(0, 0.5, 0, math.NaN()))), err: "byte 56: sample 1 of channel 2 is NaN or infinite: export it again"},
	{name: "infinity", file: riff(ck("fmt ", fmtOf(3, 1, 8000, 8, 64)), ck("data", floats64(0, 0, math.Inf(-1)))), err: "byte 60: sample 2 of channel 1 is NaN or infinite"},
	{name: "NaN behind the first block", file: riff(ck("fmt ", fmtOf(3, 1, 8000, 4, 32)), ck("data", cat(make([]byte, 400000), floats32(math.NaN())))), err: "byte 400044: sample 100000 of channel 1 is NaN"},
	{name: "ds64 cut short", file: cat([]byte("RF64"), le32(math.MaxUint32), []byte("WAVE"), ck("ds64", make([]byte, 20)), mono16, ck("data", four)), err: "byte 20: the ds64 chunk has 20 bytes and needs 24"},
	{name: "a million empty chunks", file: riff(mono16, bytes.Repeat(ck("zero", nil), 1_000_000)), err: "no samples within the first 4096 chunks"},
	{name: "a megabyte of zeros behind fmt", file: riff(mono16, make([]byte, 1<<20)), err: "no data chunk"},
	{name: "a megabyte of false fmt chunks", file: riff(claim("LIST", math.MaxUint32, bytes.Repeat([]byte("fmt \xff\xff\xff\xff"), 1<<17))), err: "no fmt chunk"},
}

// TestHostile: every file has the one right outcome, at once, in memory of a few
// times its size.
func TestHostile(t *testing.T) {
	rows := append(append([]row(nil), decodes...), refuses...)
	if len(rows) < 60 {
		t.Fatalf("only %d rows", len(rows))
	}
	for _, c := range append(rows, hostileFLAC(t)...) {
		t.Run(c.name, func(t *testing.T) { c.check(t, put(t, "x.wav", c.file)) })
	}
}

func (c row) check(t *testing.T, path string) {
	var before, after runtime.MemStats
	runtime.ReadMemStats(&before)
	start := time.Now()
	r, err := Open(path)
	took := time.Since(start)
	runtime.ReadMemStats(&after)
	// TotalAlloc counts what was freed, too: an upper bound. 2 MiB are buffers.
	if used := after.TotalAlloc - before.TotalAlloc; used > 2<<20+8*uint64(len(c.file)) {
		t.Errorf("%d bytes allocated for a file of %d", used, len(c.file))
	}
	if took > 5*time.Second {
		t.Errorf("took %v", took)
	}
	if c.err != "" {
		if err == nil {
			t.Fatalf("accepted: %+v", r.Info())
		}
		if msg := err.Error(); !strings.HasPrefix(msg, path+": ") || !strings.Contains(msg, c.err) || strings.Contains(msg, "\n") {
			t.Fatalf("error %q", msg)
		}
		return
	}
	if err != nil {
		t.Fatal(err)
	}
	defer r.Close()
	c.content(t, r)
}

func (c row) content(t *testing.T, r *Recording) {
	i := r.Info()
	if p, err := Peek(i.Path); err != nil || p.Format() != c.format || p.Rate != i.Rate || p.Channels != i.Channels || p.Bytes != i.Bytes {
		t.Errorf("a peek gives %+v, %v", p, err)
	}
	if i.Frames != c.frames || i.Format() != c.format || len(i.Warnings) != len(c.warn) {
		t.Fatalf("%s, %d frames, warnings %q", i.Format(), i.Frames, i.Warnings)
	}
	for k, w := range c.warn {
		if !strings.Contains(i.Warnings[k], w) {
			t.Errorf("warning %q, want %q", i.Warnings[k], w)
		}
	}
	planes := make([][]float64, i.Channels)
	for k := range planes {
		planes[k] = make([]float64, i.Frames)
	}
	if err := r.Read(planes, 0); err != nil {
		t.Fatal(err)
	}
	if planes[0][0] != c.first {
		t.Errorf("first sample %g, want %g", planes[0][0], c.first)
	}
	if r.Words() {
		sameWords(t, r, planes)
	}
}

// sameWords: words and reals are the same values.
func sameWords(t *testing.T, r *Recording, planes [][]float64) {
	t.Helper()
	words := make([][]int16, len(planes))
	for k := range words {
		words[k] = make([]int16, len(planes[0]))
	}
	if err := r.ReadWords(words, 0); err != nil {
		t.Fatal(err)
	}
	for k := range words {
		for i, w := range words[k] {
			if float64(w)/(1<<15) != planes[k][i] {
				t.Fatalf("channel %d sample %d: word %d, real %g", k, i, w, planes[k][i])
			}
		}
	}
}

// hostileFLAC are the same for FLAC.
func hostileFLAC(t *testing.T) []row {
	x := noise(10_000, 16, 1)
	good := flacOf(t, 16, 8000, x)
	value := float64(x[0]) / (1 << 15)
	edit := func(at int, b ...byte) []byte {
		c := bytes.Clone(good)
		copy(c[at:], b)
		return c
	}
	// Offsets in a STREAMINFO block, RFC 9639 section 8.2, behind 4 + 4 bytes.
	const rateAt, countAt, sumAt = 18, 22, 26
	const f = "FLAC, PCM 16-bit"
	return []row{
		{name: "FLAC", file: good, frames: 10000, format: f, first: value},
		{name: "FLAC behind an ID3 tag", file: cat([]byte("ID3\x04\x00\x00\x00\x00\x01\x00"), make([]byte, 128), good), frames: 10000, format: f, first: value},
		{name: "FLAC cut within a block", file: good[:len(good)-100], frames: 8192, format: f, first: value,
			warn: []string{"the last block is cut off and left out; get a complete copy", "the file ends after 8192 of 10000 samples, so its checksum cannot be checked"}},
		{name: "FLAC with rubbish behind", file: append(bytes.Clone(good), "TAGabc"...), frames: 10000, format: f, first: value, warn: []string{"6 bytes behind the last block are left out"}},
		{name: "FLAC without a count", file: edit(countAt, 0, 0, 0, 0), frames: 10000, format: f, first: value},
		{name: "FLAC without a count, rubbish behind", file: append(edit(countAt, 0, 0, 0, 0), make([]byte, 128)...), frames: 10000, format: f, first: value, warn: []string{"128 bytes behind the last block"}},
		{name: "FLAC without a checksum", file: edit(sumAt, make([]byte, 16)...), frames: 10000, format: f, first: value, warn: []string{"carries no checksum"}},
		{name: "FLAC of another checksum", file: edit(sumAt, 1, 2, 3), err: "does not match the file's checksum: the file is damaged; get a good copy"},
		{name: "FLAC that claims 2^32 samples", file: edit(countAt, 0xFF, 0xFF, 0xFF, 0xFF), frames: 10000, format: f, first: value, warn: []string{"the file ends after 10000 of 4294967295 samples"}},
		{name: "FLAC of more samples than it says", file: edit(countAt, 0, 0, 0x20, 0x01), err: "the blocks hold more than the 8193 samples"},
		{name: "FLAC of 0 Hz", file: edit(rateAt, 0, 0, good[rateAt+2]&0x0F), err: "no usable stream header"},
		{name: "FLAC of 1 Hz", file: edit(rateAt, 0, 0, 0x10|good[rateAt+2]&0x0F), err: "the header says 1 Hz"},
		{name: "FLAC of other channels than its blocks", file: edit(rateAt+2, good[rateAt+2]|0x0E), err: "a block of 1 channels in a stream of 8"},
		{name: "FLAC of 32 bits", file: edit(rateAt+2, good[rateAt+2]|1, 0xF0), err: "FLAC samples of 32 bits are not read"},
		{name: "FLAC with a flipped bit", file: edit(5000, good[5000]^1), err: "CRC-16 checksum mismatch"},
		{name: "FLAC damaged in a block's header", file: edit(60, 0xAA, 0xAA, 0xAA), err: "block at sample 0"},
		{name: "FLAC header alone", file: good[:42], err: "no samples"},
		{name: "fLaC alone", file: []byte("fLaC"), err: "no usable stream header"},
		{name: "FLAC header cut off", file: good[:30], err: "no usable stream header"},
		{name: "FLAC that opens with a picture of 16 MB", file: []byte("fLaC\x06\xFF\xFF\xFF\x00"), err: "no usable stream header"},
		{name: "FLAC, metadata of 16 MB claimed", file: cat([]byte("fLaC"), []byte{0, 0, 0, 34}, good[8:42], []byte{1, 0xFF, 0xFF, 0xFF}), err: "no usable stream header"},
	}
}
