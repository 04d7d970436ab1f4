package journal

import "testing"

// Lines as proc(5) describes them, section mountinfo.
func TestMountLines(t *testing.T) {
	for line, want := range map[string]struct {
		device, kind string
		remote       bool
	}{
		"36 35 98:0 /mnt1 /mnt2 rw,noatime master:1 - ext3 /dev/root rw,errors=continue": {"98:0", "ext3", false},
		"112 28 0:48 / /home/a/far rw,nosuid - fuse.sshfs a@far:/runs rw,user_id=1000":   {"0:48", "fuse.sshfs", true},
		"113 28 0:49 / /home/a/near rw,nosuid - fuse.ntfs-3g /dev/sdb1 rw":               {"0:49", "fuse.ntfs-3g", false},
		"114 28 8:17 / /mnt/stick rw shared:2 master:3 - fuseblk /dev/sdb1 rw":           {"8:17", "fuseblk", false},
		"115 28 0:50 / /mnt/box rw - virtiofs box rw":                                    {"0:50", "virtiofs", false},
		"garbage": {},
	} {
		device, kind := mountLine(line)
		if device != want.device || kind != want.kind || remoteFuseKind(kind) != want.remote {
			t.Errorf("%s\n\tgives %q %q remote %v", line, device, kind, remoteFuseKind(kind))
		}
	}
	if kind, remote := networkOf("/proc"); remote {
		t.Errorf("/proc lies on %s", kind)
	}
}
