package kind

import (
	"context"
	"errors"
	"fmt"
	"math"
	"slices"
	"strings"

	"saddlebook/content/fault"
	"saddlebook/content/schema"
	"saddlebook/kinetics"
	"saddlebook/kinetics/control"
	"saddlebook/kinetics/unit"
)

func init() {
	Register(Kind[controlSource, controlValue]{
		Name:    "control",
		Doc:     "What decides the rate at one composition: the degree of rate control of every state, reaction orders, activation energy, resting state, and for a catalyst its turnover and energetic span.",
		Method:  "Steady states by Newton's method on net rates, from state reduction or an integration at rest; degrees of rate control and orders by implicit differentiation, factors by a second solution; the energetic span of a cycle beside its exact turnover.",
		Version: 2,
		Fields: []schema.Field{
			{Key: "id", Doc: "the name by which readings and claims call this block", Type: schema.Text, Name: true, Required: true, Example: "decides"},
			usesMechanism,
			{Key: "rate-of", Doc: "the product whose rate of formation is meant, or a sum", Type: schema.Text, Required: true, Wants: "species", Example: "P"},
			{Key: "ratio", Doc: "two products, or sums, whose ratio of rates is looked at besides", Type: schema.Text, Wants: "species", Example: "A:B"},
			{Key: "at", Doc: "the composition: what is held, by species, and the total of the catalyst. Every species that is not named is at its steady state", Type: schema.AmountsByName,
				Dims: []unit.Dim{unit.Concentration, unit.Equivalent}, Wants: "species", Example: `{ S = "0.50 M", P = "0.05 M", cat = "1 mM" }`},
			basisField,
			{Key: "temperature", Doc: "the temperatures, with at", Type: schema.Amounts, Dims: []unit.Dim{unit.Temperature}, Default: "the mechanism's own temperature", Example: "60 °C"},
			{Key: "run", Doc: "a run to take the composition and the temperature of, in place of at", Type: schema.Text, Wants: "run", Example: "cold"},
			{Key: "time", Doc: "when in the run: a time at which it reports, or end", Type: schema.Text, Default: "end", Example: "2 h"},
			{Key: "steady", Doc: "the species of the run that count as being at their steady state; all others are held as they stand", Type: schema.Words, Default: "with a catalyst, every state that shares its conserved total", Wants: "species", Example: `["int", "rest"]`},
			{Key: "catalyst", Doc: "the species that turnover is counted by; its amount is a total over all its states", Type: schema.Text, Wants: "species", Example: "cat"},
			{Key: "totals", Doc: "other species whose amount is a total over all their states, such as a ligand", Type: schema.Words, Wants: "species", Example: `["L"]`},
			{Key: "turnover", Doc: "the steps of one turn, in order", Type: schema.Words, Default: "found from the steps", Wants: "step", Example: `["TS1", "TS2"]`},
			{Key: "caption", Doc: "what the table shows", Type: schema.Text, Example: "What decides at 60 °C"},
		},
		ID:    func(s *controlSource) string { return s.ID },
		Refs:  (*controlSource).refs,
		Check: (*controlSource).check,
		Compute: func(ctx context.Context, s *controlSource, in Inputs) (controlValue, error) {
			where, err := s.where(in)
			if err != nil {
				return controlValue{}, err
			}
			return onMechanism(in, s.Mechanism, func(m *kinetics.Mechanism) (controlValue, error) { return s.decide(ctx, m, where, nil) })
		},
		Results: (*controlSource).results,
		Gives: []Gift{
			{"rate@T", "rate of formation; below 0 it is used up"},
			{"control/STATE@T", "degree of rate control of the species or transition state"},
			{"factor/STATE@T", "the rate with this state 1 kcal/mol higher, over the rate as it is"},
			{"ratio/A:B@T", "rate of formation of A over that of B"},
			{"ratio-control/STATE@T", "how much the state decides that ratio: d ln ratio/d(−G/RT)"},
			{"ratio-factor/STATE@T", "the ratio with this state 1 kcal/mol higher, over the ratio as it is"},
			{"order/SPECIES@T", "reaction order in what is held, or in a total"},
			{"activation-energy@T", "apparent activation energy of Arrhenius, −R d ln r/d(1/T)"},
			{"resting-state@T", "the species that holds most of the total of the catalyst, or else of the first total"},
			{"resting-share@T", "its share of the total; in draws of the errors that of the same species, where another may hold more"},
			{"share/SPECIES@T", "share of that total in this species"},
			{"amount/SPECIES@T", "concentration, at the steady state where it is not held"},
			{"turnover@T", "product formed per catalyst and time, at the concentrations stated"},
			{"turns@T", "turns of the cycle per catalyst and time, exact"},
			{"turn-energy@T", "free energy of one turn at these concentrations"},
			{"span@T", "energetic span of the cycle at these concentrations"},
			{"span-turns@T", "turns per catalyst and time by the span alone"},
			{"span-pair@T", "the transition state and the intermediate that make the span"},
			{"turnover-control/STATE@T", "turnover control: over the transition states of the cycle, and over the states of the catalyst, it sums to 1"},
		},
		Present: (*controlSource).present,
		Sampler: func(ctx context.Context, s *controlSource, in Inputs) (Sampler, error) {
			where, err := s.where(in)
			if err != nil {
				return Sampler{}, err
			}
			nominal, err := onMechanism(in, s.Mechanism, func(m *kinetics.Mechanism) (controlValue, error) { return s.decide(ctx, m, where, nil) })
			if err != nil {
				return Sampler{}, err
			}
			temperatures := func(m *kinetics.Mechanism) []float64 {
				if where != nil {
					return []float64{where.kelvin}
				}
				return kelvins(atOr(s.Temperature, m))
			}
			sampler, err := samplerOn(in, s.Mechanism, temperatures,
				func(m *kinetics.Mechanism) (controlValue, error) { return s.decide(ctx, m, where, &nominal) }, s.results)
			sampler.Draws = controlDraws
			return sampler, err
		},
	})
}

