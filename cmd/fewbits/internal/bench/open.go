package bench

import (
	"fmt"
	"math"
	"path/filepath"
	"strings"

	"fewbits/samples"
	"fewbits/samples/prepare"
)

// openAll finds, opens, prepares and surveys recordings. Those that cannot be
// used are refused with a reason; the others come sorted by path.
func (e *engine) openAll(inputs []string, names map[string]bool) ([]*survey, []Refusal, error) {
	files, missing, err := samples.Find(inputs)
	if err != nil {
		return nil, nil, err
	}
	var refused []Refusal
	for _, r := range missing {
		refused = append(refused, Refusal{File: e.shown(r.Path), Reason: r.Reason})
	}
	e.begin("reading", totalSamples(files))
	e.share = frameShare(len(files))
	surveys := make([]*survey, len(files))
	reasons := make([]error, len(files))
	err = inOrder(e.ctx, len(files), e.plan.Workers,
		func(i int) (struct{}, error) {
			surveys[i], reasons[i] = e.openOne(files[i])
			return struct{}{}, e.ctx.Err()
		},
		func(int, struct{}) error { return nil })
	if err != nil {
		return nil, nil, err
	}
	var good []*survey
	for i, s := range surveys {
		if reasons[i] != nil {
			refused = append(refused, Refusal{File: e.shown(files[i]), Reason: reason(files[i], reasons[i])})
			continue
		}
		s.clip.Name = unique(clipName(s.clip.File), names)
		good = append(good, s)
	}
	return good, refused, nil
}

// reason is an error without the file's name in front, which is told beside it.
func reason(file string, err error) string {
	return strings.TrimPrefix(err.Error(), file+": ")
}

// openOne opens, prepares and surveys one recording; where that fails it is
// closed again.
func (e *engine) openOne(file string) (s *survey, err error) {
	rec, err := samples.Open(file)
	if err != nil {
		return nil, err
	}
	defer func() {
		if err != nil {
			rec.Close()
		}
	}()
	sum := later(rec.SHA256)
	defer sum() // before the file is closed
	next, did, err := prepare.Apply(rec, e.plan.Steps)
	if err != nil {
		return nil, err
	}
	rec = next
	if s, err = e.survey(rec, e.shown(file)); err != nil {
		return nil, err
	}
	if !math.IsNaN(e.plan.Level) {
		if s, did, err = e.levelled(s, did); err != nil {
			return nil, err
		}
		rec = s.rec
	}
	e.fitClip(s)
	e.pack(s)
	if s.clip.SHA256, err = sum(); err != nil {
		return nil, err
	}
	s.clip.Preparation = append(s.clip.Preparation, did...)
	if e.plan.Talker != nil {
		s.clip.Talker = e.plan.Talker.FindString(filepath.ToSlash(file))
	}
	return s, nil
}

// later starts f and returns what waits for its result.
func later[T any](f func() (T, error)) func() (T, error) {
	var t T
	var err error
	done := make(chan struct{})
	go func() { t, err = f(); close(done) }()
	return func() (T, error) { <-done; return t, err }
}

// levelled brings a clip's active speech level to the level asked for.
func (e *engine) levelled(s *survey, did []string) (*survey, []string, error) {
	if !s.clip.ActiveDBov.Defined() {
		return nil, nil, fmt.Errorf("--level: no active speech level, so no gain: leave the recording out or use --level as-is")
	}
	gain := e.plan.Level - float64(s.clip.ActiveDBov)
	rec, more, err := prepare.Apply(s.rec, prepare.Plan{GainDB: gain})
	if err != nil {
		return nil, nil, err
	}
	out, err := e.survey(rec, s.clip.File)
	return out, append(did, more...), err
}

func (e *engine) shown(path string) string {
	if e.plan.Shown != nil {
		return e.plan.Shown(path)
	}
	return path
}

// totalSamples is the length of a reading pass: every sample is read twice.
func totalSamples(files []string) (n int64) {
	for _, f := range files {
		if info, err := samples.Peek(f); err == nil {
			n += 2 * info.Frames * int64(info.Channels)
		}
	}
	return n
}

// clipName makes a folder name of a path's last part without its extension.
func clipName(file string) string {
	base := filepath.Base(filepath.FromSlash(file))
	base = strings.TrimSuffix(base, filepath.Ext(base))
	name := strings.Map(func(r rune) rune {
		switch {
		case r >= 'a' && r <= 'z', r >= 'A' && r <= 'Z', r >= '0' && r <= '9', r == '-', r == '.':
			return r
		}
		return '_'
	}, base)
	return "clip-" + strings.Trim(name, ".")[:min(80, len(strings.Trim(name, ".")))]
}
