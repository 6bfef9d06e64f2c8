package kind

import (
	"fmt"
	"math"
	"strings"

	"saddlebook/kinetics"
	"saddlebook/kinetics/control"
	"saddlebook/kinetics/unit"
)

// controlValue is what decides, at every temperature.
type controlValue struct {
	Names, Labels     []string // species
	Steps, StepLabels []string
	RateOf            string // the sum, in labels
	Pair              [2]string
	Energies          string   // unit that the mechanism gives energies in
	Rates             []string // labels of the steps with a stated rate or barrier
	Stated            []int    // species with a stated concentration or total
	Catalyst          int      // species; -1: none
	At                []controlPoint
}

type controlPoint struct {
	Condition string // as keys have it
	T         unit.Quantity
	Why       string // why there are no numbers; only in a draw

	C       []orNone // by species, mol/L
	Free    []bool
	Total   []bool // by species: what is stated is a total
	Stated  []orNone
	Rate    orNone
	Ratio   orNone
	States  []controlState // species, then steps
	Orders  []orNone       // by species
	Ea      orNone
	NoEa    string
	Resting int
	Counted int      // species whose total Shares are of; −1: none
	Shares  []orNone // by species
	Turns   orNone   // product per catalyst, 1/s
	Cycle   *controlCycle
	NoCycle string
	Assumes []string
}

type controlState struct {
	X, Factor, RatioX, RatioFactor orNone
	Raises                         []string
	WhyNot                         string
}

type controlCycle struct {
	Levels                             []controlLevel
	Steps                              []int
	Turn, PerTurn, Turns, Span, BySpan orNone
	OneWay, Backwards                  bool
	Pairs                              []control.Pair
	Partners                           []int
}

type controlLevel struct {
	State         int // species, then steps
	Step, Off     bool
	G             orNone
	Control, Rest orNone // Rest: share of the catalyst
	With          string
}

// keep takes a result over.
func (q *controlPoint) keep(r *control.Result, labels []string) {
	q.C, q.Free = orNones(r.C), r.Free
	n := len(r.C)
	q.Orders, q.Total, q.Stated = make([]orNone, n), make([]bool, n), make([]orNone, n)
	for i := range q.Orders {
		q.Orders[i], q.Stated[i] = orNone(math.NaN()), orNone(math.NaN())
	}
	for _, o := range r.Orders {
		q.Orders[o.Species], q.Total[o.Species], q.Stated[o.Species] = rounded(o.Order), o.Total, orNone(o.C)
	}
	q.Rate, q.Ratio = orNone(r.Rate), orNone(r.Ratio)
	for _, s := range r.States {
		q.States = append(q.States, controlState{X: rounded(s.X), Factor: orNone(s.Factor), RatioX: rounded(s.RatioX), RatioFactor: orNone(s.RatioFactor), Raises: s.Raises, WhyNot: s.WhyNot})
	}
	q.Ea, q.NoEa = orNone(r.ActivationEnergy), r.NoActivationEnergy
	q.Resting, q.Counted, q.Shares, q.Turns, q.NoCycle = r.Resting, r.Counted, orNones(r.Shares), orNone(r.Turnover), r.NoCycle
	if r.Cycle == nil {
		return
	}
	c := r.Cycle
	q.Cycle = &controlCycle{Steps: c.Steps, Turn: orNone(c.Turn), PerTurn: orNone(c.PerTurn), Turns: orNone(c.Turns), Span: orNone(c.Span), BySpan: orNone(c.SpanTurns),
		OneWay: c.OneWay, Backwards: c.Backwards, Pairs: c.Pairs, Partners: c.Partners}
	for _, l := range c.Levels {
		k := controlLevel{State: l.State, Step: l.Step, Off: l.Off, G: orNone(l.G), Control: orNone(l.Control), Rest: orNone(l.Share), With: besideText(l.With, labels)}
		if l.Step {
			k.State += n
		}
		q.Cycle.Levels = append(q.Cycle.Levels, k)
	}
}

// share is how much of the total that counts it is in a species.
func (q *controlPoint) share(species int) orNone {
	if species < 0 || species >= len(q.Shares) {
		return none()
	}
	return q.Shares[species]
}

// besideText words what stands beside a level: "S + 2 X", "P less L".
func besideText(with []kinetics.Term, labels []string) string {
	var there, less []string
	for _, t := range with {
		text := labels[t.Species]
		if n := max(t.N, -t.N); n > 1 {
			text = fmt.Sprintf("%d %s", n, text)
		}
		if t.N > 0 {
			there = append(there, text)
		} else {
			less = append(less, text)
		}
	}
	text := strings.Join(there, " + ")
	if len(less) > 0 {
		text = strings.TrimSpace(text + " less " + strings.Join(less, " + "))
	}
	return text
}

func none() orNone { return orNone(math.NaN()) }

// rounded takes the last digits off a degree or an order, which are rounding.
func rounded(x float64) orNone {
	if r := math.Round(x*1e10) / 1e10; r != 0 || math.IsNaN(r) {
		return orNone(r)
	}
	return 0 // and not −0
}