// controlDraws is how often the errors are drawn: each draw solves one steady
// state for every state of the mechanism, unless it is large.
const controlDraws = 512

// large tells that draws of the errors leave out how every state decides: each
// state takes a solution, and one solution the square of their number.
func large(states, temperatures int) bool { return states*states*states*temperatures > 80_000 }

type controlSource struct {
	ID          string               `key:"id"`
	Mechanism   string               `key:"mechanism"`
	RateOf      string               `key:"rate-of"`
	Ratio       string               `key:"ratio"`
	At          []schema.NamedAmount `key:"at"`
	Basis       string               `key:"basis"`
	Temperature []unit.Quantity      `key:"temperature"`
	Run         string               `key:"run"`
	Time        string               `key:"time"`
	Steady      []string             `key:"steady"`
	Catalyst    string               `key:"catalyst"`
	Totals      []string             `key:"totals"`
	Turnover    []string             `key:"turnover"`
	Caption     string               `key:"caption"`
}

func (s *controlSource) refs() []Ref {
	refs := mechanismRef(s.Mechanism)
	if s.Run != "" {
		refs = append(refs, Ref{Target: s.Run, Path: []string{"run"}})
	}
	return refs
}

func (s *controlSource) check() fault.Problems {
	ps := distinct("temperature", s.Temperature)
	add := func(key, msg, fix string) { ps = append(ps, problem([]string{key}, msg, fix)) }
	switch {
	case s.Run == "" && len(s.At) == 0:
		add("at", "no composition is stated", `state what is held, such as at = { S = "0.50 M" }, or name a run`)
	case s.Run != "" && len(s.At) > 0:
		add("at", "a composition is stated and a run is named", "keep one of the two")
	case s.Run != "" && len(s.Temperature) > 0:
		add("temperature", "the run has a temperature of its own", "leave it out")
	case s.Run != "" && len(s.Totals) > 0:
		add("totals", "the run has amounts of its own", "leave it out, and name what is at its steady state in steady")
	case s.Run == "" && s.Time != "":
		add("time", "there is no run for this time", "name one in run, or leave the time out")
	case s.Run == "" && len(s.Steady) > 0:
		add("steady", "with a stated composition every species that is not named in at is at its steady state", "leave it out")
	}
	if len(s.Turnover) > 0 && s.Catalyst == "" {
		add("turnover", "a turnover needs a catalyst", `name it, such as catalyst = "cat"`)
	}
	if s.Time != "" {
		if _, bad := s.when(); bad != nil {
			ps = append(ps, bad)
		}
	}
	if s.Ratio != "" && strings.Count(s.Ratio, ":") != 1 {
		add("ratio", fmt.Sprintf("%q is not a pair of products", s.Ratio), `write two with a colon between, such as "A:B"`)
	}
	return ps
}

// when reads the time in the run: +Inf is its end.
func (s *controlSource) when() (runTime, *fault.Problem) {
	text := strings.TrimSpace(s.Time)
	if text == "" || text == "end" {
		return runTime{At: math.Inf(1), Text: "end"}, nil
	}
	q, bad := timeWithin([]string{"time"}, text, math.Inf(1))
	if bad != nil {
		return runTime{}, bad
	}
	return runTime{At: q.SI, Text: ConditionText(q)}, nil
}

