package kind

import (
	"fmt"
	"math"
	"slices"
	"strings"

	"saddlebook/content/fault"
	"saddlebook/content/schema"
	"saddlebook/kinetics"
	"saddlebook/kinetics/course"
	"saddlebook/kinetics/unit"
)

// dosedBasis is how much of the basis is dosed, mol/L; NaN: none is.
func (s *runSource) dosedBasis() float64 {
	sum := math.NaN()
	for _, d := range s.Doses {
		if s.Basis == "" || d.Species != s.Basis || d.Amount.Unit.Dim != unit.Concentration {
			continue
		}
		if math.IsNaN(sum) {
			sum = 0
		}
		sum += d.Amount.SI
	}
	return sum
}

// dosesBasis tells whether some of the basis is dosed.
func (s *runSource) dosesBasis() bool { return !math.IsNaN(s.dosedBasis()) }

// when reads the times of a dose, s.
func (d doseSource) when(i int, end float64) (from, lasts float64, ps fault.Problems) {
	path := func(key ...string) []string { return append([]string{"doses", fmt.Sprint(i + 1)}, key...) }
	check := func(key string, q *unit.Quantity, end float64) float64 {
		if q == nil {
			return 0
		}
		if bad := within(path(key), *q, end); bad != nil {
			ps = append(ps, bad)
		}
		return q.SI
	}
	switch {
	case d.At != nil && (d.From != nil || d.Over != nil):
		return 0, 0, fault.Problems{problem(path("at"), "the dose is given at once and over a time", "keep at, or from and over")}
	case d.At == nil && d.Over == nil:
		return 0, 0, fault.Problems{problem(path(), "the dose does not say when", "add at = \"1 h\" for all of it at once, or from = \"0 h\" and over = \"2 h\"")}
	case d.At != nil:
		from = check("at", d.At, end)
		if len(ps) == 0 && from >= end {
			ps = append(ps, problem(path("at"), fmt.Sprintf("at %q the run is over", *d.At), "write an earlier time, or lengthen the programme"))
		}
		return from, 0, ps
	}
	from, lasts = check("from", d.From, end), check("over", d.Over, math.Inf(1))
	switch {
	case len(ps) > 0:
	case !(lasts > 0):
		ps = append(ps, problem(path("over"), fmt.Sprintf("an addition over %q lasts no time", *d.Over), "write at in place of from and over for all of it at once"))
	case from+lasts > end*(1+1e-12):
		ps = append(ps, problem(path("over"), fmt.Sprintf("the addition goes on until %s, and the programme ends at %s", spanText(from+lasts), spanText(end)), "end it earlier, or lengthen the programme"))
	}
	return from, lasts, ps
}

// doses reads what is added; base is the basis in mol/L.
func (s *runSource) doses(m *kinetics.Mechanism, base, end float64) ([]course.Dose, fault.Problems) {
	var ps fault.Problems
	var out []course.Dose
	for i, d := range s.Doses {
		path := func(key string) []string { return []string{"doses", fmt.Sprint(i + 1), key} }
		dose := course.Dose{Species: m.Index(d.Species), Amount: d.Amount.SI}
		var more fault.Problems
		dose.From, dose.Lasts, more = d.when(i, end)
		ps = append(ps, more...)
		if dose.Species < 0 && d.Species != "" {
			ps = append(ps, unknownSpecies(m, d.Species, path("species")))
		}
		if bad := tooMuch(path("amount"), d.Amount, base); bad != nil {
			ps = append(ps, bad)
		}
		switch q := d.Amount; {
		case q.SI < 0:
			ps = append(ps, problem(path("amount"), fmt.Sprintf("%q is negative", q), "dose 0 or more; what goes away is a removal"))
		case q.SD != 0:
			ps = append(ps, problem(path("amount"), fmt.Sprintf("the ± of %q is not carried on", q), "leave out the ±"))
		case q.Unit.Dim != unit.Equivalent:
		case s.Basis == "":
			ps = append(ps, problem(path("amount"), fmt.Sprintf("%q has no basis", q), "add basis = \"NAME\", the species that equiv and mol% refer to"))
		case d.Species == s.Basis:
			ps = append(ps, problem(path("amount"), fmt.Sprintf("%q of the basis refers to itself", q), "give the doses of the basis as concentrations, such as \"0.1 M\""))
		default:
			dose.Amount = q.SI * base
		}
		if dose.Species >= 0 {
			out = append(out, dose)
		}
	}
	return out, ps
}

