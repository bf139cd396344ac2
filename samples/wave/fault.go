package wave

import "fmt"

// Fault says why a file cannot be used: where, what, and what to do.
type Fault struct {
	Offset int64 // byte in the file; -1 where no byte is to blame
	What   string
	Remedy string
}

// Error reads "byte 36: what: remedy".
func (f *Fault) Error() string {
	if f.Offset < 0 {
		return f.What + ": " + f.Remedy
	}
	return fmt.Sprintf("byte %d: %s: %s", f.Offset, f.What, f.Remedy)
}

func fault(at int64, remedy, format string, args ...any) *Fault {
	return &Fault{Offset: at, What: fmt.Sprintf(format, args...), Remedy: remedy}
}

// Remedies that several faults share.
const (
	convert  = "convert it to WAV with PCM samples first"
	truncate = "the file is cut off; get a complete copy"
	damaged  = "the header is damaged; export the recording again"
)
