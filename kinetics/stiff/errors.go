package stiff

import (
	"errors"
	"fmt"
)

// ErrInput marks input that cannot be integrated: indices, lengths, numbers
// that are not finite, times out of order, negative concentrations.
var ErrInput = errors.New("stiff: input")

// ErrStuck marks an integration that could not go on; match it with
// errors.Is, and take the parts from StuckError with errors.As.
var ErrStuck = errors.New("stiff: stuck")

// StuckError says how far an integration got. The solver holds the last state
// that met the tolerance.
type StuckError struct {
	T        float64 // s, reached
	H        float64 // s, last step tried
	Steps    int     // accepted
	Fastest  float64 // 1/s, largest rate at which a species is used up, at T
	Species  int     // the species used up at that rate
	Reaction int     // the fastest reaction that uses it up; -1 if none
	Why      string
}

func (e *StuckError) Error() string {
	s := fmt.Sprintf("stiff: %s at t = %.6g s after %d steps (last step tried %.2g s)", e.Why, e.T, e.Steps, e.H)
	if e.Reaction >= 0 {
		s += fmt.Sprintf("; fastest: reaction %d, using up species %d at %.3g 1/s", e.Reaction, e.Species, e.Fastest)
	}
	return s + "; raise the step limit, loosen the tolerance, or treat the fastest reaction as an equilibrium"
}

// Is reports whether target is ErrStuck.
func (e *StuckError) Is(target error) bool { return target == ErrStuck }
