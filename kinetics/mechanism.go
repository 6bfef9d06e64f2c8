package kinetics

import (
	"saddlebook/kinetics/rate"
	"saddlebook/kinetics/thermo"
)

// Term is one species of one side of a reaction, N times.
type Term struct{ Species, N int }

// Species is a minimum of the energy: reactant, intermediate, product.
type Species struct {
	Name, Label, Source string
	Energy              thermo.Energy
	Unknown             bool          // no energy is given: G follows from the constants that steps state, as far as it does
	Forms               int           // 0 or 1: one form; n: G − RT ln n
	Standard            rate.Standard // of Energy
	SD                  *float64      // J/mol, its own error; nil: taken as exact
	SDEntropy           *float64      // J/mol/K, own error of the entropy that Energy is given by; nil: taken as exact
	Formula             string        // as ParseFormula reads it; "": not given
}

// Step is one elementary step. Its rate is that of a transition state (Energy),
// or a Law.
type Step struct {
	Name, Label, Source string
	From, To            []Term
	Returns             bool          // reversible; a step that does not return has no rate back
	Energy              thermo.Energy // of the transition state, or above the reactants if Above
	// Above makes Energy a barrier above the sum of the reactants as they stand,
	// forms included. It is a difference and not on the scale of the species: it
	// may stay constant where they follow temperature (Held then says so).
	Above                    bool
	Law                      *Law             // in place of Energy; nil: none
	K                        *StatedK         // beside a Law or a barrier Above; nil: from Law.Back or the species
	Heat                     *float64         // J/mol, enthalpy of reaction; nil: that of the species, if known
	Degeneracy, Transmission float64          // both directions; 0 reads as 1
	Tunnelling               *rate.Tunnelling // the same factor in both directions
	Limited                  bool             // by diffusion: 1/k = 1/k(TS) + 1/k(limit), the same factor in both directions
	Standard                 rate.Standard    // of Energy; for a barrier, of all states in it
	SD                       *float64         // J/mol, its own error; nil: taken as exact. Of a rate constant k: RT·sd(k)/k at its temperature
	SDEntropy                *float64         // J/mol/K, own error of the entropy that Energy is given by; nil: taken as exact
	// SDReturn is the own error of K, RT·sd(K)/K in J/mol, or that of Law.Back;
	// nil: the return moves as the step does, and K is exact.
	SDReturn *float64

	shiftK float64 // J/mol, on the free energy of reaction that the step states
}

// Common is an error that states have in common, fully correlated. States are
// numbered species first, then steps.
type Common struct {
	States []int
	SD     float64 // J/mol
}

// Mechanism is species and steps under one name. It encodes to JSON and back
// without loss.
type Mechanism struct {
	ID, Title, Method string
	Energies          string  // unit symbol that its author gives energies in, for printing alone; "": kcal/mol
	Temperature       float64 // K, at which constant energies hold
	Viscosity         float64 // Pa s, of the solvent; 0 reads as 0.001
	Species           []Species
	Steps             []Step
	Common            []Common
	SharingStated     bool // the author said which errors are shared, if only that none are

	// RaiseLow makes At raise a transition state that lies below a side to that
	// side and mark it, instead of refusing. Only samples of the errors do that:
	// Shifted sets it.
	RaiseLow bool `json:"-"`
}

// States returns the names of all states: species, then steps.
func (m *Mechanism) States() []string {
	names := make([]string, 0, len(m.Species)+len(m.Steps))
	for _, s := range m.Species {
		names = append(names, s.Name)
	}
	for _, s := range m.Steps {
		names = append(names, s.Name)
	}
	return names
}

// Index returns the number of the species of that name, or -1.
func (m *Mechanism) Index(species string) int {
	for i, s := range m.Species {
		if s.Name == species {
			return i
		}
	}
	return -1
}
