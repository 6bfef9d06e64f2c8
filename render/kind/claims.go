package kind

import (
	"context"
	"errors"
	"fmt"
	"math"
	"strconv"
	"strings"

	"saddlebook/content/fault"
	"saddlebook/content/schema"
	"saddlebook/kinetics/unit"
	"saddlebook/render/paper"
)

func init() {
	Register(Kind[claimsSource, claimsValue]{
		Name:    "claims",
		Doc:     "Conclusions that must hold: a reading, a bound, and how likely it must be.",
		Method:  "Claims are held against the results; their probability is the share of fixed low-discrepancy draws of the stated errors (4096, or 512 of a run) in which they hold.",
		Version: 2,
		Fields: []schema.Field{
			{Key: "claim", Doc: "the conclusions, each with at-least, at-most or both", Type: schema.Tables, Required: true,
				Example: `[{ says = "Cold keeps A.", reading = "limits/kinetic-ratio/A:B", at-least = "15:1" }]`, Fields: []schema.Field{
					{Key: "says", Doc: "the conclusion in words", Type: schema.Text, Required: true, Example: "Cold keeps the 1,2-adduct above 15:1."},
					{Key: "reading", Doc: "the result it rests on", Type: schema.Text, Required: true, Wants: "result", Example: "limits/kinetic-ratio/A:B@-78 °C"},
					{Key: "at-least", Doc: "the lower bound", Type: schema.Bounds, Example: `"15:1"`},
					{Key: "at-most", Doc: "the upper bound", Type: schema.Bounds, Example: `"22 kcal/mol"`},
					{Key: "probability", Doc: "how likely it must be under the stated errors, from 0 to 1", Type: schema.Real, Example: "0.9"},
				}},
		},
		Refs:     (*claimsSource).refs,
		Check:    (*claimsSource).check,
		Compute:  func(_ context.Context, s *claimsSource, in Inputs) (claimsValue, error) { return s.compute(in) },
		Findings: func(_ *claimsSource, v claimsValue) []Finding { return v.Findings },
		Present: func(s *claimsSource, v claimsValue, sheet *paper.Sheet) {
			var rows []paper.ClaimRow
			for _, f := range v.Findings {
				rows = append(rows, paper.ClaimRow{Says: f.Says, Reading: f.Reading, Value: f.Value, Bound: f.Bound, Margin: f.Margin,
					Probability: f.Probability, Asked: f.Asked, Standing: string(f.Standing), Why: f.Why, Anchor: f.Anchor})
			}
			sheet.Claims(rows)
		},
	})
}

type claimsSource struct {
	Claim []claimSource `key:"claim"`
}

type claimSource struct {
	Says        string        `key:"says"`
	Reading     string        `key:"reading"`
	AtLeast     *schema.Bound `key:"at-least"`
	AtMost      *schema.Bound `key:"at-most"`
	Probability *float64      `key:"probability"`
}

type claimsValue struct{ Findings []Finding }

func (s *claimsSource) refs() []Ref {
	var out []Ref
	for i, c := range s.Claim {
		out = append(out, Ref{Target: c.Reading, Result: true, Path: claimPath(i, "reading")})
	}
	return out
}

func claimPath(i int, key ...string) []string {
	return append([]string{"claim", fmt.Sprint(i + 1)}, key...)
}

func (s *claimsSource) check() fault.Problems {
	var ps fault.Problems
	for i, c := range s.Claim {
		if c.AtLeast == nil && c.AtMost == nil {
			ps = append(ps, problem(claimPath(i), "the claim has no bound", "add at-least or at-most"))
		}
		if p := c.Probability; p != nil && !(*p > 0 && *p < 1) {
			ps = append(ps, problem(claimPath(i, "probability"), fmt.Sprintf("probability %g is not between 0 and 1", *p), "write a share such as 0.9"))
		}
	}
	return ps
}

func (s *claimsSource) compute(in Inputs) (claimsValue, error) {
	var v claimsValue
	var ps fault.Problems
	for i, c := range s.Claim {
		if c.AtLeast == nil && c.AtMost == nil {
			continue // told by check, or the bound itself is at fault
		}
		f, p, err := c.judge(i, in)
		if err != nil {
			return v, err
		}
		if p != nil {
			ps = append(ps, p)
		}
		if ps.Failed() {
			continue
		}
		v.Findings = append(v.Findings, f)
	}
	if len(ps) > 0 {
		return v, ps
	}
	return v, nil
}

