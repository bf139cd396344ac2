package listening

import (
	"math"
	"math/big"
	"os"
	"path/filepath"
	"strconv"
	"strings"
	"testing"
)

// TestSignTestTable: Triola, Elementary Statistics (Pearson), Table A-7 "Critical
// Values for the Sign Test", two tails: the largest count of the rarer sign that
// is significant; -1: none is.
func TestSignTestTable(t *testing.T) {
	levels := [4]float64{0.01, 0.02, 0.05, 0.10}
	for n, row := range map[int][4]int{
		5: {-1, -1, -1, 0}, 6: {-1, -1, 0, 0}, 7: {-1, 0, 0, 0}, 8: {0, 0, 0, 1},
		9: {0, 0, 1, 1}, 11: {0, 1, 1, 2}, 12: {1, 1, 2, 2}, 15: {2, 2, 3, 3},
		17: {2, 3, 4, 4}, 20: {3, 4, 5, 5}, 22: {4, 5, 5, 6}, 24: {5, 5, 6, 7}, 25: {5, 6, 7, 7},
	} {
		for i, critical := range row {
			if critical >= 0 && !(signTest(critical, n-critical) <= levels[i]) {
				t.Errorf("n = %d: %d is not significant at %g: p = %g", n, critical, levels[i], signTest(critical, n-critical))
			}
			if next := critical + 1; !(signTest(n-next, next) > levels[i]) {
				t.Errorf("n = %d: %d is significant at %g: p = %g", n, next, levels[i], signTest(next, n-next))
			}
		}
	}
}

// TestSignTestExact compares with the definition, summed in whole numbers.
func TestSignTestExact(t *testing.T) {
	for _, n := range []int{1, 2, 3, 10, 37, 100, 601} {
		for a := 0; a <= n; a += 1 + n/40 {
			tail := new(big.Int)
			for k := max(a, n-a); k <= n; k++ {
				tail.Add(tail, new(big.Int).Binomial(int64(n), int64(k)))
			}
			p := new(big.Rat).SetFrac(tail.Lsh(tail, 1), new(big.Int).Lsh(big.NewInt(1), uint(n)))
			want, _ := p.Float64()
			want = min(1, want)
			if got := signTest(a, n-a); !(math.Abs(got-want) <= 1e-10*want) {
				t.Errorf("%d of %d: p = %.15g, want %.15g", a, n, got, want)
			}
		}
	}
	if !math.IsNaN(signTest(0, 0)) {
		t.Error("no trials give a p")
	}
}

// filled writes a table of answers.
func filled(t *testing.T, text string) string {
	t.Helper()
	path := filepath.Join(t.TempDir(), "filled.csv")
	if err := os.WriteFile(path, []byte(text), 0o666); err != nil {
		t.Fatal(err)
	}
	return path
}

// TestScore: listeners who know the key's designs are counted as they answer.
func TestScore(t *testing.T) {
	out := t.TempDir()
	if _, err := Write(out, "new", "old", tones(t, 7), 5); err != nil {
		t.Fatal(err)
	}
	key := filepath.Join(out, KeyFile)
	one, two := "pair,preferred\n", "\xef\xbb\xbfRemark;Pair;Preferred\r\n"
	for i, row := range keyRows(t, out) {
		place := map[bool]string{true: "first", false: "second"}[row["first"] == "new"]
		switch i {
		case 0: // not answered
		case 1:
			one += row["pair"] + ",none\n"
		case 2: // the other one
			one += row["pair"] + "," + map[string]string{"first": "second", "second": "first"}[place] + "\n"
		default:
			one += row["pair"] + "," + place + "\n"
		}
		two += "x;" + strconv.Itoa(i+1) + "; " + strings.ToUpper(place) + "\r\n"
	}
	two += ";;\r\n"
	s, err := Score(key, filled(t, one), filled(t, two))
	if err != nil {
		t.Fatal(err)
	}
	if s.A != "new" || s.B != "old" || s.PreferA != 4+7 || s.PreferB != 1 || s.None != 1 || s.Unanswered != 1 {
		t.Errorf("%+v", s)
	}
	if s.First+s.Second != 12 || s.PlaceP != signTest(s.First, s.Second) {
		t.Errorf("by place: %+v", s)
	}
	// 2 (C(12,11) + C(12,12)) / 2^12
	if want := 26.0 / 4096; math.Abs(s.P-want) > 1e-12 {
		t.Errorf("p = %g, want %g", s.P, want)
	}
	s, err = Score(key, filepath.Join(out, AnswersFile))
	if err != nil || s.Unanswered != 7 || !math.IsNaN(s.P) {
		t.Errorf("the empty table: %+v, %v", s, err)
	}
}

// TestScoreRefuses: each fault is named with its file and line.
func TestScoreRefuses(t *testing.T) {
	const head = "pair,order,first,second\n"
	key := filled(t, head+"pair-01,AB,new,old\npair-02,BA,old,new\n")
	for _, c := range []struct{ key, answers, want string }{
		{"", "pair,preferred\n3,first\n", `filled.csv: line 2: pair "3" is not in the key`},
		{"", "pair,preferred\n1,first\n01,second\n", "line 3: pair \"01\" is answered twice"},
		{"", "pair,preferred\n1,left\n", `line 2: preferred "left"`},
		{"", "pair,choice\n1,first\n", `line 1: no column "preferred"`},
		{"", "", "line 1: nothing there"},
		{"", "pair,preferred\n1,\"first\n", "line 2"},
		{"", "pair,preferred\n" + strings.Repeat(" ", mostBytes), "not a table"},
		{head, "", "no pairs follow"},
		{head + "1,AC,x,y\n", "", `line 2: order "AC"`},
		{head + "1,AB,x,x\n", "", `line 2: both sides are "x"`},
		{head + "1,AB,x,y\n2,BA,x,y\n", "", "line 3: designs"},
		{head + "1,AB,x,y\n01,BA,y,x\n", "", "line 3: pair \"01\" is listed twice"},
		{head + "pair-00,AB,x,y\n", "", `line 2: pair "pair-00"`},
	} {
		k := key
		if c.key != "" {
			k = filled(t, c.key)
		}
		if _, err := Score(k, filled(t, c.answers)); err == nil || !strings.Contains(err.Error(), c.want) {
			t.Errorf("%q, %q: %v, want %q", c.key, c.answers, err, c.want)
		}
	}
	if _, err := Score("nowhere.csv"); err == nil || !strings.Contains(err.Error(), "nowhere.csv") {
		t.Errorf("no key: %v", err)
	}
}

// FuzzTables: whatever is in a file, parsing ends without a panic, and answers
// are counted for pairs of the key only.
func FuzzTables(f *testing.F) {
	f.Add("pair,order,first,second\n1,AB,x,y\n2,BA,y,x\n", "pair,preferred\n1,first\n2,none\n")
	f.Add("\xef\xbb\xbfpair;order;first;second\r\n1;AB;x;y\r\n", "pair;preferred\r\n1;\r\n")
	f.Add("pair,order,first,second\n\"1", "pair,preferred\n,,,\n")
	f.Fuzz(func(t *testing.T, keyText, answerText string) {
		key, err := readKey(strings.NewReader(keyText))
		if err != nil {
			return
		}
		said, err := readAnswers(strings.NewReader(answerText), key)
		if err != nil {
			return
		}
		var s Scores
		s.count(key, said)
		if s.PreferA+s.PreferB+s.None+s.Unanswered != len(key.pairs) || s.PreferA+s.PreferB != s.First+s.Second {
			t.Errorf("%d pairs, %+v", len(key.pairs), s)
		}
	})
}
