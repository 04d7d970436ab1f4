package journal

import (
	"bufio"
	"fmt"
	"os"
	"strings"

	"golang.org/x/sys/unix"
)

// remoteMagic are the file systems, by the number statfs(2) gives, that lie
// on another machine.
var remoteMagic = map[uint32]string{
	0x6969:     "NFS",
	0x517b:     "SMB",
	0xff534d42: "CIFS",
	0xfe534d42: "SMB",
	0x564c:     "NCP",
	0x73757245: "Coda",
	0x5346414f: "AFS",
	0x6b414653: "AFS",
	0x00c36400: "Ceph",
	0x0bd00bd0: "Lustre",
	0x47504653: "GPFS",
	0x19830326: "BeeGFS",
	0x7461636f: "OCFS2",
	0x01161970: "GFS2",
}

const fuseMagic = 0x65735546

// remoteFuse are user-space file systems that lie on another machine.
var remoteFuse = []string{"sshfs", "smbnetfs", "curlftpfs", "s3fs", "rclone", "davfs", "davfs2", "glusterfs",
	"ceph-fuse", "gcsfuse", "goofys", "mount-s3", "blobfuse", "blobfuse2", "afpfs", "juicefs", "cvmfs2", "moosefs"}

// networkOf reports whether dir lies on another machine, and on what.
func networkOf(dir string) (kind string, remote bool) {
	var st unix.Statfs_t
	if unix.Statfs(dir, &st) != nil {
		return "", false
	}
	magic := uint32(st.Type)
	if name, ok := remoteMagic[magic]; ok {
		return name, true
	}
	if magic != fuseMagic {
		return "", false
	}
	return fuseRemote(dir)
}

// fuseRemote looks the mount of dir up by its device number.
func fuseRemote(dir string) (string, bool) {
	var st unix.Stat_t
	if unix.Stat(dir, &st) != nil {
		return "", false
	}
	f, err := os.Open("/proc/self/mountinfo")
	if err != nil {
		return "", false
	}
	defer f.Close()
	for lines := bufio.NewScanner(f); lines.Scan(); {
		device, kind := mountLine(lines.Text())
		if device == fmt.Sprintf("%d:%d", unix.Major(uint64(st.Dev)), unix.Minor(uint64(st.Dev))) {
			return kind, remoteFuseKind(kind)
		}
	}
	return "", false
}

// remoteFuseKind judges the type of a mount, such as fuse.sshfs.
func remoteFuseKind(kind string) bool {
	_, sub, ok := strings.Cut(kind, ".")
	if !ok {
		return false
	}
	for _, r := range remoteFuse {
		if sub == r {
			return true
		}
	}
	return false
}

// mountLine gives device number and type of a line of mountinfo; proc(5).
func mountLine(line string) (device, kind string) {
	before, after, ok := strings.Cut(line, " - ")
	fields, rest := strings.Fields(before), strings.Fields(after)
	if !ok || len(fields) < 3 || len(rest) == 0 {
		return "", ""
	}
	return fields[2], rest[0]
}
