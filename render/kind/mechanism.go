package kind

import (
	"context"
	"errors"
	"fmt"
	"math"

	"saddlebook/content/fault"
	"saddlebook/content/schema"
	"saddlebook/kinetics"
	"saddlebook/kinetics/rate"
	"saddlebook/kinetics/unit"
)

func init() {
	Register(Kind[mechanismSource, mechanismValue]{
		Name:    "mechanism",
		Doc:     "Species and steps under one id, with the free energies that say which way and how fast.",
		Method:  "Rate constants by the Eyring equation with the exact constants of 2019, or as the author states them; equilibrium constants from the free energies or as stated, so that every reversible step and every cycle obeys detailed balance; positions by the Marcus relation.",
		Version: 2,
		Fields:  mechanismFields,
		ID:      func(s *mechanismSource) string { return s.ID },
		Files: func(s *mechanismSource) []string {
			if s.Table == nil {
				return nil
			}
			return []string{s.Table.File}
		},
		Compute: func(_ context.Context, s *mechanismSource, in Inputs) (mechanismValue, error) {
			m, problems := s.build(in)
			if problems.Failed() {
				return mechanismValue{}, problems
			}
			v, err := s.tabulate(m)
			if err != nil {
				return v, err
			}
			if len(problems) > 0 {
				return v, problems
			}
			return v, nil
		},
		Results: (*mechanismSource).results,
		Gives: []Gift{
			{"barrier/STEP@T", "free energy of activation, forward"},
			{"barrier-back/STEP@T", "free energy of activation of the return"},
			{"reaction-energy/STEP@T", "free energy of reaction"},
			{"rate/STEP@T", "rate constant, forward"},
			{"rate-back/STEP@T", "rate constant of the return"},
			{"equilibrium-constant/STEP@T", "forward over back rate constant"},
			{"half-life/STEP@T", "half-life of the reactant; for more than one molecule, with the others at half-life-at"},
			{"half-life-back/STEP@T", "the same for the return"},
			{"tunnelling/STEP@T", "factor of tunnelling within the rate constants, where the step counts it"},
			{"diffusion-factor/STEP@T", "what diffusion leaves of the rate constants, where the step is limited by it"},
			{"zero-point/STATE@T", "energy of the zero point, of a state given by E and frequencies"},
			{"enthalpy/STATE@T", "its enthalpy: E, zero point and thermal part"},
			{"entropy/STATE@T", "its entropy at its standard state"},
			{"position/STEP@T", "position of the transition state between reactants (0) and products (1)"},
			{"character/STEP@T", "early, central or late"},
			{"racemisation/STEP@T", "rate constant of racemisation of a step between enantiomers: twice its rate constant"},
			{"racemisation-half-life/STEP@T", "time in which the ee halves by that step"},
			{"ee-loss/STEP@T", "time in which one per cent of the ee is lost by that step"},
		},
		Present: (*mechanismSource).present,
		Sampler: func(_ context.Context, s *mechanismSource, in Inputs) (Sampler, error) {
			m, problems := s.build(in)
			if problems.Failed() {
				return Sampler{}, problems
			}
			return Sampler{Mechanism: m, Temperatures: kelvins(s.temperatures()), Results: func(m *kinetics.Mechanism) ([]Result, error) {
				v, err := s.tabulate(m)
				if err != nil {
					return nil, err
				}
				return s.results(v), nil
			}}, nil
		},
	})
}

type mechanismSource struct {
	ID          string          `key:"id"`
	Title       string          `key:"title"`
	Energies    string          `key:"energies"`
	Temperature unit.Quantity   `key:"temperature"`
	At          []unit.Quantity `key:"at"`
	Standard    string          `key:"standard"`
	Method      string          `key:"method"`
	HalfLifeAt  *unit.Quantity  `key:"half-life-at"`
	Enantiomers []string        `key:"enantiomers"`
	Viscosity   *unit.Quantity  `key:"viscosity"`
	LowModes    *lowModesSource `key:"low-modes"`
	Scale       *float64        `key:"frequency-scale"`
	Error       *errorSource    `key:"error"`
	Shared      []sharedSource  `key:"shared"`
	Table       *tableSource    `key:"table"`
	Species     []speciesSource `key:"species"`
	Step        []stepSource    `key:"step"`
}

type errorSource struct {
	Species       *unit.Quantity `key:"species"`
	Step          *unit.Quantity `key:"step"`
	SharedSpecies *unit.Quantity `key:"shared-species"`
	SharedStep    *unit.Quantity `key:"shared-step"`
}

type sharedSource struct {
	Of []string      `key:"of"`
	SD unit.Quantity `key:"sd"`
}

