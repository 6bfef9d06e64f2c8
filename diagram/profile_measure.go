package diagram

import (
	"strings"

	"saddlebook/diagram/axis"
	"saddlebook/diagram/lettering"
)

// ProfileBarrier is a barrier measured by an arrow under its transition state.
type ProfileBarrier struct {
	Path string // Name of the path; "": the first path over the transition state
	Peak string // Name of the transition state
	Back bool   // from the level behind it; otherwise from the one before it
	Text string // as printed; default the difference
}

// ProfileSpan is the difference between two points of a path, measured by a
// double arrow, such as the energetic span of a cycle (Kozuch and Shaik, Acc.
// Chem. Res. 2011, 44, 101). If To stands before From, the arrow leads to To in
// the next turn, and the path must end with its first state Again.
type ProfileSpan struct {
	Path     string // Name of the path; "": the first path through both
	From, To string // Names of two points
	Text     string // as printed; default "span" and the difference
}

// measure is a height that is measured on the figure.
type measure struct {
	kind     measureKind
	from, to *state // states of the whole net
	low      float64
	high     float64 // values at the tail and the head
	text     string
}

type measureKind int8

const (
	barrier measureKind = iota
	barrierBack
	turn
	span     // both points in one turn
	nextSpan // to the next turn
)

// measures finds what the profile asks to be measured.
func (p Profile) measures(n *net) ([]measure, error) {
	var out []measure
	decimals := p.decimals()
	text := func(given string, d float64) string {
		if given != "" {
			return given
		}
		return axis.Text(d, finer(d, nil, decimals))
	}
	for _, b := range p.Barriers {
		t, err := p.over(n, b)
		if err != nil {
			return nil, err
		}
		m := measure{kind: barrier, from: t.from, to: t.peak}
		if b.Back {
			m.kind, m.from = barrierBack, t.to
		}
		m.low, m.high = m.from.point.Value, m.to.point.Value
		m.text = text(b.Text, m.high-m.low)
		for _, o := range out {
			if o.kind == m.kind && o.to == m.to {
				return nil, refuse("ask for it once", "the barrier of %q is to be measured twice", b.Peak)
			}
		}
		out = append(out, m)
	}
	seen := map[*state]bool{}
	for i, path := range p.Paths {
		last := path.Points[len(path.Points)-1]
		if !last.Again {
			continue
		}
		route := n.routes[i]
		m := measure{kind: turn, from: route[0].from, to: route[len(route)-1].to, low: path.Points[0].Value, high: last.Value}
		if seen[m.to] {
			continue
		}
		seen[m.to] = true
		m.text = "turn " + text("", m.high-m.low)
		out = append(out, m)
	}
	if p.Span != nil {
		m, err := p.spanned(n, text)
		if err != nil {
			return nil, err
		}
		out = append(out, m)
	}
	return out, nil
}

// over finds the stretch over the transition state of a barrier.
func (p Profile) over(n *net, b ProfileBarrier) (*stretch, error) {
	var peaks []string
	found := false
	for i, route := range n.routes {
		if b.Path != "" && p.Paths[i].Name != b.Path {
			continue
		}
		found = true
		for _, t := range route {
			if t.peak == nil {
				continue
			}
			if t.peak.point.key() == b.Peak {
				return t, nil
			}
			peaks = append(peaks, t.peak.point.key())
		}
	}
	if !found {
		return nil, refuse("name one of the paths", "no path %q, whose barrier over %q is to be measured", b.Path, b.Peak)
	}
	return nil, refuse("name one of the transition states: "+strings.Join(peaks, ", "), "no transition state %q whose barrier could be measured", b.Peak)
}

func (p Profile) spanned(n *net, text func(string, float64) string) (measure, error) {
	s := p.Span
	for i, path := range p.Paths {
		if s.Path != "" && path.Name != s.Path {
			continue
		}
		from, to := -1, -1
		for k, q := range path.Points {
			if from < 0 && q.key() == s.From {
				from = k
			}
			if to < 0 && q.key() == s.To && !q.Again {
				to = k
			}
		}
		if from < 0 || to < 0 || from == to {
			continue
		}
		last := path.Points[len(path.Points)-1]
		m := measure{kind: span, from: n.at(i, from, path), to: n.at(i, to, path), low: path.Points[from].Value, high: path.Points[to].Value}
		if to < from {
			if !last.Again {
				return m, refuse("end the path with its first state again, or change From and To", "%q stands before %q, and path %s is no cycle", s.To, s.From, path.called(i))
			}
			m.kind = nextSpan
			m.high += last.Value - path.Points[0].Value
		}
		m.text = s.Text
		if m.text == "" {
			m.text = "span " + text("", m.high-m.low)
		}
		if m.kind == nextSpan {
			m.text += " to " + path.Points[to].shown() + " in the next turn"
		}
		return m, nil
	}
	return measure{}, refuse("name two points of one path", "no path runs through %q and %q, between which a span is to be measured", s.From, s.To)
}

// at gives the state of point k of a path.
func (n *net) at(path, k int, points ProfilePath) *state {
	leg := 0 // stretches before point k
	for _, q := range points.Points[:k] {
		if !q.Peak {
			leg++
		}
	}
	route := n.routes[path]
	switch {
	case points.Points[k].Peak:
		return route[leg-1].peak
	case leg == len(route):
		return route[leg-1].to
	}
	return route[leg].from
}

// mine lists the measures that row l shows: a span where its head is, or where
// its tail is if it leads to the next turn.
func (l *layout) mine(all []measure) {
	for _, m := range all {
		at := m.to
		if m.kind == nextSpan {
			at = m.from
		}
		// A level at a cut stands in two rows; it is measured in the one it ends.
		if s := l.copyOf(at); s != nil && (s.point.Peak || l.net.begins || s.column > l.net.first) {
			l.measures = append(l.measures, m)
		}
	}
}

// copyOf gives the state of this row that stands for a state of the whole net.
func (l *layout) copyOf(whole *state) *state {
	for _, s := range l.net.states {
		if s.is(whole) {
			return s
		}
	}
	return nil
}

func (s *state) is(whole *state) bool { return s == whole || s.of != nil && s.of == whole }

// measureLabel is the text of a measure beside its arrow.
func measureLabel(text string, arrow Rect) *label {
	m := &label{bar: arrow, overhang: -6, prefer: []side{right, left, above, below}}
	for _, wide := range []float64{110, 48} {
		var b block
		for _, line := range lettering.Wrap(text, valueSize, wide) {
			b.add("measure-text", line, valueSize)
		}
		if len(m.forms) == 0 || b.w < m.forms[0].w {
			m.forms = append(m.forms, form{b.w, b.h, b.at})
		}
	}
	for y := arrow.Y0 + 6; y < arrow.Y1-6; y += 8 {
		m.spots = append(m.spots, Rect{arrow.X0, y, arrow.X1, y})
	}
	return m
}
