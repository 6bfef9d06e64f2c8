package skeleton

import (
	"math"
	"strconv"
	"strings"
	"unicode"
	"unicode/utf8"

	"saddlebook/diagram/lettering"
)

// Proportions of the lettering in em. Capitals of Liberation Sans are 0.69 high
// (its OS/2 table gives 1409 of 2048).
const (
	capital = 0.70
	middle  = 0.344 // of a capital above its base line
	stacked = 0.87  // from the base line of a symbol to that of hydrogens above or below
	bearing = 0.03  // white on either side of a letter
)

// box is where ink may stand, with rounded corners, relative to the atom.
type box struct{ x0, y0, x1, y1, round float64 }

// row is a line of text that starts at x on the base line y.
type row struct {
	runs []lettering.Run
	x, y float64
}

// label is one way to letter an atom, placed relative to it.
type label struct {
	rows    []row
	boxes   []box // the first is the symbol itself
	toward  Point // where the hydrogens, or the charge, stand
	weight  float64
	penalty float64
}

// part is a stretch of a label.
type part struct {
	text  string
	shift lettering.Shift
	core  bool // the atom stands in its middle
}

// name is what is lettered, in plain text.
func (a *atom) name() string {
	switch {
	case a.alias != "":
		return a.alias
	case a.group > 0:
		return "R" + strconv.Itoa(a.group)
	}
	return a.symbol
}

// hidden reports whether the atom is a bare corner of the skeleton.
func (m *Molecule) hidden(i int) bool {
	a := &m.atoms[i]
	if a.bare {
		return true
	}
	if a.symbol != "C" || !a.element() || a.charge != 0 || a.radical != 0 || a.mass != 0 || len(a.next) == 0 {
		return false
	}
	if len(a.next) == 2 {
		b, c := m.bonds[a.next[0]], m.bonds[a.next[1]]
		u, v := m.direction(i, b), m.direction(i, c)
		return !(b.order == c.order && u.X*v.X+u.Y*v.Y < -0.996) // 175°
	}
	return true
}

// direction of a bond away from one of its atoms.
func (m *Molecule) direction(i int, b bond) Point {
	p, q := m.at(i), m.at(b.other(i))
	d := math.Hypot(q.X-p.X, q.Y-p.Y)
	return Point{(q.X - p.X) / d, (q.Y - p.Y) / d}
}

// choices gives the ways to letter atom i, the one liked best first.
func (m *Molecule) choices(i int) []label {
	if m.hidden(i) {
		return nil
	}
	a := &m.atoms[i]
	sign := []part{{a.sign(), lettering.Super, false}}
	if !a.element() {
		return a.short(sign)
	}
	var mass []part
	if a.mass > 0 {
		mass = []part{{strconv.Itoa(a.mass), lettering.Super, false}}
	}
	symbol := append(mass, part{a.symbol, lettering.Base, true})
	right, left, up, down := Point{1, 0}, Point{-1, 0}, Point{0, -1}, Point{0, 1}
	if a.implicit == 0 {
		out := []label{set(join(symbol, sign), Point{0.8, -0.6}, 0.3, 0)}
		if sign[0].text != "" && len(mass) == 0 {
			out = append(out, set(join(sign, symbol), Point{-0.8, -0.6}, 0.3, 0.05))
		}
		return out
	}
	h := []part{{text: "H"}}
	if a.implicit > 1 {
		h = append(h, part{strconv.Itoa(a.implicit), lettering.Sub, false})
	}
	out := []label{
		set(join(symbol, h, sign), right, 0.5, 0),
		set(join(h, symbol, sign), left, 0.5, 0.05),
	}
	if sign[0].text != "" && len(mass) == 0 {
		out = append(out, set(join(sign, h, symbol), left, 0.5, 0.15))
	}
	for _, to := range []Point{up, down} {
		l := set(join(symbol, sign), to, 0.5, 0.25)
		h[0].core = true
		away := stacked
		if sign[0].text != "" || a.mass > 0 {
			away += lettering.Drop // a count of hydrogens stays clear of what stands high
			if to == up {
				away += lettering.Drop
			}
		}
		r, boxes := line(h, middle+to.Y*away)
		l.rows, l.boxes = append(l.rows, r), append(l.boxes, boxes...)
		out = append(out, l)
	}
	return out
}

// sign is the charge, behind the lone electrons.
func (a *atom) sign() string {
	s := strings.Repeat("•", a.radical)
	if a.singlet {
		s = ":"
	}
	if c := max(a.charge, -a.charge); c > 0 {
		if c > 1 {
			s += strconv.Itoa(c)
		}
		s += map[bool]string{true: "+", false: "−"}[a.charge > 0]
	}
	return s
}

// short gives the ways to letter a short name: forwards, turned round, and about its middle.
func (a *atom) short(sign []part) []label {
	if a.group > 0 && a.alias == "" {
		return []label{set(join([]part{{"R", lettering.Base, true}, {strconv.Itoa(a.group), lettering.Super, false}}, sign), Point{1, 0}, 0.1, 0)}
	}
	right, left := Point{1, 0}, Point{-1, 0}
	name := a.name()
	list, ok := tokens(name)
	if ok && len(list) > 1 {
		var front, back []part
		for k, t := range list {
			p := t.parts()
			p[0].core = k == 0
			front, back = append(front, p...), append(p, back...)
		}
		return []label{set(join(front, sign), right, 0.5, 0), set(join(back, sign), left, 0.5, 0.05)}
	}
	var whole []part
	if ok {
		whole = list[0].parts()
	} else {
		for _, r := range lettering.Runs(name) {
			whole = append(whole, part{r.Text, r.Shift, false})
		}
		if len(whole) == 0 {
			whole = []part{{text: "?"}}
		}
	}
	out := []label{set(join(lettered(whole, true), sign), right, 0.5, 0), set(join(lettered(whole, false), sign), left, 0.5, 0.05)}
	if len(whole) == 1 {
		about := set(join([]part{{whole[0].text, whole[0].shift, true}}, sign), Point{1, 0}, 0, 0.1)
		out = append(out, about)
	}
	return out
}

