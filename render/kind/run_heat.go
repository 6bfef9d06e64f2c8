package kind

import (
	"fmt"
	"math"

	"saddlebook/content/fault"
	"saddlebook/kinetics"
	"saddlebook/kinetics/course"
	"saddlebook/kinetics/unit"
	"saddlebook/render/paper"
)

// runHeat is what a run says of its heat.
type runHeat struct {
	Shown   bool     // density and heat capacity are given, or all enthalpies known
	PerRise bool     // density and heat capacity are given
	Unknown []string // the steps whose enthalpy is not known; with any, nothing is
	At      float64  // K, at which the enthalpies are taken
	Whole   orNone   // J/L, the most that the steps can release from all that is charged
	Rise    orNone   // K, the adiabatic rise of that
}

// checkHeat says what is wrong with the density and the heat capacity.
func (s *runSource) checkHeat() fault.Problems {
	var ps fault.Problems
	for _, k := range []struct {
		key, other string
		q, beside  *unit.Quantity
		example    string
	}{
		{"density", "heat-capacity", s.Density, s.HeatCapacity, "1.7 J/g/K"},
		{"heat-capacity", "density", s.HeatCapacity, s.Density, "0.87 g/mL"},
	} {
		switch {
		case k.q == nil:
		case !(k.q.SI > 0) || k.q.SD != 0:
			ps = append(ps, problem([]string{k.key}, fmt.Sprintf("%q makes no sense here", *k.q), "write a value above 0, without ±"))
		case k.beside == nil:
			p := problem([]string{k.key}, fmt.Sprintf("heat needs the %s too", k.other), fmt.Sprintf("add %s = %q", k.other, k.example))
			p.Lacks = k.other
			ps = append(ps, p)
		}
	}
	return ps
}

// heat computes the heat of a course.
func (s *runSource) heat(m *kinetics.Mechanism, c *course.Course) (runHeat, *course.Heat, error) {
	h := runHeat{PerRise: s.Density != nil && s.HeatCapacity != nil, At: m.Temperature, Whole: orNone(math.NaN()), Rise: orNone(math.NaN())}
	perStep, missing := m.Enthalpy(h.At)
	h.Unknown = missing
	h.Shown = h.PerRise || len(missing) == 0
	if len(missing) > 0 {
		return h, nil, nil
	}
	n, err := m.At(h.At)
	if err != nil {
		return h, nil, err
	}
	data := course.HeatData{Species: m.SpeciesEnthalpy(h.At)}
	for _, r := range n.Reactions {
		data.Steps = append(data.Steps, perStep[r.Step])
	}
	if h.PerRise {
		data.PerKelvin = s.Density.SI * s.HeatCapacity.SI
	}
	heat, err := c.Heat(data)
	if err != nil {
		return h, nil, fault.Problems{problem([]string{"mechanism"}, err.Error(), "correct the enthalpies of the mechanism")}
	}
	if h.Unknown = heat.Missing; len(h.Unknown) > 0 {
		return h, nil, nil
	}
	h.Whole, h.Rise = orNone(heat.Whole), orNone(heat.Rise)
	return h, heat, nil
}

// why says why the heat has no number.
func (h runHeat) why() string {
	if len(h.Unknown) == 0 {
		return "needs density and heat-capacity"
	}
	return "not known: no enthalpy for " + listWords(h.Unknown)
}

// explainHeat says what the heat rests on.
func (v *runValue) explainHeat(sheet *paper.Sheet) {
	h := v.Heat
	if !h.Shown {
		return
	}
	if len(h.Unknown) > 0 {
		sheet.Words(fmt.Sprintf("Heat: not known, since %s has no enthalpy. A sum over the other steps would be taken for the whole.", listWords(h.Unknown)))
		return
	}
	if !h.Rise.none() {
		sheet.Words(fmt.Sprintf("Adiabatic rise at full conversion, all at once: %s.", sheet.Value("adiabatic-rise").Text))
	}
	sheet.Method(fmt.Sprintf("Heat is from the enthalpies of the steps at %s, never from free energies, positive where it is set free. Heat left is the most that the listed steps could still release from what is there: the largest sum of −ΔH times extent that leaves no concentration below zero.", celsiusWords(h.At)))
	sheet.Assumption("Enthalpies, density and heat capacity are taken as constant over temperature and composition; heat of mixing, dosing and evaporation is left out.")
}
