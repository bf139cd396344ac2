//go:build !windows

package samples

// tempVariable names the environment variable for the temporary folder.
const tempVariable = "TMPDIR"