// lettered puts the atom at the first or last letter of a name.
func lettered(whole []part, first bool) []part {
	k := 0
	if !first {
		k = len(whole) - 1
		for k > 0 && whole[k].shift != lettering.Base {
			k--
		}
	}
	p := whole[k]
	_, n := utf8.DecodeRuneInString(p.text)
	cut := []part{{p.text[:n], p.shift, true}, {p.text[n:], p.shift, false}}
	if !first {
		_, n = utf8.DecodeLastRuneInString(p.text)
		n = len(p.text) - n
		cut = []part{{p.text[:n], p.shift, false}, {p.text[n:], p.shift, true}}
	}
	return join(whole[:k], cut, whole[k+1:])
}

func join(lists ...[]part) []part {
	var out []part
	for _, l := range lists {
		for _, p := range l {
			if p.text != "" {
				out = append(out, p)
			}
		}
	}
	return out
}

// set makes a label of one row.
func set(parts []part, toward Point, weight, penalty float64) label {
	r, boxes := line(parts, middle)
	return label{rows: []row{r}, boxes: boxes, toward: toward, weight: weight, penalty: penalty}
}

// line sets parts on a base line so that the middle of the core is at x = 0. The box
// of the core comes first.
func line(parts []part, y float64) (row, []box) {
	x, core, at := 0.0, 0.0, 0
	r := row{y: y}
	var boxes []box
	for _, p := range parts {
		w := lettering.Width([]lettering.Run{{Text: p.text, Shift: p.shift}}, 1)
		if p.core {
			core, at = x+w/2, len(boxes)
		}
		boxes = append(boxes, ink(p, x, y, w))
		x += w
		if n := len(r.runs); n > 0 && r.runs[n-1].Shift == p.shift {
			r.runs[n-1].Text += p.text
		} else {
			r.runs = append(r.runs, lettering.Run{Text: p.text, Shift: p.shift})
		}
	}
	r.x = -core
	for i := range boxes {
		boxes[i].x0 -= core
		boxes[i].x1 -= core
	}
	boxes[0], boxes[at] = boxes[at], boxes[0]
	return r, boxes
}

// ink is where the letters of a part stand.
func ink(p part, x, y, w float64) box {
	low, high := 0.01, capital
	for _, c := range p.text {
		switch {
		case strings.ContainsRune("gjpqyQ,;", c):
			low = math.Max(low, 0.21)
		case strings.ContainsRune("()[]{}|/", c) || c > unicode.MaxLatin1 && c < 0x2000:
			low, high = math.Max(low, 0.22), math.Max(high, 0.78)
		}
	}
	if p.shift != lettering.Base && strings.Trim(p.text, "+−•") == "" {
		low, high = -0.05, 0.60
	}
	small, base := 1.0, y
	switch p.shift {
	case lettering.Sub:
		small, base = lettering.Small, y+lettering.Drop
	case lettering.Super:
		small, base = lettering.Small, y-lettering.Rise
	}
	b := box{x + bearing*small, base - high*small, x + w - bearing*small, base + low*small, 0.08}
	if p.text == "C" || p.text == "O" || p.text == "S" {
		b.round = 0.3
	}
	b.round = math.Min(b.round, math.Min(b.x1-b.x0, b.y1-b.y0)/2)
	return b
}

// member is one symbol or bracket of a short name, with its count.
type member struct {
	text  string
	count string
	list  []member // of a bracket
}

func (t member) parts() []part {
	out := []part{{text: t.text}}
	if t.list != nil {
		out = []part{{text: "("}}
		for _, u := range t.list {
			out = append(out, u.parts()...)
		}
		out = append(out, part{text: ")"})
	}
	if t.count != "" {
		out = append(out, part{t.count, lettering.Sub, false})
	}
	return out
}

// tokens parts a short name into symbols of elements and known groups. ok is false if
// some of it is neither.
func tokens(name string) ([]member, bool) {
	out, rest := symbols(name, 0)
	return out, rest == "" && len(out) > 0
}

func symbols(s string, depth int) ([]member, string) {
	var out []member
	for s != "" && s[0] != ')' {
		var t member
		if s[0] == '(' {
			list, rest := symbols(s[1:], depth+1)
			if depth > 2 || len(list) == 0 || !strings.HasPrefix(rest, ")") {
				return out, s
			}
			t.list, s = list, rest[1:]
		} else {
			n := min(6, len(s))
			for n > 0 && !(groups[s[:n]] || elements[s[:n]] && s[:n] != "T" && s[:n] != "D") {
				n--
			}
			if n == 0 || n < len(s) && s[n] >= 'a' && s[n] <= 'z' && !strings.ContainsRune("nist", rune(s[n])) {
				return out, s
			}
			t.text, s = s[:n], s[n:]
		}
		n := 0
		for n < len(s) && s[n] >= '0' && s[n] <= '9' {
			n++
		}
		if n > 3 {
			return out, s
		}
		t.count, s = s[:n], s[n:]
		out = append(out, t)
	}
	return out, s
}
