package wave

// samples takes the first data chunk, whose header is at an offset.
func (w *walker) samples(at int64, claim uint64) (int64, error) {
	body := at + 8
	left := w.size - body
	if w.hasData {
		w.f.warn(at, "a second data chunk is left out")
		if claim > uint64(left) {
			return -1, nil
		}
		return w.after(body, int64(claim))
	}
	w.dataAt, w.hasData = at, true
	switch {
	case claim == 0 && left > 0:
		empty, err := w.chained(body)
		if err != nil || empty {
			return body, err
		}
		w.f.warn(at+4, "the data chunk says 0 bytes, as streamed files do; all %d bytes to the end are taken as samples", left)
	case asStreamed(claim) && claim > uint64(left):
		w.f.warn(at+4, "the data chunk says %d bytes, as streamed files do; all %d bytes to the end are taken as samples", claim, left)
	case claim > uint64(left):
		w.f.warn(at+4, "the data chunk claims %d bytes but the file ends after %d; read to the end: get a complete copy if the tail matters", claim, left)
	default:
		w.data = int64(claim)
		return w.after(body, w.data)
	}
	w.data, w.endless = left, true
	return -1, nil
}

// chained says whether whole chunks follow from an offset to the file's end, so
// that a data chunk of size 0 before them is truly empty.
func (w *walker) chained(at int64) (bool, error) {
	for n := 0; at < w.size; n++ {
		b, err := w.read(at, 8)
		if err != nil || len(b) < 8 || !plausible(b[:4]) || n > maxChunks {
			return false, err
		}
		if at, err = w.after(at+8, int64(le.Uint32(b[4:]))); err != nil {
			return false, err
		}
	}
	return at <= w.size+1, nil
}

// lost deals with bytes that cannot be followed as chunks: harmless behind the
// samples, else the missing chunk is searched for.
func (w *walker) lost(at int64, format string, args ...any) (int64, error) {
	if w.hasFmt && w.hasData {
		w.f.warn(at, format+"; left out", args...)
		return -1, nil
	}
	want := "data"
	if !w.hasFmt {
		want = "fmt "
	}
	found, err := w.search(at+4, want)
	if err != nil || found < 0 {
		return -1, err
	}
	w.f.warn(at, format+"; went on at the %s chunk found at byte %d", append(args, name(want), found)...)
	return found, nil
}

// search finds a chunk of that name from an offset on; -1 where there is none.
// Chunks start at even offsets, but for writers that forget the pad byte.
func (w *walker) search(from int64, id string) (int64, error) {
	const block = 1 << 16
	for at := from; at < w.size; at += block {
		b, err := w.read(at, block+7)
		if err != nil {
			return -1, err
		}
		for i := 0; i+8 <= len(b) && i < block; i++ {
			if string(b[i:i+4]) == id && w.credible(at+int64(i), id, le.Uint32(b[i+4:])) {
				return at + int64(i), nil
			}
		}
	}
	return -1, nil
}

// credible says whether a size found beside a name in unknown bytes can be one.
func (w *walker) credible(at int64, id string, claim uint32) bool {
	left := w.size - at - 8
	if id == "fmt " {
		return claim >= 16 && claim <= 64 && int64(claim) <= left
	}
	return left > 0 && (claim == 0 || claim == streamed || int64(claim) <= left)
}

// settle puts together what the walk has found.
func (w *walker) settle() (*Format, error) {
	if !w.hasFmt {
		return nil, fault(w.size, truncate, "no fmt chunk up to the end of the file")
	}
	e, err := w.fmt.encoding()
	if err != nil {
		return nil, err
	}
	if !w.hasData {
		return nil, fault(w.size, truncate, "no data chunk up to the end of the file")
	}
	w.checkRiffSize()
	f := &w.f
	f.Encoding, f.Rate, f.Channels, f.ValidBits = e, int(w.fmt.rate), w.fmt.channels, w.fmt.validBits
	f.DataStart = w.dataAt + 8
	f.Frames = w.data / int64(f.FrameBytes())
	if rest := w.data % int64(f.FrameBytes()); rest != 0 {
		f.warn(f.DataStart+w.data-rest, "the samples end with %d bytes of a frame of %d; left out", rest, f.FrameBytes())
	}
	if f.Frames == 0 {
		return nil, fault(w.dataAt, "record or export it again", "the data chunk holds no samples")
	}
	return f, nil
}
