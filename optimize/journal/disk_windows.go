package journal

import (
	"path/filepath"
	"strings"

	"golang.org/x/sys/windows"
)

// networkOf reports whether dir lies on another machine, and on what.
func networkOf(dir string) (kind string, remote bool) {
	abs, err := filepath.Abs(dir)
	if err != nil {
		return "", false
	}
	volume := filepath.VolumeName(abs)
	if strings.HasPrefix(volume, `\\`) && !strings.HasPrefix(volume, `\\?\`) && !strings.HasPrefix(volume, `\\.\`) {
		return "share " + volume, true
	}
	root, err := windows.UTF16PtrFromString(volume + `\`)
	if err != nil {
		return "", false
	}
	return "network drive " + volume, windows.GetDriveType(root) == windows.DRIVE_REMOTE
}

// syncDir has nothing to do: a rename is durable with the file's own log.
func syncDir(string) error { return nil }
