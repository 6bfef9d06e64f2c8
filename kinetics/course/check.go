package course

import (
	"errors"
	"fmt"
	"math"
	"slices"

	"saddlebook/kinetics"
)

// ErrRun marks a run that makes no sense as stated.
var ErrRun = errors.New("run")

func bad(format string, args ...any) error {
	return fmt.Errorf("%w: "+format, append([]any{ErrRun}, args...)...)
}

func finite(x float64) bool { return !math.IsNaN(x) && !math.IsInf(x, 0) }

func amount(x float64) bool { return x >= 0 && finite(x) }

func (r *Run) check(m *kinetics.Mechanism) error {
	n := len(m.Species)
	known := func(what string, i, s int) error {
		if s < 0 || s >= n {
			return bad("%s %d names species %d; give one from 0 to %d", what, i+1, s, n-1)
		}
		return nil
	}
	if len(r.Charge) != n {
		return bad("%d concentrations are charged for %d species; give one each", len(r.Charge), n)
	}
	for i, c := range r.Charge {
		if !amount(c) {
			return bad("%g mol/L of %s is charged; give a finite amount of 0 or more", c, m.Species[i].Name)
		}
	}
	if len(r.Programme) == 0 {
		return bad("the programme is empty; give at least one hold")
	}
	total := 0.0
	for i, l := range r.Programme {
		if !(l.To > 0) || !finite(l.To) || !(l.Lasts > 0) || !finite(l.Lasts) {
			return bad("leg %d of the programme is %g s to %g K; give a time and a temperature above zero", i+1, l.Lasts, l.To)
		}
		if i == 0 && l.Ramp {
			return bad("the programme begins with a ramp, which has no temperature to start from; begin with a hold")
		}
		next := total + l.Lasts
		if !finite(next) {
			return bad("the programme lasts longer than any number; shorten it")
		}
		if next == total {
			return bad("leg %d of the programme, %g s, is lost in rounding after %g s; leave it out", i+1, l.Lasts, total)
		}
		total = next
	}
	for i, d := range r.Doses {
		if err := known("dose", i, d.Species); err != nil {
			return err
		}
		if !amount(d.Amount) || !amount(d.From) || !amount(d.Lasts) {
			return bad("dose %d adds %g mol/L of %s from %g s over %g s; give finite numbers of 0 or more", i+1, d.Amount, m.Species[d.Species].Name, d.From, d.Lasts)
		}
	}
	for i, v := range r.Removals {
		if err := known("removal", i, v.Species); err != nil {
			return err
		}
		name := m.Species[v.Species].Name
		switch {
		case !amount(v.From) || !amount(v.K):
			return bad("removal %d of %s begins at %g s with %g 1/s; give finite numbers of 0 or more", i+1, name, v.From, v.K)
		case v.K == 0 && !(v.Leaves >= 0 && v.Leaves <= 1):
			return bad("removal %d leaves the fraction %g of %s; give one from 0 to 1", i+1, v.Leaves, name)
		case v.K > 0 && !(v.To >= v.From):
			return bad("removal %d of %s ends at %g s, before it begins at %g s; give times in order", i+1, name, v.To, v.From)
		}
	}
	return r.checkWanted(m)
}

func (r *Run) checkWanted(m *kinetics.Mechanism) error {
	n := len(m.Species)
	if r.Basis < -1 || r.Basis >= n {
		return bad("the basis is species %d; give one from 0 to %d, or -1", r.Basis, n-1)
	}
	if r.PerBasis != nil && len(r.PerBasis) != len(r.Products) {
		return bad("%d numbers of basis units for %d products; give one each or none", len(r.PerBasis), len(r.Products))
	}
	for i, p := range r.Products {
		if r.PerBasis != nil && !amount(r.PerBasis[i]) {
			return bad("product %s holds %g units of the basis; give a finite number of 0 or more", p.Name, r.PerBasis[i])
		}
		if len(p.Members) == 0 {
			return bad("product %s has no species; name at least one", p.Name)
		}
		for j, s := range p.Members {
			if s < 0 || s >= n {
				return bad("product %s names species %d; give one from 0 to %d", p.Name, s, n-1)
			}
			if slices.Contains(p.Members[:j], s) {
				return bad("product %s counts %s twice; name it once", p.Name, m.Species[s].Name)
			}
		}
	}
	for i, p := range r.Pairs {
		for _, x := range p {
			if x < 0 || x >= len(r.Products) {
				return bad("pair %d names product %d; give one from 0 to %d", i+1, x, len(r.Products)-1)
			}
		}
		a, b := r.Products[p[0]], r.Products[p[1]]
		for _, s := range a.Members {
			if slices.Contains(b.Members, s) {
				return bad("products %s and %s both count %s; products that are compared have no species in common", a.Name, b.Name, m.Species[s].Name)
			}
		}
	}
	for i, t := range r.Report {
		if !amount(t) || i > 0 && t < r.Report[i-1] {
			return bad("result %d is wanted at %g s; give ascending times of 0 or more", i+1, t)
		}
	}
	pairs := len(r.pairs())
	for i, u := range r.Until {
		size, what := 0, ""
		switch u.Of {
		case Conversion:
			size, what = 1, "conversion"
		case Amount:
			size, what = n, "amount"
		case Yield:
			size, what = len(r.Products), "yield"
		case Ratio:
			size, what = pairs, "ratio"
		default:
			return bad("end %d watches measure %d, which does not exist; give one of the measures", i+1, u.Of)
		}
		if u.Of != Conversion && (u.Index < 0 || u.Index >= size) {
			return bad("end %d watches the %s of number %d of %d; give one from 0", i+1, what, u.Index, size)
		}
		if (u.Of == Conversion || u.Of == Yield) && r.Basis < 0 {
			return bad("end %d watches a %s, which needs a basis; name one", i+1, what)
		}
		if !amount(u.Value) {
			return bad("end %d waits for a %s of %g; give a finite number of 0 or more", i+1, what, u.Value)
		}
	}
	if r.Trace < 0 {
		return bad("%d points are wanted for drawing; give 0 or more", r.Trace)
	}
	if r.RTol != 0 && !(r.RTol >= 1e-13 && r.RTol <= 1e-2) {
		return bad("relative tolerance %g; give one from 1e-13 to 1e-2", r.RTol)
	}
	return nil
}

// pairs returns the pairs that are wanted. Of every pair of products, those
// with a species in common are left out.
func (r *Run) pairs() [][2]int {
	if r.Pairs != nil {
		return r.Pairs
	}
	var all [][2]int
	for a := range r.Products {
		for b := a + 1; b < len(r.Products); b++ {
			common := false
			for _, s := range r.Products[a].Members {
				common = common || slices.Contains(r.Products[b].Members, s)
			}
			if !common {
				all = append(all, [2]int{a, b})
			}
		}
	}
	return all
}
