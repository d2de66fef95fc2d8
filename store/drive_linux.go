package store

import "golang.org/x/sys/unix"

// networkDrives are the file systems of other computers, on which neither
// SQLite's locks nor its shared memory can be relied upon (statfs(2)).
var networkDrives = map[uint32]string{
	unix.NFS_SUPER_MAGIC:   "nfs",
	unix.SMB_SUPER_MAGIC:   "smb",
	unix.SMB2_SUPER_MAGIC:  "smb2",
	unix.CIFS_SUPER_MAGIC:  "cifs",
	unix.AFS_SUPER_MAGIC:   "afs",
	unix.AFS_FS_MAGIC:      "afs",
	unix.CODA_SUPER_MAGIC:  "coda",
	unix.CEPH_SUPER_MAGIC:  "ceph",
	unix.OCFS2_SUPER_MAGIC: "ocfs2",
	unix.V9FS_MAGIC:        "9p",
}

// statfs is the system's, but for tests.
var statfs = unix.Statfs

// onNetwork tells whether a folder is on a drive of another computer.
func onNetwork(dir string) (bool, error) {
	var s unix.Statfs_t
	if err := statfs(dir, &s); err != nil {
		return false, err
	}
	_, remote := networkDrives[uint32(s.Type)]
	return remote, nil
}
