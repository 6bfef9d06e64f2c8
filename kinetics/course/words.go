package course

import (
	"fmt"
	"math"

	"saddlebook/kinetics/unit"
)

// words says how the run was computed and what a reader must know.
func (w *walk) words() {
	c, p := w.c, w.p
	steps := "Rosenbrock method of order 5"
	switch {
	case w.multi > 0 && w.multi == w.steps:
		steps = "numerical differentiation formulas of orders 1 to 5"
	case w.multi > 0:
		steps = "numerical differentiation formulas of orders 1 to 5, with a Rosenbrock method of order 5"
	}
	integrated := fmt.Sprintf("integrated with error control (%s, relative tolerance %s)", steps, unit.Digits(p.rtol, 1))
	const exactly = "exact (exponential of the rate matrix), as every step is of first order"
	switch {
	case w.stepped == 0:
		c.Method = exactly + " and every leg a hold"
	case w.exact > 0:
		c.Method = "in holds " + exactly + "; in ramps " + integrated
	case p.notFirst != "":
		c.Method = integrated + ", as " + p.notFirst
	default:
		c.Method = integrated + ", as the temperature changes throughout"
	}
	warn := func(format string, args ...any) { c.Warnings = append(c.Warnings, fmt.Sprintf(format, args...)) }
	if len(p.run.Until) > 0 && c.Ended < 0 {
		warn("no end that was watched for was reached within the programme")
	}
	for _, d := range p.run.Doses {
		switch last := d.From + d.Lasts; {
		case d.From > c.End:
			warn("a dose of %s is not given: the run ends before it", p.names[d.Species])
		case last > c.End:
			warn("a dose of %s is not given in full: the run ends before it does", p.names[d.Species])
		}
	}
	for _, v := range p.run.Removals {
		name := p.names[v.Species]
		if v.From > c.End {
			warn("%s is not removed: the run ends before", name)
			continue
		}
		if v.Species == p.run.Basis {
			warn("%s is the basis and is removed: what is removed counts as converted", name)
		}
	}
	if w.restFail {
		warn("an equilibrium composition was not found: control is not known there")
	}
	if c.Lowest < -math.Max(p.atol, 1e-14) {
		warn("a concentration of %.1e mol/L, below zero, was met and kept", c.Lowest)
	}
}
