package study

import (
	"context"
	"fmt"
	"sync"

	"saddlebook/render/kind"
)

// slowing is what a block's results come to when the steps that its mechanism
// keeps fast are ten times slower.
type slowing struct {
	once   sync.Once
	err    error
	steps  []string  // none: nothing is kept fast
	values []float64 // by result
}

// tenfold is by how much steps that are kept fast are slowed: a conclusion that
// this moves rests on how fast they were taken to be.
const tenfold = 10

// slow runs the block once with its fast steps slowed.
func (b *Block) slow(ctx context.Context, in kind.Inputs) (*slowing, error) {
	if b.Kind.Sampler == nil {
		return b.slowed, nil
	}
	b.slowed.once.Do(func() { b.slowed.err = b.slowed.run(ctx, b, in) })
	return b.slowed, b.slowed.err
}

// digest is the same for the same slowed results.
func (s *slowing) digest() string {
	if len(s.steps) == 0 {
		return ""
	}
	return fmt.Sprintf(" slowed %q %x", s.steps, s.values)
}

func (s *slowing) run(ctx context.Context, b *Block, in kind.Inputs) error {
	sampler, err := b.Kind.Sampler(ctx, b.Spec, in)
	if err != nil {
		return err
	}
	steps := sampler.Mechanism.FastSteps()
	if len(steps) == 0 {
		return nil
	}
	rs, err := sampler.Results(sampler.Mechanism.Slowed(tenfold))
	if err != nil {
		return err
	}
	if len(rs) != len(b.Results) {
		return fmt.Errorf("with its fast steps slowed the block gave %d results in place of %d", len(rs), len(b.Results))
	}
	s.steps, s.values = steps, reals(rs)
	return nil
}
