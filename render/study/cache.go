package study

import (
	"crypto/sha256"
	"encoding/json"
	"fmt"
	"io"
	"os"
	"path/filepath"
	"runtime"

	"golang.org/x/sys/cpu"
)

// A Cache keeps what blocks computed, by content. It is safe to delete, and to
// share between folders and machines: the key names everything a value
// depends on.
type Cache interface {
	Get(key string) ([]byte, bool)
	Put(key string, data []byte) error
}

// Folder is a cache in a folder, one file a value.
type Folder struct{ Path string }

func (f Folder) file(key string) string { return filepath.Join(f.Path, key[:2], key[2:]) }

// Get returns what was kept under the key. A damaged file counts as missing.
func (f Folder) Get(key string) ([]byte, bool) {
	data, err := os.ReadFile(f.file(key))
	if err != nil || len(data) < sha256.Size {
		return nil, false
	}
	sum, data := data[:sha256.Size], data[sha256.Size:]
	if sha256.Sum256(data) != [sha256.Size]byte(sum) {
		return nil, false
	}
	return data, true
}

// Put keeps a value: whole or not at all, whoever else writes the same one.
func (f Folder) Put(key string, data []byte) error {
	name := f.file(key)
	if err := os.MkdirAll(filepath.Dir(name), 0o777); err != nil {
		return err
	}
	tmp, err := os.CreateTemp(filepath.Dir(name), "new-*")
	if err != nil {
		return err
	}
	defer os.Remove(tmp.Name()) // gone already when the rename went well
	sum := sha256.Sum256(data)
	_, err = tmp.Write(append(sum[:], data...))
	if cerr := tmp.Close(); err == nil {
		err = cerr
	}
	if err != nil {
		return err
	}
	return os.Rename(tmp.Name(), name)
}

// identity is that of the running program and of the processor type, since the last bits of exp differ
// between processors with and without fused multiply-add.
func identity() ([]byte, error) {
	name, err := os.Executable()
	if err != nil {
		return nil, err
	}
	f, err := os.Open(name)
	if err != nil {
		return nil, err
	}
	defer f.Close()
	id := identityOf(f)
	if id == nil {
		return nil, fmt.Errorf("%s cannot be read whole", name)
	}
	return id, nil
}

// identityOf is nil if the program cannot be read.
func identityOf(program io.Reader) []byte {
	h := sha256.New()
	if _, err := io.Copy(h, program); err != nil {
		return nil
	}
	fmt.Fprintf(h, "%s fma=%v", runtime.GOARCH, cpu.X86.HasFMA)
	return h.Sum(nil)
}

func (s *Study) recall(key string, into *stored) bool {
	if s.cache == nil {
		return false
	}
	data, ok := s.cache.Get(key)
	return ok && json.Unmarshal(data, into) == nil
}

// remember keeps a value. A cache that cannot be written costs time and no
// result, so its error is noted once and is none of the notebook's faults.
func (s *Study) remember(key string, keep stored) {
	if s.cache == nil {
		return
	}
	if err := s.cache.Put(key, mustJSON(keep)); err != nil {
		s.cacheTrouble.Do(func() { s.CacheError = err })
	}
}
