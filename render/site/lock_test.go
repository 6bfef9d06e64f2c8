package site

import (
	"errors"
	"path/filepath"
	"runtime"
	"sync"
	"sync/atomic"
	"testing"
)

func TestManyAtOnce(t *testing.T) {
	target := filepath.Join(t.TempDir(), "published")
	a, b := release("A"), release("B")
	var wg sync.WaitGroup
	var done atomic.Int32
	for i := range 8 {
		files := a
		if i%2 == 1 {
			files = b
		}
		wg.Go(func() {
			for range 6 {
				switch _, err := tryPublish(target, files, quick); {
				case err == nil:
					done.Add(1)
				case !errors.Is(err, ErrBusy):
					t.Error(err)
				}
			}
		})
	}
	wg.Wait()
	if done.Load() == 0 {
		t.Error("nobody got through")
	}
	if difference(target, a) != nil && difference(target, b) != nil {
		t.Errorf("neither site: %v; %v", difference(target, a), difference(target, b))
	}
	mustBeAlone(t, target)
}

// Each holder removes the lock file, so one who opened it before and locks it
// afterwards holds a file that nobody else sees. Two must never hold at once.
func TestLockExcludes(t *testing.T) {
	p, err := resolve(filepath.Join(t.TempDir(), "published"))
	must(t, err)
	var wg sync.WaitGroup
	var holders, held atomic.Int32
	for range 8 {
		wg.Go(func() {
			for range 3000 {
				l, err := p.lock()
				if errors.Is(err, ErrBusy) {
					continue
				}
				if err != nil {
					t.Error(err)
					return
				}
				held.Add(1)
				if n := holders.Add(1); n != 1 {
					t.Errorf("%d hold the lock", n)
				}
				runtime.Gosched()
				holders.Add(-1)
				if err := p.unlock(l); err != nil {
					t.Error(err)
					return
				}
			}
		})
	}
	wg.Wait()
	if held.Load() == 0 {
		t.Error("nobody got the lock")
	}
}