var mechanismFields = []schema.Field{
	{Key: "id", Doc: "the name by which other blocks and readings call this mechanism", Type: schema.Text, Name: true, Required: true, Example: "addition"},
	{Key: "title", Doc: "the heading of its table", Type: schema.Text, Example: "Addition to enone 3"},
	{Key: "energies", Doc: "the unit of bare energies", Type: schema.Text, OneOf: []string{"kcal/mol", "kJ/mol", "eV", "Eh", "cm-1"}, Default: "kcal/mol"},
	{Key: "temperature", Doc: "the temperature at which given G values hold", Type: schema.Amount, Dims: []unit.Dim{unit.Temperature}, Required: true, Example: "25 °C"},
	{Key: "at", Doc: "the temperatures of the table", Type: schema.Amounts, Dims: []unit.Dim{unit.Temperature}, Default: "the mechanism's own temperature", Example: "25 °C"},
	{Key: "standard", Doc: "the standard state of the given energies; the program works at 1 M", Type: schema.Text, OneOf: []string{"1 M", "1 atm", "1 bar"}, Default: "1 M"},
	{Key: "method", Doc: "where the energies come from, printed as provenance", Type: schema.Text, Example: "functional/basis, solvent model"},
	{Key: "half-life-at", Doc: "the concentration of the other molecules for half-lives of steps of more than one", Type: schema.Amount, Dims: []unit.Dim{unit.Concentration}, Default: "1 M", Example: "0.2 M"},
	{Key: "enantiomers", Doc: "two species that mirror each other; a step between them racemises", Type: schema.Words, Wants: "species", Example: `["R", "S"]`},
	{Key: "viscosity", Doc: "of the solvent, for the diffusion limit", Type: schema.Amount, Dims: []unit.Dim{unit.Viscosity}, Default: "1 mPa s", Example: "0.6 mPa s"},
	lowModesField,
	{Key: "frequency-scale", Doc: "factor on the frequencies of every state", Type: schema.Real, Default: "1", Example: "0.97"},
	{Key: "error", Doc: "standard deviations where a state gives none of its own", Type: schema.Table, Fields: []schema.Field{
		{Key: "species", Doc: "own error of each species", Type: schema.Amount, Dims: []unit.Dim{unit.MolarEnergy}, Bare: "@energies", Example: "0.5 kcal/mol"},
		{Key: "step", Doc: "own error of each transition state, not of a stated rate", Type: schema.Amount, Dims: []unit.Dim{unit.MolarEnergy}, Bare: "@energies", Example: "0.8 kcal/mol"},
		{Key: "shared-species", Doc: "error that all species have in common", Type: schema.Amount, Dims: []unit.Dim{unit.MolarEnergy}, Bare: "@energies", Example: "1 kcal/mol"},
		{Key: "shared-step", Doc: "error that all transition states have in common, stated rates apart", Type: schema.Amount, Dims: []unit.Dim{unit.MolarEnergy}, Bare: "@energies", Example: "1.5 kcal/mol"},
	}},
	{Key: "shared", Doc: "errors that the named states have in common", Type: schema.Tables, Fields: []schema.Field{
		{Key: "of", Doc: "species and steps", Type: schema.Words, Required: true, Wants: "state", Example: `["TSa", "TSb"]`},
		{Key: "sd", Doc: "the common standard deviation", Type: schema.Amount, Dims: []unit.Dim{unit.MolarEnergy}, Bare: "@energies", Required: true, Example: "2 kcal/mol"},
	}},
	{Key: "table", Doc: "a CSV file beside the note with a row for each state: columns name, optional reaction, label, source and formula, and the columns to add up", Type: schema.Table, Fields: []schema.Field{
		{Key: "file", Doc: "the file", Type: schema.Text, Required: true, Example: "energies.csv"},
		{Key: "sum", Doc: "the columns whose sum is G", Type: schema.Words, Required: true, Example: `["E", "Gcorr", "Gsolv"]`},
		{Key: "unit", Doc: "the unit of these columns", Type: schema.Text, OneOf: []string{"kcal/mol", "kJ/mol", "eV", "Eh", "cm-1"}, Default: "the unit of bare energies"},
	}},
	{Key: "species", Doc: "the minima, by name; one without an energy follows from the constants that steps state", Type: schema.Named, Fields: append(energyFields(), []schema.Field{
		{Key: "forms", Doc: "how many indistinct forms the species stands for (2 for a racemate): G - RT ln n", Type: schema.Whole, Default: "1"},
		{Key: "formula", Doc: "composition and charge; with it every step must balance", Type: schema.Text, Example: "C6H10O"},
	}...)},
	{Key: "step", Doc: "the elementary steps, by the name of their transition state", Type: schema.Named, Fields: stepFields()},
}

