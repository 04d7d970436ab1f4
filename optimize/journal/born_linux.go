package journal

import (
	"bytes"
	"fmt"
	"os"
)

// born tells boot and start time of the process, "" if that is not to be
// had. The start time is field 22 of /proc/PID/stat, clock ticks since boot;
// proc(5). The name before it, in parentheses, may hold anything.
func born(pid int) string {
	stat, err := os.ReadFile(fmt.Sprintf("/proc/%d/stat", pid))
	if err != nil {
		return ""
	}
	fields := bytes.Fields(stat[bytes.LastIndexByte(stat, ')')+1:])
	if len(fields) < 20 {
		return ""
	}
	boot, err := os.ReadFile("/proc/sys/kernel/random/boot_id")
	if err != nil {
		return ""
	}
	return fmt.Sprintf("%s/%s", bytes.TrimSpace(boot), fields[19])
}
