package wave

import "bytes"

// Format tags of the RIFF registry (Microsoft mmreg.h).
const (
	tagPCM        = 0x0001
	tagFloat      = 0x0003
	tagALaw       = 0x0006
	tagMuLaw      = 0x0007
	tagExtensible = 0xFFFE
)

// codecs names format tags that are refused.
var codecs = map[uint16]string{
	0x0000: "an unknown codec (format tag 0)",
	0x0002: "Microsoft ADPCM",
	0x0010: "OKI ADPCM",
	0x0011: "IMA ADPCM",
	0x0012: "MediaSpace ADPCM",
	0x0014: "G.723 ADPCM",
	0x0016: "G.723 ADPCM",
	0x0017: "Dialogic OKI ADPCM",
	0x0020: "Yamaha ADPCM",
	0x0022: "TrueSpeech",
	0x0031: "GSM 06.10",
	0x0040: "G.721 ADPCM",
	0x0041: "G.728 CELP",
	0x0042: "G.723.1",
	0x0045: "G.726 ADPCM",
	0x0050: "MPEG audio",
	0x0055: "MP3",
	0x0057: "AMR narrow band",
	0x0058: "AMR wide band",
	0x0064: "G.726 ADPCM",
	0x0065: "G.722 ADPCM",
	0x0083: "G.729",
	0x0161: "Windows Media Audio",
	0x0162: "Windows Media Audio",
	0x00FF: "AAC",
	0x1610: "AAC",
	0x2000: "AC-3",
	0x674F: "Ogg Vorbis",
	0xA109: "Speex",
	0xF1AC: "FLAC in WAV",
}

// strangers are openings of files that are no RIFF/WAVE.
var strangers = []struct{ magic, name string }{
	{"riff\x2e\x91\xcf\x11", "a Wave64 file"},
	{"RIFX", "a big-endian RIFF file (RIFX)"},
	{"FORM", "an AIFF or other IFF file"},
	{".snd", "a Sun audio file"},
	{"OggS", "an Ogg file"},
	{"caff", "a Core Audio file"},
	{"wvpk", "a WavPack file"},
	{"NIST", "a SPHERE file"},
	{"#!AM", "an AMR file"},
	{"ID3", "a tagged file, most likely MP3"},
	{"\x1a\x45\xdf\xa3", "a Matroska or WebM file"},
	{"PK\x03\x04", "a ZIP archive"},
	{"\x1f\x8b", "a gzip file"},
}

// stranger names a file by its opening bytes.
func stranger(head []byte) string {
	for _, s := range strangers {
		if bytes.HasPrefix(head, []byte(s.magic)) {
			return s.name
		}
	}
	switch {
	case len(head) >= 8 && string(head[4:8]) == "ftyp":
		return "an MP4 or M4A file"
	case len(head) >= 2 && head[0] == 0xFF && head[1]&0xE0 == 0xE0:
		return "MPEG audio (MP3 or AAC)"
	}
	return "not a WAV or FLAC file"
}
