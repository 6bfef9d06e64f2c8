package kind

import (
	"context"
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

// drawTolerance is that of the runs with shifted energies.
const drawTolerance = 1e-6

// An effort is how much a run computes.
type effort struct {
	rtol  float64
	trace bool
}

var (
	fine   = effort{rtol: 1e-9, trace: true}
	coarse = effort{rtol: drawTolerance} // for draws of the errors, which lie far apart
)

// tracePoints is how many points the figure and the file of numbers have, and
// mostTraced how many concentrations a run keeps for them.
const (
	tracePoints = 200
	mostTraced  = 20_000
)

// A runPlan is a run as the core takes it.
type runPlan struct {
	run   course.Run
	prog  programme
	times []runTime // where results are wanted, in the order of the block; the end is among them
	base  float64   // mol/L of the basis, doses included; NaN without one
	named []bool    // by product: its units of the basis are stated
	holds []float64 // by species: molecules of the basis in one of it; NaN: cannot be told
}

// A runTime is a time at which results are wanted.
type runTime struct {
	At   float64 // s; +Inf: the end
	Text string  // as it stands in keys
}

// plan turns the block into a run of the mechanism.
func (s *runSource) plan(m *kinetics.Mechanism) (runPlan, fault.Problems) {
	p := runPlan{base: math.NaN()}
	var ps fault.Problems
	add := func(more fault.Problems) { ps = append(ps, more...) }
	var more fault.Problems
	p.prog, more = readProgramme(s.Programme)
	add(more)
	if len(p.prog.legs) == 0 {
		return p, append(ps, problem([]string{"programme"}, "the programme has no leg", "write how long and where, such as ["+holdExample+"]"))
	}
	end := p.prog.end()
	if more.Failed() {
		end = math.Inf(1) // a leg is missing: nobody knows
	}
	p.times, more = readTimes(s.ReportAt, end)
	add(more)

	r := &p.run
	r.Programme, r.Basis = p.prog.legs, -1
	r.Charge, p.base, more = concentrationsWith(m, s.Charge, s.Basis, s.dosedBasis())
	add(more)
	total := 0.0
	for i, c := range r.Charge {
		if math.IsNaN(c) {
			r.Charge[i] = 0
		}
		total += r.Charge[i]
	}
	if s.Basis != "" {
		r.Basis = m.Index(s.Basis)
	}
	r.Doses, more = s.doses(m, p.base, end)
	add(more)
	for _, d := range r.Doses {
		total += d.Amount
	}
	if total == 0 && len(ps) == 0 {
		ps = append(ps, problem([]string{"charge"}, "every amount charged is 0", "charge more than 0 of at least one species"))
	}
	if r.Basis >= 0 && p.base == 0 {
		ps = append(ps, problem([]string{"basis"}, fmt.Sprintf("of %q nothing is charged", s.Basis), "charge it, or take another basis"))
	}
	r.Removals, more = s.removals(m, end)
	add(more)

	groups, more := groupsOf(m, s.Products, "products")
	add(more)
	for g, group := range s.Products {
		r.Products = append(r.Products, course.Product{Name: group.Name, Members: groups[g]})
		for other := range g {
			r.Pairs = append(r.Pairs, [2]int{other, g})
		}
	}
	slices.SortStableFunc(r.Pairs, func(a, b [2]int) int { return a[0] - b[0] })
	add(s.checkEnantiomers())
	add(s.checkHeat())
	r.Peaks = true
	r.PerBasis, p.named, p.holds, more = s.perBasis(m, p, len(ps) == 0)
	add(more)
	r.Until, more = s.until(m, p)
	add(more)

	for _, t := range p.times {
		if t.At <= p.prog.end() {
			r.Report = append(r.Report, t.At)
		}
	}
	r.Report = append(r.Report, p.prog.warmings()...)
	slices.Sort(r.Report)
	r.Report = slices.Compact(r.Report)
	return p, ps
}

// A readyRun is a run made ready for a mechanism, and for those that differ from
// it only in their energies.
type readyRun struct {
	src  *runSource
	plan runPlan
	core *course.Plan
}

// ready makes the run ready.
func (s *runSource) ready(m *kinetics.Mechanism, e effort) (*readyRun, error) {
	p, ps := s.plan(m)
	if len(ps) > 0 {
		return nil, ps
	}
	p.run.RTol = e.rtol
	if e.trace {
		p.run.Trace = min(tracePoints, max(50, mostTraced/len(m.Species)))
	}
	core, err := course.Prepare(m, p.run)
	if err != nil {
		return nil, asProblems(err, "")
	}
	return &readyRun{s, p, core}, nil
}

// simulate computes the run for one mechanism.
func (r *readyRun) simulate(ctx context.Context, m *kinetics.Mechanism) (runValue, error) {
	c, err := r.core.Simulate(ctx, m)
	if err != nil {
		return runValue{}, asProblems(err, "")
	}
	return r.src.value(m, r.plan, c)
}

// readTimes reads the times at which results are wanted, the end in any case.
func readTimes(texts []string, end float64) ([]runTime, fault.Problems) {
	var ps fault.Problems
	var out []runTime
	seen := map[string]string{} // the text, by how its key is compared
	for i, text := range texts {
		path := []string{"report-at", fmt.Sprint(i + 1)}
		t := runTime{At: math.Inf(1), Text: "end"}
		if strings.TrimSpace(text) != "end" {
			if strings.HasSuffix(strings.ToLower(strings.TrimSpace(text)), "end") {
				ps = append(ps, problem(path, fmt.Sprintf("%q is no time", text), "write \"end\" alone for the end of the run"))
				continue
			}
			q, bad := timeWithin(path, text, end)
			if bad != nil {
				ps = append(ps, bad)
				continue
			}
			t = runTime{At: q.SI, Text: ConditionText(q)}
		}
		if other, twice := seen[canonicalCondition(t.Text)]; twice {
			ps = append(ps, problem(path, fmt.Sprintf("%q is the same time as %q", text, other), "list each time once"))
			continue
		}
		seen[canonicalCondition(t.Text)] = text
		out = append(out, t)
	}
	if _, listed := seen["end"]; !listed {
		out = append(out, runTime{At: math.Inf(1), Text: "end"})
	}
	return out, ps
}

// timeWithin reads a time of the run.
func timeWithin(path []string, text string, end float64) (unit.Quantity, *fault.Problem) {
	q, err := unit.Parse(text, unit.Unit{}, unit.Time)
	if err != nil {
		e, ok := err.(*unit.Error)
		if !ok {
			e = &unit.Error{Msg: err.Error()}
		}
		p := problem(path, e.Msg, or(e.Fix, "write a time such as \"2 h\", or \"end\""))
		p.Char = e.At
		return q, p
	}
	if bad := within(path, q, end); bad != nil {
		return q, bad
	}
	return q, nil
}

// within refuses a time outside the run.
func within(path []string, q unit.Quantity, end float64) *fault.Problem {
	switch {
	case q.SD != 0:
		return problem(path, fmt.Sprintf("the ± of %q is not carried on", q), "leave out the ±")
	case q.SI < 0:
		return problem(path, fmt.Sprintf("%q lies before the start", q), "write 0 h or later")
	case q.SI > end*(1+1e-12):
		return problem(path, fmt.Sprintf("%q lies beyond the end of the programme, which is at %s", q, spanText(end)), "write an earlier time, or lengthen the programme")
	}
	return nil
}

// spanText is a time in the largest unit that writes it shortly, as in a source.
func spanText(seconds float64) string {
	best := ""
	for _, symbol := range []string{"h", "min", "s", "d"} {
		text := unit.Quantity{SI: seconds, Unit: unit.Must(symbol)}.String()
		if best == "" || len(text) < len(best)-4 {
			best = text
		}
	}
	return best
}

func (s *runSource) checkEnantiomers() fault.Problems {
	if s.Enantiomers == nil {
		return nil
	}
	var ps fault.Problems
	path := []string{"enantiomers"}
	if n := len(s.Enantiomers); n != 2 {
		ps = append(ps, problem(path, fmt.Sprintf("an enantiomeric excess is of two products, and here are %d", n), "name two, such as [\"R\", \"S\"]"))
	} else if s.Enantiomers[0] == s.Enantiomers[1] {
		ps = append(ps, problem(path, fmt.Sprintf("%q is named twice", s.Enantiomers[0]), "name two products"))
	}
	for i, name := range s.Enantiomers {
		if s.product(name) < 0 {
			ps = append(ps, problem(append(path, fmt.Sprint(i+1)), fmt.Sprintf("%q is not among the products", name), s.suggestProduct(name)))
		}
	}
	return ps
}

// product is the number of the product of that name, or -1.
func (s *runSource) product(name string) int {
	return slices.IndexFunc(s.Products, func(g schema.Group) bool { return g.Name == name })
}

func (s *runSource) suggestProduct(name string) string {
	if len(s.Products) == 0 {
		return fmt.Sprintf("list the products, such as products = [%q]", name)
	}
	var names []string
	for _, g := range s.Products {
		names = append(names, g.Name)
	}
	return suggest(name, names)
}

// perBasis finds how many units of the basis a molecule of each product, and of
// each species, holds.
// tell is false where other faults leave it open what is charged.
func (s *runSource) perBasis(m *kinetics.Mechanism, p runPlan, tell bool) (ofProduct []float64, named []bool, ofSpecies []float64, ps fault.Problems) {
	stated := map[string]float64{}
	for _, u := range s.BasisUnits {
		path := []string{"basis-units", u.Name}
		switch {
		case s.product(u.Name) < 0:
			ps = append(ps, problem(path, fmt.Sprintf("%q is not among the products", u.Name), s.suggestProduct(u.Name)))
		case s.Basis == "":
			ps = append(ps, problem(path, "there is no basis whose units could be counted", "add basis = \"NAME\""))
		case !(u.Quantity.SI > 0) || u.Quantity.SD != 0:
			ps = append(ps, problem(path, fmt.Sprintf("%q is no number of molecules", u.Quantity), "write a number above 0"))
		}
		stated[u.Name] = u.Quantity.SI
	}
	if p.run.Basis < 0 {
		return nil, nil, nil, ps
	}
	units := make([]float64, len(s.Products))
	named = make([]bool, len(s.Products))
	outside := make([]bool, len(m.Species))
	for i, c := range p.run.Charge {
		outside[i] = c > 0
	}
	for _, d := range p.run.Doses {
		outside[d.Species] = outside[d.Species] || d.Amount > 0
	}
	outside[p.run.Basis] = false
	for _, product := range p.run.Products {
		for _, i := range product.Members {
			outside[i] = false
		}
	}
	found := m.BasisUnits(p.run.Basis, outside)
	for g, product := range p.run.Products {
		units[g] = 1
		if u, ok := stated[product.Name]; ok {
			units[g], named[g] = u, true
			continue
		}
		for k, i := range product.Members {
			if k == 0 {
				units[g] = found[i]
			} else if found[i] != units[g] {
				units[g] = math.NaN()
			}
		}
		if len(product.Members) > 0 && math.IsNaN(units[g]) && tell {
			ps = append(ps, problem(append([]string{"products"}, s.Products[g].Paths[0]...), fmt.Sprintf("the steps do not tell how many molecules of %s one of %s is made of", s.Basis, product.Name),
				fmt.Sprintf("state it: basis-units = { %q = 1 }", product.Name)))
		}
	}
	return units, named, found, ps
}
