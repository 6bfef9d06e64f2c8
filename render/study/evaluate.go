package study

import (
	"context"
	"crypto/sha256"
	"encoding/hex"
	"encoding/json"
	"errors"
	"fmt"
	"sync"

	"saddlebook/content/fault"
	"saddlebook/kinetics/spread"
	"saddlebook/render/kind"
)

// evaluate computes the blocks, each after those it needs, with at most
// o.Jobs at work at once. The order of work does not show in the outcome.
func (s *Study) evaluate(ctx context.Context, o Options) (fault.List, error) {
	waits := map[*Block]int{}
	feeds := map[*Block][]*Block{}
	for _, b := range s.Blocks {
		seen := map[*Block]bool{}
		for _, r := range b.refs {
			if b.Spec != nil && !seen[r.to] {
				seen[r.to] = true
				waits[b]++
				feeds[r.to] = append(feeds[r.to], b)
			}
		}
	}
	jobs := min(max(o.Jobs, 1), max(len(s.Blocks), 1))
	ready := make(chan *Block, len(s.Blocks))
	left := len(s.Blocks)
	if left == 0 {
		return nil, nil
	}
	for _, b := range s.Blocks {
		if waits[b] == 0 {
			ready <- b
		}
	}
	var (
		mu      sync.Mutex
		faults  fault.List
		broken  error
		workers sync.WaitGroup
		done    int
	)
	for range jobs {
		workers.Add(1)
		go func() {
			defer workers.Done()
			for b := range ready {
				var fs fault.List
				var err error
				if ctx.Err() == nil {
					fs, err = s.compute(ctx, b)
				} else {
					err = ctx.Err()
				}
				mu.Lock()
				faults = append(faults, fs...)
				if err != nil && broken == nil {
					broken = err
				}
				done++
				if o.Progress != nil {
					o.Progress(done, len(s.Blocks))
				}
				for _, next := range feeds[b] {
					if waits[next]--; waits[next] == 0 {
						ready <- next
					}
				}
				if left--; left == 0 {
					close(ready)
				}
				mu.Unlock()
			}
		}()
	}
	workers.Wait()
	for _, b := range s.Blocks {
		b.sampled = nil // claims have been weighed; the draws are large
	}
	return faults, broken
}

// stored is what the cache keeps of a block.
type stored struct {
	Value     json.RawMessage
	Problems  fault.Problems
	Intervals map[string][]spread.Interval // by key within the block
	Remarks   []string
	Draws     string // digest of the sampling: what a claim may see of it
}

// compute computes one block, or takes it from the cache. The value always
// passes through its stored form, so that both ways give the same bytes.
func (s *Study) compute(ctx context.Context, b *Block) (fault.List, error) {
	if b.Spec == nil || b.unlinked {
		return nil, nil
	}
	for _, r := range b.refs {
		if !r.to.Done {
			return nil, nil // the fault stands where it arose
		}
	}
	in := s.inputs(ctx, b)
	if len(b.wrong) > 0 {
		return s.rest(ctx, b, in)
	}
	key, err := s.cacheKey(b)
	if err != nil {
		return nil, err
	}
	var keep stored
	if !s.recall(key, &keep) {
		value, err := b.Kind.Compute(ctx, b.Spec, in)
		var ps fault.Problems
		switch {
		case errors.As(err, &ps):
			if ps.Failed() {
				return b.diagnoseAll(ps), nil
			}
			keep.Problems = ps
		case errors.Is(err, kind.ErrNotComputed):
			return nil, nil
		case ctx.Err() != nil:
			return nil, ctx.Err()
		case err != nil:
			return b.diagnoseAll(fault.Problems{{Severity: fault.Error, Msg: err.Error(), Fix: "check the numbers of this block and of those it uses", Err: err}}), nil
		}
		if keep.Value, err = b.Kind.Encode(value); err != nil {
			return nil, fmt.Errorf("%s: the value cannot be stored: %w", b.Source.Label, err)
		}
		if b.Value, err = b.Kind.Restore(keep.Value); err != nil {
			return nil, fmt.Errorf("%s: the stored value cannot be read back: %w", b.Source.Label, err)
		}
		b.Results = b.Kind.Results(b.Spec, b.Value)
		ps, err = b.sample(ctx, in)
		if err != nil {
			return nil, err
		}
		keep.Problems = append(keep.Problems, ps...)
		slow, err := b.slow(ctx, in)
		if err != nil && ctx.Err() != nil {
			return nil, ctx.Err()
		}
		if err != nil {
			keep.Problems = append(keep.Problems, &fault.Problem{Severity: fault.Warning, Msg: "with its fast steps ten times slower the block could not be computed: " + err.Error(), Fix: "give these steps a rate of their own", Err: err})
		}
		keep.Intervals, keep.Remarks, keep.Draws = b.intervals(), b.Remarks, b.sampled.digest()+slow.digest()
		s.remember(key, keep)
	} else {
		if b.Value, err = b.Kind.Restore(keep.Value); err != nil {
			return nil, fmt.Errorf("%s: the stored value cannot be read back: %w; publish with --fresh", b.Source.Label, err)
		}
		b.Results = b.Kind.Results(b.Spec, b.Value)
		b.restoreIntervals(keep.Intervals)
		b.Remarks = keep.Remarks
	}
	b.Hash = HashOf(keep.Value, mustJSON(b.Results), []byte(keep.Draws))
	for i, r := range b.Results {
		if _, twice := b.index[r.Key.Canonical()]; twice {
			return b.diagnoseAll(fault.Problems{{Severity: fault.Error, Msg: fmt.Sprintf("the result %q is computed twice", r.Key.Local()), Fix: "list each temperature and each name once"}}), nil
		}
		b.index[r.Key.Canonical()] = i
		if first := (kind.Key{ID: r.Key.ID, Quantity: r.Key.Quantity, Item: r.Key.Item}).Canonical(); r.Key.Condition != "" {
			if _, ok := b.index[first]; !ok {
				b.index[first] = i // without @ the first condition is meant
			}
		}
	}
	for _, p := range keep.Problems {
		b.Doubts = append(b.Doubts, p.Msg)
	}
	b.Done = true
	return b.diagnoseAll(keep.Problems), nil
}

