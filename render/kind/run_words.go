package kind

import (
	"fmt"
	"math"
	"slices"
	"strings"

	"saddlebook/kinetics/unit"
	"saddlebook/render/paper"
)

func (s *runSource) present(v runValue, sheet *paper.Sheet) {
	sheet.Words(s.conditions(v))
	sheet.Table(s.table(v, sheet))
	if len(v.Pairs) > 1 {
		sheet.Table(s.pairTable(v, sheet))
	}
	for _, text := range s.readings(v, sheet) {
		sheet.Words(text)
	}
	s.figure(v, sheet)
	s.file(v, sheet)
	v.explainHeat(sheet)
	s.explain(v, sheet)
	cautionConditions(sheet)
	for _, w := range v.Warmings {
		if v.Basis >= 0 && w.Reached {
			cautionWarming(sheet, w.T, v.Labels[v.Basis], sheet.Value("unreacted-at-warming@"+w.Condition).Text)
		}
	}
}

// conditions says what was done, as the block has it.
func (s *runSource) conditions(v runValue) string {
	var charged, done []string
	for _, a := range s.Charge {
		text := fmt.Sprintf("%s %s", v.label(a.Name), amountWords(a.Quantity))
		if a.Quantity.Unit.Dim == unit.Equivalent {
			text += fmt.Sprintf(" (%s)", unit.Print(a.Quantity.SI*float64(v.BasisCharged), molar, unit.FormMolar))
		}
		charged = append(charged, text)
	}
	done = append(done, "Charged: "+listWords(charged)+".")
	done = append(done, "Programme: "+strings.Join(v.legWords(), ", ")+".")
	for _, d := range s.Doses {
		amount := amountWords(d.Amount)
		when := ""
		switch {
		case d.At != nil:
			when = "at once at " + spanWords(*d.At)
		case d.From != nil && d.From.SI > 0:
			when = fmt.Sprintf("evenly over %s from %s on", spanWords(*d.Over), spanWords(*d.From))
		case d.Over != nil:
			when = fmt.Sprintf("evenly over the first %s", spanWords(*d.Over))
		}
		done = append(done, fmt.Sprintf("Added: %s of %s, %s.", amount, v.label(d.Species), when))
	}
	for _, r := range s.Removal {
		done = append(done, r.words(v.label(r.Species)))
	}
	if len(s.Until) > 0 {
		done = append(done, s.endWords(v))
	}
	return strings.Join(done, " ")
}

// label is how pages call a species.
func (v *runValue) label(name string) string {
	if i := slices.Index(v.Names, name); i >= 0 {
		return v.Labels[i]
	}
	return name
}

// amountWords is a concentration, or an amount in terms of the basis.
func amountWords(q unit.Quantity) string {
	if q.Unit.Dim == unit.Equivalent {
		return unit.Print(q.SI, q.Unit, unit.FormPlain)
	}
	return unit.Print(q.SI, q.Unit, unit.FormMolar)
}

func spanWords(q unit.Quantity) string { return unit.Print(q.SI, q.Unit, unit.FormPlain) }

// legWords words the programme, up to where it ran.
func (v *runValue) legWords() []string {
	var out []string
	for _, l := range v.Legs {
		T := celsiusWords(l.To)
		if l.Ramp {
			out = append(out, fmt.Sprintf("ramp to %s over %s", T, lastsWords(l.Lasts)))
		} else {
			out = append(out, fmt.Sprintf("%s at %s", lastsWords(l.Lasts), T))
		}
	}
	return out
}

// lastsWords is how long a leg lasts, as short as it can be said in full.
func lastsWords(seconds float64) string {
	q, err := unit.Parse(spanText(seconds), unit.Unit{}, unit.Time)
	if err != nil {
		return unit.Span(seconds)
	}
	return spanWords(q)
}

func celsiusWords(kelvin float64) string { return unit.Print(kelvin, celsius, unit.FormKelvin) }

