package kind

import (
	"context"

	"saddlebook/content/fault"
	"saddlebook/content/schema"
	"saddlebook/kinetics"
	"saddlebook/kinetics/unit"
)

// runDraws is how many draws of the errors a run is computed for: each one is
// an integration.
const runDraws = 512

// runNoise is the relative error of a draw, ten times what its integration is
// asked for: errors of steps add up.
const runNoise = 10 * drawTolerance

func init() {
	Register(Kind[runSource, runValue]{
		Name:    "run",
		Doc:     "What one set of conditions gives: what is charged, the temperature programme, how long.",
		Method:  "Mass-action rate equations along the temperature programme, integrated with error control; the kinetic limit is the same run without the directions that consume a listed product.",
		Version: 2,
		Fields: []schema.Field{
			{Key: "id", Doc: "the name by which readings and claims call this block", Type: schema.Text, Name: true, Required: true, Example: "cold"},
			usesMechanism,
			chargeField("what is charged at the start, by species", true),
			{Key: "basis", Doc: "the species that equiv, mol%, conversion and yields refer to: all of it that is charged, its doses included", Type: schema.Text, Wants: "species", Example: "R"},
			{Key: "programme", Doc: "holds and ramps in turn, a hold first; a ramp goes over a time, or at a rate such as 0.5 K/min", Type: schema.Words, Required: true, Example: `["2 h at -78 °C", "ramp to 20 °C over 3 h", "12 h at 20 °C"]`},
			{Key: "products", Doc: "the products to compare; a product may be a sum of species", Type: schema.Groups, Wants: "species", Example: `{ syn = ["S1", "S2"], anti = "T" }`},
			{Key: "enantiomers", Doc: "two products, R and S: ee = (R - S)/(R + S), signed", Type: schema.Words, Wants: "product", Example: `["R", "S"]`},
			{Key: "report-at", Doc: "times from the start, or end", Type: schema.Words, Default: "the end", Example: `["30 min", "2 h", "end"]`},
			{Key: "doses", Doc: "what is added during the run; the volume counts as constant", Type: schema.Tables, Example: `[{ species = "X", amount = "0.5 equiv", from = "0 h", over = "2 h" }]`, Fields: []schema.Field{
				{Key: "species", Doc: "what is added", Type: schema.Text, Required: true, Wants: "species", Example: "X"},
				{Key: "amount", Doc: "how much in all, per volume of the run", Type: schema.Amount, Dims: []unit.Dim{unit.Concentration, unit.Equivalent}, Required: true, Example: "0.5 equiv"},
				{Key: "at", Doc: "when, for all of it at once", Type: schema.Amount, Dims: []unit.Dim{unit.Time}, Example: "1 h"},
				{Key: "from", Doc: "when it begins, for an even addition", Type: schema.Amount, Dims: []unit.Dim{unit.Time}, Default: "the start", Example: "0 h"},
				{Key: "over", Doc: "how long an even addition takes", Type: schema.Amount, Dims: []unit.Dim{unit.Time}, Example: "2 h"},
			}},
			{Key: "removal", Doc: "what is taken away: at an instant (a quench), or steadily by first order (evaporation)", Type: schema.Tables, Example: `[{ species = "X", at = "2 h", leaves = "1 %" }]`, Fields: []schema.Field{
				{Key: "species", Doc: "what is taken away", Type: schema.Text, Required: true, Wants: "species", Example: "X"},
				{Key: "at", Doc: "when, for all of it at once", Type: schema.Amount, Dims: []unit.Dim{unit.Time}, Example: "2 h"},
				{Key: "leaves", Doc: "the share that an instant leaves", Type: schema.Amount, Dims: []unit.Dim{unit.None}, Default: "nothing", Example: "1 %"},
				{Key: "from", Doc: "when a steady removal begins", Type: schema.Amount, Dims: []unit.Dim{unit.Time}, Default: "the start", Example: "0 h"},
				{Key: "to", Doc: "when a steady removal ends", Type: schema.Amount, Dims: []unit.Dim{unit.Time}, Default: "the end", Example: "2 h"},
				{Key: "half-life", Doc: "how fast: the time in which half of it goes", Type: schema.Amount, Dims: []unit.Dim{unit.Time}, Example: "30 min"},
				{Key: "rate", Doc: "how fast: its rate constant", Type: schema.Amount, Dims: []unit.Dim{unit.RateConstant(1)}, Example: "4e-4 s-1"},
			}},
			{Key: "until", Doc: "what ends the run before its programme does: the first that is met", Type: schema.Tables, Example: `[{ conversion = "95 %" }, { yield = "A", reaches = "90 %" }]`, Fields: []schema.Field{
				{Key: "conversion", Doc: "the share of the basis that is gone", Type: schema.Bounds, Example: "95 %"},
				{Key: "yield", Doc: "the product whose yield is watched", Type: schema.Text, Wants: "product", Example: "A"},
				{Key: "amount", Doc: "the species whose concentration is watched", Type: schema.Text, Wants: "species", Example: "R"},
				{Key: "ratio", Doc: "the two products whose ratio is watched", Type: schema.Text, Example: "A:B"},
				{Key: "reaches", Doc: "the value that ends the run, for a yield, an amount or a ratio", Type: schema.Bounds, Example: "90 %"},
			}},
			{Key: "basis-units", Doc: "how many molecules of the basis one molecule of a product is made of, where the steps do not tell", Type: schema.AmountsByName, Dims: []unit.Dim{unit.None}, Wants: "product", Example: "{ D = 2 }"},
			{Key: "density", Doc: "of the mixture, for heat", Type: schema.Amount, Dims: []unit.Dim{unit.Density}, Example: "0.87 g/mL"},
			{Key: "heat-capacity", Doc: "of the mixture, per mass, for heat", Type: schema.Amount, Dims: []unit.Dim{unit.SpecificHeat}, Example: "1.7 J/g/K"},
			{Key: "caption", Doc: "what the figure shows", Type: schema.Text, Example: "Cold, then warm"},
		},
		ID:    func(s *runSource) string { return s.ID },
		Refs:  func(s *runSource) []Ref { return mechanismRef(s.Mechanism) },
		Check: (*runSource).check,
		Compute: func(ctx context.Context, s *runSource, in Inputs) (runValue, error) {
			m, err := in.Mechanism(s.Mechanism)
			if err != nil {
				return runValue{}, err
			}
			r, err := s.ready(m, fine)
			if err != nil {
				return runValue{}, err
			}
			v, err := r.simulate(ctx, m)
			if err != nil {
				return v, err
			}
			return v, v.doubts().Err()
		},
		Results: (*runSource).results,
		Gives: []Gift{
			{"conversion@TIME", "share of the basis charged, doses included, that is gone"},
			{"yield/PRODUCT@TIME", "share of the basis charged, doses included, that the product holds"},
			{"share/PRODUCT@TIME", "share of the product among the listed ones, by molecules"},
			{"ratio/A:B@TIME", "A over B, by molecules"},
			{"ee@TIME", "enantiomeric excess, signed"},
			{"control/A:B@TIME", "0 under kinetic, 1 under thermodynamic control"},
			{"kinetic-share/A:B@TIME", "share of A among A and B at the kinetic limit of the same run"},
			{"equilibrium-share/A:B@TIME", "share of A among A and B at equilibrium at the temperature of that time"},
			{"mass-balance@TIME", "basis left and in the listed products, as a share of the basis charged so far"},
			{"amount/SPECIES@TIME", "concentration"},
			{"temperature@TIME", "temperature"},
			{"changeover/A:B", "when control first passes 0.5"},
			{"changeover-temperature/A:B", "the temperature then"},
			{"even/A:B", "when the ratio of A to B first is 1"},
			{"even-temperature/A:B", "the temperature then"},
			{"unreacted-at-warming@TIME", "share of the basis charged that is unreacted when warming starts, at each such time"},
			{"peak-yield/PRODUCT", "highest share of all the basis charged that the product holds"},
			{"peak-time/PRODUCT", "when that is, if it is not the end"},
			{"end", "when the run ends"},
			{"ended-by", "what ends it"},
			{"adiabatic-rise", "rise of temperature if no heat is lost and the listed steps give the most they can"},
			{"rise-of-run", "rise of temperature if no heat is lost, by what the run sets free by its end"},
			{"peak-heat-rate", "highest rate at which heat is set free, but for the first millionth of the programme after its start and after whatever begins, ends or jumps"},
			{"peak-heat-rate-time", "when that is"},
			{"heat-left@TIME", "the most heat that what is in the pot can still give, per volume"},
			{"heat-rate@TIME", "heat set free, per volume and time"},
		},
		Present: (*runSource).present,
		Sampler: func(ctx context.Context, s *runSource, in Inputs) (Sampler, error) { return s.sampler(ctx, in) },
	})
}

