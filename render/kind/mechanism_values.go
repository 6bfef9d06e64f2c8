package kind

import (
	"errors"
	"fmt"
	"math"

	"saddlebook/content/fault"
	"saddlebook/kinetics"
	"saddlebook/kinetics/rate"
	"saddlebook/kinetics/unit"
)

// mechanismValue is what a mechanism block computes: the model for other
// blocks, and its steps at each temperature of the table.
type mechanismValue struct {
	Model *kinetics.Mechanism
	Steps [][]stepValue // by temperature, by step
	Held  [][]string    // by temperature, by step: what was held constant, and its price; "" if nothing
	Exact []string      // states without an error of their own, when others have one
}

// Mechanism gives the model to the blocks that name this one.
func (v mechanismValue) Mechanism() *kinetics.Mechanism { return v.Model }

type stepValue struct {
	Barrier, BarrierBack, Reaction   float64 // J/mol
	LnK                              float64 // K itself may be beyond a float64
	Rate, RateBack                   float64
	HalfLife, HalfLifeBack           float64  // s; 0: none; below 0: longer than any time
	Position                         *float64 // nil: no barrier either way
	Molecules, MoleculesBack, Change int
}

// tabulate computes the steps at every temperature asked for.
func (s *mechanismSource) tabulate(m *kinetics.Mechanism) (mechanismValue, error) {
	v := mechanismValue{Model: m}
	others := 1.0
	if s.HalfLifeAt != nil {
		others = s.HalfLifeAt.SI
	}
	for _, T := range s.temperatures() {
		n, err := m.At(T.SI)
		if err != nil {
			return v, asProblems(err, "step")
		}
		var rows []stepValue
		for _, r := range n.Reactions {
			row := stepValue{Barrier: r.Barrier, BarrierBack: r.BarrierBack, Reaction: r.DeltaG, LnK: -r.DeltaG / (rate.R * T.SI), Rate: finite(r.Forward), RateBack: finite(r.Back),
				Molecules: kinetics.Molecules(r.From), MoleculesBack: kinetics.Molecules(r.To)}
			row.Change = row.MoleculesBack - row.Molecules
			row.HalfLife = stored(r.HalfLife(false, others))
			if r.Returns {
				row.HalfLifeBack = stored(r.HalfLife(true, others))
			}
			if !math.IsNaN(r.Position) {
				chi := r.Position
				row.Position = &chi
			}
			rows = append(rows, row)
		}
		v.Steps = append(v.Steps, rows)
		held := make([]string, len(m.Steps))
		for j := range m.Steps {
			held[j] = m.HeldStep(j, T.SI)
		}
		v.Held = append(v.Held, held)
	}
	if m.HasErrors() {
		v.Exact = m.ExactStates()
	}
	return v, nil
}

