package course

import (
	"fmt"
	"slices"

	"saddlebook/kinetics"
	"saddlebook/kinetics/stiff"
)

// A direction of a step, with its constant.
type direction struct {
	from, to []kinetics.Term
	k        int
}

// compile sets up the system: the network, then, if pairs are wanted and a
// product can react, the network of the kinetic limit with the same constants.
// What cannot happen, because something it needs never forms, is left out.
func (p *Plan) compile(net *kinetics.Network) error {
	p.steps = len(net.Reactions)
	var all, kept []direction
	for i := range net.Reactions {
		r := &net.Reactions[i]
		all = append(all, direction{r.From, r.To, 2 * i})
		if r.Returns {
			all = append(all, direction{r.To, r.From, 2*i + 1})
		} else {
			p.oneWay = true
		}
	}
	all = p.possible(all)
	for _, d := range all {
		uses := false
		for _, t := range reactionOf(d.from, d.to, d.k, 0).Net {
			uses = uses || t.Coef < 0 && p.product(t.Species)
		}
		if !uses {
			kept = append(kept, d)
		}
		if p.notFirst == "" && !(single(p.moving(d.from)) && single(p.moving(d.to))) {
			p.notFirst = fmt.Sprintf("step %s is not of first order", net.Reactions[d.k/2].Name)
		}
	}
	if p.notFirst == "" && p.width > most {
		p.notFirst = fmt.Sprintf("more than %d species are quicker that way", most)
	}
	p.twin = len(p.pairs) > 0 && len(kept) < len(all)
	p.happens, p.limit = make([]bool, 2*p.steps), make([]bool, 2*p.steps)
	var list []stiff.Reaction
	size := 0
	add := func(directions []direction, happens []bool) {
		for _, d := range directions {
			happens[d.k] = true
			list = append(list, reactionOf(p.moving(d.from), p.moving(d.to), d.k, size))
		}
		for i, v := range p.sinks {
			s := size + p.run.Removals[v].Species
			list = append(list, stiff.Reaction{In: []int{s}, K: 2*p.steps + i,
				Net: []stiff.Term{{Species: s, Coef: -1}, {Species: size + p.n + i, Coef: 1}}})
		}
		size += p.width
	}
	add(all, p.happens)
	if p.twin {
		add(p.possible(kept), p.limit)
	}
	sys, err := stiff.NewSystem(size, 2*p.steps+len(p.sinks), list)
	if err != nil {
		return fmt.Errorf("course: %w", err)
	}
	p.sys = sys
	return nil
}

// possible returns the directions for which everything is there, or can form.
func (p *Plan) possible(all []direction) []direction {
	there := make([]bool, p.n)
	for s, c := range p.whole {
		there[s] = c > 0
	}
	done := make([]bool, len(all))
	for more := true; more; {
		more = false
	next:
		for i, d := range all {
			if done[i] {
				continue
			}
			for _, t := range d.from {
				if !there[t.Species] {
					continue next
				}
			}
			done[i], more = true, true
			for _, t := range d.to {
				there[t.Species] = true
			}
		}
	}
	var out []direction
	for i, d := range all {
		if done[i] {
			out = append(out, d)
		}
	}
	return out
}

// product reports whether a species belongs to a listed product.
func (p *Plan) product(s int) bool { return slices.Contains(p.members, s) }

// fix finds the fixed species.
func (p *Plan) fix(net *kinetics.Network) {
	p.fixed = make([]bool, p.n)
	for s := range p.fixed {
		p.fixed[s] = true
	}
	for _, row := range stepNets(net) {
		for s, v := range row {
			p.fixed[s] = p.fixed[s] && v == 0
		}
	}
	for _, d := range p.run.Doses {
		if d.Lasts > 0 {
			p.fixed[d.Species] = false
		}
	}
	for _, v := range p.sinks {
		p.fixed[p.run.Removals[v].Species] = false
	}
	for i := range net.Reactions {
		for _, side := range [2][]kinetics.Term{net.Reactions[i].From, net.Reactions[i].To} {
			var list []int
			for _, t := range side {
				for range t.N {
					if p.fixed[t.Species] {
						list = append(list, t.Species)
					}
				}
			}
			p.beside = append(p.beside, list)
		}
	}
}

// moving returns what is not fixed of a side.
func (p *Plan) moving(side []kinetics.Term) []kinetics.Term {
	var out []kinetics.Term
	for _, t := range side {
		if !p.fixed[t.Species] {
			out = append(out, t)
		}
	}
	return out
}

func single(side []kinetics.Term) bool { return len(side) == 1 && side[0].N == 1 }

func reactionOf(from, to []kinetics.Term, k, off int) stiff.Reaction {
	r := stiff.Reaction{K: k}
	net := map[int]int{}
	var order []int
	count := func(side []kinetics.Term, sign int) {
		for _, t := range side {
			if _, ok := net[t.Species]; !ok {
				order = append(order, t.Species)
			}
			net[t.Species] += sign * t.N
		}
	}
	count(from, -1)
	count(to, 1)
	for _, t := range from {
		for range t.N {
			r.In = append(r.In, off+t.Species)
		}
	}
	for _, s := range order {
		if net[s] != 0 {
			r.Net = append(r.Net, stiff.Term{Species: off + s, Coef: float64(net[s])})
		}
	}
	return r
}

// nets returns the net change of each step and of each removal, by species and
// sink.
func (p *Plan) nets(net *kinetics.Network) [][]float64 {
	rows := stepNets(net)
	for i := range rows {
		rows[i] = append(rows[i], make([]float64, len(p.sinks))...)
	}
	for i, v := range p.sinks {
		row := make([]float64, p.width)
		row[p.run.Removals[v].Species], row[p.n+i] = -1, 1
		rows = append(rows, row)
	}
	return rows
}
