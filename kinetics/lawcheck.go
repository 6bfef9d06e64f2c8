package kinetics

import (
	"fmt"
	"math"
)

// lawFault returns what makes the rate of step i impossible whatever the
// energies: constants that make no sense, and laws that do not fit the reaction.
func (m *Mechanism) lawFault(i int) (Complaint, bool) {
	s := &m.Steps[i]
	bad := func(key, msg, fix string) (Complaint, bool) {
		return Complaint{State: s.Name, Key: key, Fatal: true, Msg: msg, Fix: fix}, true
	}
	if !(m.Viscosity >= 0) || math.IsInf(m.Viscosity, 0) {
		return Complaint{Key: "viscosity", Fatal: true, Msg: fmt.Sprintf("viscosity %g Pa s makes no sense", m.Viscosity), Fix: "give one above 0, such as \"0.6 mPa s\""}, true
	}
	from, to := Molecules(s.From), Molecules(s.To)
	if k := s.K; k != nil {
		switch {
		case !s.Returns:
			return bad("K", fmt.Sprintf("step %s has a K and no return", s.Name), "write <=> for a reversible step, or leave out K")
		case s.Law == nil && !s.Above:
			return bad("K", fmt.Sprintf("step %s has a K beside the energy of its transition state, which gives the return already", s.Name), "leave out K, or give a barrier in place of the energy")
		case s.Law != nil && s.Law.Back != nil:
			return bad("K", fmt.Sprintf("step %s has both K and k-back", s.Name), "keep one of them: K is k over k-back")
		case !(k.K > 0) || math.IsInf(k.K, 0):
			return bad("K", fmt.Sprintf("an equilibrium constant of %g makes no sense", k.K), "give a finite number above 0")
		case !(k.At > 0) || math.IsInf(k.At, 0):
			return bad("at-K", fmt.Sprintf("K at %g K makes no sense", k.At), "give a temperature above 0 K")
		}
	}
	if h := s.Heat; h != nil && (math.IsNaN(*h) || math.IsInf(*h, 0)) {
		return bad("heat", fmt.Sprintf("an enthalpy of reaction of %g J/mol makes no sense", *h), "give a finite number")
	}
	meets := from == 2 || to == 2 && s.Returns
	if s.Limited && !meets {
		return bad("limit", fmt.Sprintf("step %s cannot be limited by diffusion: no two molecules meet in it", s.Name), "leave out limit")
	}
	l := s.Law
	if l == nil {
		return Complaint{}, false
	}
	if math.IsNaN(l.Shift) || math.IsInf(l.Shift, 0) || !(l.Slower >= 0) || math.IsInf(l.Slower, 0) {
		return bad("", fmt.Sprintf("the rate of step %s is changed by a number that is not finite", s.Name), "give finite shifts and factors")
	}
	switch l.Kind {
	case Measured:
		if l.Forward == nil {
			return bad("k", fmt.Sprintf("step %s has no rate constant", s.Name), "give k")
		}
		if l.Back != nil && !s.Returns {
			return bad("k-back", fmt.Sprintf("step %s has a k-back and no return", s.Name), "write <=> for a reversible step, or leave out k-back")
		}
		for _, c := range []struct {
			c    *Constant
			more string
		}{{l.Forward, ""}, {l.Back, "-back"}} {
			if c.c != nil {
				if key, msg, fix := c.c.fault(); key != "" {
					return bad(key+c.more, msg, fix)
				}
			}
		}
	case AtDiffusion, KeptFast:
		key := string(l.Kind)
		switch {
		case l.Forward != nil || l.Back != nil:
			return bad(key, fmt.Sprintf("step %s has a rate constant beside %s = true", s.Name, key), "keep one of them")
		case l.Kind == AtDiffusion && !meets:
			return bad(key, fmt.Sprintf("no two molecules meet in step %s, so diffusion does not limit it", s.Name), "write fast = true for an equilibrium that is kept fast, or give k")
		case l.Kind == KeptFast && !s.Returns:
			return bad(key, fmt.Sprintf("step %s has no return, and fast = true keeps an equilibrium", s.Name), "write <=> for a reversible step, or give k")
		case l.Kind == KeptFast && max(from, to) > 2 && !meets:
			return bad(key, fmt.Sprintf("three molecules do not meet at once in step %s", s.Name), splitStep)
		case s.Limited:
			return bad("limit", fmt.Sprintf("step %s runs at the diffusion limit already", s.Name), "leave out limit")
		}
	default:
		return bad("", fmt.Sprintf("the law %q of step %s is not known", string(l.Kind), s.Name), "give measured, diffusion or fast")
	}
	return Complaint{}, false
}

// fault returns what is wrong with a constant, by the key of the forward one.
func (c *Constant) fault() (key, msg, fix string) {
	finite := func(x float64) bool { return !math.IsNaN(x) && !math.IsInf(x, 0) }
	switch {
	case c.Ea != nil && !finite(*c.Ea):
		return "Ea", fmt.Sprintf("an activation energy of %g J/mol makes no sense", *c.Ea), "give a finite number"
	case c.A != 0 && (c.K != 0 || c.At != 0):
		return "A", "A stands beside k", "keep one of them"
	case c.A != 0 && c.Ea == nil:
		return "A", "A has no Ea beside it", "add Ea, or give k and its temperature"
	case c.A != 0 && (!(c.A > 0) || !finite(c.A)):
		return "A", fmt.Sprintf("a pre-exponential factor of %g makes no sense", c.A), "give a finite number above 0"
	case c.A != 0:
		return "", "", ""
	case !(c.K > 0) || !finite(c.K):
		return "k", fmt.Sprintf("a rate constant of %g makes no sense", c.K), "give a finite number above 0"
	case !(c.At > 0) || !finite(c.At):
		return "at", fmt.Sprintf("a rate constant at %g K makes no sense", c.At), "give a temperature above 0 K"
	}
	return "", "", ""
}
