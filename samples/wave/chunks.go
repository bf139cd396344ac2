package wave

// sizes reads the ds64 chunk of RF64 and BW64 (EBU Tech 3306, section 4); in
// plain RIFF it means nothing.
func (w *walker) sizes(at int64, claim uint64) error {
	if w.f.Container == "WAV" {
		return nil
	}
	b, err := w.read(at, int64(min(claim, 28+12*64)))
	if err != nil {
		return err
	}
	if len(b) < 24 {
		return fault(at, damaged, "the ds64 chunk has %d bytes and needs 24", len(b))
	}
	w.wide["data"] = le.Uint64(b[8:])
	if len(b) < 28 {
		return nil
	}
	entries := le.Uint32(b[24:])
	for b = b[28:]; entries > 0 && len(b) >= 12; entries-- {
		w.wide[string(b[:4])] = le.Uint64(b[4:])
		b = b[12:]
	}
	return nil
}

// format takes the first fmt chunk.
func (w *walker) format(at int64, claim uint64) error {
	if w.hasFmt {
		w.f.warn(at-8, "a second fmt chunk is left out")
		return nil
	}
	b, err := w.read(at, int64(min(claim, 40)))
	if err != nil {
		return err
	}
	if claim >= 16 && len(b) < 16 {
		return fault(at+int64(len(b)), truncate, "the file ends within its fmt chunk")
	}
	w.hasFmt = true
	w.fmt, err = parseFmt(at, b)
	return err
}