func (r removalSource) words(label string) string {
	if r.At != nil {
		left := "all of it"
		if r.Leaves != nil && r.Leaves.SI > 0 {
			left = "all but " + unit.Percent(r.Leaves.SI)
		}
		return fmt.Sprintf("Removed: %s of %s at %s.", left, label, spanWords(*r.At))
	}
	how := ""
	switch {
	case r.HalfLife != nil:
		how = "with a half-life of " + spanWords(*r.HalfLife)
	case r.Rate != nil:
		how = "with a rate constant of " + unit.Print(r.Rate.SI, r.Rate.Unit, unit.FormPlain)
	}
	if r.From != nil && r.From.SI > 0 {
		how += " from " + spanWords(*r.From) + " on"
	}
	if r.To != nil {
		how += " until " + spanWords(*r.To)
	}
	return fmt.Sprintf("Removed: %s, %s.", label, how)
}

// endWords says what ended the run, where something could before its programme.
func (s *runSource) endWords(v runValue) string {
	if v.Ended >= 0 && v.Ended < len(s.Until) {
		return fmt.Sprintf("Ended after %s: %s.", unit.Span(v.End), s.Until[v.Ended].words(v.basisLabel(), v.label))
	}
	var waits []string
	for _, u := range s.Until {
		waits = append(waits, strings.Replace(u.words(v.basisLabel(), v.label), " reached ", " reaches ", 1))
	}
	return fmt.Sprintf("Ended with its programme: it would have stopped once %s.", strings.Join(waits, ", or "))
}

func (v *runValue) basisLabel() string {
	if v.Basis < 0 {
		return ""
	}
	return v.Labels[v.Basis]
}

// readings are the sentences on control and on the ratio.
func (s *runSource) readings(v runValue, sheet *paper.Sheet) []string {
	var out []string
	silent := map[string][]string{} // pairs without a degree of control, by the reason
	var reasons []string
	last := v.reached()[len(v.reached())-1]
	for i, p := range v.Pairs {
		a, b := v.Products[p.A], v.Products[p.B]
		item := s.pairName(p)
		of := ""
		if len(v.Pairs) > 1 {
			of = fmt.Sprintf(" of %s and %s", a, b)
		}
		switch why := p.noControl(); {
		case why != "":
			if silent[why] == nil {
				reasons = append(reasons, why)
			}
			silent[why] = append(silent[why], a+" : "+b)
		case !p.Changeover.none():
			out = append(out, fmt.Sprintf("Control%s passes from kinetic to thermodynamic after %s at %s.", of, sheet.Value("changeover/"+item).Text, sheet.Value("changeover-temperature/"+item).Text))
		case !last.Control[i].none():
			side := "kinetic"
			if float64(last.Control[i]) >= 0.5 {
				side = "thermodynamic"
			}
			out = append(out, fmt.Sprintf("Control%s does not change over: at the end it is %s (%s).", of, side, sheet.Value("control/"+item+"@end").Text))
		}
		if !p.Even.none() {
			out = append(out, fmt.Sprintf("The ratio of %s to %s passes 1 after %s at %s.", a, b, sheet.Value("even/"+item).Text, sheet.Value("even-temperature/"+item).Text))
		}
	}
	for _, why := range reasons {
		of := " of " + listWords(silent[why])
		if len(silent[why]) == len(v.Pairs) {
			of = ""
		}
		out = append(out, fmt.Sprintf("Control%s has no number: %s.", of, why))
	}
	return out
}

