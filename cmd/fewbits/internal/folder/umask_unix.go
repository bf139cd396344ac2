//go:build unix

package folder

import (
	"io/fs"
	"syscall"
)

// umask is the process's file mode mask: a temporary folder is made private
// and gets the usual mode before it becomes the output.
func umask() fs.FileMode {
	m := syscall.Umask(0)
	syscall.Umask(m)
	return fs.FileMode(m)
}
