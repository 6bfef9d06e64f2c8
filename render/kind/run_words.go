package kind

import (
	"fmt"
	"math"
	"slices"
	"strconv"
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
			heat := ""
			if w.HeatLeft > orNone(heatShare)*v.Heat.Whole {
				heat = heatWords(w.HeatLeft, w.HeatRise)
			}
			cautionWarming(sheet, w.T, v.Labels[v.Basis], sheet.Value("unreacted-at-warming@"+w.Condition).Text, heat)
		}
	}
}

// conditions says what was done, as the block has it.
func (s *runSource) conditions(v runValue) string {
	var charged, done []string
	for _, a := range s.Charge {
		charged = append(charged, fmt.Sprintf("%s (%s)", v.label(a.Name), v.amountInFull(a.Quantity)))
	}
	done = append(done, "Charged: "+listWords(charged)+".")
	prog, _ := readProgramme(s.Programme)
	done = append(done, "Programme: "+strings.Join(prog.words, ", ")+".")
	for _, leg := range prog.jumps() {
		if prog.begin(leg) > v.End {
			break
		}
		done = append(done, fmt.Sprintf("From %s to %s the temperature changes at once, after %s.", celsiusWords(prog.before(leg)), celsiusWords(prog.legs[leg].To), timeWords(prog.begin(leg))))
	}
	for _, d := range s.Doses {
		when := ""
		switch {
		case d.At != nil && d.At.SI == 0:
			when = "at once at the start"
		case d.At != nil:
			when = "at once after " + spanWords(*d.At)
		case d.From != nil && d.From.SI > 0:
			when = fmt.Sprintf("evenly over %s, from %s on", spanWords(*d.Over), spanWords(*d.From))
		case d.Over != nil:
			when = "evenly over " + firstWords(*d.Over)
		}
		done = append(done, fmt.Sprintf("Added: %s (%s), %s.", v.label(d.Species), v.amountInFull(d.Amount), when))
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

// productLabel is how pages call a product.
func (s *runSource) productLabel(v *runValue, name string) string {
	if g := s.product(name); g >= 0 {
		return v.Products[g]
	}
	return name
}

// amountInFull is an amount, with its concentration where it is stated in terms
// of the basis.
func (v *runValue) amountInFull(q unit.Quantity) string {
	text := amountWords(q)
	if q.Unit.Dim == unit.Equivalent {
		text += ", " + unit.Print(q.SI*float64(v.BasisCharged), molar, unit.FormMolar)
	}
	return text
}

// amountWords is a concentration, or an amount in terms of the basis.
func amountWords(q unit.Quantity) string {
	if q.Unit.Dim == unit.Equivalent {
		return unit.Print(q.SI, q.Unit, unit.FormPlain)
	}
	return unit.Print(q.SI, q.Unit, unit.FormMolar)
}

func spanWords(q unit.Quantity) string { return unit.Print(q.SI, q.Unit, unit.FormPlain) }

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
	product := func(name string) string { return s.productLabel(&v, name) }
	if v.Ended >= 0 && v.Ended < len(s.Until) {
		return fmt.Sprintf("Ended after %s: %s.", timeWords(v.End), s.Until[v.Ended].words(v.basisLabel(), v.label, product))
	}
	var waits []string
	for _, u := range s.Until {
		text := strings.Replace(u.words(v.basisLabel(), v.label, product), " reached ", " reaches ", 1)
		if u.Conversion != nil || u.Yield != "" {
			text = "the " + text
		}
		waits = append(waits, text)
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
		turns := distinctTimes([]float64{float64(p.Changeover), float64(p.Even)})
		switch why := p.noControl(); {
		case why != "":
			if silent[why] == nil {
				reasons = append(reasons, why)
			}
			silent[why] = append(silent[why], a+" : "+b)
		case !p.Changeover.none():
			out = append(out, fmt.Sprintf("Control%s passes from kinetic to thermodynamic after %s at %s%s.", of, turns[0], sheet.Value("changeover-temperature/"+item).Text, intervalWords(sheet, "changeover/"+item)))
		case !last.Control[i].none():
			side := "kinetic"
			if float64(last.Control[i]) >= 0.5 {
				side = "thermodynamic"
			}
			out = append(out, fmt.Sprintf("Control%s does not change over: at the end it is %s (%s).", of, side, sheet.Value("control/"+item+"@end").Text))
		}
		if !p.Even.none() {
			out = append(out, fmt.Sprintf("The ratio of %s to %s passes 1 after %s at %s%s.", a, b, turns[1], sheet.Value("even-temperature/"+item).Text, intervalWords(sheet, "even/"+item)))
		}
	}
	for _, why := range reasons {
		of := " of " + listWords(silent[why])
		if len(silent[why]) == len(v.Pairs) {
			of = ""
		}
		out = append(out, fmt.Sprintf("Control%s has no number: %s.", of, why))
	}
	for g, p := range v.Peaks {
		if key := s.Products[g].Name; !p.T.none() {
			out = append(out, fmt.Sprintf("%s peaks at a yield of %s after %s%s.", v.Products[g], sheet.Value("peak-yield/"+key).Text, timeWords(float64(p.T)), intervalWords(sheet, "peak-time/"+key)))
		}
	}
	return out
}

// intervalWords is the interval of a result in brackets, where it says more than
// the result.
func intervalWords(sheet *paper.Sheet, key string) string {
	if i := sheet.Interval(key); telling(sheet.Value(key).Text, i) {
		return " (5 to 95 %: " + i + ")"
	}
	return ""
}

// telling tells that an interval says more than the value beside it: its ends
// differ in the digits shown, by more than one in the last of three.
func telling(value, interval string) bool {
	low, high, ok := strings.Cut(interval, " to ")
	if !ok || low == high {
		return false
	}
	if value != low && value != high {
		return true
	}
	number := func(text string) (float64, string, bool) {
		digits, unit, _ := strings.Cut(text, "\u00a0")
		x, err := strconv.ParseFloat(strings.Replace(digits, "\u2212", "-", 1), 64)
		return x, unit, err == nil && !strings.HasPrefix(unit, "×")
	}
	a, unitA, okA := number(low)
	b, unitB, okB := number(high)
	if !okA || !okB || unitA != unitB {
		return true
	}
	decimals := 0
	if _, behind, ok := strings.Cut(strings.TrimSuffix(low, "\u00a0"+unitA), "."); ok {
		decimals = len(behind)
	}
	last := math.Pow(10, -float64(decimals))
	return b-a > 1.01*last || last > 0.011*math.Abs(a)
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
	sheet.Intervals(slices.DeleteFunc(sure, func(key string) bool {
		i := sheet.Interval(key)
		return i != "" && !telling(sheet.Value(key).Text, i)
	})...)
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
		text += fmt.Sprintf(" No concentration falls below zero by more than rounding does (%s M).", unit.Digits(v.Floor, 1))
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
