// Package balance finds the equilibrium composition of any set of reversible
// reactions, from free energies and what is charged.
//
// # Method
//
// The equilibrium is the composition of least free energy, Σ c (μ − R·T), among
// those with the same totals. The totals follow from the reactions: the
// conservation laws are the null space of the stoichiometry, found exactly in
// whole numbers. In place of the concentrations the program seeks one potential
// a law, which makes the problem convex and free of bounds, and each
// concentration a product of powers: a trace of 1e-15 has as many digits as the
// main product. Newton's method is damped so that every step descends. The laws
// are written each time on the most abundant independent species, which keeps
// the equations well conditioned and every law free of cancellation.
//
// # Units
//
// Energies are J/mol at the standard state of 1 mol/L, temperatures K,
// concentrations mol/L. Activities are concentrations.
//
// # Errors
//
// Impossible input matches rate.ErrDomain; a search that did not end,
// ErrNoConvergence.
//
// # Sources
//
//   - Smith and Missen, Chemical Reaction Equilibrium Analysis (1982)
//   - Boyd and Vandenberghe, Convex Optimization (2004): duality, damped Newton
package balance

import (
	"errors"
	"fmt"
	"math"

	"saddlebook/kinetics/rate"
)

// Term is N molecules of the species with index Species; N is above 0. A species
// may stand in several terms.
type Term struct{ Species, N int }

// Reaction is one reversible reaction. A catalyst stands on both sides.
type Reaction struct{ From, To []Term }

// Problem is what an equilibrium follows from.
type Problem struct {
	T         float64   // K
	G         []float64 // J/mol at 1 mol/L, one a species
	Reactions []Reaction
	Start     []float64 // mol/L, one a species; zero or more
}

// Result is an equilibrium composition.
type Result struct {
	C          []float64 // mol/L; exactly 0 for a species that cannot form
	LnC        []float64 // ln of it, also where C underflows; −Inf for a species that cannot form
	Residual   float64   // largest relative error of a conservation law
	Iterations int       // Newton steps
}

// ErrNoConvergence is matched by *NoConvergence.
var ErrNoConvergence = errors.New("no convergence")

// NoConvergence says how far the search had got.
type NoConvergence struct {
	Residual   float64 // largest relative error of a conservation law
	Iterations int
}

func (e *NoConvergence) Error() string {
	return fmt.Sprintf("the equilibrium was not found in %d steps (a conservation law is still off by %.1e of itself); check the largest energies for a slip of unit", e.Iterations, e.Residual)
}

// Unwrap returns ErrNoConvergence.
func (e *NoConvergence) Unwrap() error { return ErrNoConvergence }

// Solve returns the equilibrium composition of p, each concentration to 1e-10 of
// itself or better, given exact energies.
//
// It is where mass action leads in the end: a reaction runs only if all the
// species of one of its sides are there or can form, so a catalyst that is not
// charged leaves its cycle still. Species in no running reaction keep their
// amounts.
//
// Solve returns rate.ErrDomain if T is not positive and finite, if lengths
// differ, if an energy is not finite, if a reaction energy is beyond 1e5 R·T, if
// an amount is negative or not finite, or if a term names no species or no
// molecule; and ErrNoConvergence (a *NoConvergence), never a wrong composition.
func Solve(p Problem) (Result, error) {
	if err := p.check(); err != nil {
		return Result{}, err
	}
	r := Result{C: make([]float64, len(p.G)), LnC: make([]float64, len(p.G))}
	for i, c := range p.Start {
		r.C[i], r.LnC[i] = c, math.Log(c)
	}
	species, net, guess := p.running()
	if len(species) == 0 {
		return r, nil
	}
	laws, err := newLaws(len(species), net, guess)
	if err != nil {
		return Result{}, err
	}
	s := newSearch(laws, pick(p.Start, species), pick(p.G, species), rate.R*p.T, guess)
	for _, g := range s.g {
		if !(math.Abs(g) <= far) {
			return Result{}, &rate.DomainError{What: "a reaction energy (J/mol)", Value: g * rate.R * p.T, Fix: "give all energies in one unit and from one zero"}
		}
	}
	if err := s.run(); err != nil {
		return Result{}, err
	}
	r.Residual, r.Iterations = s.residual, s.iterations
	for i, j := range species {
		r.C[j], r.LnC[j] = math.Exp(s.ln[i]), s.ln[i]
	}
	return r, nil
}

func pick(from []float64, which []int) []float64 {
	out := make([]float64, len(which))
	for i, j := range which {
		out[i] = from[j]
	}
	return out
}

func (p Problem) check() error {
	if !(p.T > 0) || math.IsInf(p.T, 0) {
		return &rate.DomainError{What: "temperature (K)", Value: p.T, Fix: "give a finite one above zero"}
	}
	if len(p.G) != len(p.Start) {
		return fmt.Errorf("%w: %d energies and %d starting amounts; give one of each a species", rate.ErrDomain, len(p.G), len(p.Start))
	}
	for i := range p.G {
		if math.IsNaN(p.G[i]) || math.IsInf(p.G[i], 0) {
			return &rate.DomainError{What: fmt.Sprintf("free energy (J/mol) of species %d", i), Value: p.G[i], Fix: "give a finite one"}
		}
		if !(p.Start[i] >= 0) || math.IsInf(p.Start[i], 0) {
			return &rate.DomainError{What: fmt.Sprintf("starting amount (mol/L) of species %d", i), Value: p.Start[i], Fix: "give a finite one, zero or more"}
		}
	}
	for i, r := range p.Reactions {
		for _, side := range [][]Term{r.From, r.To} {
			for _, t := range side {
				if t.Species < 0 || t.Species >= len(p.G) {
					return &rate.DomainError{What: fmt.Sprintf("a species number in reaction %d", i), Value: float64(t.Species), Fix: fmt.Sprintf("species run from 0 to %d", len(p.G)-1)}
				}
				if t.N < 1 || t.N > largest {
					return &rate.DomainError{What: fmt.Sprintf("the count of species %d in reaction %d", t.Species, i), Value: float64(t.N), Fix: "give one or more molecules"}
				}
			}
		}
	}
	return nil
}
