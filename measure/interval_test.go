package measure

import (
	"math"
	"math/rand/v2"
	"reflect"
	"runtime"
	"testing"
)

// TestStudentSleepData: extra hours of sleep of ten patients under two drugs.
// Data: "Student", The probable error of a mean, Biometrika 6 (1908), the
// data set `sleep` of R, whose paired t-test prints t = -4.0621 and a 95 %
// interval from -2.4599 to -0.7001 for the first less the second. The
// leader here is the second drug.
func TestStudentSleepData(t *testing.T) {
	c := Compare(Units{Values: [][]float64{
		{0.7, -1.6, -0.2, -1.2, -0.1, 3.4, 3.7, 0.8, 0.0, 2.0},
		{1.9, 0.8, 1.1, 0.1, -0.1, 4.4, 5.5, 1.6, 4.6, 3.4},
	}}, 1)
	if c.Leader != 1 || c.Observations != 10 {
		t.Fatalf("leader %d of %d observations", c.Leader, c.Observations)
	}
	near(t, "lower end", c.Behind[0][0], 0.7001, 5e-5)
	near(t, "upper end", c.Behind[0][1], 2.4599, 5e-5)
	half := (c.Behind[0][1] - c.Behind[0][0]) / 2
	near(t, "t", (c.Means[1]-c.Means[0])/(half/c.Critical), 4.0621, 5e-5)
	if want := []string{LeadBehind, LeadClear}; !reflect.DeepEqual(c.Lead, want) {
		t.Errorf("lead %v, want %v", c.Lead, want)
	}
}

// TestCoverage: over many synthetic comparisons, each design's own interval
// and all differences between designs at once hold the truth in 95 %; those
// from the leader, which is chosen by the same data, in no less. Clips differ
// from each other more than designs do, as in speech. The tolerance is three
// standard errors of the count, and one point for the bootstrap's own bias.
func TestCoverage(t *testing.T) {
	const trials, designs, used = 1000, 4, 199
	truth := []float64{20, 20.5, 21, 21}
	tol := 3*math.Sqrt(0.95*0.05/trials) + 0.01
	for _, n := range []int{5, 10, 15, 30, 60} {
		var own, all, led int
		for trial := range trials {
			r := rand.New(rand.NewPCG(uint64(trial), uint64(n)))
			v := make([][]float64, designs)
			for range n {
				clip := 4 * r.NormFloat64()
				for d := range v {
					v[d] = append(v[d], truth[d]+clip+r.NormFloat64()*float64(1+d))
				}
			}
			c := compare(Units{Values: v}, uint64(trial), used)
			if holds(c.Interval[0], truth[0]) {
				own++
			}
			if allPairsHold(v, c, truth) {
				all++
			}
			if leaderHolds(c, truth) {
				led++
			}
		}
		t.Logf("%2d clips: own %.4f, all pairs %.4f, from the leader %.4f", n,
			float64(own)/trials, float64(all)/trials, float64(led)/trials)
		near(t, "coverage of one mean", float64(own)/trials, 0.95, tol)
		near(t, "joint coverage of all differences", float64(all)/trials, 0.95, tol)
		if got := float64(led) / trials; got < 0.95-tol {
			t.Errorf("%d clips: coverage from the leader %.4f", n, got)
		}
	}
}

func holds(interval [2]float64, x float64) bool { return interval[0] <= x && x <= interval[1] }

func allPairsHold(v [][]float64, c Comparison, truth []float64) bool {
	for i := range v {
		for j := range i {
			off := c.Means[i] - c.Means[j] - (truth[i] - truth[j])
			if math.Abs(off) > c.Critical*standardError(v[i], v[j]) {
				return false
			}
		}
	}
	return true
}

func leaderHolds(c Comparison, truth []float64) bool {
	for d := range truth {
		if d != c.Leader && !holds(c.Behind[d], truth[c.Leader]-truth[d]) {
			return false
		}
	}
	return true
}

func TestCompareStates(t *testing.T) {
	r := rand.New(rand.NewPCG(1, 1))
	a := make([]float64, 20)
	for i := range a {
		a[i] = 20 + r.NormFloat64()
	}
	shift := func(by, noise float64) []float64 {
		out := make([]float64, len(a))
		for i := range a {
			out[i] = a[i] + by + noise*r.NormFloat64()
		}
		return out
	}
	for _, c := range []struct {
		name   string
		values [][]float64
		lead   []string
		set    []int
	}{
		{"far apart", [][]float64{a, shift(5, 0.1), shift(1, 0.1)}, []string{LeadBehind, LeadClear, LeadBehind}, []int{1}},
		{"the same", [][]float64{a, a, shift(-3, 0.1)}, []string{LeadShared, LeadShared, LeadBehind}, []int{0, 1}},
		{"a hair apart", [][]float64{a, shift(0, 0.01)}, []string{LeadShared, LeadShared}, []int{0, 1}},
		{"unsettled", [][]float64{a, shift(0.1, 1)}, []string{LeadOpen, LeadOpen}, []int{0, 1}},
		{"a constant apart", [][]float64{a, shift(1, 0)}, []string{LeadBehind, LeadClear}, []int{1}},
		{"alone", [][]float64{a}, []string{LeadClear}, []int{0}},
	} {
		got := Compare(Units{Values: c.values}, 3)
		if !reflect.DeepEqual(got.Lead, c.lead) || !reflect.DeepEqual(got.Set, c.set) {
			t.Errorf("%s: lead %v set %v, want %v %v (behind %v)", c.name, got.Lead, got.Set, c.lead, c.set, got.Behind)
		}
	}
}

