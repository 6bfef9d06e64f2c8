package site

import (
	"bufio"
	"errors"
	"fmt"
	"io/fs"
	"math/rand/v2"
	"os"
	"os/exec"
	"path/filepath"
	"slices"
	"strconv"
	"strings"
	"sync"
	"sync/atomic"
	"testing"
	"time"
)

// The tests of this file run the test program once more as a publisher that is
// killed: by itself before its n-th operation on the disk, or from outside.
const (
	envTarget  = "SADDLEBOOK_TEST_TARGET"
	envRelease = "SADDLEBOOK_TEST_RELEASE"
	envKillAt  = "SADDLEBOOK_TEST_KILL_AT" // 0: never; "rename 2": before the second rename
	envWay     = "SADDLEBOOK_TEST_WAY"     // words: no-exchange, no-links, sync, at-once
)

func TestMain(m *testing.M) {
	if target := os.Getenv(envTarget); target != "" {
		if err := publisher(target); err != nil {
			fmt.Fprintln(os.Stderr, err)
			os.Exit(1)
		}
		os.Exit(0)
	}
	os.Exit(m.Run())
}

// publisher publishes and prints its operations in order.
func publisher(target string) error {
	kind, number, ok := strings.Cut(os.Getenv(envKillAt), " ")
	if !ok {
		kind, number = "", kind
	}
	killAt, err := strconv.ParseInt(number, 10, 64)
	if err != nil {
		return err
	}
	way := strings.Fields(os.Getenv(envWay))
	var ops []string
	var n atomic.Int64
	atOnce := slices.Contains(way, "at-once")
	with := tricks{
		noExchange: slices.Contains(way, "no-exchange"),
		noLinks:    slices.Contains(way, "no-links"),
		noSync:     !slices.Contains(way, "sync"),
		before: func(op string) {
			if (kind == "" || kind == op) && n.Add(1) == killAt {
				self, err := os.FindProcess(os.Getpid())
				if err == nil {
					err = self.Kill()
				}
				if err != nil {
					panic(err)
				}
				select {} // until the signal arrives
			}
			if !atOnce {
				ops = append(ops, op)
			}
		},
	}
	files := release(os.Getenv(envRelease))
	fmt.Println("ready")
	if atOnce {
		s, err := begin(target, with)
		if err != nil {
			return err
		}
		var wg sync.WaitGroup
		for p, data := range files {
			wg.Go(func() { s.Write(p, data) }) // Commit reports what failed
		}
		wg.Wait()
		_, err = s.Commit()
		return err
	}
	if _, err := tryPublish(target, files, with); err != nil {
		return err
	}
	fmt.Println(strings.Join(ops, " "))
	return nil
}

func publisherCommand(target, release, killAt, way string) *exec.Cmd {
	cmd := exec.Command(os.Args[0])
	cmd.Env = append(os.Environ(), envTarget+"="+target, envRelease+"="+release,
		envKillAt+"="+killAt, envWay+"="+way)
	return cmd
}

// runKilled runs a publisher that must die at its n-th operation.
func runKilled(t *testing.T, target, release string, killAt int, way string) {
	t.Helper()
	out, err := publisherCommand(target, release, strconv.Itoa(killAt), way).CombinedOutput()
	var exit *exec.ExitError
	if !errors.As(err, &exit) || string(out) != "ready\n" { // one that fails says why, one that ends prints more
		t.Fatalf("operation %d: not killed: %v\n%s", killAt, err, out)
	}
}

// runWhole runs a publisher to its end and returns its operations.
func runWhole(t *testing.T, target, release, way string) []string {
	t.Helper()
	cmd := publisherCommand(target, release, "0", way)
	cmd.Stderr = os.Stderr
	out, err := cmd.Output()
	must(t, err)
	return strings.Fields(strings.TrimPrefix(string(out), "ready\n"))
}

