package site

import (
	"errors"
	"fmt"
	"io/fs"
	"os"
	"path/filepath"
)

// errNoExchange says that two folders cannot be exchanged in one operation here.
var errNoExchange = errors.New("folders cannot be exchanged here")

// recoverPlaces clears what a killed publish left. The -old folder is whole as
// long as it bears that name: it is the marker of a publish killed between the
// two renames.
func (p places) recoverPlaces(t tricks) error {
	old, err := exists(p.old)
	if err != nil {
		return err
	}
	if old {
		target, err := exists(p.target)
		if err != nil {
			return err
		}
		if target {
			if err := discard(p.stage, t); err != nil {
				return err
			}
			if err := t.rename(p.old, p.stage); err != nil {
				return err
			}
		} else if err := t.rename(p.old, p.target); err != nil {
			return err
		}
	}
	return discard(p.stage, t)
}

// takePlace puts the staged folder at the target. What stood there before is
// then at the place of the stage. done says whether the new site stands, which
// an error does not rule out.
func (p places) takePlace(targetStands bool, t tricks) (done bool, err error) {
	if !targetStands {
		err := t.rename(p.stage, p.target)
		return err == nil, p.besides(err)
	}
	err = errNoExchange
	if !t.noExchange {
		t.at("exchange")
		err = exchange(p.stage, p.target)
	}
	if !errors.Is(err, errNoExchange) {
		return err == nil, p.besides(err)
	}
	if err := t.rename(p.target, p.old); err != nil {
		return false, p.besides(err)
	}
	if err := t.rename(p.stage, p.target); err != nil {
		return false, errors.Join(p.besides(err), t.rename(p.old, p.target))
	}
	return true, t.rename(p.old, p.stage)
}

// discard removes a folder and all in it, also where folders were made
// read-only. No folder is no error.
func discard(dir string, t tricks) error {
	info, err := os.Lstat(dir)
	switch {
	case errors.Is(err, fs.ErrNotExist):
		return nil
	case err != nil:
		return err
	case !info.IsDir():
		t.at("unlink")
		return os.Remove(dir)
	}
	if info.Mode().Perm()&0o700 != 0o700 {
		if err := os.Chmod(dir, 0o700); err != nil {
			return err
		}
	}
	entries, err := os.ReadDir(dir)
	if err != nil {
		return err
	}
	for _, e := range entries {
		full := filepath.Join(dir, e.Name())
		if e.IsDir() {
			err = discard(full, t)
		} else {
			t.at("unlink")
			err = os.Remove(full)
		}
		if err != nil {
			return err
		}
	}
	t.at("rmdir")
	return os.Remove(dir)
}

func exists(name string) (bool, error) {
	_, err := os.Lstat(name)
	if errors.Is(err, fs.ErrNotExist) {
		return false, nil
	}
	return err == nil, err
}

// tricks are for tests: what to do without, and a call before each operation
// that changes the disk.
type tricks struct {
	noExchange, noLinks, noSync bool
	before                      func(operation string)
}

func (t tricks) at(operation string) {
	if t.before != nil {
		t.before(operation)
	}
}

func (t tricks) rename(from, to string) error {
	t.at("rename")
	if err := os.Rename(from, to); err != nil {
		return fmt.Errorf("renaming a folder: %w", err)
	}
	return nil
}
