package site

import (
	"errors"
	"fmt"
	"io/fs"
	"os"
	"path/filepath"
	"runtime"

	"github.com/gofrs/flock"
)

// lock takes the lock file of a target, or fails at once. The system drops the
// lock of a process that dies, so a lock file left behind binds nobody.
func (p places) lock() (*flock.Flock, error) {
	const tries = 100
	for range tries {
		l := flock.New(p.lockFile, flock.SetPermissions(0o666))
		ok, err := l.TryLock()
		if err != nil {
			return nil, fmt.Errorf("locking %s: %w", p.lockFile, err)
		}
		if !ok {
			break
		}
		// Whoever held it before us may have removed the file between our
		// opening and our locking it: then our lock is on a file nobody sees.
		held, err := l.Stat()
		if err != nil {
			return nil, errors.Join(err, l.Unlock())
		}
		there, err := os.Lstat(p.lockFile)
		if err == nil && os.SameFile(held, there) {
			return l, nil
		}
		if uerr := l.Unlock(); uerr != nil {
			return nil, uerr
		}
		if err != nil && !errors.Is(err, fs.ErrNotExist) {
			return nil, err
		}
	}
	return nil, &refusal{what: p.name, busy: true,
		why: "another publish is at work on this folder and holds " + filepath.Base(p.lockFile),
		fix: "wait until it has ended and publish again"}
}

// unlock removes the lock file and gives the lock back.
func (p places) unlock(l *flock.Flock) error {
	if runtime.GOOS != "windows" {
		// While it is held: afterwards it may be another's.
		return errors.Join(os.Remove(p.lockFile), l.Unlock())
	}
	// An open file cannot be removed there, neither ours now nor another's
	// later, so a refusal means that somebody else holds it.
	if err := l.Unlock(); err != nil {
		return err
	}
	os.Remove(p.lockFile)
	return nil
}
