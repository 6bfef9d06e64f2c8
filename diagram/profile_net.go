package diagram

import (
	"fmt"
	"math"
)

// net holds the states of all paths, each once, and the stretches between them.
type net struct {
	states    []*state
	stretches []*stretch
	routes    [][]*stretch // per path
	first     int          // lowest column
	last      int
	begins    bool // not the continuation of another row
	ends      bool // no row follows
}

// state is a level or a peak with its place.
type state struct {
	point       ProfilePoint
	paths       []int  // that run through it, in order
	block       *block // its text
	column      int    // of a level
	x, y        float64
	half        float64 // half the width of its bar
	band        float64 // half the height of its deviation
	low, high   float64 // of a peak: the room in its gap
	up, down    bool    // a curve leaves it upwards, downwards
	clump, slot float64 // how many levels stand side by side, and which this is, from the middle
	of          *state  // in a row: the state of the whole net
	twin        *state  // of a variant: the state that it varies
	pass        bool    // no state: a place where a curve goes on in another row
}

// stretch leads from a level to the next, over a peak or over none.
type stretch struct {
	from, to, peak *state
	paths          []int
	trace          []Rect  // small boxes along its curve
	dir            float64 // +1 to the right, -1 to the left
}

// net joins what paths have in common and gives every level its column.
func (p Profile) net() (*net, error) {
	n := p.join(false)
	p.twins(n)
	if !n.columns(p.Sides) {
		// The paths run through common states in different order. Only states at the
		// same place in their paths can then be drawn once.
		n = p.join(true)
		n.columns(p.Sides) // cannot fail: every level stands at its number
	}
	for i, route := range n.routes {
		for j, other := range n.routes[:i] {
			if alike(route, other) {
				return nil, refuse("leave one of them out", "paths %s and %s run through the same states", p.Paths[j].called(j), p.Paths[i].called(i))
			}
		}
		if len(n.routes) > 1 && p.Paths[i].Name == "" && len(route[len(route)-1].to.paths) > 1 {
			return nil, refuse("give it a name", "path %d ends in the state %q of another path and has no name of its own", i+1, route[len(route)-1].to.point.shown())
		}
	}
	return n, nil
}

func alike(a, b []*stretch) bool {
	if len(a) != len(b) {
		return false
	}
	for i := range a {
		if a[i] != b[i] {
			return false
		}
	}
	return true
}

// join makes the states and stretches. strict: only states with the same number
// of levels before them are one.
func (p Profile) join(strict bool) *net {
	n := &net{begins: true, ends: true}
	levels := map[string]*state{}
	legs := map[string]*stretch{}
	number := map[*state]int{}
	for i, path := range p.Paths {
		seen := map[string]int{}
		var from, peak *state
		var route []*stretch
		column := 0
		for k, q := range path.Points {
			if q.Peak {
				peak = &state{point: q}
				continue
			}
			// The same name for the second time in one path is a state of its own.
			seen[q.key()]++
			key := fmt.Sprintf("%q %q %q %x %d", q.key(), q.shown(), q.Text, math.Float64bits(q.Value+0), seen[q.key()])
			if strict {
				key += fmt.Sprint(" ", column)
			}
			if p.Sides && k > 0 {
				key += fmt.Sprint(" side ", i)
			}
			to := levels[key]
			if to == nil {
				to = &state{point: q, column: column}
				levels[key] = to
				number[to] = len(n.states)
				n.states = append(n.states, to)
			}
			to.paths = append(to.paths, i)
			if from != nil {
				leg := fmt.Sprint(number[from], " ", number[to])
				if peak != nil {
					leg += fmt.Sprintf(" %q %q %q %x %v", peak.point.key(), peak.point.shown(), peak.point.Text, math.Float64bits(peak.point.Value+0), peak.position())
				}
				s := legs[leg]
				if s == nil {
					s = &stretch{from: from, to: to, peak: peak, dir: 1}
					if p.Sides && i == 0 {
						s.dir = -1
					}
					legs[leg] = s
					n.stretches = append(n.stretches, s)
					if peak != nil {
						n.states = append(n.states, peak)
					}
				}
				s.paths = append(s.paths, i)
				if s.peak != nil {
					s.peak.paths = s.paths
				}
				route = append(route, s)
			}
			from, peak = to, nil
			column++
		}
		n.routes = append(n.routes, route)
	}
	return n
}

// position of a peak in its gap.
func (s *state) position() float64 {
	if math.IsNaN(s.point.Position) {
		return 0.5
	}
	return s.point.Position
}

// columns puts each level as far from its start as the longest way to it; on
// two sides, leftwards for the first path. It reports false where the paths run
// in a circle.
func (n *net) columns(sides bool) bool {
	for _, s := range n.states {
		s.column = 0
	}
	for round := 0; ; round++ {
		moved := false
		for _, s := range n.stretches {
			if s.to.column < s.from.column+1 {
				s.to.column, moved = s.from.column+1, true
			}
		}
		for _, s := range n.states {
			if t := s.twin; t != nil && !s.point.Peak && s.column != t.column {
				s.column, t.column, moved = max(s.column, t.column), max(s.column, t.column), true
			}
		}
		if !moved {
			break
		}
		if round > len(n.states) {
			return false
		}
	}
	if sides {
		for _, s := range n.routes[0] {
			s.to.column = -s.to.column
		}
	}
	n.first, n.last = 0, 0
	for _, s := range n.states {
		n.first, n.last = min(n.first, s.column), max(n.last, s.column)
	}
	return true
}