// composed is a block that keeps compositions: a run.
type composed interface {
	CompositionAt(seconds float64) (c []float64, kelvin float64, err error)
}

// whereabouts is a composition that a run was found at.
type whereabouts struct {
	condition string
	c         []float64
	kelvin    float64
	names     []string // of the species, nil if the run does not say
}

// where finds the composition in the run; nil without one.
func (s *controlSource) where(in Inputs) (*whereabouts, error) {
	if s.Run == "" {
		return nil, nil
	}
	value, err := in.Value(s.Run)
	if err != nil {
		return nil, err
	}
	run, ok := value.(composed)
	if !ok {
		return nil, fault.Problems{problem([]string{"run"}, fmt.Sprintf("%q keeps no composition", s.Run), "name a block of kind run")}
	}
	t, bad := s.when()
	if bad != nil {
		return nil, fault.Problems{bad}
	}
	w := &whereabouts{condition: t.Text}
	if w.c, w.kelvin, err = run.CompositionAt(t.At); err != nil {
		fix := "take a time at which the run reports"
		var te *TimeError
		if errors.As(err, &te) {
			fix = te.Remedy()
		}
		return nil, fault.Problems{problem([]string{"time"}, err.Error(), fix)}
	}
	if v, ok := value.(runValue); ok {
		w.names = v.Names
	}
	return w, nil
}

// problem puts the question to the core: everything but the network.
func (s *controlSource) problem(m *kinetics.Mechanism, where *whereabouts) (control.Problem, fault.Problems) {
	p := control.Problem{Catalyst: -1}
	var ps fault.Problems
	species := m.States()[:len(m.Species)]
	index := func(key string, i int, name string) int {
		path := []string{key}
		if i >= 0 {
			path = append(path, fmt.Sprint(i+1))
		}
		k := m.Index(name)
		if k < 0 {
			ps = append(ps, unknownSpecies(m, name, path))
		}
		return k
	}
	sum := func(key, text string) []kinetics.Term {
		terms, err := kinetics.ParseSum(text, species)
		if err != nil {
			ps = append(ps, sumProblem([]string{key}, err, species))
		}
		return terms
	}
	p.RateOf = sum("rate-of", s.RateOf)
	if a, b, ok := strings.Cut(s.Ratio, ":"); ok {
		p.Pair[0], p.Pair[1] = sum("ratio", strings.TrimSpace(a)), sum("ratio", strings.TrimSpace(b))
	}
	if s.Catalyst != "" {
		p.Catalyst = index("catalyst", -1, s.Catalyst)
	}
	for i, name := range s.Turnover {
		k := slices.IndexFunc(m.Steps, func(st kinetics.Step) bool { return st.Name == name })
		if k < 0 {
			ps = append(ps, problem([]string{"turnover", fmt.Sprint(i + 1)}, fmt.Sprintf("%q is not a step of mechanism %q", name, m.ID), suggest(name, m.States()[len(m.Species):])))
		}
		p.Turnover = append(p.Turnover, k)
	}
	total := map[int]bool{p.Catalyst: p.Catalyst >= 0}
	for i, name := range s.Totals {
		k := index("totals", i, name)
		if k >= 0 && total[k] {
			ps = append(ps, problem([]string{"totals", fmt.Sprint(i + 1)}, fmt.Sprintf("the amount of %q is a total already", name), "leave it out here"))
		}
		total[k] = true
	}
	p.Held, p.Total = make([]float64, len(species)), make([]float64, len(species))
	for i := range species {
		p.Held[i], p.Total[i] = math.NaN(), math.NaN()
	}
	if where == nil {
		c, more := s.stated(m)
		ps = append(ps, more...)
		for i := range c {
			if total[i] {
				p.Total[i] = c[i]
			} else {
				p.Held[i] = c[i]
			}
		}
		for i := range c {
			if total[i] && math.IsNaN(c[i]) && len(more) == 0 {
				ps = append(ps, problem([]string{"at"}, fmt.Sprintf("the total of %s is not stated", species[i]), fmt.Sprintf("add it, such as %s = \"1 mM\"", species[i])))
			}
		}
		return p, ps
	}
	steady := map[int]bool{p.Catalyst: p.Catalyst >= 0}
	for i, name := range s.Steady {
		steady[index("steady", i, name)] = true
	}
	if p.Catalyst >= 0 && len(s.Steady) == 0 && len(ps) == 0 {
		states, bad := statesOfCatalyst(m, &p)
		if bad != nil {
			return p, append(ps, bad)
		}
		for _, i := range states {
			steady[i] = true
		}
	}
	if len(where.c) != len(species) || where.names != nil && !slices.Equal(where.names, species) {
		return p, append(ps, problem([]string{"run"}, fmt.Sprintf("the species of run %q are not those of mechanism %q", s.Run, m.ID), "name a run of this mechanism"))
	}
	for i := range species {
		if !steady[i] {
			p.Held[i] = math.Max(0, where.c[i])
		}
	}
	return p, ps
}

