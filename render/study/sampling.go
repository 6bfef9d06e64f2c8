package study

import (
	"context"
	"crypto/sha256"
	"encoding/binary"
	"encoding/hex"
	"errors"
	"fmt"
	"math"
	"slices"
	"sync"

	"saddlebook/content/fault"
	"saddlebook/kinetics"
	"saddlebook/kinetics/spread"
	"saddlebook/kinetics/unit"
	"saddlebook/render/kind"
)

// sampling holds what a block's results did under shifted energies.
type sampling struct {
	once  sync.Once
	err   error
	cases []spread.Case
	runs  [][][]float64 // by case, by result, by draw
	raise []float64     // by case: the share of draws with a raised transition state
	exact [][]string    // by result: the states without an error that it answers to
	noise float64       // relative width of an interval that is none
}

// mostValues bounds the work of one sampling to some seconds.
const mostValues = 6_000_000

// leastEnergy is the width, in J/mol, below which an interval of an energy is
// the rounding of sums that cancel.
const leastEnergy = 1e-6

// draw runs the sampler of the block once.
func (b *Block) draw(ctx context.Context, in kind.Inputs) (*sampling, error) {
	if b.Kind.Sampler == nil {
		return nil, nil
	}
	b.sampled.once.Do(func() { b.sampled.err = b.sampled.run(ctx, b, in) })
	return b.sampled, b.sampled.err
}

func (s *sampling) run(ctx context.Context, b *Block, in kind.Inputs) error {
	sampler, err := b.Kind.Sampler(ctx, b.Spec, in)
	if err != nil {
		return err
	}
	m := sampler.Mechanism
	if !m.HasErrors() {
		return nil
	}
	s.noise = sampler.Noise
	draws := sampler.Draws
	if draws == 0 {
		draws = spread.Draws
	}
	if n := len(b.Results) * draws * len(m.Plans()); n > mostValues {
		return fmt.Errorf("%d results by %d draws are %d values, and at most %d are computed", len(b.Results), draws*len(m.Plans()), n, mostValues)
	}
	if err := s.findExact(b, sampler); err != nil {
		return err
	}
	for _, plan := range m.Plans() {
		raised := 0
		values, err := spread.Sample(plan, draws, func(shift []float64) ([]float64, error) {
			if err := ctx.Err(); err != nil {
				return nil, err
			}
			shifted := m.Shifted(shift)
			low, err := raises(shifted, sampler.Temperatures)
			if err != nil {
				return nil, err
			}
			if low {
				raised++
			}
			rs, err := sampler.Results(shifted)
			if err != nil {
				return nil, err
			}
			if len(rs) != len(b.Results) {
				return nil, fmt.Errorf("a draw gave %d results and the block has %d", len(rs), len(b.Results))
			}
			return reals(rs), nil
		})
		if err != nil {
			return err
		}
		s.cases = append(s.cases, plan.Case)
		s.runs = append(s.runs, values)
		s.raise = append(s.raise, float64(raised)/float64(draws))
	}
	return nil
}

// reals are the numbers of results; NaN where there is none.
func reals(rs []kind.Result) []float64 {
	out := make([]float64, len(rs))
	for i, r := range rs {
		out[i] = math.NaN()
		switch r.Value.Kind {
		case kind.Real:
			out[i] = r.Value.Value
		case kind.Endless:
			out[i] = math.Inf(1)
		}
	}
	return out
}

// raises tells whether a shifted mechanism has a transition state below a side
// at any of the temperatures.
func raises(m *kinetics.Mechanism, temperatures []float64) (bool, error) {
	for _, T := range temperatures {
		n, err := m.At(T)
		if err != nil {
			return false, err
		}
		for _, r := range n.Reactions {
			if r.Raised {
				return true, nil
			}
		}
	}
	return false, nil
}

// digest is the same for the same draws of all results.
func (s *sampling) digest() string {
	if s.runs == nil {
		return ""
	}
	h := sha256.New()
	for c := range s.runs {
		fmt.Fprintf(h, "%v %x;", s.cases[c], math.Float64bits(s.raise[c]))
		for _, column := range s.runs[c] {
			for _, x := range column {
				var b [8]byte
				binary.LittleEndian.PutUint64(b[:], math.Float64bits(x))
				h.Write(b[:])
			}
		}
	}
	fmt.Fprintf(h, "%q", s.exact)
	return hex.EncodeToString(h.Sum(nil))
}

// findExact tells, for each result, which energies without an error it answers
// to: shifting them by 1 kJ/mol moves it. States that set the zero of the
// mechanism do not count, since their energy is exact by choice.
func (s *sampling) findExact(b *Block, sampler kind.Sampler) error {
	m := sampler.Mechanism
	s.exact = make([][]string, len(b.Results))
	exact := m.ExactStates()
	for i, name := range m.States() {
		if !slices.Contains(exact, name) {
			continue
		}
		shift := make([]float64, len(m.States()))
		shift[i] = 1000
		rs, err := sampler.Results(m.Shifted(shift))
		if err != nil {
			return err
		}
		for j, r := range rs {
			was := b.Results[j].Value
			if r.Value.Kind != was.Kind || math.Abs(r.Value.Value-was.Value) > max(1e-9, s.noise)*math.Abs(was.Value) {
				s.exact[j] = append(s.exact[j], name)
			}
		}
	}
	return nil
}