// judge tests one claim against its result and, where energies have errors,
// against the draws.
func (c claimSource) judge(i int, in Inputs) (Finding, *fault.Problem, error) {
	f := Finding{Says: c.Says, Reading: c.Reading, Path: claimPath(i), Anchor: fmt.Sprintf("claim-%d", i+1)}
	r, err := in.Read(c.Reading)
	var remedy interface{ Remedy() string }
	switch {
	case errors.As(err, &remedy):
		return f, problem(claimPath(i, "reading"), err.Error(), remedy.Remedy()), nil
	case err != nil:
		return f, nil, err
	}
	if r.Value.Kind == Words {
		return f, problem(claimPath(i, "reading"), fmt.Sprintf("%q is a word, %q, and has no bounds", c.Reading, r.Value.Text), "name a result that is a number, such as position in place of character"), nil
	}
	low, high := math.Inf(-1), math.Inf(1)
	for _, b := range []struct {
		key   string
		bound *schema.Bound
		into  *float64
	}{{"at-least", c.AtLeast, &low}, {"at-most", c.AtMost, &high}} {
		if b.bound == nil {
			continue
		}
		x, bad := boundFor(r, b.bound)
		if bad != nil {
			bad.Path = claimPath(i, b.key)
			return f, bad, nil
		}
		*b.into = x
	}
	if low > high {
		return f, problem(claimPath(i, "at-most"), fmt.Sprintf("no value is at least %s and at most %s", c.AtLeast.Text, c.AtMost.Text), "exchange or widen the bounds"), nil
	}
	f.Bound = boundWords(r, c)
	if f.Value, err = printFor(r, c); err != nil {
		return f, nil, err
	}
	if r.Value.Kind == Nothing {
		f.Standing, f.Why = Undecided, "the result has no number: "+r.Value.Text
		f.Value = "no value"
		return f, nil, nil
	}
	x := r.Value.Value
	if r.Value.Kind == Endless {
		x = math.Inf(1)
	}
	f.Standing = Fails
	if x >= low && x <= high {
		f.Standing = Holds
	}
	if !math.IsInf(x, 0) {
		f.Margin = margin(r, x, low, high)
	}
	draws, err := in.Draws(c.Reading)
	if err != nil {
		return f, nil, err
	}
	c.weigh(&f, draws, low, high)
	if len(r.Assumes) > 0 {
		f.Why += "; it rests on this: " + strings.Join(r.Assumes, "; ")
	}
	return f, c.slowed(i, &f, draws, x >= low && x <= high, low, high), nil
}

// slowed warns where a claim would fare otherwise if the steps that are kept
// fast were ten times slower.
func (c claimSource) slowed(i int, f *Finding, d Draws, holds bool, low, high float64) *fault.Problem {
	if len(d.Fast) == 0 || holds == (d.Slowed >= low && d.Slowed <= high) {
		return nil
	}
	steps := "step " + d.Fast[0] + " is"
	if len(d.Fast) > 1 {
		steps = "steps " + listWords(d.Fast) + " are"
	}
	turn := "would fail"
	if !holds {
		turn = "would hold"
	}
	f.Why += fmt.Sprintf("; if %s ten times slower, it %s", steps, turn)
	return &fault.Problem{Path: claimPath(i), Severity: fault.Warning,
		Msg: fmt.Sprintf("this claim rests on how fast fast steps are: if %s ten times slower, it %s", steps, turn),
		Fix: "give each of them a rate of its own, with k or the energy of its transition state"}
}

// weigh adds the probability of a claim. Where two samplings exist the less
// favourable one counts.
func (c claimSource) weigh(f *Finding, d Draws, low, high float64) {
	least := math.Inf(1)
	var each []string // the probability under each sampling, for the reader to see both
	for _, one := range d.Cases {
		in := 0
		for _, x := range one.Values {
			if x >= low && x <= high { // false for NaN: a draw without a number does not hold
				in++
			}
		}
		p := float64(in) / float64(len(one.Values))
		least = min(least, p)
		each = append(each, fmt.Sprintf("%s with errors %s", probability(p), one.Case))
	}
	switch {
	case d.None != "":
		f.Why = d.None
	case len(d.Cases) == 0:
		f.Why = "nothing behind it has a ±"
	case len(d.Exact) > 0:
		f.Why = "these have no ±: " + listWords(d.Exact)
	default:
		f.Probability, f.Why = probability(least), strings.Join(each, ", ")
		if len(each) == 1 {
			f.Why = "errors " + d.Cases[0].Case.String()
		}
	}
	if c.Probability == nil {
		return
	}
	f.Asked = strconv.FormatFloat(100**c.Probability, 'g', 4, 64) + " %"
	if f.Standing == Holds && (f.Probability == "" || least < *c.Probability) {
		f.Standing = Undecided
	}
}