// stated reads at.
func (s *controlSource) stated(m *kinetics.Mechanism) ([]float64, fault.Problems) {
	if s.Basis != "" && m.Index(s.Basis) >= 0 && !slices.ContainsFunc(s.At, func(a schema.NamedAmount) bool { return a.Name == s.Basis && a.Quantity.Unit.Dim == unit.Concentration }) {
		return nil, fault.Problems{problem([]string{"basis"}, fmt.Sprintf("%q has no concentration in at", s.Basis), "state it, such as "+s.Basis+" = \"0.50 M\"")}
	}
	c, ps := concentrations(m, s.At, s.Basis)
	for _, p := range ps {
		if len(p.Path) > 0 && p.Path[0] == "charge" {
			p.Path[0] = "at"
			p.Fix = strings.Replace(p.Fix, "charge 0", "state 0", 1)
		}
	}
	return c, ps
}

// decide analyses every temperature. In a draw of the errors (nominal is then
// what the energies give as they are) a point without a steady state is kept, as
// one without numbers.
func (s *controlSource) decide(ctx context.Context, m *kinetics.Mechanism, where *whereabouts, nominal *controlValue) (controlValue, error) {
	var v controlValue
	p, ps := s.problem(m, where)
	if len(ps) > 0 {
		return v, ps
	}
	for _, sp := range m.Species {
		v.Names = append(v.Names, sp.Name)
		v.Labels = append(v.Labels, or(sp.Label, sp.Name))
	}
	for _, st := range m.Steps {
		v.Steps = append(v.Steps, st.Name)
		v.StepLabels = append(v.StepLabels, or(st.Label, st.Name))
		if st.Law != nil || st.Above {
			v.Rates = append(v.Rates, or(st.Label, st.Name))
		}
	}
	v.Energies = m.Energies
	v.Catalyst = p.Catalyst
	v.RateOf = besideText(p.RateOf, v.Labels)
	v.Pair = [2]string{besideText(p.Pair[0], v.Labels), besideText(p.Pair[1], v.Labels)}
	temperatures := atOr(s.Temperature, m)
	p.Brief = nominal != nil && large(len(m.States()), len(temperatures))
	if where != nil {
		temperatures = []unit.Quantity{{SI: where.kelvin, Unit: celsius}}
	}
	for _, T := range temperatures {
		at := controlPoint{Condition: ConditionText(T), T: T, Assumes: m.Held(T.SI)}
		if where != nil {
			at.Condition = where.condition
			n, err := m.At(T.SI)
			if err != nil {
				return v, asProblems(err, "")
			}
			if p.Total, err = control.Totals(n, p.Held, where.c, p.Catalyst); err != nil {
				return v, s.faults(m, &p, err)
			}
		}
		for i := range p.Held {
			if len(v.At) == 0 && (!math.IsNaN(p.Held[i]) || !math.IsNaN(p.Total[i])) {
				v.Stated = append(v.Stated, i)
			}
		}
		r, err := control.Analyse(ctx, m, T.SI, p)
		var pe *control.PointError
		switch {
		case errors.As(err, &pe) && nominal != nil:
			at = nominal.At[len(v.At)]
			at.Why = pe.Msg
		case err != nil:
			return v, s.faults(m, &p, err)
		default:
			if nominal != nil {
				r.Resting = nominal.At[len(v.At)].Resting
			}
			at.keep(r, v.Labels)
		}
		v.At = append(v.At, at)
	}
	return v, nil
}

// faults puts an error of the core at the key that mends it.
func (s *controlSource) faults(m *kinetics.Mechanism, p *control.Problem, err error) error {
	var pe *control.PointError
	if !errors.As(err, &pe) {
		return asProblems(err, "")
	}
	path := []string{"at"}
	if s.Run != "" {
		path = []string{"steady"}
		if s.Steady == nil {
			path = []string{"run"}
		}
	}
	switch {
	case errors.Is(err, control.ErrCycle):
		path = []string{"turnover"}
	case errors.Is(err, control.ErrNoRate):
		path = []string{"rate-of"}
	}
	fix := pe.Fix
	if s.Run != "" && errors.Is(err, control.ErrNotStated) && s.Catalyst != "" {
		fix += ": list them in steady, " + steadyExample(m, p)
	}
	return fault.Problems{problem(path, pe.Msg, fix)}
}
