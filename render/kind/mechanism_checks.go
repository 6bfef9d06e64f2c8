package kind

import (
	"fmt"
	"math"

	"saddlebook/content/fault"
	"saddlebook/kinetics"
	"saddlebook/kinetics/unit"
)

// diffusion holds every step of two molecules against the rate at which they
// meet (Smoluchowski, 8RT/3η).
func (b *builder) diffusion(m *kinetics.Mechanism, n *kinetics.Network, T unit.Quantity) {
	most := m.DiffusionLimit(T.SI)
	eta := unit.Quantity{SI: 1e-3}
	if b.src.Viscosity != nil {
		eta = *b.src.Viscosity
	}
	say := func(step, way string, k float64) {
		b.problems = append(b.problems, &fault.Problem{Path: b.path(step, ""), Severity: fault.Warning,
			Msg: fmt.Sprintf("the rate constant of step %s %sat %s, %s, is above the diffusion limit of %s (viscosity %s mPa s)", step, way, T,
				unit.Print(k, rateUnit(2), unit.FormRate), unit.Print(most, rateUnit(2), unit.FormRate), unit.Digits(eta.SI*1000, 2)),
			Fix: "raise the transition state to what diffusion allows, write limit = \"diffusion\", or state the viscosity of the solvent"})
	}
	const above = 1 + 1e-9 // of rounding
	for _, r := range n.Reactions {
		if kinetics.Molecules(r.From) == 2 && r.Forward > most*above {
			say(r.Name, "", r.Forward)
		}
		if r.Returns && kinetics.Molecules(r.To) == 2 && r.Back > most*above {
			say(r.Name, "back ", r.Back)
		}
	}
}

// plainNumbers refuses what makes no sense whatever the states are.
func (s *mechanismSource) plainNumbers() fault.Problems {
	ps := append(temperature([]string{"temperature"}, &s.Temperature), distinct("at", s.At)...)
	ps = append(ps, exactly([]string{"viscosity"}, s.Viscosity)...)
	if c := s.HalfLifeAt; c != nil {
		ps = append(ps, exactly([]string{"half-life-at"}, c)...)
		if !(c.SI > 0) {
			ps = append(ps, problem([]string{"half-life-at"}, fmt.Sprintf("at %q of the other molecules nothing has a half-life", *c), "give a concentration above 0, such as \"0.2 M\""))
		}
	}
	if l := s.LowModes; l != nil {
		ps = append(append(ps, exactly([]string{"low-modes", "below"}, l.Below)...), exactly([]string{"low-modes", "moment"}, l.Moment)...)
	}
	deviation := func(path []string, q *unit.Quantity) {
		ps = append(ps, exactly(path, q)...)
		if q != nil && q.SI < 0 {
			ps = append(ps, problem(path, fmt.Sprintf("a standard deviation of %s makes no sense", *q), "give 0 or more"))
		}
	}
	if e := s.Error; e != nil {
		for _, q := range []struct {
			key string
			q   *unit.Quantity
		}{{"species", e.Species}, {"step", e.Step}, {"shared-species", e.SharedSpecies}, {"shared-step", e.SharedStep}} {
			deviation([]string{"error", q.key}, q.q)
		}
	}
	for i := range s.Shared {
		deviation([]string{"shared", fmt.Sprint(i + 1), "sd"}, &s.Shared[i].SD)
	}
	for _, st := range s.Step {
		for _, q := range []struct {
			key string
			q   *unit.Quantity
		}{{"at", st.At}, {"at-back", st.AtBack}, {"at-K", st.AtK}} {
			ps = append(ps, temperature([]string{"step", st.Name, q.key}, q.q)...)
		}
	}
	return ps
}

// mirror checks that the enantiomers exist and have one energy.
func (b *builder) mirror(m *kinetics.Mechanism) {
	names := b.src.Enantiomers
	if len(names) == 0 {
		return
	}
	if len(names) != 2 {
		b.fault([]string{"enantiomers"}, fmt.Sprintf("%d enantiomers are named", len(names)), "name the two of one pair, such as [\"R\", \"S\"]")
		return
	}
	if names[0] == names[1] {
		b.fault([]string{"enantiomers", "2"}, fmt.Sprintf("%q is named twice", names[1]), "name the two of one pair")
		return
	}
	var pair []kinetics.Species
	for i, name := range names {
		k := m.Index(name)
		if k < 0 {
			b.problems = append(b.problems, unknownSpecies(m, name, []string{"enantiomers", fmt.Sprint(i + 1)}))
			continue
		}
		pair = append(pair, m.Species[k])
	}
	if len(pair) < 2 {
		return
	}
	for _, T := range append(b.src.temperatures(), b.src.Temperature) {
		if x, y := pair[0].Energy.At(T.SI), pair[1].Energy.At(T.SI); pair[0].Unknown != pair[1].Unknown || math.Abs(x-y) > 1e-6 {
			b.fault([]string{"enantiomers"}, fmt.Sprintf("%q and %q have different energies, and enantiomers have the same", names[0], names[1]), fmt.Sprintf("write %s = { same-as = %q }", names[1], names[0]))
			return
		}
	}
}
