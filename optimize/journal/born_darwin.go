package journal

import (
	"fmt"

	"golang.org/x/sys/unix"
)

// born tells when the process started, "" if that is not to be had.
func born(pid int) string {
	p, err := unix.SysctlKinfoProc("kern.proc.pid", pid)
	if err != nil {
		return ""
	}
	t := p.Proc.P_starttime
	return fmt.Sprintf("%d.%06d", t.Sec, t.Usec)
}
