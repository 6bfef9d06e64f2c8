package spread

import (
	"errors"
	"fmt"
	"math"
	"slices"
)

// Case tells which sharing of errors a sampling assumed.
type Case int

// The cases. Where the author states no sharing, results are given for
// Independent and for Shared, because the answer differs several-fold.
const (
	Stated      Case = iota // as the author states it
	Independent             // no error is shared
	Shared                  // transition states correlated by SharedCorrelation
)

// SharedCorrelation is the correlation between the errors of any two transition
// states in the case Shared.
const SharedCorrelation = 0.9

func (c Case) String() string {
	switch c {
	case Stated:
		return "as stated"
	case Independent:
		return "independent"
	case Shared:
		return "strongly shared"
	}
	return fmt.Sprintf("case %d", int(c))
}

// Part is one independent error that several states have in common. SD[k] is
// what a unit of it does to state States[k], in J/mol.
type Part struct {
	States []int
	SD     []float64
}

// Plan says which errors the states have: their own, and parts they share.
type Plan struct {
	Case   Case
	Own    []float64 // by state: standard deviation of its own error, J/mol; 0: none
	Common []Part
}

// ErrPlan marks a plan that cannot be drawn.
var ErrPlan = errors.New("plan of errors cannot be drawn")

// Strong returns the plan in which the listed states, with the standard
// deviations sd (J/mol, by state), have the correlation SharedCorrelation with
// each other; every other state keeps its own error. The standard deviation of
// every state stays what it was.
func Strong(sd []float64, together []int) Plan {
	p := Plan{Case: Shared, Own: append([]float64(nil), sd...)}
	part := Part{States: append([]int(nil), together...)}
	for _, s := range together {
		part.SD = append(part.SD, sd[s]*math.Sqrt(SharedCorrelation))
		p.Own[s] = sd[s] * math.Sqrt(1-SharedCorrelation)
	}
	p.Common = []Part{part}
	return p
}

// Check returns an error that matches ErrPlan if the plan cannot be drawn.
func (p Plan) Check() error {
	for s, sd := range p.Own {
		if !(sd >= 0) || math.IsInf(sd, 0) {
			return fmt.Errorf("%w: the standard deviation of state %d is %g; give a finite number, 0 or more", ErrPlan, s+1, sd)
		}
	}
	for c, part := range p.Common {
		if len(part.States) != len(part.SD) {
			return fmt.Errorf("%w: shared error %d has %d states and %d standard deviations; give one for each", ErrPlan, c+1, len(part.States), len(part.SD))
		}
		for k, s := range part.States {
			if slices.Contains(part.States[:k], s) {
				return fmt.Errorf("%w: shared error %d names state %d twice; name it once", ErrPlan, c+1, s+1)
			}
			if s < 0 || s >= len(p.Own) {
				return fmt.Errorf("%w: shared error %d names state %d of %d; name a state of the mechanism", ErrPlan, c+1, s+1, len(p.Own))
			}
			if !(part.SD[k] >= 0) || math.IsInf(part.SD[k], 0) {
				return fmt.Errorf("%w: the standard deviation of shared error %d is %g; give a finite number, 0 or more", ErrPlan, c+1, part.SD[k])
			}
		}
	}
	if d := p.Dim(); d > MaxDim {
		return fmt.Errorf("%w: it has %d independent parts, and %d can be drawn; give fewer states a ±", ErrPlan, d, MaxDim)
	}
	return nil
}

// Dim returns the number of independent parts: own errors above 0, then common ones.
func (p Plan) Dim() int {
	n := len(p.Common)
	for _, sd := range p.Own {
		if sd > 0 {
			n++
		}
	}
	return n
}

// SD returns the whole standard deviation of a state, in J/mol.
func (p Plan) SD(state int) float64 {
	v := p.Own[state] * p.Own[state]
	for _, part := range p.Common {
		for k, s := range part.States {
			if s == state {
				v += part.SD[k] * part.SD[k]
			}
		}
	}
	return math.Sqrt(v)
}

// Covariance returns the covariance of the errors of two states, in (J/mol)².
func (p Plan) Covariance(a, b int) float64 {
	if a == b {
		return p.SD(a) * p.SD(a)
	}
	v := 0.0
	for _, part := range p.Common {
		var ca, cb float64
		for k, s := range part.States {
			switch s {
			case a:
				ca = part.SD[k]
			case b:
				cb = part.SD[k]
			}
		}
		v += ca * cb
	}
	return v
}

// Shift writes the errors of all states at one point (Dim coordinates) into
// shift, in J/mol.
func (p Plan) Shift(shift, z []float64) {
	if len(shift) != len(p.Own) || len(z) != p.Dim() {
		panic("spread: Shift: lengths do not match the plan")
	}
	k := 0
	for s, sd := range p.Own {
		shift[s] = 0
		if sd > 0 {
			shift[s] = sd * z[k]
			k++
		}
	}
	for c, part := range p.Common {
		for j, s := range part.States {
			shift[s] += part.SD[j] * z[k+c]
		}
	}
}