// killPoints are n points over the whole run and every one near the exchange,
// counted from 1.
func killPoints(ops []string, exchange, n int) []int {
	points := []int{1, 2, len(ops) - 1, len(ops)}
	for i := range n {
		points = append(points, 1+i*(len(ops)-1)/(n-1))
	}
	for i := exchange - 5; i <= exchange+8; i++ {
		points = append(points, i)
	}
	slices.Sort(points)
	return slices.Compact(points)
}

// Killed before operation n, the target is wholly the old or wholly the new
// site, which of them is known, and the next publish succeeds and clears up.
func TestKilledAtEachPoint(t *testing.T) {
	for _, way := range []struct {
		name     string
		exchange string // the operation that puts the new site in place
		n        int
	}{
		{"", "exchange", 100},
		{"no-links", "exchange", 5},
		{"sync", "exchange", 3},
		{"no-exchange", "rename", 100},
		{"no-exchange no-links", "rename", 5},
	} {
		t.Run("way="+way.name, func(t *testing.T) {
			t.Parallel()
			a, b := release("A"), release("B")
			target := filepath.Join(t.TempDir(), "published")
			publish(t, target, a, quick)
			ops := runWhole(t, target, "B", way.name)
			mustHold(t, target, b)
			publish(t, target, a, quick)
			at := slices.Index(ops, way.exchange) + 1
			if way.exchange == "exchange" && slices.Contains(ops, "rename") {
				t.Skip("no exchange here")
			}
			if at == 0 {
				t.Fatalf("no %q among %d operations", way.exchange, len(ops))
			}
			renames := strings.Contains(way.name, "no-exchange")
			n := way.n
			if testing.Short() {
				n = 10
			}
			points := killPoints(ops, at, n)
			t.Logf("%d kills, %d operations, the exchange is number %d", len(points), len(ops), at)
			for _, n := range points {
				runKilled(t, target, "B", n, way.name)
				// What bears this name may be put back, so it is whole.
				old := filepath.Join(filepath.Dir(target), ".published.saddlebook-old")
				if _, err := os.Lstat(old); err == nil {
					mustHold(t, old, a)
				}
				now := b
				switch {
				case n <= at:
					now = a
				case n == at+1 && renames:
					if _, err := os.Lstat(target); !errors.Is(err, fs.ErrNotExist) {
						t.Fatalf("operation %d: no gap between the renames", n)
					}
					// Only beginning, without publishing, brings the site back.
					s, err := begin(target, quick)
					must(t, err)
					must(t, s.Abandon())
					mustBeAlone(t, target)
					now = a
				}
				if err := difference(target, now); err != nil {
					t.Fatalf("after a kill at operation %d (%s) of %d: %v", n, ops[n-1], len(ops), err)
				}
				publish(t, target, a, quick)
				mustHold(t, target, a)
				mustBeAlone(t, target)
			}
		})
	}
}

// either says which of some releases stands at the target, or "" for none.
func either(target string, names ...string) (string, error) {
	var all []error
	for _, name := range names {
		err := difference(target, release(name))
		if err == nil {
			return name, nil
		}
		all = append(all, fmt.Errorf("not %s: %w", name, err))
	}
	return "", errors.Join(all...)
}

