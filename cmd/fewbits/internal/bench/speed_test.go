package bench

import (
	"context"
	"io"
	"io/fs"
	"os"
	"path/filepath"
	"runtime"
	"strings"
	"testing"
	"time"
)

// BenchmarkHour measures an hour with twelve designs, in one file and in sixty,
// on one core and on all in turn, and reports how much faster all are.
func BenchmarkHour(b *testing.B) {
	for name, files := range map[string]int{"one-file": 1, "sixty-files": 60} {
		b.Run(name, func(b *testing.B) {
			plan := planFor(b, b.TempDir(), []string{hour(b, files)}, twelve()...)
			plan.Audio = false
			var one, all time.Duration
			for b.Loop() {
				one += timed(b, plan, 1)
				all += timed(b, plan, runtime.NumCPU())
			}
			b.ReportMetric(one.Seconds()/float64(b.N), "s/one-core")
			b.ReportMetric(all.Seconds()/float64(b.N), "s/all-cores")
			b.ReportMetric(one.Seconds()/all.Seconds(), "times-faster")
			b.ReportMetric(0, "ns/op")
		})
	}
}

// timed runs a plan on so many cores.
func timed(b *testing.B, plan Plan, cores int) time.Duration {
	defer runtime.GOMAXPROCS(runtime.GOMAXPROCS(cores))
	plan.Workers = cores
	begun := time.Now()
	if _, _, err := Run(context.Background(), plan); err != nil {
		b.Fatal(err)
	}
	return time.Since(begun)
}

// BenchmarkAudio writes the reconstructions and errors of an hour and twelve
// designs, and copies what was written (1.4 GB each), in turn.
func BenchmarkAudio(b *testing.B) {
	in := hour(b, 1)
	var run, copied time.Duration
	for b.Loop() {
		dir, err := os.MkdirTemp(b.TempDir(), "")
		if err != nil {
			b.Fatal(err)
		}
		run += timed(b, planFor(b, filepath.Join(dir, "a"), []string{in}, twelve()...), runtime.NumCPU())
		begun := time.Now()
		if err := copyTree(filepath.Join(dir, "a"), filepath.Join(dir, "b")); err != nil {
			b.Fatal(err)
		}
		copied += time.Since(begun)
		os.RemoveAll(dir)
	}
	b.ReportMetric(run.Seconds()/float64(b.N), "s/run")
	b.ReportMetric(copied.Seconds()/float64(b.N), "s/copy")
	b.ReportMetric(run.Seconds()/copied.Seconds(), "times-a-copy")
	b.ReportMetric(0, "ns/op")
}

// copyTree copies all files below a folder through memory, 256 KB at a time.
func copyTree(from, to string) error {
	buf := make([]byte, 1<<18)
	return filepath.WalkDir(from, func(path string, d fs.DirEntry, err error) error {
		if err != nil {
			return err
		}
		dst := to + strings.TrimPrefix(path, from)
		if d.IsDir() {
			return os.MkdirAll(dst, 0o777)
		}
		in, err := os.Open(path)
		if err != nil {
			return err
		}
		defer in.Close()
		out, err := os.Create(dst)
		if err != nil {
			return err
		}
		defer out.Close()
		if _, err = io.CopyBuffer(struct{ io.Writer }{out}, struct{ io.Reader }{in}, buf); err != nil {
			return err
		}
		return out.Close()
	})
}
