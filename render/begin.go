package render

import (
	"errors"
	"fmt"
	"io/fs"
	"os"
	"path/filepath"

	"saddlebook/content"
)

// ErrNotEmpty says that a folder to begin in holds something already.
var ErrNotEmpty = errors.New("the folder is not empty; name a new one")

// Begin writes a small notebook to start from into a new or empty folder and
// returns the files written.
func Begin(dir string) ([]string, error) {
	entries, err := os.ReadDir(dir)
	switch {
	case err == nil && len(entries) > 0:
		return nil, fmt.Errorf("%s: %w", dir, ErrNotEmpty)
	case err != nil && !errors.Is(err, fs.ErrNotExist):
		return nil, err
	}
	var written []string
	src := content.Begin()
	err = fs.WalkDir(src, ".", func(p string, d fs.DirEntry, err error) error {
		if err != nil {
			return err
		}
		to := filepath.Join(dir, filepath.FromSlash(p))
		if d.IsDir() {
			return os.MkdirAll(to, 0o777)
		}
		data, err := fs.ReadFile(src, p)
		if err != nil {
			return err
		}
		written = append(written, to)
		return os.WriteFile(to, data, 0o666)
	})
	return written, err
}