// how reads what a removal does, but for its species.
func (r removalSource) how(i int, end float64) (course.Removal, fault.Problems) {
	path := func(key ...string) []string { return append([]string{"removal", fmt.Sprint(i + 1)}, key...) }
	one := func(key, msg, fix string) (course.Removal, fault.Problems) {
		p := path()
		if key != "" {
			p = path(key)
		}
		return course.Removal{}, fault.Problems{problem(p, msg, fix)}
	}
	out := course.Removal{To: end}
	steady := r.From != nil || r.To != nil || r.HalfLife != nil || r.Rate != nil
	switch {
	case r.At != nil && steady:
		return one("at", "the removal is at an instant and goes on for a time", "keep at and leaves, or from, to and half-life")
	case r.At == nil && r.Leaves != nil:
		return one("leaves", "a share is left at an instant, and none is given", "add at = \"2 h\"")
	case r.At == nil && !steady:
		return one("", "the removal does not say when", "add at = \"2 h\" and leaves = \"1 %\", or half-life = \"30 min\"")
	case r.HalfLife != nil && r.Rate != nil:
		return one("rate", "the removal has both a half-life and a rate constant", "keep one of them")
	case r.At == nil && r.HalfLife == nil && r.Rate == nil:
		return one("", "the removal does not say how fast", "add half-life = \"30 min\" or rate = \"4e-4 s-1\"")
	}
	var ps fault.Problems
	for _, t := range []struct {
		key  string
		q    *unit.Quantity
		into *float64
	}{{"at", r.At, &out.From}, {"from", r.From, &out.From}, {"to", r.To, &out.To}} {
		if t.q == nil {
			continue
		}
		*t.into = t.q.SI
		if bad := within(path(t.key), *t.q, end); bad != nil {
			ps = append(ps, bad)
		}
	}
	switch {
	case len(ps) > 0:
	case r.At != nil && out.From >= end:
		ps = append(ps, problem(path("at"), fmt.Sprintf("at %q the run is over", *r.At), "write an earlier time, or lengthen the programme"))
	case r.At == nil && out.From >= out.To:
		key := "from"
		if r.From == nil {
			key = "to"
		}
		ps = append(ps, problem(path(key), "the removal ends before it begins", "write a later end, or an earlier beginning"))
	}
	positive := func(key string, q *unit.Quantity) bool {
		if !(q.SI > 0) || q.SD != 0 {
			ps = append(ps, problem(path(key), fmt.Sprintf("%q makes no sense here", *q), "write a value above 0, without ±"))
			return false
		}
		return true
	}
	switch {
	case r.Leaves != nil:
		out.Leaves = r.Leaves.SI
		if !(out.Leaves >= 0 && out.Leaves < 1) || r.Leaves.SD != 0 {
			ps = append(ps, problem(path("leaves"), fmt.Sprintf("%q is no share that a removal leaves", *r.Leaves), "write a share from 0 to below 100 %, such as \"1 %\""))
		}
	case r.HalfLife != nil && positive("half-life", r.HalfLife):
		out.K = math.Ln2 / r.HalfLife.SI
	case r.Rate != nil && positive("rate", r.Rate):
		out.K = r.Rate.SI
	}
	return out, ps
}

func (s *runSource) removals(m *kinetics.Mechanism, end float64) ([]course.Removal, fault.Problems) {
	var ps fault.Problems
	var out []course.Removal
	for i, r := range s.Removal {
		c, more := r.how(i, end)
		ps = append(ps, more...)
		c.Species = m.Index(r.Species)
		if c.Species < 0 && r.Species != "" {
			ps = append(ps, unknownSpecies(m, r.Species, []string{"removal", fmt.Sprint(i + 1), "species"}))
		}
		if c.Species >= 0 {
			out = append(out, c)
		}
	}
	return out, ps
}

// until reads what ends the run.
func (s *runSource) until(m *kinetics.Mechanism, p runPlan) ([]course.Until, fault.Problems) {
	var ps fault.Problems
	var out []course.Until
	for i, u := range s.Until {
		c, bad := s.untilOne(m, p, u)
		if bad != nil {
			bad.Path = append([]string{"until", fmt.Sprint(i + 1)}, bad.Path...)
			ps = append(ps, bad)
			continue
		}
		out = append(out, c)
	}
	return out, ps
}

