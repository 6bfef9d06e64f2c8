package kind

import (
	"fmt"
	"math"
	"strings"

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
	Way     []string // the steps that it comes from
	Dosed   orNone   // J/L, the part of Whole that comes with doses after the start
	Run     orNone   // J/L, what the run sets free
	RunRise orNone   // K, the adiabatic rise of that
	Peak    orNone   // W/L, the highest rate
	PeakAt  orNone   // s
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
	none := orNone(math.NaN())
	h := runHeat{PerRise: s.Density != nil && s.HeatCapacity != nil, At: m.Temperature,
		Whole: none, Rise: none, Dosed: none, Run: none, RunRise: none, Peak: none, PeakAt: none}
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
	h.Whole, h.Rise, h.Dosed = orNone(heat.Whole), orNone(heat.Rise), orNone(heat.Dosed)
	h.Run, h.RunRise = orNone(heat.Run), orNone(heat.RunRise)
	if heat.Peak*c.End > heatShare*heat.Whole {
		h.Peak, h.PeakAt = orNone(heat.Peak), orNone(heat.PeakAt)
	}
	most := 0.0
	for _, x := range heat.Way {
		most = math.Max(most, math.Abs(x))
	}
	for i, x := range heat.Way {
		switch name := n.Reactions[i].Name; {
		case x > wayShare*most:
			h.Way = append(h.Way, name)
		case x < -wayShare*most:
			h.Way = append(h.Way, name+" backwards")
		}
	}
	return h, heat, nil
}

// wayShare is how often a step must turn, against the one that turns most, to be
// named where the heat comes from.
const wayShare = 1e-6

// mostWays is how many steps are named there.
const mostWays = 5

// heatWords is a heat, with its adiabatic rise where there is one.
func heatWords(heat, rise orNone) string {
	text := unit.Print(float64(heat), heatUnit, unit.FormFactor)
	if !rise.none() {
		text += fmt.Sprintf(" (%s adiabatic)", unit.Print(float64(rise), kelvinUnit, unit.FormRise))
	}
	return text
}

// rise is the adiabatic rise of a heat.
func (h runHeat) rise(heat orNone) orNone {
	if h.Rise.none() || !(h.Whole > 0) {
		return orNone(math.NaN())
	}
	return heat * h.Rise / h.Whole
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
		sheet.Words(fmt.Sprintf("Heat: not known, since no enthalpy is given for %s. A sum over the other steps would be taken for the whole.", listWords(h.Unknown)))
		return
	}
	sheet.Words(v.heatSentences(h))
	sheet.Method(fmt.Sprintf("Heat is from the enthalpies of the steps at %s, never from free energies, positive where it is set free. Heat left is the most that the listed steps could still release from what is in the pot, doses to come left out: the largest sum of −ΔH times extent that leaves no concentration below zero. The highest rate does not count what comes within %s, a millionth of the programme, after its start and after whatever begins, ends or jumps.", celsiusWords(h.At), unit.Span(1e-6*v.planned())))
	sheet.Assumption("Enthalpies, density and heat capacity are taken as constant over temperature and composition; heat of mixing, dosing and evaporation is left out.")
}

// planned is how long the programme lasts, s.
func (v *runValue) planned() float64 {
	sum := 0.0
	for _, l := range v.Legs {
		sum += l.Lasts
	}
	return sum
}

// heatSentences say how much heat there is, how much of it the run sets free,
// what the doses bring, and when it comes fastest.
func (v *runValue) heatSentences(h runHeat) string {
	if !(h.Whole > 0) {
		return "Heat: the listed steps set none free."
	}
	way := ""
	if n := len(h.Way); n > mostWays {
		way = fmt.Sprintf(", by way of %s and %d more steps", strings.Join(h.Way[:mostWays], ", "), n-mostWays)
	} else if n > 0 {
		way = ", by way of " + listWords(h.Way)
	}
	text := fmt.Sprintf("Heat: %s is the most that the listed steps can give%s. ", heatWords(h.Whole, h.Rise), way)
	if h.Run >= 0 {
		text += fmt.Sprintf("The run sets free %s by its end.", heatWords(h.Run, h.RunRise))
	} else {
		text += fmt.Sprintf("The run takes up %s by its end.", heatWords(-h.Run, -h.RunRise))
	}
	if h.Dosed > orNone(heatShare)*h.Whole {
		text += fmt.Sprintf(" Of the most, %s comes with what is dosed after the start: heat left counts only what is in the pot.", heatWords(h.Dosed, h.rise(h.Dosed)))
	}
	if !h.Peak.none() {
		when := "after " + timeWords(float64(h.PeakAt))
		if float64(h.PeakAt) < 1e-4*v.End {
			when = "at the start"
		}
		text += fmt.Sprintf(" Heat comes fastest %s, at %s.", when, unit.Print(float64(h.Peak), heatRateUnit, unit.FormFactor))
	}
	return text
}