// explain says how the numbers were made and what they rest on.
func (s *runSource) explain(v runValue, sheet *paper.Sheet) {
	sheet.Method("Mass-action rate equations whose constants follow the temperature programme, " + strings.TrimSuffix(v.Method, ".") + ".")
	sheet.Method(v.exactness())
	if len(v.Pairs) > 0 {
		sheet.Method("Control of two products is (x − x_kin)/(x_eq − x_kin), with x the share of the first among the two; x_kin is that of the same run with every direction removed that consumes a listed product, x_eq that at equilibrium of the reversible steps at the temperature of the moment: 0 is kinetic, 1 thermodynamic control. Changeover is its first crossing of 0.5. Where the limits differ by less than 0.02 they coincide and there is no number.")
		sheet.Method("A ratio is of molecules, the first product to the second.")
	}
	if len(s.Enantiomers) == 2 {
		sheet.Method(fmt.Sprintf("ee = (%s − %s)/(%s + %s), signed.", s.Enantiomers[0], s.Enantiomers[1], s.Enantiomers[0], s.Enantiomers[1]))
	}
	if v.Basis >= 0 {
		sheet.Assumption(fmt.Sprintf("Equivalents and mol%% refer to all %s that is charged, doses included: %s. Conversion and yields at a time refer to what of it was charged by then.", v.basisLabel(), unit.Print(float64(v.BasisCharged), molar, unit.FormMolar)))
		if len(s.Products) > 0 {
			sheet.Assumption(s.yieldWords(v))
		}
	}
	sheet.Assumption("Ideal solution, well mixed, constant volume: concentrations refer to the volume at the end, and what is dosed adds nothing to it. The mixture has the temperature of the programme throughout.")
	for _, leg := range (programme{legs: v.Legs}).jumps() {
		sheet.Assumption(fmt.Sprintf("From leg %d to leg %d the temperature changes at once.", leg, leg+1))
	}
	if len(v.Held) > 0 {
		for _, h := range v.Held {
			sheet.Assumption(h)
		}
	}
	var sure []string
	for _, q := range v.reached() {
		if v.Basis >= 0 {
			sure = append(sure, "conversion@"+q.Condition)
		}
		for _, g := range s.Products {
			if v.Basis >= 0 {
				sure = append(sure, "yield/"+g.Name+"@"+q.Condition)
			}
		}
		for _, p := range v.Pairs {
			sure = append(sure, "ratio/"+s.pairName(p)+"@"+q.Condition)
		}
	}
	for _, p := range v.Pairs {
		sure = append(sure, "changeover/"+s.pairName(p))
	}
	sheet.Intervals(sure...)
}

// exactness says how well the course keeps what must be kept.
func (v *runValue) exactness() string {
	const good = 1e-12
	held := math.Pow(10, math.Ceil(math.Log10(math.Max(v.Balance, good))-1e-9))
	text := fmt.Sprintf("Conservation laws hold to a relative %s or better.", unit.Digits(held, 1))
	switch {
	case v.Lowest < -v.Floor:
		text += fmt.Sprintf(" The lowest concentration met is %s.", unit.Print(v.Lowest, molar, unit.FormMolar))
	case v.Lowest < 0:
		text += fmt.Sprintf(" No concentration falls below zero by more than %s.", unit.Print(v.Floor, molar, unit.FormMolar))
	}
	return text
}

// yieldWords defines the yield, with the units that are not 1.
func (s *runSource) yieldWords(v runValue) string {
	text := fmt.Sprintf("A yield is the amount of the product times the molecules of %s in one of it, over the %s charged", v.basisLabel(), v.basisLabel())
	var odd []string
	for g, u := range v.Units {
		if u != 1 || v.Stated[g] {
			one := fmt.Sprintf("%s of %s", unit.Digits(u, 3), v.Products[g])
			if u == math.Trunc(u) {
				one = fmt.Sprintf("%.0f in %s", u, v.Products[g])
			}
			if v.Stated[g] {
				one += " (stated)"
			}
			odd = append(odd, one)
		}
	}
	switch {
	case len(odd) == 0:
		return text + ": 1 each."
	case len(odd) < len(v.Units):
		return text + ": " + listWords(odd) + ", 1 in the others."
	}
	return text + ": " + listWords(odd) + "."
}