func (s *runSource) untilOne(m *kinetics.Mechanism, p runPlan, u untilSource) (course.Until, *fault.Problem) {
	var named []string
	for _, k := range []struct {
		key  string
		here bool
	}{{"conversion", u.Conversion != nil}, {"yield", u.Yield != ""}, {"amount", u.Amount != ""}, {"ratio", u.Ratio != ""}} {
		if k.here {
			named = append(named, k.key)
		}
	}
	const forms = `write one of { conversion = "95 %" }, { yield = "A", reaches = "90 %" }, { amount = "R", reaches = "1 mM" } and { ratio = "A:B", reaches = "1:1" }`
	var c course.Until
	switch {
	case len(named) == 0:
		return c, problem(nil, "nothing is watched", forms)
	case len(named) > 1:
		return c, problem([]string{named[1]}, fmt.Sprintf("%s and %s are watched in one", named[0], named[1]), "give each a table of its own: the first one met ends the run")
	case named[0] == "conversion" && u.Reaches != nil:
		return c, problem([]string{"reaches"}, "the conversion has its value already", "leave reaches out")
	case named[0] != "conversion" && u.Reaches == nil:
		return c, problem(nil, fmt.Sprintf("the value that the %s must reach is missing", named[0]), forms)
	case (named[0] == "conversion" || named[0] == "yield") && s.Basis == "":
		return c, problem([]string{named[0]}, fmt.Sprintf("a %s needs a basis", named[0]), "add basis = \"NAME\", the species that it refers to")
	}
	var bad *fault.Problem
	switch named[0] {
	case "conversion":
		c.Of = course.Conversion
		c.Value, bad = shareBound("conversion", u.Conversion)
	case "yield":
		c.Of, c.Index = course.Yield, s.product(u.Yield)
		if c.Index < 0 {
			return c, problem([]string{"yield"}, fmt.Sprintf("%q is not among the products", u.Yield), s.suggestProduct(u.Yield))
		}
		c.Value, bad = shareBound("reaches", u.Reaches)
	case "amount":
		c.Of, c.Index = course.Amount, m.Index(u.Amount)
		if c.Index < 0 {
			return c, unknownSpecies(m, u.Amount, []string{"amount"})
		}
		c.Value, bad = s.amountBound(u.Reaches, p.base)
	case "ratio":
		c.Of = course.Ratio
		var turned bool
		if c.Index, turned, bad = s.pair(u.Ratio, p.run.Pairs); bad != nil {
			return c, bad
		}
		c.Value = u.Reaches.Value
		switch {
		case u.Reaches.Quantity != nil || !(c.Value > 0):
			bad = problem([]string{"reaches"}, fmt.Sprintf("%q is no ratio to reach", u.Reaches.Text), "write it as in \"15:1\"")
		case turned:
			c.Value = 1 / c.Value
		}
	}
	return c, bad
}

// pair finds two products written A:B; turned tells that they are listed the
// other way round.
func (s *runSource) pair(text string, pairs [][2]int) (index int, turned bool, bad *fault.Problem) {
	a, b, ok := strings.Cut(text, ":")
	if !ok {
		return 0, false, problem([]string{"ratio"}, fmt.Sprintf("%q is not two products", text), "write them as in \"A:B\"")
	}
	at := 0
	var pair [2]int
	for k, name := range []string{a, b} {
		trimmed := strings.TrimSpace(name)
		if pair[k] = s.product(trimmed); pair[k] < 0 {
			p := problem([]string{"ratio"}, fmt.Sprintf("%q is not among the products", trimmed), s.suggestProduct(trimmed))
			p.Char = at
			return 0, false, p
		}
		at = len([]rune(a)) + 1
	}
	if i := slices.Index(pairs, pair); i >= 0 {
		return i, false, nil
	}
	if i := slices.Index(pairs, [2]int{pair[1], pair[0]}); i >= 0 {
		return i, true, nil
	}
	return 0, false, problem([]string{"ratio"}, fmt.Sprintf("%q is one product twice", text), "name two products")
}

// shareBound reads a share between nothing and all.
func shareBound(key string, b *schema.Bound) (float64, *fault.Problem) {
	fits := !b.Ratio && (b.Quantity == nil || b.Quantity.Unit.Dim == unit.None) && b.Value > 0 && b.Value < 1
	if fits {
		return b.Value, nil
	}
	fix := "write a share between 0 and 100 %, such as \"95 %\""
	if b.Quantity == nil && !b.Ratio && b.Value > 1 && b.Value < 100 {
		fix = fmt.Sprintf("write its unit: %q", b.Text+" %")
	}
	return 0, problem([]string{key}, fmt.Sprintf("%q is no share that can be reached", b.Text), fix)
}

// amountBound reads a concentration or an amount in terms of the basis.
func (s *runSource) amountBound(b *schema.Bound, base float64) (float64, *fault.Problem) {
	path := []string{"reaches"}
	switch q := b.Quantity; {
	case q == nil || q.Unit.Dim != unit.Concentration && q.Unit.Dim != unit.Equivalent:
		return 0, problem(path, fmt.Sprintf("%q is no concentration", b.Text), "write it as in \"1 mM\" or \"5 mol%\"")
	case !(q.SI > 0):
		return 0, problem(path, fmt.Sprintf("%q is never reached exactly", b.Text), "write a concentration above 0")
	case q.Unit.Dim == unit.Equivalent && s.Basis == "":
		return 0, problem(path, fmt.Sprintf("%q has no basis", b.Text), "add basis = \"NAME\", the species that equiv and mol% refer to")
	case q.Unit.Dim == unit.Equivalent:
		return q.SI * base, nil
	}
	return b.Quantity.SI, nil
}
