//go:build !unix

package folder

import "io/fs"

func umask() fs.FileMode { return 0 }
