package site

import (
	"errors"
	"os"

	"golang.org/x/sys/unix"
)

// exchange swaps two folders in one operation.
func exchange(a, b string) error {
	err := unix.Renameat2(unix.AT_FDCWD, a, unix.AT_FDCWD, b, unix.RENAME_EXCHANGE)
	switch {
	case err == nil:
		return nil
	case errors.Is(err, unix.ENOSYS), errors.Is(err, unix.EINVAL), errors.Is(err, unix.EOPNOTSUPP):
		return errNoExchange // an old kernel, or a file system without it
	}
	return &os.LinkError{Op: "exchange", Old: a, New: b, Err: err}
}

// settle forces the file system that holds dir to disk: one call for the whole
// stage costs far less than one for each file.
func settle(dir string) error {
	d, err := os.Open(dir)
	if err != nil {
		return err
	}
	defer d.Close()
	if err := unix.Syncfs(int(d.Fd())); err != nil {
		return &os.PathError{Op: "sync", Path: dir, Err: err}
	}
	return nil
}

// apart says whether a folder is on another file system than its parent, and
// so cannot be renamed.
func apart(dir, parent string) (bool, error) {
	var d, p unix.Stat_t
	if err := unix.Stat(dir, &d); err != nil {
		return false, &os.PathError{Op: "stat", Path: dir, Err: err}
	}
	if err := unix.Stat(parent, &p); err != nil {
		return false, &os.PathError{Op: "stat", Path: parent, Err: err}
	}
	return d.Dev != p.Dev, nil
}
