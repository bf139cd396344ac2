package wave

import (
	"fmt"
	"io"
	"math"
)

// streamed is the size a writer leaves when it cannot know it; in RF64 and
// BW64 it says that the ds64 chunk has the size.
const streamed = math.MaxUint32

// maxChunks bounds the walk; recordings have a handful of chunks.
const maxChunks = 4096

// walker goes through a file's chunks.
type walker struct {
	r    io.ReaderAt
	size int64 // of the file
	f    Format
	wide map[string]uint64 // sizes from ds64, by chunk

	fmt     header
	hasFmt  bool
	hasData bool
	dataAt  int64  // offset of the data chunk's header
	data    int64  // bytes of samples in the file
	claim   uint32 // the RIFF header's size
	endless bool   // the data chunk's size was no use
	chunks  int
}

// Walk finds format and samples of the RIFF/WAVE file of size bytes behind r.
// A file that cannot be used gives a *Fault, or the error of reading it.
func Walk(r io.ReaderAt, size int64) (*Format, error) {
	w := &walker{r: r, size: size, wide: map[string]uint64{}}
	next, err := w.open()
	for err == nil && next >= 0 {
		next, err = w.chunk(next)
	}
	if err != nil {
		return nil, err
	}
	return w.settle()
}

// read fetches up to n bytes at an offset; fewer only at the file's end.
func (w *walker) read(at, n int64) ([]byte, error) {
	n = min(n, w.size-at)
	if n <= 0 {
		return nil, nil
	}
	b := make([]byte, n)
	if _, err := w.r.ReadAt(b, at); err != nil {
		return nil, fmt.Errorf("byte %d: %w", at, err)
	}
	return b, nil
}

// open reads the file's first bytes and gives the offset of the first chunk.
func (w *walker) open() (int64, error) {
	b, err := w.read(0, 12)
	if err != nil {
		return 0, err
	}
	if len(b) == 0 {
		return 0, fault(-1, "record or copy it again", "the file is empty")
	}
	id := string(b[:min(4, len(b))])
	if id != "RIFF" && id != "RF64" && id != "BW64" {
		return 0, fault(0, convert, "this is %s", stranger(b))
	}
	if len(b) < 12 {
		return 0, fault(int64(len(b)), truncate, "the file ends within its first header")
	}
	if form := string(b[8:12]); form == "AVI " {
		return 0, fault(8, "extract the sound track as WAV first", "this is an AVI video")
	} else if form != "WAVE" {
		return 0, fault(8, convert, "this RIFF file holds %q and not WAVE", form)
	}
	w.f.Container = map[string]string{"RIFF": "WAV", "RF64": "RF64", "BW64": "BW64"}[id]
	w.claim = le.Uint32(b[4:])
	return 12, nil
}

// asStreamed says whether a size is one that writers leave who cannot know it:
// 0, or about 2 or 4 GiB less up to a page.
func asStreamed(claim uint64) bool {
	return claim == 0 || claim >= 1<<31-1<<12 && claim <= 1<<31 || claim >= 1<<32-1<<12 && claim <= streamed
}

// checkRiffSize warns of an outer size that cannot be right, where the data
// chunk's does not tell as much. It decides nothing: the chunks are followed to
// the end of the file.
func (w *walker) checkRiffSize() {
	switch claim := uint64(w.claim); {
	case w.f.Container != "WAV" || w.endless:
	case asStreamed(claim) && claim > uint64(w.size) || claim == 0:
		w.f.warn(4, "the file says its size is %d, as streamed files do; it is read to its end", claim)
	case claim+8 > uint64(w.size)+1: // a missing last pad byte is harmless
		w.f.warn(4, "the file says it has %d bytes but ends at %d; it may have been cut off", claim+8, w.size)
	}
}

// chunk looks at the chunk at an offset and gives the next one's, -1 at the end.
func (w *walker) chunk(at int64) (int64, error) {
	if at >= w.size || w.hasFmt && w.hasData && w.chunks > maxChunks {
		return -1, nil
	}
	if w.chunks++; w.chunks > maxChunks {
		return -1, fault(at, damaged, "no samples within the first %d chunks", maxChunks)
	}
	b, err := w.read(at, 8)
	if err != nil {
		return -1, err
	}
	if len(b) < 8 || !plausible(b[:4]) {
		return w.lost(at, "%d bytes that are no chunk", w.size-at)
	}
	id, claim := string(b[:4]), uint64(le.Uint32(b[4:]))
	if wide, ok := w.wide[id]; ok && claim == streamed {
		claim = wide
	}
	switch id {
	case "ds64":
		err = w.sizes(at+8, claim)
	case "fmt ":
		err = w.format(at+8, claim)
	case "data":
		return w.samples(at, claim)
	}
	if err != nil {
		return -1, err
	}
	if claim > uint64(w.size-at-8) {
		return w.lost(at, "the %s chunk claims %d bytes but the file ends at %d", name(id), claim, w.size)
	}
	return w.after(at+8, int64(claim))
}

// name shows a chunk's four letters.
func name(id string) string {
	if id == "fmt " {
		return "fmt"
	}
	return fmt.Sprintf("%q", id)
}

// plausible says whether four bytes can be a chunk's name.
func plausible(id []byte) bool {
	for _, c := range id {
		if c < ' ' || c > '~' {
			return false
		}
	}
	return len(id) == 4
}

// common are names that settle where a chunk starts.
var common = map[string]bool{"fmt ": true, "data": true, "LIST": true, "fact": true}

// after gives the offset behind a chunk's body. An odd body is padded, but some
// writers forget: then the next name stands right behind it.
func (w *walker) after(body, size int64) (int64, error) {
	end := body + size
	if size%2 == 0 || end >= w.size {
		return end, nil
	}
	b, err := w.read(end, 5)
	if err != nil {
		return -1, err
	}
	if len(b) == 5 && plausible(b[:4]) && !common[string(b[1:])] {
		return end, nil
	}
	return end + 1, nil
}