// probability prints a share of draws to the digits that they carry.
func probability(p float64) string {
	switch {
	case p > 0.995:
		return ">99 %"
	case p < 0.005:
		return "<1 %"
	}
	return unit.Fixed(100*p, 0) + " %"
}

// boundFor turns a bound into the base quantity of a result.
func boundFor(r Result, b *schema.Bound) (float64, *fault.Problem) {
	what, like := r.Unit.Dim.String(), r.Unit.Dim.Example()
	switch {
	case r.Form == unit.FormRatio:
		what, like = "a ratio", "15:1"
	case r.Unit.Symbol == "%":
		what, like = "a percentage", "90 %"
	case r.Unit.Dim == unit.None:
		what, like = "a number without a unit", "0.9"
	}
	fits := b.Quantity != nil && b.Quantity.Unit.Dim == r.Unit.Dim
	switch {
	case r.Form == unit.FormRatio:
		fits = b.Quantity == nil // 80 % of what is no ratio
	case b.Ratio:
		fits = false
	case b.Quantity == nil:
		fits = r.Unit.Dim == unit.None && (r.Unit.Symbol != "%" || math.Abs(b.Value) <= 1) // 90 was meant as 90 %
	}
	if !fits {
		fix := fmt.Sprintf("write it as in %q", like)
		if b.Quantity == nil && !b.Ratio && r.Unit.Symbol != "" {
			fix = fmt.Sprintf("write its unit, as in %q", b.Text+" "+r.Unit.Symbol)
		}
		return 0, problem(nil, fmt.Sprintf("%q cannot bound %q, which is %s", b.Text, r.Key.Local(), what), fix)
	}
	switch {
	case b.Quantity == nil:
		return b.Value, nil
	case r.Form == unit.FormRise: // 50 °C is then a difference, and no temperature
		return b.Quantity.SI - b.Quantity.Unit.Offset, nil
	}
	return b.Quantity.SI, nil
}

func boundWords(r Result, c claimSource) string {
	switch {
	case c.AtLeast != nil && c.AtMost != nil:
		return "at least " + c.AtLeast.Text + " and at most " + c.AtMost.Text
	case c.AtLeast != nil:
		return "at least " + c.AtLeast.Text
	}
	return "at most " + c.AtMost.Text
}

// printFor prints the value in the manner of the bound: a ratio bounded by
// 15:1 reads 21.7:1, and one bounded by 94:6 reads 96:4.
func printFor(r Result, c claimSource) (string, error) {
	bound := c.AtLeast
	if bound == nil {
		bound = c.AtMost
	}
	if r.Form == unit.FormRatio && !bound.Hundred() {
		return r.Print("n:1")
	}
	if bound.Quantity != nil && r.Value.Kind == Real && bound.Quantity.Unit.Symbol != r.Unit.Symbol && r.Form != unit.FormSpan {
		return r.Print(bound.Quantity.Unit.Symbol)
	}
	return r.Print("")
}

// margin is how far the value lies inside the nearer bound: a factor for what
// spans decades, a difference for the rest.
func margin(r Result, x, low, high float64) string {
	near := low
	if math.IsInf(low, 0) || high-x < x-low {
		near = high
	}
	switch r.Form {
	case unit.FormRatio, unit.FormRate, unit.FormSpan, unit.FormConstant, unit.FormMolar, unit.FormFactor:
		if x > 0 && near > 0 {
			f := x / near
			if near == high {
				f = near / x
			}
			return "factor " + unit.Digits(f, 2)
		}
	}
	d := x - near
	if near == high {
		d = near - x
	}
	switch {
	case r.Form == unit.FormPercent:
		return unit.Fixed(100*d, 1) + " points"
	case r.Unit.Dim == unit.Temperature:
		return unit.Print(d, kelvinUnit, unit.FormRise)
	}
	return r.PrintBound(d)
}