// sample sets the intervals of the block's results.
func (b *Block) sample(ctx context.Context, in kind.Inputs) (fault.Problems, error) {
	s, err := b.draw(ctx, in)
	if err != nil {
		if ctx.Err() != nil {
			return nil, ctx.Err()
		}
		var cs kinetics.Complaints
		msg := err.Error()
		if errors.As(err, &cs) {
			msg = cs[0].Msg
		}
		return fault.Problems{{Severity: fault.Warning, Msg: "no interval could be given: " + msg, Fix: "check the ± of the energies behind this block, or part it into smaller ones", Err: err}}, nil
	}
	if s == nil || len(s.cases) == 0 {
		return nil, nil
	}
	blank := 0 // results that some draws gave no number for
	for i := range b.Results {
		if b.Results[i].Value.Kind != kind.Real {
			continue
		}
		if slices.ContainsFunc(s.runs, func(run [][]float64) bool { return slices.ContainsFunc(run[i], math.IsNaN) }) {
			blank++
		}
		least := 0.0
		if b.Results[i].Unit.Dim == unit.MolarEnergy {
			least = leastEnergy
		}
		for c := range s.cases {
			q := spread.Quantiles(s.runs[c][i], 0.05, 0.5, 0.95)
			if !(q[2]-q[0] > max(least, s.noise*math.Abs(q[1]))) || math.IsInf(q[2], 0) {
				continue // the same at every draw, endless at some, or not a number
			}
			b.Results[i].Intervals = append(b.Results[i].Intervals, spread.Interval{Case: s.cases[c], Low: q[0], Median: q[1], High: q[2]})
		}
		b.Results[i].Widest()
	}
	if blank > 0 {
		b.Remarks = append(b.Remarks, fmt.Sprintf("%s no interval: some draws gave no number there, such as a time after the run had ended", count(blank, "result has", "results have")))
	}
	var ps fault.Problems
	for c, share := range s.raise {
		switch {
		case share > 0.01:
			ps = append(ps, &fault.Problem{Severity: fault.Warning,
				Msg: fmt.Sprintf("in %s of the draws (%s) a transition state fell below a side and was raised to it", unit.Percent(share), s.cases[c]),
				Fix: "narrow the ± of these energies, or treat the step as fast"})
		case share > 0:
			b.Remarks = append(b.Remarks, fmt.Sprintf("in %s of the draws (%s) a transition state fell below a side and was raised to it", unit.Percent(share), s.cases[c]))
		}
	}
	return ps, nil
}

func (b *Block) intervals() map[string][]spread.Interval {
	out := map[string][]spread.Interval{}
	for _, r := range b.Results {
		if len(r.Intervals) > 0 {
			out[r.Key.Local()] = r.Intervals
		}
	}
	return out
}

func (b *Block) restoreIntervals(kept map[string][]spread.Interval) {
	for i := range b.Results {
		b.Results[i].Intervals = kept[b.Results[i].Key.Local()]
		b.Results[i].Widest()
	}
}

// draws returns how one result answers to the stated errors.
func (b *Block) draws(ctx context.Context, in kind.Inputs, k kind.Key) (kind.Draws, error) {
	i, ok := b.index[k.Canonical()]
	if !ok {
		_, err := b.Result(k)
		return kind.Draws{}, err
	}
	var d kind.Draws
	if slow, err := b.slow(ctx, in); err == nil && len(slow.steps) > 0 { // the block has said so where it failed
		d.Fast, d.Slowed = slow.steps, slow.values[i]
	}
	s, err := b.draw(ctx, in)
	switch {
	case ctx.Err() != nil:
		return kind.Draws{}, ctx.Err()
	case err != nil: // the block has said so in a warning
		d.None = "no draw could be made"
		return d, nil
	case s == nil:
		d.None = "results of this kind are not sampled"
		return d, nil
	}
	if s.exact != nil {
		d.Exact = s.exact[i]
	}
	for c := range s.cases {
		d.Cases = append(d.Cases, kind.Draw{Case: s.cases[c], Values: s.runs[c][i], Raised: s.raise[c]})
	}
	return d, nil
}

// unitWords takes an error of unit apart into what is wrong and a remedy.
func unitWords(err error) (msg, fix string) {
	var ue *unit.Error
	if errors.As(err, &ue) {
		return ue.Msg, ue.Fix
	}
	return err.Error(), "leave out the unit"
}

func count(n int, one, many string) string {
	if n == 1 {
		return "1 " + one
	}
	return fmt.Sprintf("%d %s", n, many)
}