// A chain of kills without an undisturbed publish between them: each run meets
// what the last one left, and is often killed while clearing that.
func TestKilledAgainAndAgain(t *testing.T) {
	for _, way := range []string{"", "no-exchange"} {
		t.Run("way="+way, func(t *testing.T) {
			t.Parallel()
			target := filepath.Join(t.TempDir(), "published")
			publish(t, target, release("A"), quick)
			ops := len(runWhole(t, target, "B", way))
			names := []string{"A", "B", "C"}
			swap := "exchange"
			if way != "" {
				swap = "rename"
			}
			stands, gaps, kills := "B", 0, 0
			rnd := rand.New(rand.NewPCG(7, 1))
			runs := 60
			if testing.Short() {
				runs = 15
			}
			for range runs {
				next := names[rnd.IntN(len(names))]
				if next == stands {
					continue
				}
				n := strconv.Itoa(1 + rnd.IntN(ops))
				switch rnd.IntN(3) {
				case 0:
					n = strconv.Itoa(1 + rnd.IntN(8)) // where clearing happens
				case 1:
					n = swap + " " + strconv.Itoa(1+rnd.IntN(5)) // about the change of places
				}
				cmd := publisherCommand(target, next, n, way)
				out, err := cmd.CombinedOutput()
				if err != nil && strings.TrimSpace(string(out)) != "ready" {
					t.Fatalf("operation %s: %v\n%s", n, err, out)
				}
				if err != nil {
					kills++
				}
				if _, err := os.Lstat(target); way != "" && errors.Is(err, fs.ErrNotExist) {
					// In the gap the old site waits, whole, under its other name.
					gaps++
					if err := difference(filepath.Join(filepath.Dir(target), ".published.saddlebook-old"), release(stands)); err != nil {
						t.Fatal(err)
					}
					continue
				}
				if stands, err = either(target, stands, next); err != nil {
					t.Fatalf("after a kill at operation %s: %v", n, err)
				}
			}
			t.Logf("%d kills, %d gaps", kills, gaps)
			publish(t, target, release("A"), quick)
			mustHold(t, target, release("A"))
			mustBeAlone(t, target)
		})
	}
}

// Kills from outside, at any moment of a publish that writes from many
// goroutines at once.
func TestKilledFromOutside(t *testing.T) {
	for _, way := range []string{"at-once", "at-once no-exchange"} {
		t.Run("way="+way, func(t *testing.T) {
			t.Parallel()
			target := filepath.Join(t.TempDir(), "published")
			publish(t, target, release("A"), quick)
			// run publishes and, after a delay that is not negative, kills.
			run := func(name string, delay time.Duration) time.Duration {
				cmd := publisherCommand(target, name, "0", way)
				pipe, err := cmd.StdoutPipe()
				must(t, err)
				must(t, cmd.Start())
				if _, err := bufio.NewReader(pipe).ReadString('\n'); err != nil {
					t.Fatal(err)
				}
				began := time.Now()
				if delay >= 0 {
					time.Sleep(delay)
					if err := cmd.Process.Kill(); err != nil && !errors.Is(err, os.ErrProcessDone) {
						t.Fatal(err)
					}
				}
				if err := cmd.Wait(); err != nil && delay < 0 {
					t.Fatal(err)
				}
				return time.Since(began)
			}
			whole := run("B", -1)
			stands, next := "B", "A"
			rnd := rand.New(rand.NewPCG(3, 14))
			kills, old, gaps := 25, 0, 0
			if testing.Short() {
				kills = 8
			}
			for range kills {
				run(next, time.Duration(rnd.Float64()*1.1*float64(whole)))
				if _, err := os.Lstat(target); way != "at-once" && errors.Is(err, fs.ErrNotExist) {
					gaps++
					s, err := begin(target, quick)
					must(t, err)
					must(t, s.Abandon())
				}
				now, err := either(target, stands, next)
				must(t, err)
				if now == stands {
					old++
				} else {
					stands, next = next, stands
				}
			}
			t.Logf("%d kills in a publish of %v: the old site %d times, the new one %d times, %d gaps", kills, whole, old, kills-old, gaps)
			publish(t, target, release("C"), quick)
			mustHold(t, target, release("C"))
			mustBeAlone(t, target)
		})
	}
}

// A reader who looks while sites are exchanged finds one at every moment.
func TestNoGapForReaders(t *testing.T) {
	target := filepath.Join(t.TempDir(), "published")
	publish(t, target, release("A"), quick)
	exchanged := false
	publish(t, target, release("B"), tricks{noSync: true, before: func(op string) { exchanged = exchanged || op == "rename" }})
	if exchanged {
		t.Skip("no exchange here")
	}
	stop := make(chan struct{})
	looked := make(chan error)
	go func() {
		for {
			if _, err := os.Stat(filepath.Join(target, "index.html")); err != nil {
				looked <- err
				return
			}
			select {
			case <-stop:
				looked <- nil
				return
			default:
			}
		}
	}()
	for range 20 {
		publish(t, target, release("A"), quick)
		publish(t, target, release("B"), quick)
	}
	close(stop)
	must(t, <-looked)
}