type runSource struct {
	ID           string               `key:"id"`
	Mechanism    string               `key:"mechanism"`
	Charge       []schema.NamedAmount `key:"charge"`
	Basis        string               `key:"basis"`
	Programme    []string             `key:"programme"`
	Products     []schema.Group       `key:"products"`
	Enantiomers  []string             `key:"enantiomers"`
	ReportAt     []string             `key:"report-at"`
	Doses        []doseSource         `key:"doses"`
	Removal      []removalSource      `key:"removal"`
	Until        []untilSource        `key:"until"`
	BasisUnits   []schema.NamedAmount `key:"basis-units"`
	Density      *unit.Quantity       `key:"density"`
	HeatCapacity *unit.Quantity       `key:"heat-capacity"`
	Caption      string               `key:"caption"`
}

type doseSource struct {
	Species string         `key:"species"`
	Amount  unit.Quantity  `key:"amount"`
	At      *unit.Quantity `key:"at"`
	From    *unit.Quantity `key:"from"`
	Over    *unit.Quantity `key:"over"`
}

type removalSource struct {
	Species  string         `key:"species"`
	At       *unit.Quantity `key:"at"`
	Leaves   *unit.Quantity `key:"leaves"`
	From     *unit.Quantity `key:"from"`
	To       *unit.Quantity `key:"to"`
	HalfLife *unit.Quantity `key:"half-life"`
	Rate     *unit.Quantity `key:"rate"`
}

