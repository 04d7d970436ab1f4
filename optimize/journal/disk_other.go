//go:build !linux && !darwin && !windows

package journal

// networkOf cannot tell here: the folder is taken to be local.
func networkOf(string) (kind string, remote bool) { return "", false }
