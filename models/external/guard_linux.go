package external

import "syscall"

// dieWithGuard has the kernel end the simulator should its guard alone be
// killed.
func dieWithGuard() *syscall.SysProcAttr {
	return &syscall.SysProcAttr{Pdeathsig: syscall.SIGKILL}
}
