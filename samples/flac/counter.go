package flac

import (
	"bufio"
	"io"
)

// counter is a buffered reader that knows its place in the file.
type counter struct {
	r    *bufio.Reader
	src  *io.SectionReader
	base int64
	err  error // of reading the file, but for its end
}

func newCounter(r io.ReaderAt, start, size int64) *counter {
	c := &counter{src: io.NewSectionReader(r, start, max(0, size-start)), base: start}
	c.r = bufio.NewReaderSize(c, 1<<16)
	return c
}

// Read passes on and remembers a failure.
func (c *counter) Read(b []byte) (int, error) {
	n, err := c.src.Read(b)
	if err != nil && err != io.EOF {
		c.err = err
	}
	return n, err
}

// at is the offset of the next byte to be decoded.
func (c *counter) at() int64 {
	read, _ := c.src.Seek(0, io.SeekCurrent)
	return c.base + read - int64(c.r.Buffered())
}