func (s *mechanismSource) results(v mechanismValue) []Result {
	var out []Result
	energy := unit.Must(or(s.Energies, "kcal/mol"), unit.MolarEnergy)
	for i, T := range s.temperatures() {
		condition := ConditionText(T)
		for j, st := range v.Model.Steps {
			row := v.Steps[i][j]
			key := func(quantity string) Key {
				return Key{ID: s.ID, Quantity: quantity, Item: st.Name, Condition: condition}
			}
			var assumes []string
			if h := v.Held[i][j]; h != "" {
				assumes = []string{h}
			}
			add := func(quantity string, x float64, u unit.Unit, f unit.Form, more ...string) {
				out = append(out, Result{Key: key(quantity), Value: Value(x, beyond(x)), Unit: u, Form: f, Assumes: append(assumes[:len(assumes):len(assumes)], more...)})
			}
			add("barrier", row.Barrier, energy, unit.FormEnergy)
			if st.Returns {
				add("barrier-back", row.BarrierBack, energy, unit.FormEnergy)
			}
			add("reaction-energy", row.Reaction, energy, unit.FormEnergy)
			add("rate", row.Rate, rateUnit(row.Molecules), unit.FormRate)
			if st.Returns {
				add("rate-back", row.RateBack, rateUnit(row.MoleculesBack), unit.FormRate)
				add("equilibrium-constant", math.Exp(row.LnK), constantUnit(row.Change), unit.FormConstant)
			}
			if row.HalfLife != 0 {
				add("half-life", told(row.HalfLife), seconds, unit.FormSpan, s.halfLifeNote(row.Molecules)...)
			}
			if s.racemises(v.Model, st) {
				note := "racemisation is twice as fast as the exchange of the enantiomers, since each exchange undoes two molecules' worth of ee"
				add("racemisation", 2*row.Rate, rateUnit(1), unit.FormRate, note)
				add("racemisation-half-life", rate.HalfLife(2*row.Rate), seconds, unit.FormSpan, note)
				add("ee-loss", -math.Log(0.99)/(2*row.Rate), seconds, unit.FormSpan, note)
			}
			if row.HalfLifeBack != 0 {
				add("half-life-back", told(row.HalfLifeBack), seconds, unit.FormSpan, s.halfLifeNote(row.MoleculesBack)...)
			}
			var note []string
			if row.Change != 0 {
				note = []string{"the number of molecules changes in this step, so its position depends on the standard state of 1 M"}
			}
			chi := math.NaN()
			word := "none"
			if row.Position != nil {
				chi = *row.Position
				word = rate.PositionWord(chi)
			}
			add("position", chi, plain, unit.FormPosition, note...)
			out = append(out, Result{Key: key("character"), Value: Number{Kind: Words, Text: word}, Assumes: append(assumes[:len(assumes):len(assumes)], note...)})
		}
	}
	return out
}

// stored keeps a half-life in a form that JSON can hold; told takes it back.
func stored(life float64) float64 {
	if math.IsInf(life, 0) || math.IsNaN(life) {
		return -1
	}
	return life
}

func told(life float64) float64 {
	if life < 0 {
		return math.Inf(1)
	}
	return life
}

// finite keeps a rate within what JSON can hold.
func finite(k float64) float64 { return math.Min(k, math.MaxFloat64) }

// beyond is what stands in the place of a value that is no number.
func beyond(x float64) string {
	if math.IsInf(x, 0) {
		return "beyond any number"
	}
	return "none"
}

// racemises tells whether a step turns one enantiomer into the other.
func (s *mechanismSource) racemises(m *kinetics.Mechanism, st kinetics.Step) bool {
	if len(s.Enantiomers) != 2 || !st.Returns || kinetics.Molecules(st.From) != 1 || kinetics.Molecules(st.To) != 1 {
		return false
	}
	from, to := m.Species[st.From[0].Species].Name, m.Species[st.To[0].Species].Name
	return from == s.Enantiomers[0] && to == s.Enantiomers[1] || from == s.Enantiomers[1] && to == s.Enantiomers[0]
}

func (s *mechanismSource) halfLifeNote(molecules int) []string {
	if molecules == 1 {
		return nil
	}
	return []string{fmt.Sprintf("the half-life is that of the first reactant that is used up, with all others held at %s; where several molecules of it react, from that concentration to half of it", s.others())}
}

func (s *mechanismSource) others() string {
	if s.HalfLifeAt == nil {
		return "1 M"
	}
	return s.HalfLifeAt.String()
}

// rateUnit is the unit of a rate constant for a step of that many molecules.
func rateUnit(molecules int) unit.Unit { return rateUnits[molecules-1] }

// constantUnit is the unit of an equilibrium constant: M to the change of
// molecules.
func constantUnit(change int) unit.Unit { return constantUnits[change] }

// asProblems turns an error of the core into problems at the states it names.
func asProblems(err error, section string) error {
	var le *kinetics.LimitError
	if errors.As(err, &le) {
		return fault.Problems{problem(nil, le.Msg, le.Fix)}
	}
	var cs kinetics.Complaints
	if !errors.As(err, &cs) {
		return err
	}
	var ps fault.Problems
	for _, c := range cs {
		p := &fault.Problem{Severity: fault.Error, Msg: c.Msg, Fix: c.Fix}
		if section != "" && c.State != "" {
			p.Path = []string{section, c.State}
		}
		ps = append(ps, p)
	}
	return ps
}
