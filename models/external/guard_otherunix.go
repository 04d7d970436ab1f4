//go:build unix && !linux

package external

import "syscall"

// dieWithGuard asks for nothing: these kernels have nothing of the kind. A
// simulator whose guard alone was killed sees its streams end.
func dieWithGuard() *syscall.SysProcAttr { return nil }
