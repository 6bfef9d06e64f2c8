package kind

import (
	"fmt"
	"math"
	"strings"

	"saddlebook/kinetics/unit"
)

var (
	heatUnit     = unit.Must("kJ/L")
	heatRateUnit = unit.Must("W/L")
	kelvinUnit   = unit.Must("K")
)

// pairName is how keys name two products.
func (s *runSource) pairName(p runPair) string {
	return s.Products[p.A].Name + ":" + s.Products[p.B].Name
}

func nothing(text string) Number { return Number{Kind: Nothing, Text: text} }

// numberOr is a number, or words where there is none.
func numberOr(x orNone, text string) Number { return Value(float64(x), text) }

func (s *runSource) results(v runValue) []Result {
	var out []Result
	add := func(k Key, n Number, u unit.Unit, f unit.Form) {
		k.ID = s.ID
		out = append(out, Result{Key: k, Value: n, Unit: u, Form: f, Assumes: v.Held})
	}
	for i := range v.At {
		s.resultsAt(v, v.At[i], add)
	}
	for _, w := range v.Warmings {
		if v.Basis < 0 {
			break
		}
		n := numberOr(w.Unreacted, "none")
		if !w.Reached {
			n = nothing(v.over())
		}
		add(Key{Quantity: "unreacted-at-warming", Condition: w.Condition}, n, percent, unit.FormPercent)
	}
	for g, p := range v.Peaks {
		item, why := s.Products[g].Name, "its yield is highest at the end"
		if p.Yield == 0 {
			why = unformed
		}
		add(Key{Quantity: "peak-yield", Item: item}, numberOr(p.Yield, "none"), percent, unit.FormPercent)
		add(Key{Quantity: "peak-time", Item: item}, numberOr(p.T, why), seconds, unit.FormSpan)
	}
	for _, p := range v.Pairs {
		item := s.pairName(p)
		why := "control does not pass 0.5 within the run"
		if w := p.noControl(); w != "" {
			why = w
		}
		add(Key{Quantity: "changeover", Item: item}, numberOr(p.Changeover, why), seconds, unit.FormSpan)
		add(Key{Quantity: "changeover-temperature", Item: item}, numberOr(p.ChangeoverKelvin, why), celsius, unit.FormWhole)
		const uneven = "the ratio does not pass 1 within the run"
		add(Key{Quantity: "even", Item: item}, numberOr(p.Even, uneven), seconds, unit.FormSpan)
		add(Key{Quantity: "even-temperature", Item: item}, numberOr(p.EvenKelvin, uneven), celsius, unit.FormWhole)
	}
	add(Key{Quantity: "end"}, Value(v.End, "none"), seconds, unit.FormSpan)
	add(Key{Quantity: "ended-by"}, Number{Kind: Words, Text: s.endedBy(v)}, plain, unit.FormPlain)
	if v.Heat.Shown {
		h := v.Heat
		cool := "no heat is set free at any time"
		if len(h.Unknown) > 0 {
			cool = h.why()
		}
		add(Key{Quantity: "adiabatic-rise"}, numberOr(h.Rise, h.why()), kelvinUnit, unit.FormRise)
		add(Key{Quantity: "rise-of-run"}, numberOr(h.RunRise, h.why()), kelvinUnit, unit.FormRise)
		add(Key{Quantity: "peak-heat-rate"}, numberOr(h.Peak, cool), heatRateUnit, unit.FormFactor)
		add(Key{Quantity: "peak-heat-rate-time"}, numberOr(h.PeakAt, cool), seconds, unit.FormSpan)
	}
	return out
}