// mechanismValue is what a mechanism block computes: the model for other
// blocks, and its steps at each temperature of the table.
type mechanismValue struct {
	Model *kinetics.Mechanism
	Steps [][]stepValue // by temperature, by step
	Held  [][]string    // by temperature, by step: what was held constant, and its price; "" if nothing
	Exact []string      // states without an error of their own, when others have one
	// Molecules is the thermochemistry of the states given by E and frequencies,
	// by temperature.
	Molecules [][]moleculeValue
}

// Mechanism gives the model to the blocks that name this one.
func (v mechanismValue) Mechanism() *kinetics.Mechanism { return v.Model }

type stepValue struct {
	Barrier                          float64  // J/mol
	BarrierBack, Reaction            *float64 // J/mol; nil: not known
	LnK                              *float64 // K itself may be beyond a float64; nil: not known
	Rate, RateBack                   float64
	HalfLife, HalfLifeBack           float64  // s; 0: none; below 0: longer than any time
	Position                         *float64 // nil: no barrier either way
	Tunnelling, Limit                float64  // factors within the rates, 1 where none is counted
	Molecules, MoleculesBack, Change int
}

// tabulate computes the steps at every temperature asked for.
func (s *mechanismSource) tabulate(m *kinetics.Mechanism) (mechanismValue, error) {
	v := mechanismValue{Model: m}
	others := 1.0
	if s.HalfLifeAt != nil {
		others = s.HalfLifeAt.SI
	}
	for _, T := range s.temperatures() {
		n, err := m.At(T.SI)
		if err != nil {
			return v, asProblems(err, "step")
		}
		var rows []stepValue
		for _, r := range n.Reactions {
			row := stepValue{Barrier: r.Barrier, BarrierBack: number(r.BarrierBack), Reaction: number(r.DeltaG), LnK: number(-r.DeltaG / (rate.R * T.SI)), Rate: finite(r.Forward), RateBack: finite(r.Back),
				Tunnelling: r.Tunnelling, Limit: r.LimitFactor, Molecules: kinetics.Molecules(r.From), MoleculesBack: kinetics.Molecules(r.To)}
			row.Change = row.MoleculesBack - row.Molecules
			row.HalfLife = stored(r.HalfLife(false, others))
			if r.Returns {
				row.HalfLifeBack = stored(r.HalfLife(true, others))
			}
			row.Position = number(r.Position)
			rows = append(rows, row)
		}
		v.Steps = append(v.Steps, rows)
		held := make([]string, len(m.Steps))
		for j := range m.Steps {
			held[j] = m.HeldStep(j, T.SI)
		}
		v.Held = append(v.Held, held)
		v.Molecules = append(v.Molecules, contributions(m, T.SI))
	}
	if m.HasErrors() {
		v.Exact = m.ExactStates()
	}
	return v, nil
}

