package kind

import (
	"fmt"
	"strings"

	"saddlebook/kinetics/unit"
)

var (
	perHour      = unit.Must("h-1")
	molarPerHour = unit.Must("M h-1")
)

// pairText is how keys name the pair.
func (s *controlSource) pairText() string {
	a, b, _ := strings.Cut(s.Ratio, ":")
	return strings.TrimSpace(a) + ":" + strings.TrimSpace(b)
}

func (s *controlSource) results(v controlValue) []Result {
	var out []Result
	for _, q := range v.At {
		s.resultsAt(v, q, func(quantity, item string, n func() Number, u unit.Unit, f unit.Form) {
			value := nothing(q.Why)
			if q.Why == "" {
				value = n()
			}
			r := Result{Key: Key{ID: s.ID, Quantity: quantity, Item: item, Condition: q.Condition}, Value: value, Unit: u, Form: f}
			r.Assumes = append([]string{v.composition(q)}, q.Assumes...)
			out = append(out, r)
		})
	}
	return out
}

// resultsAt adds the same keys whatever the numbers are.
func (s *controlSource) resultsAt(v controlValue, q controlPoint, put func(quantity, item string, n func() Number, u unit.Unit, f unit.Form)) {
	energy, _ := energyUnits(v.Energies)
	number := func(x orNone, why string) func() Number { return func() Number { return numberOr(x, why) } }
	put("rate", "", number(q.Rate, "none"), molarPerHour, unit.FormRate)
	states := append(append([]string{}, v.Names...), v.Steps...)
	for i, name := range states {
		st := q.state(i)
		put("control", name, number(st.X, "none"), plain, unit.FormPosition)
		put("factor", name, number(st.Factor, or(st.WhyNot, "none")), plain, unit.FormFactor)
	}
	if s.Ratio != "" {
		put("ratio", s.pairText(), func() Number {
			if q.Ratio < 0 {
				return nothing("one of the two is used up")
			}
			return numberOr(q.Ratio, "none")
		}, plain, unit.FormRatio)
		for i, name := range states {
			st := q.state(i)
			put("ratio-control", name, number(st.RatioX, "none"), plain, unit.FormPosition)
			put("ratio-factor", name, number(st.RatioFactor, or(st.WhyNot, "none")), plain, unit.FormFactor)
		}
	}
	for _, i := range v.Stated {
		put("order", v.Names[i], func() Number { return numberOr(q.Orders[i], "not told at 0 M") }, plain, unit.FormPosition)
	}
	put("activation-energy", "", number(q.Ea, q.NoEa), energy, unit.FormEnergy)
	put("resting-state", "", func() Number {
		if q.Resting < 0 {
			return nothing("no total is stated")
		}
		return Number{Kind: Words, Text: v.Labels[q.Resting]}
	}, plain, unit.FormPlain)
	put("resting-share", "", number(q.share(q.Resting), "no total is stated"), percent, unit.FormPercent)
	for i, name := range v.Names {
		if !q.share(i).none() {
			put("share", name, number(q.share(i), "none"), percent, unit.FormPercent)
		}
	}
	for i, name := range v.Names {
		put("amount", name, func() Number { return numberOr(q.C[i], "none") }, molar, unit.FormMolar)
	}
	if s.Catalyst == "" {
		return
	}
	put("turnover", "", number(q.Turns, "the catalyst has no total"), perHour, unit.FormRate)
	c, why := q.Cycle, or(q.NoCycle, "no cycle")
	if c == nil {
		for _, quantity := range []string{"turns", "span-turns"} {
			put(quantity, "", number(none(), why), perHour, unit.FormRate)
		}
		for _, quantity := range []string{"span", "turn-energy"} {
			put(quantity, "", number(none(), why), energy, unit.FormEnergy)
		}
		put("span-pair", "", number(none(), why), plain, unit.FormPlain)
		return
	}
	span := "none"
	if c.Backwards {
		span = "runs backwards"
	}
	put("turns", "", number(c.Turns, "none"), perHour, unit.FormRate)
	put("span", "", number(c.Span, span), energy, unit.FormEnergy)
	put("turn-energy", "", number(c.Turn, "a step of the turn has no return at these concentrations"), energy, unit.FormEnergy)
	put("span-turns", "", number(c.BySpan, span), perHour, unit.FormRate)
	put("span-pair", "", func() Number {
		if len(c.Pairs) == 0 {
			return nothing(span)
		}
		top := c.Pairs[0]
		labels := v.labels()
		return Number{Kind: Words, Text: fmt.Sprintf("%s over %s", labels[c.Levels[top.TS].State], labels[c.Levels[top.I].State])}
	}, plain, unit.FormPlain)
	for _, l := range c.Levels {
		put("turnover-control", states[l.State], number(l.Control, span), plain, unit.FormPosition)
	}
}

// state returns how a state decides; nothing in a draw without numbers.
func (q *controlPoint) state(i int) controlState {
	if i < len(q.States) {
		return q.States[i]
	}
	return controlState{X: none(), Factor: none(), RatioX: none(), RatioFactor: none()}
}

// composition words the temperature and what is stated at a point.
func (v *controlValue) composition(q controlPoint) string {
	return "At " + unit.Print(q.T.SI, q.T.Unit, unit.FormPlain) + " with " + v.stated(q)
}

// stated words what is stated at a point: "0.500 M substrate and 5.00 mM
// catalyst in all".
func (v *controlValue) stated(q controlPoint) string {
	var held []string
	for _, i := range v.Stated {
		if i >= len(q.Stated) || q.Stated[i].none() {
			continue
		}
		text := molarWords(float64(q.Stated[i])) + " " + v.Labels[i]
		if q.Total[i] {
			text += " in all"
		}
		held = append(held, text)
	}
	return listWords(held)
}

// molarWords prints a stated concentration as a bench has it: below 0.1 M in mM.
func molarWords(c float64) string {
	u := molar
	if c > 0 && c < 0.1 && c >= 1e-4 {
		u = unit.Must("mM")
	}
	return unit.Print(c, u, unit.FormMolar)
}
