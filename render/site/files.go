package site

import (
	"bytes"
	"errors"
	"io"
	"io/fs"
	"os"
	"path"
	"path/filepath"
	"sync"
	"syscall"
)

// noPerm stands for the permission bits of a new file.
const noPerm = fs.FileMode(0)

func (s *Stage) inTarget(path string) string {
	return filepath.Join(s.target, filepath.FromSlash(path))
}
func (s *Stage) inStage(path string) string { return filepath.Join(s.stage, filepath.FromSlash(path)) }

var buffers = sync.Pool{New: func() any { return new([64 << 10]byte) }}

// holds says whether a file holds exactly these bytes, and its permission bits.
func holds(name string, data []byte) (bool, fs.FileMode, error) {
	f, err := os.Open(name)
	if err != nil {
		return false, noPerm, err
	}
	defer f.Close()
	info, err := f.Stat()
	if err != nil {
		return false, noPerm, err
	}
	perm := info.Mode().Perm()
	if info.Size() != int64(len(data)) {
		return false, perm, nil
	}
	buf := buffers.Get().(*[64 << 10]byte)
	defer buffers.Put(buf)
	for len(data) > 0 {
		n, err := io.ReadFull(f, buf[:min(len(buf), len(data))])
		switch {
		case !bytes.Equal(buf[:n], data[:n]):
			return false, perm, nil
		case errors.Is(err, io.EOF), errors.Is(err, io.ErrUnexpectedEOF):
			return false, perm, nil // it shrank meanwhile
		case err != nil:
			return false, perm, err
		}
		data = data[n:]
	}
	return true, perm, nil
}

// put writes one file to the stage.
func (s *Stage) put(name string, data []byte, perm fs.FileMode) error {
	if err := s.makeFolder(path.Dir(name)); err != nil {
		return err
	}
	s.at("create")
	f, err := os.OpenFile(s.inStage(name), os.O_WRONLY|os.O_CREATE|os.O_EXCL, 0o666)
	if err != nil {
		return err
	}
	s.at("write")
	_, err = f.Write(data)
	if err == nil && perm != noPerm {
		err = f.Chmod(perm)
	}
	if cerr := f.Close(); err == nil {
		err = cerr
	}
	return err
}

// makeFolder makes a folder of the stage, and those above it, with the
// permission bits of the one in the target.
func (s *Stage) makeFolder(dir string) error {
	s.folders.Lock()
	defer s.folders.Unlock()
	return s.makeFolderLocked(dir)
}

func (s *Stage) makeFolderLocked(dir string) error {
	if s.folders.made[dir] {
		return nil
	}
	if dir != "." {
		if err := s.makeFolderLocked(path.Dir(dir)); err != nil {
			return err
		}
	}
	s.at("mkdir")
	if err := os.Mkdir(s.inStage(dir), 0o777); err != nil {
		return err
	}
	if s.was.exists {
		switch info, err := os.Lstat(s.inTarget(dir)); {
		case err == nil && info.IsDir():
			const bits = fs.ModePerm | fs.ModeSetgid | fs.ModeSticky
			if err := os.Chmod(s.inStage(dir), info.Mode()&bits|0o700); err != nil {
				return err
			}
		case err != nil && !errors.Is(err, fs.ErrNotExist) && !errors.Is(err, syscall.ENOTDIR):
			return err
		}
	}
	s.folders.made[dir] = true
	return nil
}

// carry brings a file of the target into the stage: by a link, or by a copy
// with the same time.
func (s *Stage) carry(name string) error {
	if err := s.makeFolder(path.Dir(name)); err != nil {
		return err
	}
	if !s.noLinks {
		s.at("link")
		if os.Link(s.inTarget(name), s.inStage(name)) == nil {
			return nil
		}
	}
	from, err := os.Open(s.inTarget(name))
	if err != nil {
		return err
	}
	defer from.Close()
	info, err := from.Stat()
	if err != nil {
		return err
	}
	s.at("create")
	to, err := os.OpenFile(s.inStage(name), os.O_WRONLY|os.O_CREATE|os.O_EXCL, 0o666)
	if err != nil {
		return err
	}
	s.at("write")
	_, err = io.Copy(to, from)
	if err == nil {
		err = to.Chmod(info.Mode().Perm())
	}
	if cerr := to.Close(); err == nil {
		err = cerr
	}
	if err != nil {
		return err
	}
	return os.Chtimes(s.inStage(name), info.ModTime(), info.ModTime())
}
