package family

import (
	"fmt"
	"math"
	"math/bits"
	"slices"
	"strconv"
	"strings"
)

// Key is one key=value of a family.
type Key struct {
	Name    string
	Accepts string // what a value may be, for messages and help
	Default string
	// Valid reports whether the value is accepted.
	Valid func(v string) bool
}

// Args are a spec's keys as typed.
type Args map[string]string

// Spec is a parsed design spec.
type Spec struct {
	Text   string // as typed
	Family *Family
	Args   Args
	// Bits is 0 while left open; Levels is the number of cells once both are
	// settled. With levels=N, Bits is the smallest number that holds N.
	Bits, Levels int
}

// Get returns the value of a key or the family's default.
func (s Spec) Get(key string) string {
	if v, ok := s.Args[key]; ok {
		return v
	}
	for _, k := range s.Family.Keys {
		if k.Name == key {
			return k.Default
		}
	}
	panic("family: no key " + key + " in " + s.Family.Name)
}

// Number returns a key's value as a number; the key's Valid has vouched for it.
func (s Spec) Number(key string) float64 {
	f, err := strconv.ParseFloat(s.Get(key), 64)
	if err != nil {
		panic("family: key " + key + " is not a number")
	}
	return f
}

// Need reports what the spec must know of recordings.
func (s Spec) Need() Need {
	if s.Family.Needs == nil {
		return Nothing
	}
	return s.Family.Needs(s.full())
}

// full is Args with the defaults filled in.
func (s Spec) full() Args {
	out := Args{}
	for _, k := range s.Family.Keys {
		out[k.Name] = s.Get(k.Name)
	}
	return out
}

// Parse reads one spec. Errors name the word at fault and what is accepted.
func Parse(text string) (Spec, error) {
	words := strings.Split(text, ",")
	name, bitsText, hasBits := strings.Cut(words[0], ":")
	s := Spec{Text: text, Args: Args{}}
	for i := range Register {
		if Register[i].Name == name {
			s.Family = &Register[i]
		}
	}
	if s.Family == nil {
		return s, fmt.Errorf("design %q: no family %q; families are %s", text, name, strings.Join(Names(), ", "))
	}
	if hasBits {
		n, err := strconv.Atoi(bitsText)
		if err != nil || n < s.Family.MinBits || n > s.Family.MaxBits {
			return s, fmt.Errorf("design %q: bits %q: %s takes %s", text, bitsText, name, s.Family.bitsRange())
		}
		s.Bits = n
	}
	for _, w := range words[1:] {
		if err := s.take(w); err != nil {
			return s, fmt.Errorf("design %q: %w", text, err)
		}
	}
	return s.settle()
}

// take reads one key=value.
func (s *Spec) take(word string) error {
	key, value, ok := strings.Cut(word, "=")
	if !ok {
		return fmt.Errorf("%q: want key=value; keys of %s are %s", word, s.Family.Name, s.Family.keyNames())
	}
	if _, twice := s.Args[key]; twice || key == "levels" && s.Levels != 0 {
		return fmt.Errorf("key %q is given twice", key)
	}
	if key == "levels" && s.Family.MinBits != s.Family.MaxBits {
		return s.takeLevels(value)
	}
	i := slices.IndexFunc(s.Family.Keys, func(k Key) bool { return k.Name == key })
	if i < 0 {
		return fmt.Errorf("no key %q; keys of %s are %s", key, s.Family.Name, s.Family.keyNames())
	}
	if k := s.Family.Keys[i]; !k.Valid(value) {
		return fmt.Errorf("%s=%q: want %s", key, value, k.Accepts)
	}
	s.Args[key] = value
	return nil
}

func (s *Spec) takeLevels(value string) error {
	n, err := strconv.Atoi(value)
	if most := 1 << s.Family.MaxBits; err != nil || n < 2 || n > most {
		return fmt.Errorf("levels=%q: want 2 to %d", value, most)
	}
	if s.Bits != 0 {
		return fmt.Errorf("bits %d and levels=%d: give one of them", s.Bits, n)
	}
	s.Levels, s.Bits = n, bits.Len(uint(n-1))
	return nil
}

// settle fills in the number of cells where the bits are known and runs the
// family's own check.
func (s Spec) settle() (Spec, error) {
	if s.Family.MinBits == s.Family.MaxBits {
		s.Bits = s.Family.MinBits
	}
	if s.Bits != 0 && s.Levels == 0 {
		s.Levels = 1 << s.Bits
		if s.Family.Cells != nil {
			s.Levels = s.Family.Cells(s.full(), s.Bits)
		}
	}
	if s.Family.Check != nil && s.Levels != 0 {
		if err := s.Family.Check(s); err != nil {
			return s, fmt.Errorf("design %q: %w", s.Text, err)
		}
	}
	return s, nil
}

// WithBits returns the spec at so many bits, where its own are left open; the
// text gains them, so that it stands for itself.
func (s Spec) WithBits(n int) (Spec, error) {
	if s.Bits != 0 {
		return s, nil
	}
	head, rest, more := strings.Cut(s.Text, ",")
	head, _, _ = strings.Cut(head, ":")
	text := fmt.Sprintf("%s:%d", head, n)
	if more {
		text += "," + rest
	}
	return Parse(text)
}

// Open reports whether the bits are left to be chosen.
func (s Spec) Open() bool { return s.Bits == 0 }

// Name is the spec as a file name: letters, digits, dot, hyphen and
// underscore only.
func (s Spec) Name() string {
	out := strings.Map(func(r rune) rune {
		switch {
		case r >= 'a' && r <= 'z' || r >= 'A' && r <= 'Z' || r >= '0' && r <= '9' || r == '.' || r == '-':
			return r
		case r == ':' || r == '=':
			return '-'
		}
		return '_'
	}, s.Text)
	if len(out) > 100 {
		out = out[:100]
	}
	return strings.TrimRight(out, ".")
}

func (f *Family) bitsRange() string {
	if f.MinBits == f.MaxBits {
		return fmt.Sprintf("%d bits only", f.MinBits)
	}
	return fmt.Sprintf("whole bits from %d to %d", f.MinBits, f.MaxBits)
}

func (f *Family) keyNames() string {
	var names []string
	for _, k := range f.Keys {
		names = append(names, k.Name)
	}
	if f.MinBits != f.MaxBits {
		names = append(names, "levels")
	}
	if len(names) == 0 {
		return "none"
	}
	return strings.Join(names, ", ")
}

// oneOf accepts the listed words; the first is the default.
func oneOf(name string, words ...string) Key {
	return Key{
		Name: name, Accepts: strings.Join(words, "|"), Default: words[0],
		Valid: func(v string) bool { return slices.Contains(words, v) },
	}
}

// number accepts a finite number in (lo, hi].
func number(name, def string, lo, hi float64) Key {
	return Key{
		Name: name, Accepts: fmt.Sprintf("a number above %g, at most %g", lo, hi), Default: def,
		Valid: func(v string) bool { f, ok := parseNumber(v); return ok && f > lo && f <= hi },
	}
}

// parseNumber reads a plain finite decimal number: no NaN, no infinity, no
// hexadecimal, no underscores.
func parseNumber(v string) (float64, bool) {
	if v == "" || strings.Trim(v, "0123456789.eE+-") != "" {
		return 0, false
	}
	f, err := strconv.ParseFloat(v, 64)
	return f, err == nil && math.Abs(f) <= math.MaxFloat64
}