// rest looks for what else is wrong in a block that has faults already, so
// that they are all told at once. What it computes is thrown away.
func (s *Study) rest(ctx context.Context, b *Block, in kind.Inputs) (fault.List, error) {
	_, err := b.Kind.Compute(ctx, b.Spec, in)
	if ctx.Err() != nil {
		return nil, ctx.Err()
	}
	var ps fault.Problems
	if !errors.As(err, &ps) {
		return nil, nil
	}
	var out fault.List
	for _, p := range ps {
		if !b.hides(p) {
			out = append(out, b.diagnose(p))
		}
	}
	return out, nil
}

func (b *Block) diagnoseAll(ps fault.Problems) fault.List {
	var out fault.List
	for _, p := range ps {
		out = append(out, b.diagnose(p))
	}
	return out
}

// inputs is what the block may see of the rest.
func (s *Study) inputs(ctx context.Context, b *Block) kind.Inputs {
	find := func(target string) (*Block, error) {
		for _, r := range b.refs {
			if r.Target == target {
				if !r.to.Done {
					return nil, kind.ErrNotComputed
				}
				return r.to, nil
			}
		}
		return nil, fmt.Errorf("block %q is not among the named ones", target)
	}
	return kind.Inputs{
		Value: func(target string) (any, error) {
			to, err := find(target)
			if err != nil {
				return nil, err
			}
			return to.Value, nil
		},
		Read: func(reading string) (kind.Result, error) {
			to, err := find(reading)
			if err != nil {
				return kind.Result{}, err
			}
			k, err := kind.ParseKey(reading)
			if err != nil {
				return kind.Result{}, err
			}
			return to.Result(k)
		},
		Draws: func(reading string) (kind.Draws, error) {
			to, err := find(reading)
			if err != nil {
				return kind.Draws{}, err
			}
			k, err := kind.ParseKey(reading)
			if err != nil {
				return kind.Draws{}, err
			}
			return to.draws(ctx, s.inputs(ctx, to), k)
		},
		File: func(name string) ([]byte, error) { return s.file(b.Source.Note, name) },
	}
}

// HashOf is the SHA-256 of the parts, each with its length.
func HashOf(parts ...[]byte) string {
	h := sha256.New()
	for _, p := range parts {
		fmt.Fprintf(h, "%d:", len(p))
		h.Write(p)
	}
	return hex.EncodeToString(h.Sum(nil))
}

func mustJSON(v any) []byte {
	data, err := json.Marshal(v)
	if err != nil {
		panic(err) // plain structs of numbers and strings encode
	}
	return data
}

// cacheKey names everything that the block's value depends on.
func (s *Study) cacheKey(b *Block) (string, error) {
	if s.cache == nil {
		return "", nil
	}
	if s.seed == nil {
		return "", errors.New("the cache has no program identity")
	}
	h := sha256.New()
	part := func(p []byte) { fmt.Fprintf(h, "%d:", len(p)); h.Write(p) }
	part(s.seed)
	part([]byte(fmt.Sprintf("%s %d", b.Kind.Name, b.Kind.Version)))
	part(mustJSON(b.Spec))
	for _, f := range b.Kind.Files(b.Spec) {
		part([]byte(f))
		data, err := s.file(b.Source.Note, f)
		if err != nil {
			data = []byte("missing: " + err.Error())
		}
		part(data)
	}
	for _, r := range b.refs {
		part([]byte(r.Target))
		part([]byte(r.to.Hash))
	}
	return hex.EncodeToString(h.Sum(nil)), nil
}