func TestCompareWithTooLittle(t *testing.T) {
	nan := math.NaN()
	for _, u := range []Units{
		{},
		{Values: [][]float64{{}, {}}},
		{Values: [][]float64{{nan, nan}, {1, 2}}},
		{Values: [][]float64{{3}, {4}}},
		{Values: [][]float64{{3, nan}, {4, 5}}},
		{Values: [][]float64{{3, 4, 5}, {4, 5, 6}}, Groups: []string{"a", "a", "a"}},
	} {
		c := Compare(u, 1)
		if len(c.Set) != 0 {
			t.Errorf("%v: set %v", u.Values, c.Set)
		}
		for d := range c.Interval {
			if !math.IsNaN(c.Interval[d][0]) || !math.IsNaN(c.Behind[d][1]) || c.Lead[d] != "" {
				t.Errorf("%v: interval %v, behind %v, lead %q", u.Values, c.Interval[d], c.Behind[d], c.Lead[d])
			}
		}
	}
	u := Units{Values: [][]float64{{1, 2, nan, 3}, {2, 9, 4, 5}}}
	near(t, "mean without the undefined unit", Compare(u, 1).Means[1], 16.0/3, 1e-12)
}

// TestGroups: ten clips each of few talkers are few observations.
func TestGroups(t *testing.T) {
	r := rand.New(rand.NewPCG(2, 2))
	u := Units{Values: make([][]float64, 2)}
	for i := range 80 {
		talker := float64(i/10) * math.Sin(float64(i/10))
		u.Values[0] = append(u.Values[0], 20+talker)
		u.Values[1] = append(u.Values[1], 20+0.1*r.NormFloat64())
		u.Groups = append(u.Groups, string(rune('a'+i/10)))
	}
	grouped := Compare(u, 1)
	u.Groups = nil
	apart := Compare(u, 1)
	if grouped.Observations != 8 || apart.Observations != 80 {
		t.Fatalf("observations %d, %d", grouped.Observations, apart.Observations)
	}
	near(t, "mean", grouped.Means[0], apart.Means[0], 1e-12)
	if g, a := width(grouped.Interval[0]), width(apart.Interval[0]); !(g > 2*a) {
		t.Errorf("width over talkers %g, over clips %g", g, a)
	}
	// Equal groups: exactly the t interval of the talkers' means.
	var talkers [][]float64
	for range 1 {
		row := make([]float64, 8)
		for k := range row {
			row[k] = 20 + float64(k)*math.Sin(float64(k))
		}
		talkers = append(talkers, row)
	}
	near(t, "half width", width(grouped.Interval[0]), width(Compare(Units{Values: talkers}, 1).Interval[0]), 1e-9)
}

func width(i [2]float64) float64 { return i[1] - i[0] }

// TestCompareIsRepeatable: the same seed gives the same bits, on one core, two
// or seven.
func TestCompareIsRepeatable(t *testing.T) {
	r := rand.New(rand.NewPCG(3, 3))
	for _, n := range []int{12, 45} {
		v := make([][]float64, 5)
		for d := range v {
			for range n {
				v[d] = append(v[d], r.NormFloat64())
			}
		}
		cores := runtime.GOMAXPROCS(1)
		a := Compare(Units{Values: v}, 9)
		runtime.GOMAXPROCS(7)
		b := Compare(Units{Values: v}, 9)
		runtime.GOMAXPROCS(cores)
		a.Behind[a.Leader], b.Behind[b.Leader] = [2]float64{}, [2]float64{} // NaN
		if !reflect.DeepEqual(a, b) {
			t.Errorf("%d units: %+v then %+v", n, a, b)
		}
	}
}

func TestBlockMeans(t *testing.T) {
	b := NewBlockMeans(4)
	const frames = 4*maxBlocks*3 + 7
	var sum float64
	for i := range frames {
		x := math.Sin(float64(i) / 50)
		sum += x
		b.Add([]float64{x, 2 * x})
	}
	u := b.Units()
	if n := len(u.Weights); n > maxBlocks || n < maxBlocks/4 {
		t.Errorf("%d blocks", n)
	}
	c := Compare(u, 1)
	near(t, "mean over blocks", c.Means[1], 2*sum/frames, 1e-12)
	if got := Compare(NewBlockMeans(5).Units(), 1); got.Leader != -1 {
		t.Errorf("leader %d of nothing", got.Leader)
	}
}
