package journal

import "golang.org/x/sys/unix"

// networkOf reports whether dir lies on another machine, and on what.
func networkOf(dir string) (kind string, remote bool) {
	var st unix.Statfs_t
	if unix.Statfs(dir, &st) != nil {
		return "", false
	}
	return unix.ByteSliceToString(st.Fstypename[:]), st.Flags&unix.MNT_LOCAL == 0
}
