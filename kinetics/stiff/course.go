package stiff

import (
	"context"
	"sort"
)

// A Course holds a run at the times asked for.
type Course struct {
	T      []float64     // s, as asked, up to the time reached
	Y      [][]float64   // concentrations, by time and species
	Slopes [][][]float64 // dy/dp, by time, parameter and species
	End    float64       // s, reached: To, or the event that stopped the run
	Final  []float64     // concentrations at End
	Hits   []Hit
	Stats  Stats
}

// Solve runs a problem once and returns the state at the times given, which
// must ascend and lie within the run. At the time of a jump it is the state
// after the jump.
//
// Errors are those of NewSolver and Run. With ErrStuck, or the error of the
// context, the course up to there is returned too.
func Solve(ctx context.Context, sys *System, opt Options, p Problem, at []float64) (*Course, error) {
	s, err := NewSolver(sys, opt)
	if err != nil {
		return nil, err
	}
	return s.course(ctx, p, at)
}

func (s *Solver) course(ctx context.Context, p Problem, at []float64) (*Course, error) {
	sys := s.sys
	if !sort.Float64sAreSorted(at) || len(at) > 0 && !(at[0] >= p.From && at[len(at)-1] <= p.To) {
		return nil, bad("times asked for do not ascend from %g s to %g s; sort them and keep them within the run", p.From, p.To)
	}
	c := &Course{}
	read := func(t float64, get func([]float64), slope func(int, []float64)) {
		y := make([]float64, sys.species)
		get(y)
		var d [][]float64
		for i := range p.Params {
			d = append(d, make([]float64, sys.species))
			slope(i, d[i])
		}
		c.T, c.Y, c.Slopes = append(c.T, t), append(c.Y, y), append(c.Slopes, d)
	}
	drop := func(t float64) { // states at t read before a jump there
		for len(c.T) > 0 && c.T[len(c.T)-1] == t {
			last := len(c.T) - 1
			c.T, c.Y, c.Slopes = c.T[:last], c.Y[:last], c.Slopes[:last]
		}
	}
	err := s.Run(ctx, &p, func(st *Step) error {
		drop(st.T0)
		for len(c.T) < len(at) && at[len(c.T)] <= st.T1 {
			t := at[len(c.T)]
			read(t, func(y []float64) { st.At(t, y) }, func(i int, y []float64) { st.SlopeAt(i, t, y) })
		}
		return nil
	})
	c.End, c.Hits, c.Stats = s.T(), s.Hits(), s.Stats()
	if err != nil && c.Stats.Restarts == 0 {
		return nil, err
	}
	drop(c.End)
	for len(c.T) < len(at) && at[len(c.T)] <= c.End {
		read(at[len(c.T)], s.Y, s.Slope)
	}
	c.Final = make([]float64, sys.species)
	s.Y(c.Final)
	return c, err
}
