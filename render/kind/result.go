package kind

import (
	"fmt"
	"math"
	"strings"

	"saddlebook/kinetics"
	"saddlebook/kinetics/spread"
	"saddlebook/kinetics/unit"
)

// NumberKind tells what a result's value is.
type NumberKind int

const (
	Real    NumberKind = iota // a number in base quantities
	Words                     // a word, such as "late"
	Nothing                   // no number, such as a position that does not exist
	Endless                   // an infinite ratio: null in data, beyond any bound
)

// A Number is the value of a result: a real number, words, or nothing (with
// the words that stand in its place).
type Number struct {
	Value float64
	Text  string
	Kind  NumberKind
}

// Value returns a real number. A NaN or an infinity becomes nothing, since no
// result may carry one; text says what stands in its place.
func Value(x float64, text string) Number {
	if math.IsNaN(x) || math.IsInf(x, 0) {
		return Number{Kind: Nothing, Text: text}
	}
	return Number{Value: x}
}

// A Result is one computed value.
type Result struct {
	Key       Key
	Value     Number
	Unit      unit.Unit // the unit it is printed in
	Form      unit.Form // how it is printed
	Intervals []spread.Interval
	Low, High *float64 // 5 and 95 %: reach over all of Intervals
	Assumes   []string
}

// Widest sets Low and High to reach over all intervals: where two samplings
// exist the less favourable end of each counts.
func (r *Result) Widest() {
	r.Low, r.High = nil, nil
	for _, i := range r.Intervals {
		if low := i.Low; r.Low == nil || low < *r.Low {
			r.Low = &low
		}
		if high := i.High; r.High == nil || high > *r.High {
			r.High = &high
		}
	}
}

// Print writes the value with the digits it deserves and its unit. in is the
// unit asked for by a reading, or "". A ratio can be asked for "in n:1".
func (r Result) Print(in string) (string, error) {
	u, form := r.Unit, r.Form
	if in != "" {
		switch {
		case r.Value.Kind == Words:
			return "", &unit.Error{Msg: fmt.Sprintf("%q is a word and has no unit", r.Key.Local()), Fix: "leave out \"in " + in + "\""}
		case form == unit.FormRatio && in == "n:1":
			if r.Value.Kind == Nothing {
				return r.Value.Text, nil
			}
			return unit.RatioToOne(r.Value.Value), nil
		case form == unit.FormRatio && in == "number":
			form = unit.FormFactor
		case form == unit.FormRatio:
			return "", &unit.Error{Msg: fmt.Sprintf("%q is a ratio and has no unit", r.Key.Local()), Fix: "leave out \"in " + in + "\", or write \"in n:1\" or \"in number\""}
		default:
			asked, err := unit.Lookup(in, u.Dim)
			if err != nil {
				return "", err
			}
			u = asked
			switch form { // a fixed unit was asked for
			case unit.FormSpan:
				form = unit.FormPlain
			case unit.FormMolar:
				if r.Value.Kind == Real {
					return unit.PrintBare(r.Value.Value, u, form) + "\u00a0" + u.Symbol, nil
				}
			}
		}
	}
	if r.Value.Kind != Real {
		return r.Value.Text, nil
	}
	return unit.Print(r.Value.Value, u, form), nil
}

// PrintBound writes another value (an interval's end, a claim's bound) in the
// manner of this result.
func (r Result) PrintBound(base float64) string { return unit.Print(base, r.Unit, r.Form) }

// Interval words the 5 to 95 % interval, or "" if there is none.
func (r Result) Interval() string {
	if r.Low == nil || r.High == nil {
		return ""
	}
	return r.PrintBound(*r.Low) + " to " + r.PrintBound(*r.High)
}

// InUnit returns a base value in the result's own unit, for data files.
func (r Result) InUnit(base float64) float64 { return r.Unit.Of(base) }

// Standing is how a conclusion fares.
type Standing string

const (
	Holds     Standing = "holds"
	Fails     Standing = "fails"
	Undecided Standing = "undecided"
)

// A Finding is one conclusion, checked.
type Finding struct {
	Says, Reading      string
	Standing           Standing
	Value, Bound       string
	Margin             string
	Probability, Asked string   // "" if none
	Why                string   // a remark: what is missing, which sampling decided
	Path               []string // the key of the block where it stands
	Anchor             string   // the id of its element on the page
}

// A Sampler says how the results of a block answer to shifted energies.
type Sampler struct {
	Mechanism    *kinetics.Mechanism // whose energies are drawn
	Temperatures []float64           // K, at which the results are computed
	Draws        int                 // of each plan; 0: spread.Draws. Fewer where one draw costs much
	Noise        float64             // relative error of a draw: a narrower interval is none
	// Results computes the block's results for a mechanism with shifted
	// energies: the same keys in the same order at every call.
	Results func(*kinetics.Mechanism) ([]Result, error)
}

// listWords joins names for a sentence.
func listWords(names []string) string {
	switch len(names) {
	case 0:
		return ""
	case 1:
		return names[0]
	}
	return strings.Join(names[:len(names)-1], ", ") + " and " + names[len(names)-1]
}