// resultsAt adds what the run says of one time: the same keys whatever it says.
func (s *runSource) resultsAt(v runValue, q runPoint, add func(Key, Number, unit.Unit, unit.Form)) {
	put := func(quantity, item string, n func() Number, u unit.Unit, f unit.Form) {
		value := nothing(v.over())
		if q.Reached {
			value = n()
		}
		add(Key{Quantity: quantity, Item: item, Condition: q.Condition}, value, u, f)
	}
	if v.Basis >= 0 {
		put("conversion", "", func() Number { return numberOr(q.Conversion, "none") }, percent, unit.FormPercent)
	}
	for g, product := range s.Products {
		if v.Basis >= 0 {
			put("yield", product.Name, func() Number { return numberOr(q.Yields[g], "none") }, percent, unit.FormPercent)
		}
		put("share", product.Name, func() Number { return numberOr(q.Shares[g], unformed) }, percent, unit.FormPercent)
	}
	for i, p := range v.Pairs {
		item := s.pairName(p)
		put("ratio", item, func() Number { return v.ratio(p.A, p.B, q) }, plain, unit.FormRatio)
		put("control", item, func() Number { return numberOr(q.Control[i], v.noControl(i, q)) }, plain, unit.FormPosition)
		put("kinetic-share", item, func() Number { return numberOr(q.Kinetic[i], "no kinetic limit") }, percent, unit.FormPercent)
		put("equilibrium-share", item, func() Number { return numberOr(q.Rest[i], or(p.Unreachable, "none")) }, percent, unit.FormPercent)
	}
	if len(s.Enantiomers) == 2 {
		put("ee", "", func() Number { return v.excess(s.product(s.Enantiomers[0]), s.product(s.Enantiomers[1]), q) }, percent, unit.FormWhole)
	}
	if v.Basis >= 0 && len(s.Products) > 0 {
		put("mass-balance", "", func() Number { return numberOr(q.Balance, "nothing is charged yet") }, percent, unit.FormPercent)
	}
	for i, name := range v.Names {
		put("amount", name, func() Number {
			return Value(q.C[i], "none")
		}, molar, unit.FormMolar)
	}
	put("temperature", "", func() Number { return Value(q.Kelvin, "none") }, celsius, unit.FormKelvin)
	if v.Heat.Shown {
		put("heat-rate", "", func() Number { return numberOr(q.HeatRate, v.Heat.why()) }, heatRateUnit, unit.FormFactor)
		put("heat-left", "", func() Number { return numberOr(q.HeatLeft, v.Heat.why()) }, heatUnit, unit.FormFactor)
	}
}

// ratio is one product over another, by molecules. What lies below the floor of
// the integration counts as nothing.
func (v *runValue) ratio(a, b int, q runPoint) Number {
	x, y := v.amount(a, q.C), v.amount(b, q.C)
	switch {
	case v.unformed(q) || x <= v.Floor && y <= v.Floor:
		return nothing(unformed)
	case y <= v.Floor:
		return Number{Kind: Endless, Text: "only " + v.Products[a] + " has formed"}
	}
	return Value(x/y, "beyond any number")
}

// unformed tells that there is too little of all products to compare them.
func (v *runValue) unformed(q runPoint) bool {
	return len(q.Shares) == 0 || q.Shares[0].none()
}

// excess is the enantiomeric excess.
func (v *runValue) excess(r, s int, q runPoint) Number {
	x, y := v.amount(r, q.C), v.amount(s, q.C)
	if v.unformed(q) || x+y <= v.Floor {
		return nothing(unformed)
	}
	return Value(inSteps((x-y)/(x+y), balanceSteps), unformed)
}

const unformed = "nothing has formed"

// over words that the run had ended.
func (v *runValue) over() string { return "the run ended before, after " + unit.Span(v.End) }

// noControl says why a pair has no degree of control at any time, or "".
func (p runPair) noControl() string {
	if p.Unreachable == "" && p.Coincide {
		return "the limits coincide"
	}
	return p.Unreachable
}

// closeLimits is how near the two limits of control may come before there is
// no telling them apart.
const closeLimits = 0.02

// noControl says why a pair has no degree of control at one time.
func (v *runValue) noControl(pair int, q runPoint) string {
	p := v.Pairs[pair]
	kinetic, rest := float64(q.Kinetic[pair]), float64(q.Rest[pair])
	switch {
	case p.noControl() != "":
		return p.noControl()
	case v.ratio(p.A, p.B, q).Kind == Nothing:
		return unformed
	case math.Abs(kinetic-rest) < closeLimits:
		return "the limits coincide"
	}
	return "there is no limit to compare with"
}

// endedBy words what ended the run.
func (s *runSource) endedBy(v runValue) string {
	if v.Ended < 0 || v.Ended >= len(s.Until) {
		return "the programme"
	}
	asIs := func(name string) string { return name }
	return s.Until[v.Ended].words(s.Basis, asIs, asIs)
}

// words says what an until waits for; label and product say how a species and a
// product are called.
func (u untilSource) words(basis string, label, product func(string) string) string {
	value := func() string {
		if u.Reaches == nil {
			return ""
		}
		return u.Reaches.Text
	}
	switch {
	case u.Conversion != nil:
		return fmt.Sprintf("conversion of %s reached %s", basis, u.Conversion.Text)
	case u.Yield != "":
		return fmt.Sprintf("yield of %s reached %s", product(u.Yield), value())
	case u.Amount != "":
		return fmt.Sprintf("%s reached %s", label(u.Amount), value())
	}
	a, b, _ := strings.Cut(u.Ratio, ":")
	return fmt.Sprintf("the ratio %s:%s reached %s", product(strings.TrimSpace(a)), product(strings.TrimSpace(b)), value())
}
