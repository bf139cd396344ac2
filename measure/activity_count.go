package measure

import "math"

// cross settles the thresholds that q crossed at sample t and returns the
// bounds within which q may now move.
func (a *Activity) cross(q float64, t int64) (low, high float64) {
	for a.top > 0 && q < threshold56(a.top-1) {
		a.top--
		a.count[a.top] += t - a.from[a.top]
		a.from[a.top], a.until[a.top] = t, t+a.hangover
	}
	for a.top < thresholds56 && q >= threshold56(a.top) {
		a.count[a.top] += max(0, min(a.until[a.top], t)-a.from[a.top])
		a.from[a.top] = t
		a.top++
	}
	return threshold56(a.top - 1), threshold56(a.top)
}

// settle brings all counts up to now.
func (a *Activity) settle() {
	for j := range a.count {
		end := a.now
		if j >= a.top {
			end = min(end, a.until[j])
		}
		a.count[j] += max(0, end-a.from[j])
		a.from[j] = a.now
	}
}

// Merge adds the counts of o, which follows a; a takes over o's state, so that
// samples after o may be added to it. Both must have the same rate.
func (a *Activity) Merge(o *Activity) {
	if a.g != o.g {
		panic("measure: Activity.Merge of different rates")
	}
	a.settle()
	next := *o
	next.settle()
	for j := range a.count {
		next.count[j] += a.count[j]
	}
	next.samples += a.samples
	sum := a.squares
	sum.merge(next.squares)
	next.squares = sum
	*a = next
}

// Result returns the active speech level in dBov and the share of active
// samples, 0 to 1; both NaN where the level is undefined: no threshold at
// which it lies 15.9 dB above, as in silence, below about -74 dBov or in 50 ms.
func (a *Activity) Result() (activeDBov, activity float64) {
	a.settle()
	sum := a.squares.value()
	margin := func(j int) (level, above float64) {
		level = DB(sum / float64(a.count[j]))
		return level, level - 20*math.Log10(threshold56(j))
	}
	for j := 0; j+1 < thresholds56 && a.count[j+1] > 0 && sum > 0; j++ {
		l0, d0 := margin(j)
		l1, d1 := margin(j + 1)
		if d0 >= marginDB && marginDB >= d1 {
			active := l0
			if d0 > d1 {
				active += (l1 - l0) * (d0 - marginDB) / (d0 - d1)
			}
			return active, math.Pow(10, (DB(sum/float64(a.samples))-active)/10)
		}
	}
	return math.NaN(), math.NaN()
}

// Counts returns the active samples for each threshold 2^-15 ... 2^-1.
func (a *Activity) Counts() [thresholds56]int64 {
	a.settle()
	return a.count
}
