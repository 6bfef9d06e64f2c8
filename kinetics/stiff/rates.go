package stiff

import (
	"fmt"
	"math"
)

// Rates gives the rate constants over time. Time is cut into pieces at the
// corners; within a piece every constant is smooth. Piece i ends at corner i,
// the last piece is without end; where two pieces meet, each gives its own
// value, so constants may jump.
type Rates interface {
	// Corners returns the times, in s and ascending, at which a constant or
	// its slope jumps.
	Corners() []float64
	// Held reports whether all constants are the same throughout a piece.
	Held(piece int) bool
	// At writes the constants at time t of a piece to k and, when dk is not
	// nil, their derivatives in time to dk.
	At(piece int, t float64, k, dk []float64)
}

// Constant is Rates that do not change.
type Constant []float64

// Corners returns nil.
func (Constant) Corners() []float64 { return nil }

// Held returns true.
func (Constant) Held(int) bool { return true }

// At copies the constants.
func (c Constant) At(_ int, _ float64, k, dk []float64) {
	copy(k, c)
	clear(dk)
}

// A Node is a temperature (K) at a time (s).
type Node struct{ T, Kelvin float64 }

// A Programme is a temperature over time, straight between nodes, held before
// the first and after the last. Two nodes at one time are a jump.
type Programme struct {
	corners []float64
	from    []Node // start of each piece
	slope   []float64
	rate    func(kelvin float64, k, dk []float64)
}

// NewProgramme returns Rates that follow the temperature. The function rate
// writes the constants at a temperature and, when dk is not nil, their
// derivatives by temperature.
//
// It refuses, with ErrInput, no nodes, times that fall or are not finite, and
// temperatures that are not above zero.
func NewProgramme(nodes []Node, rate func(kelvin float64, k, dk []float64)) (*Programme, error) {
	if len(nodes) == 0 {
		return nil, fmt.Errorf("%w: a programme without temperatures; give at least one node", ErrInput)
	}
	p := &Programme{rate: rate, from: []Node{nodes[0]}, slope: []float64{0}}
	for i, n := range nodes {
		if !(n.Kelvin > 0) || math.IsInf(n.Kelvin, 0) || math.IsNaN(n.T) || math.IsInf(n.T, 0) {
			return nil, fmt.Errorf("%w: node %d of the programme is %g K at %g s; give a finite time and a temperature above 0 K", ErrInput, i, n.Kelvin, n.T)
		}
		if i > 0 && n.T < nodes[i-1].T {
			return nil, fmt.Errorf("%w: node %d of the programme is at %g s, before the %g s of the node before; put nodes in order of time", ErrInput, i, n.T, nodes[i-1].T)
		}
		slope := 0.0
		if i+1 < len(nodes) {
			if nodes[i+1].T == n.T {
				continue
			}
			slope = (nodes[i+1].Kelvin - n.Kelvin) / (nodes[i+1].T - n.T)
		}
		p.corners = append(p.corners, n.T)
		p.from = append(p.from, n)
		p.slope = append(p.slope, slope)
	}
	return p, nil
}

// Corners returns the times of the nodes.
func (p *Programme) Corners() []float64 { return p.corners }

// Held reports whether the temperature is constant in a piece.
func (p *Programme) Held(piece int) bool { return p.slope[piece] == 0 }

// Kelvin returns the temperature at time t of a piece.
func (p *Programme) Kelvin(piece int, t float64) float64 {
	if p.slope[piece] == 0 {
		return p.from[piece].Kelvin
	}
	return p.from[piece].Kelvin + p.slope[piece]*(t-p.from[piece].T)
}

// At writes the constants at time t, and their derivatives in time.
func (p *Programme) At(piece int, t float64, k, dk []float64) {
	p.rate(p.Kelvin(piece, t), k, dk)
	for i := range dk {
		dk[i] *= p.slope[piece]
	}
}

// Inverse is the Scale of parameters that act through energy over
// temperature: it returns 1/T and its derivative in time.
func (p *Programme) Inverse(piece int, t float64) (phi, dphi float64) {
	phi = 1 / p.Kelvin(piece, t)
	return phi, -phi * phi * p.slope[piece]
}
