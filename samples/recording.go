package samples

import (
	"crypto/sha256"
	"encoding/hex"
	"errors"
	"io"
	"os"

	"fewbits/samples/wave"
)

// Recording is an opened recording. Its methods may be called from several
// goroutines at once, but for Close.
type Recording struct {
	info   Info
	file   *os.File   // as the user named it
	spool  *spool     // where the samples are, if not in file
	origin *Recording // what this one was made from; owned
	made   Source     // makes the samples out of origin's; nil: they are stored
	enc    wave.Encoding
	start  int64 // of the samples in file or spool
}

// Info says what is known of the recording.
func (r *Recording) Info() Info { return r.info }

// Words says whether every sample lies on the 16-bit grid by its format (PCM up
// to 16 bits, G.711), so that ReadWords may be used.
func (r *Recording) Words() bool {
	if r.made != nil {
		return r.made.Words()
	}
	return r.enc.OnWords()
}

// SHA256 is the hexadecimal digest of the file's bytes, for a prepared recording
// of the file it was made from.
func (r *Recording) SHA256() (string, error) {
	if r.origin != nil {
		return r.origin.SHA256()
	}
	h := sha256.New()
	if _, err := io.Copy(h, io.NewSectionReader(r.file, 0, r.info.Bytes)); err != nil {
		return "", &Error{r.info.Path, plain(err)}
	}
	return hex.EncodeToString(h.Sum(nil)), nil
}

// Close lets go of the file and of what was made from it.
func (r *Recording) Close() error {
	var errs []error
	if r.spool != nil {
		errs = append(errs, r.spool.Close())
	}
	if r.origin != nil {
		errs = append(errs, r.origin.Close())
	}
	if r.file != nil {
		errs = append(errs, r.file.Close())
	}
	return errors.Join(errs...)
}