type untilSource struct {
	Conversion *schema.Bound `key:"conversion"`
	Yield      string        `key:"yield"`
	Amount     string        `key:"amount"`
	Ratio      string        `key:"ratio"`
	Reaches    *schema.Bound `key:"reaches"`
}

// check says what is wrong whatever the mechanism.
func (s *runSource) check() fault.Problems {
	prog, ps := readProgramme(s.Programme)
	if len(s.Programme) == 0 || ps.Failed() {
		return ps // without an end nothing else can be told
	}
	_, more := readTimes(s.ReportAt, prog.end())
	ps = append(ps, more...)
	for i, d := range s.Doses {
		_, _, more := d.when(i, prog.end())
		ps = append(ps, more...)
	}
	for i, r := range s.Removal {
		_, more := r.how(i, prog.end())
		ps = append(ps, more...)
	}
	ps = append(ps, s.checkEnantiomers()...)
	return append(ps, s.checkHeat()...)
}

// sampler draws the energies of the mechanism.
func (s *runSource) sampler(ctx context.Context, in Inputs) (Sampler, error) {
	m, err := in.Mechanism(s.Mechanism)
	if err != nil {
		return Sampler{}, err
	}
	r, err := s.ready(m, coarse)
	if err != nil {
		return Sampler{}, err
	}
	return Sampler{Mechanism: m, Temperatures: r.plan.prog.extremes(), Draws: runDraws, Noise: runNoise, Results: func(m *kinetics.Mechanism) ([]Result, error) {
		v, err := r.simulate(ctx, m)
		if err != nil {
			return nil, err
		}
		return s.results(v), nil
	}}, nil
}
