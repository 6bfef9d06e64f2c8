package site

import (
	"errors"
	"os"
	"os/exec"
	"path/filepath"
	"runtime"
	"strings"
	"syscall"
	"testing"

	"golang.org/x/sys/unix"
)

// notRoot runs f as a user without privileges, also when the tests run as root.
func notRoot(t *testing.T, f func()) {
	t.Helper()
	if os.Geteuid() != 0 {
		f()
		return
	}
	done := make(chan error)
	go func() {
		// The identity is that of one thread, which dies with this goroutine.
		runtime.LockOSThread()
		if err := unix.Setfsuid(65534); err != nil {
			done <- err
			return
		}
		f()
		done <- nil
	}()
	must(t, <-done)
}

// letPass opens a temporary folder and those above it to that user.
func letPass(t *testing.T, dir string) {
	t.Helper()
	for ; dir != filepath.Clean(os.TempDir()) && dir != "/"; dir = filepath.Dir(dir) {
		if mustStat(t, dir).Mode().Perm()&0o005 != 0o005 {
			must(t, os.Chmod(dir, 0o755))
		}
	}
}

func TestParentNotWritable(t *testing.T) {
	parent := filepath.Join(t.TempDir(), "srv")
	target := filepath.Join(parent, "published")
	publish(t, target, release("A"), quick)
	must(t, os.Chmod(parent, 0o555))
	letPass(t, filepath.Dir(parent))
	for _, name := range []string{target, filepath.Join(parent, "other"), filepath.Join(parent, "deep", "other")} {
		var err error
		notRoot(t, func() { _, err = Begin(name) })
		if !errors.Is(err, ErrRefused) || !strings.Contains(err.Error(), "no permission to write in") {
			t.Errorf("%s: got %v", name, err)
		}
	}
	must(t, os.Chmod(parent, 0o755))
	mustHold(t, target, release("A"))
	mustBeAlone(t, target)
}

// Folders of the site that were made read-only are replaced and removed.
func TestReadOnlyFolders(t *testing.T) {
	parent := filepath.Join(t.TempDir(), "srv")
	must(t, os.Mkdir(parent, 0o777))
	must(t, os.Chmod(parent, 0o777))
	letPass(t, filepath.Dir(parent))
	target := filepath.Join(parent, "published")
	var err error
	notRoot(t, func() {
		if _, err = tryPublish(target, release("A"), quick); err != nil {
			return
		}
		if err = os.Chmod(filepath.Join(target, "notes", "part-0"), 0o555); err != nil {
			return
		}
		_, err = tryPublish(target, release("B"), quick)
	})
	must(t, err)
	mustHold(t, target, release("B"))
	mustBeAlone(t, target)
}

// A folder that is a mount point is refused before anything is computed. The
// mount lives in a name space of the child process.
func TestMountPoint(t *testing.T) {
	const env = "SADDLEBOOK_TEST_MOUNT"
	if target := os.Getenv(env); target != "" {
		if err := unix.Mount("none", target, "tmpfs", 0, ""); err != nil {
			t.Skip("no mounts here:", err)
		}
		_, err := Begin(target)
		if !errors.Is(err, ErrRefused) || !strings.Contains(err.Error(), "mount point") {
			t.Errorf("got %v", err)
		}
		mustBeAlone(t, target)
		return
	}
	target := filepath.Join(t.TempDir(), "published")
	must(t, os.Mkdir(target, 0o777))
	cmd := exec.Command(os.Args[0], "-test.run=^TestMountPoint$", "-test.v")
	cmd.Env = append(os.Environ(), env+"="+target)
	cmd.SysProcAttr = &syscall.SysProcAttr{
		Cloneflags:  syscall.CLONE_NEWNS | syscall.CLONE_NEWUSER,
		UidMappings: []syscall.SysProcIDMap{{ContainerID: 0, HostID: os.Getuid(), Size: 1}},
	}
	out, err := cmd.CombinedOutput()
	var exit *exec.ExitError
	switch {
	case err != nil && !errors.As(err, &exit):
		t.Skip("no name spaces here:", err)
	case err != nil:
		t.Fatalf("%v\n%s", err, out)
	case strings.Contains(string(out), "SKIP"):
		t.Skipf("%s", out)
	}
}