func (s *mechanismSource) results(v mechanismValue) []Result {
	var out []Result
	energy := unit.Must(or(s.Energies, "kcal/mol"), unit.MolarEnergy)
	for i, T := range s.temperatures() {
		condition := ConditionText(T)
		for j, st := range v.Model.Steps {
			row := v.Steps[i][j]
			key := func(quantity string) Key {
				return Key{ID: s.ID, Quantity: quantity, Item: st.Name, Condition: condition}
			}
			assumes := lawAssumes(st)
			if h := v.Held[i][j]; h != "" {
				assumes = append(assumes, h)
			}
			add := func(quantity string, x float64, u unit.Unit, f unit.Form, more ...string) {
				out = append(out, Result{Key: key(quantity), Value: Value(x, beyond(x)), Unit: u, Form: f, Assumes: append(assumes[:len(assumes):len(assumes)], more...)})
			}
			add("barrier", row.Barrier, energy, unit.FormEnergy)
			if st.Returns {
				add("barrier-back", told(row.BarrierBack), energy, unit.FormEnergy)
			}
			add("reaction-energy", told(row.Reaction), energy, unit.FormEnergy)
			add("rate", row.Rate, rateUnit(row.Molecules), unit.FormRate)
			if st.Returns {
				add("rate-back", row.RateBack, rateUnit(row.MoleculesBack), unit.FormRate)
				add("equilibrium-constant", math.Exp(told(row.LnK)), constantUnit(row.Change), unit.FormConstant)
			}
			if st.Tunnelling != nil {
				add("tunnelling", row.Tunnelling, plain, unit.FormFactor)
			}
			if st.Limited {
				add("diffusion-factor", row.Limit, plain, unit.FormFactor)
			}
			if row.HalfLife != 0 {
				add("half-life", lifetime(row.HalfLife), seconds, unit.FormSpan, s.halfLifeNote(row.Molecules)...)
			}
			if s.racemises(v.Model, st) {
				note := "racemisation is twice as fast as the exchange of the enantiomers, since each exchange undoes two molecules' worth of ee"
				add("racemisation", 2*row.Rate, rateUnit(1), unit.FormRate, note)
				add("racemisation-half-life", rate.HalfLife(2*row.Rate), seconds, unit.FormSpan, note)
				add("ee-loss", -math.Log(0.99)/(2*row.Rate), seconds, unit.FormSpan, note)
			}
			if row.HalfLifeBack != 0 {
				add("half-life-back", lifetime(row.HalfLifeBack), seconds, unit.FormSpan, s.halfLifeNote(row.MoleculesBack)...)
			}
			var note []string
			if row.Change != 0 {
				note = []string{"the number of molecules changes in this step, so its position depends on the standard state of 1 M"}
			}
			word, none := rate.PositionWord(told(row.Position)), "none"
			if row.Reaction == nil {
				word, none = "not known", "not known"
			}
			chi := Result{Key: key("position"), Value: Value(told(row.Position), none), Unit: plain, Form: unit.FormPosition, Assumes: append(assumes[:len(assumes):len(assumes)], note...)}
			out = append(out, chi, Result{Key: key("character"), Value: Number{Kind: Words, Text: word}, Assumes: chi.Assumes})
		}
		out = append(out, s.moleculeResults(v, i, T)...)
	}
	return out
}

// number keeps a NaN out of JSON; told takes it back.
func number(x float64) *float64 {
	if math.IsNaN(x) || math.IsInf(x, 0) {
		return nil
	}
	return &x
}

func told(x *float64) float64 {
	if x == nil {
		return math.NaN()
	}
	return *x
}

// stored keeps a half-life in a form that JSON can hold; lifetime takes it back.
func stored(life float64) float64 {
	if math.IsInf(life, 0) || math.IsNaN(life) {
		return -1
	}
	return life
}

func lifetime(life float64) float64 {
	if life < 0 {
		return math.Inf(1)
	}
	return life
}

// finite keeps a rate within what JSON can hold.
func finite(k float64) float64 { return math.Min(k, math.MaxFloat64) }

// beyond is what stands in the place of a value that is no number.
func beyond(x float64) string {
	if math.IsInf(x, 0) {
		return "beyond any number"
	}
	return "not known"
}

// racemises tells whether a step turns one enantiomer into the other.
func (s *mechanismSource) racemises(m *kinetics.Mechanism, st kinetics.Step) bool {
	if len(s.Enantiomers) != 2 || !st.Returns || kinetics.Molecules(st.From) != 1 || kinetics.Molecules(st.To) != 1 {
		return false
	}
	from, to := m.Species[st.From[0].Species].Name, m.Species[st.To[0].Species].Name
	return from == s.Enantiomers[0] && to == s.Enantiomers[1] || from == s.Enantiomers[1] && to == s.Enantiomers[0]
}

func (s *mechanismSource) halfLifeNote(molecules int) []string {
	if molecules == 1 {
		return nil
	}
	return []string{fmt.Sprintf("the half-life is that of the first reactant that is used up, with all others held at %s; where several molecules of it react, from that concentration to half of it", s.others())}
}

func (s *mechanismSource) others() string {
	if s.HalfLifeAt == nil {
		return "1 M"
	}
	return s.HalfLifeAt.String()
}

// rateUnit is the unit of a rate constant for a step of that many molecules.
func rateUnit(molecules int) unit.Unit { return rateUnits[molecules-1] }

// constantUnit is the unit of an equilibrium constant: M to the change of
// molecules.
func constantUnit(change int) unit.Unit { return constantUnits[change] }

// asProblems turns an error of the core into problems at the states it names.
func asProblems(err error, section string) error {
	var le *kinetics.LimitError
	if errors.As(err, &le) {
		return fault.Problems{problem(nil, le.Msg, le.Fix)}
	}
	var cs kinetics.Complaints
	if !errors.As(err, &cs) {
		return err
	}
	var ps fault.Problems
	for _, c := range cs {
		p := &fault.Problem{Severity: fault.Error, Msg: c.Msg, Fix: c.Fix}
		if section != "" && c.State != "" {
			p.Path = []string{section, c.State}
		}
		ps = append(ps, p)
	}
	return ps
}
