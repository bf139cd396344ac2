package measure

// TallyHistogram computes the global figures (samples, energies, overload,
// index counts) of a design on 16-bit samples from their histogram. Sum x^2
// is exact; error energies are summed by ascending value.
func TallyHistogram(h *Histogram, l Lookup) Tally {
	l.check()
	t := Tally{Indices: make([]int64, len(l.Values))}
	var signal energy
	for i, n := range h.Counts() {
		if n == 0 {
			continue
		}
		w := int64(i - words16/2)
		signal.addProduct(uint64(n), uint64(w*w))
		x := float64(w) / (words16 / 2)
		e := l.error(i)
		ee := float64(n) * float64(e*e)
		t.Samples += n
		t.Indices[l.Index[i]] += n
		t.Error += ee
		if x < l.Lo || x > l.Hi {
			t.Overloaded += n
			t.OverloadErr += ee
		} else {
			t.GranularErr += ee
		}
	}
	t.Signal = signal.value()
	return t
}

// EnergiesOf sums over the samples of a histogram, by ascending value: for
// the in-range samples Signal and Cross give the level-matching gain, for the
// quiet ones Output gives the idle level.
func EnergiesOf(h *Histogram, l Lookup) Energies {
	l.check()
	var b Energies
	var signal energy
	for i, n := range h.Counts() {
		if n == 0 {
			continue
		}
		w := int64(i - words16/2)
		signal.addProduct(uint64(n), uint64(w*w))
		x, y, e, count := float64(w)/(words16/2), l.Values[l.Index[i]], l.error(i), float64(n)
		b.Error += count * float64(e*e)
		b.Cross += count * float64(x*y)
		b.Output += count * float64(y*y)
	}
	b.Signal = signal.value()
	return b
}

// AddInRange adds the energies of in-range frames (level matching).
func (t *Tally) AddInRange(b Energies) {
	t.SignalIn += b.Signal
	t.CrossIn += b.Cross
}

// AddQuiet adds the output energy of n samples of whole frames that are not in
// range, the silent ones included (idle level).
func (t *Tally) AddQuiet(b Energies, n int64) {
	t.OutputOut += b.Output
	t.SamplesOut += n
}

// grow makes room for n indices.
func (t *Tally) grow(n int) {
	if n > len(t.Indices) {
		t.Indices = append(t.Indices, make([]int64, n-len(t.Indices))...)
	}
}
