package family

import (
	"strings"
	"testing"
)

func TestParseAccepts(t *testing.T) {
	for _, row := range []struct {
		text         string
		bits, levels int
		need         Need
		name         string
	}{
		{"mu-law:8", 8, 256, Nothing, "mu-law-8"},
		{"mu-law:4,shape=mid-tread", 4, 15, Nothing, "mu-law-4_shape-mid-tread"},
		{"a-law:16,a=1,peak=0.5", 16, 65536, Nothing, "a-law-16_a-1_peak-0.5"},
		{"mu-law,levels=100", 7, 100, Nothing, "mu-law_levels-100"},
		{"g711-mu", 8, 256, Nothing, "g711-mu"},
		{"g711-a:8", 8, 256, Nothing, "g711-a-8"},
		{"uniform:1", 1, 2, Nothing, "uniform-1"},
		{"uniform:6,overload=4rms", 6, 64, Level, "uniform-6_overload-4rms"},
		{"uniform:6,overload=0.25", 6, 64, Nothing, "uniform-6_overload-0.25"},
		{"uniform:6,overload=optimal,from=gamma", 6, 64, Level, "uniform-6_overload-optimal_from-gamma"},
		{"lloyd-max:12", 12, 4096, Level, "lloyd-max-12"},
		{"lloyd-max,levels=3,from=gaussian,scale=active,symmetry=free", 2, 3, Level, "lloyd-max_levels-3_from-gaussian_scale-active_symmetry-free"},
		{"uniform:6,overload=optimal,from=data", 6, 64, Data, "uniform-6_overload-optimal_from-data"},
		{"lloyd-max:6,aim=entropy,rate=3.5", 6, 64, Level, "lloyd-max-6_aim-entropy_rate-3.5"},
		{"lloyd-max:6,from=data,aim=entropy,lambda=1e-4", 6, 64, Data, "lloyd-max-6_from-data_aim-entropy_lambda-1e-4"},
		{"compander:4,from=data,segments=8,power=0.5", 4, 16, Data, "compander-4_from-data_segments-8_power-0.5"},
		{"compander:4", 4, 16, Level, "compander-4"},
		{"lloyd-max:4,from=own.csv,symmetry=free", 4, 16, Level, "lloyd-max-4_from-own.csv_symmetry-free"},
		{"lloyd-max:4,from=data", 4, 16, Data, "lloyd-max-4_from-data"},
		{"lloyd-max:4,from=data,aim=segsnr", 4, 16, FramedData, "lloyd-max-4_from-data_aim-segsnr"},
		{"uniform", 0, 0, Nothing, "uniform"},
	} {
		s, err := Parse(row.text)
		if err != nil {
			t.Errorf("%s: %v", row.text, err)
			continue
		}
		if s.Bits != row.bits || s.Levels != row.levels || s.Need() != row.need || s.Name() != row.name {
			t.Errorf("%s: %d bits, %d levels, need %d, name %q", row.text, s.Bits, s.Levels, s.Need(), s.Name())
		}
	}
}

