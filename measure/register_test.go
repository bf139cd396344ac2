package measure

import (
	"math"
	"reflect"
	"regexp"
	"testing"
)

// worked is a tally with round numbers.
func worked() Tally {
	return Tally{
		Samples: 1000, Signal: 100, Error: 1, GranularErr: 0.75, OverloadErr: 0.25, Overloaded: 20,
		Indices: []int64{250, 250, 250, 250},
		Segmental: [3]Segments{
			{SumDB: 40, Frames: 4, AtUpper: 1, AtLower: 2}, {SumDB: 60, Frames: 5, AtUpper: 2},
			{SumDB: 100, Frames: 4, Floored: 3, AtLower: 1},
		},
		FramesIn: 4, FramesOut: 1, FramesSilent: 7,
		SignalOut: 1e-3, ErrorOut: 1e-5, SignalIn: 50, CrossIn: 49,
		SamplesOut: 100, OutputOut: 1e-4, Toggled: 3, Steps: 12,
	}
}

func TestRegister(t *testing.T) {
	want := map[string]float64{
		"mse": 1e-3, "snr_db": 20, "segsnr_db": 10, "segsnr_all_db": 12, "segsnr_open_db": 25,
		"frames_used": 4, "frames_out_of_range": 1, "frames_left_out": 7,
		"at_upper_limit": 0.25, "at_lower_limit": 0.5, "all_at_upper_limit": 0.4, "all_at_lower_limit": 0,
		"open_at_upper_limit": 0, "open_at_lower_limit": 0.25, "floored": 0.75,
		"overload_fraction": 0.02, "granular_mse": 7.5e-4, "overload_mse": 2.5e-4, "entropy_bits": 2,
		"quiet_snr_db": 20, "idle_dbov": -60, "idle_gain_db": -10, "match_b": 0.98, "idle_toggling": 0.25,
	}
	tally := worked()
	name := regexp.MustCompile(`^[a-z][a-z_]*$`)
	for _, m := range Register {
		v, ok := want[m.Name]
		if !ok || !name.MatchString(m.Name) || m.Means == "" {
			t.Errorf("measure %+v: unknown, badly named or unexplained", m)
		}
		near(t, m.Name, m.Of(&tally), v, 1e-12)
		delete(want, m.Name)
		if found, ok := ByName(m.Name); !ok || found.Name != m.Name {
			t.Errorf("%s is not found by name", m.Name)
		}
	}
	if len(want) != 0 {
		t.Errorf("not in the register, or twice: %v", want)
	}
	if _, ok := ByName("loudness"); ok {
		t.Error("found a measure that is not there")
	}
}

// TestUndefinedFigures: nothing measured gives NaN or zero counts, never an
// infinity or an invented number.
func TestUndefinedFigures(t *testing.T) {
	counts := map[string]bool{"frames_used": true, "frames_out_of_range": true, "frames_left_out": true}
	for _, m := range Register {
		if v := m.Of(&Tally{}); !math.IsNaN(v) && !(counts[m.Name] && v == 0) {
			t.Errorf("%s of nothing is %g", m.Name, v)
		}
	}
	lossless := Tally{Samples: 10, Signal: 1}
	if !Lossless(&lossless) || !math.IsNaN(snr.Of(&lossless)) || Lossless(&Tally{}) {
		t.Error("lossless is not told from nothing measured")
	}
	silent := Tally{Samples: 10, Error: 1}
	if Lossless(&silent) || !math.IsNaN(snr.Of(&silent)) {
		t.Error("SNR without signal is defined")
	}
}

// TestTallyMerge: pooling doubles every sum, whichever field it is.
func TestTallyMerge(t *testing.T) {
	a, b := worked(), worked()
	a.Merge(&b)
	doubled(t, "Tally", reflect.ValueOf(a), reflect.ValueOf(b))
	short := Tally{Indices: []int64{1}}
	short.Merge(&b)
	if short.Indices[0] != 251 || short.Indices[3] != 250 {
		t.Errorf("indices %v", short.Indices)
	}
}

func doubled(t *testing.T, path string, sum, one reflect.Value) {
	t.Helper()
	switch one.Kind() {
	case reflect.Struct:
		for i := range one.NumField() {
			doubled(t, path+"."+one.Type().Field(i).Name, sum.Field(i), one.Field(i))
		}
	case reflect.Array, reflect.Slice:
		for i := range one.Len() {
			doubled(t, path, sum.Index(i), one.Index(i))
		}
	case reflect.Float64:
		near(t, path, sum.Float(), 2*one.Float(), 0)
	case reflect.Int64:
		if sum.Int() != 2*one.Int() {
			t.Errorf("%s = %d, want %d", path, sum.Int(), 2*one.Int())
		}
	default:
		t.Errorf("%s: field of kind %v is not pooled by this test", path, one.Kind())
	}
}

// TestEntropy: closed forms: 2^n equal counts give n bits, a fair coin 1, one
// cell 0; (1/2, 1/4, 1/8, 1/8) gives 1.75.
func TestEntropy(t *testing.T) {
	near(t, "one cell", Entropy([]int64{0, 9}), 0, 0)
	near(t, "coin", Entropy([]int64{7, 7}), 1, 1e-15)
	near(t, "halves", Entropy([]int64{4, 2, 1, 1}), 1.75, 1e-15)
}