// TestParseRefuses wants the word at fault and what is accepted in the message.
func TestParseRefuses(t *testing.T) {
	for _, row := range []struct{ text, fault, accepted string }{
		{"", `""`, "mu-law"},
		{"mu-las:8", `"mu-las"`, "mu-law"},
		{"MU-LAW:8", `"MU-LAW"`, "mu-law"},
		{"mu-law:0", `"0"`, "1 to 16"},
		{"mu-law:17", `"17"`, "1 to 16"},
		{"mu-law:-3", `"-3"`, "1 to 16"},
		{"mu-law:3.5", `"3.5"`, "1 to 16"},
		{"mu-law:NaN", `"NaN"`, "1 to 16"},
		{"mu-law:99999999999999999999", `"99999999999999999999"`, "1 to 16"},
		{"lloyd-max:13", `"13"`, "1 to 12"},
		{"g711-mu:7", `"7"`, "8 bits only"},
		{"g711-mu,levels=256", `"levels"`, "none"},
		{"mu-law:8,", `""`, "key=value"},
		{"mu-law:8,mu", `"mu"`, "key=value"},
		{"mu-law:8,nu=255", `"nu"`, "mu, peak, shape, levels"},
		{"mu-law:8,mu=255,mu=100", `"mu"`, "twice"},
		{"mu-law:8,mu=NaN", `"NaN"`, "a number above 0"},
		{"mu-law:8,mu=Inf", `"Inf"`, "a number above 0"},
		{"mu-law:8,mu=-1", `"-1"`, "a number above 0"},
		{"mu-law:8,mu=0", `"0"`, "a number above 0"},
		{"mu-law:8,mu=1e999", `"1e999"`, "a number above 0"},
		{"mu-law:8,mu=0x10", `"0x10"`, "a number above 0"},
		{"mu-law:8,mu=1_0", `"1_0"`, "a number above 0"},
		{"mu-law:8,peak=0", `"0"`, "a number above 0"},
		{"mu-law:8,shape=flat", `"flat"`, "mid-rise|mid-tread"},
		{"mu-law:1,shape=mid-tread", "mid-tread", "2 bits or more"},
		{"mu-law,levels=7", "levels=7", "even"},
		{"mu-law,levels=8,shape=mid-tread", "levels=8", "odd"},
		{"mu-law:8,levels=256", "levels=256", "one of them"},
		{"mu-law,levels=1", `"1"`, "2 to 65536"},
		{"mu-law,levels=65537", `"65537"`, "2 to 65536"},
		{"a-law:8,a=0.5", `"0.5"`, "from 1"},
		{"uniform:8,overload=0", `"0"`, "full, optimal"},
		{"uniform:8,overload=-1", `"-1"`, "full, optimal"},
		{"uniform:8,overload=rms", `"rms"`, "full, optimal"},
		{"uniform:8,overload=NaNrms", `"NaNrms"`, "full, optimal"},
		{"uniform:8,from=gamma", `"gamma"`, "overload=optimal"},
		{"lloyd-max:8,from=cauchy", `"cauchy"`, "laplacian"},
		{"lloyd-max:8,scale=peak", `"peak"`, "rms|active|fit"},
		{"lloyd-max:8,symmetry=odd", `"odd"`, "mirror|free"},
		{"lloyd-max:8,aim=entropy", "aim=entropy", "rate= or lambda="},
		{"lloyd-max:8,aim=entropy,rate=3,lambda=1", "aim=entropy", "one of them"},
		{"lloyd-max:8,rate=3", "rate=", "aim=entropy"},
		{"lloyd-max:8,aim=entropy,rate=NaN", `"NaN"`, "bits a sample"},
		{"lloyd-max:8,aim=segsnr", `"segsnr"`, "from=data"},
	} {
		_, err := Parse(row.text)
		if err == nil {
			t.Errorf("%q is accepted", row.text)
			continue
		}
		if msg := err.Error(); !strings.Contains(msg, row.fault) || !strings.Contains(msg, row.accepted) {
			t.Errorf("%q: message %q names not both %s and %s", row.text, msg, row.fault, row.accepted)
		}
	}
}

func TestWithBits(t *testing.T) {
	s, err := Parse("lloyd-max,from=gamma")
	if err != nil {
		t.Fatal(err)
	}
	at, err := s.WithBits(6)
	if err != nil || at.Text != "lloyd-max:6,from=gamma" || at.Levels != 64 {
		t.Errorf("WithBits(6) = %q, %d levels, %v", at.Text, at.Levels, err)
	}
	if _, err := s.WithBits(13); err == nil {
		t.Error("13 bits are accepted")
	}
}

// FuzzParse: no panic, and what is accepted is settled and named safely.
func FuzzParse(f *testing.F) {
	for _, s := range []string{"mu-law:8", "uniform:6,overload=4rms", "lloyd-max,levels=3,from=data", "g711-a", "a-law:16,a=1,,"} {
		f.Add(s)
	}
	f.Fuzz(func(t *testing.T, text string) {
		s, err := Parse(text)
		if err != nil {
			return
		}
		if s.Levels != 0 && (s.Levels < 2 || s.Levels > 1<<16) {
			t.Fatalf("%q: %d levels", text, s.Levels)
		}
		s.Need()
		if name := s.Name(); name == "" || strings.Trim(name, "abcdefghijklmnopqrstuvwxyzABCDEFGHIJKLMNOPQRSTUVWXYZ0123456789.-_") != "" {
			t.Fatalf("%q: unsafe name %q", text, name)
		}
	})
}
