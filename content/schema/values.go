package schema

import (
	"regexp"
	"slices"
	"strings"

	"saddlebook/content/place"
	"saddlebook/kinetics/unit"
)

var (
	wholeForm  = regexp.MustCompile(`^[+-]?(0|[1-9][0-9]*)$`)
	numberForm = regexp.MustCompile(`^[+-]?(0|[1-9][0-9]*)(\.[0-9]+)?([eE][+-]?[0-9]+)?$`)
)

func isWhole(text string) bool  { return wholeForm.MatchString(text) }
func isNumber(text string) bool { return numberForm.MatchString(text) }

func isQuoted(text string) bool {
	return len(text) > 1 && (text[0] == '"' || text[0] == '\'') && text[len(text)-1] == text[0]
}

// text reads a text: not empty, one of the words if there is a list, a name if
// it is one.
func (d *decoder) text(n *Node, f Field) (string, bool) {
	if n.Kind != Text {
		d.wrong(n, f)
		return "", false
	}
	return n.Text, d.textFits(n, f)
}

func (d *decoder) textFits(n *Node, f Field) bool {
	if strings.TrimSpace(n.Text) == "" {
		fix := "write " + f.line()
		if !f.Required {
			fix += ", or leave the key out"
		}
		d.report(n.At, "the text is empty", fix)
		return false
	}
	if len(f.OneOf) > 0 && !slices.Contains(f.OneOf, n.Text) {
		fix := "write " + alternatives(f.OneOf)
		if near := Nearest(n.Text, f.OneOf); near != "" {
			fix = "write " + quote(near)
		}
		d.report(n.At, "the word "+quote(n.Text)+" is not one of those allowed", fix)
		return false
	}
	if f.Name {
		if msg, fix := NameFault(n.Text); msg != "" {
			d.report(n.At, msg, fix)
			return false
		}
	}
	return true
}

// alternatives lists texts in quotes: "a", "b" or "c".
func alternatives(words []string) string {
	quoted := make([]string, len(words))
	for i, w := range words {
		quoted[i] = quote(w)
	}
	if len(quoted) == 1 {
		return quoted[0]
	}
	return strings.Join(quoted[:len(quoted)-1], ", ") + " or " + quoted[len(quoted)-1]
}

// list calls do for every element of a list, or for a single value in its place.
func (d *decoder) list(n *Node, f Field, do func(kid *Node)) {
	if n.Kind != Array {
		do(n)
		return
	}
	for _, kid := range n.Kids {
		if !kid.refused {
			d.in(kid.Key, func() { do(kid) })
		}
	}
	if len(n.Kids) == 0 {
		d.empty(n, f)
	}
}

func (d *decoder) words(n *Node, f Field) []string {
	list := []string{}
	d.list(n, f, func(kid *Node) {
		switch {
		case kid == n && n.Kind != Text:
			d.wrong(n, f)
		case kid.Kind != Text:
			d.wrongElement(kid, f, "a text", `"text"`)
		case d.textFits(kid, f):
			list = append(list, kid.Text)
		}
	})
	return list
}

// wrongElement reports an element of the wrong type.
func (d *decoder) wrongElement(n *Node, f Field, wanted, sample string) {
	if n.Kind != Table && n.Kind != Array && n.Kind != Text && strings.HasPrefix(wanted, "a text") {
		sample = place.Literal(n.Text)
	}
	d.report(n.At, found(n)+" stands where "+wanted+" is wanted", "write "+sample)
}

// amount reads a quantity of one of the field's kinds.
func (d *decoder) amount(n *Node, f Field) (unit.Quantity, bool) {
	var q unit.Quantity
	var err error
	switch n.Kind {
	case Whole, Real:
		q, err = unit.Bare(n.Num, d.bare(f), f.Dims...)
	case Text:
		q, err = unit.Parse(n.Text, d.bare(f), f.Dims...)
	default:
		d.report(n.At, found(n)+" stands where "+dims(f.Dims)+" is wanted", "write it as in "+quote(f.Dims[0].Example()))
		return q, false
	}
	if err != nil {
		d.unit(n, err, "write "+quote(f.Dims[0].Example()))
		return q, false
	}
	return q, true
}

func (d *decoder) amounts(n *Node, f Field) []unit.Quantity {
	list := []unit.Quantity{}
	d.list(n, f, func(kid *Node) {
		if q, ok := d.amount(kid, f); ok {
			list = append(list, q)
		}
	})
	return list
}

// bare finds the unit of bare numbers of a field; the zero unit if a unit must
// be written. A unit that a top-level key names wrongly is reported there, once.
func (d *decoder) bare(f Field) unit.Unit {
	symbol := f.Bare
	if key, named := strings.CutPrefix(f.Bare, "@"); named {
		i := slices.IndexFunc(d.fields, func(f Field) bool { return f.Key == key })
		if i >= 0 {
			symbol = d.fields[i].Default
		}
		if n := d.root.kid(key); n != nil && n.Kind == Text && n.Text != "" && !n.refused {
			u, err := unit.Lookup(n.Text, f.Dims...)
			if err == nil {
				return u
			}
			if i < 0 || len(d.fields[i].OneOf) == 0 { // else it is reported already
				path := d.path
				d.path = []string{key}
				d.unit(n, err, "write "+quote(symbol))
				d.path = path
			}
		}
	}
	if symbol == "" {
		return unit.Unit{}
	}
	u, err := unit.Lookup(symbol, f.Dims...)
	if err != nil {
		return unit.Unit{} // a default in words: a unit is required
	}
	return u
}

func (d *decoder) amountsByName(n *Node, f Field) []NamedAmount {
	list := []NamedAmount{}
	d.each(n, f, func(kid *Node) {
		if q, ok := d.amount(kid, f); ok {
			list = append(list, NamedAmount{kid.Key, q})
		}
	})
	return list
}

func (d *decoder) textsByName(n *Node, f Field) []NamedText {
	list := []NamedText{}
	d.each(n, f, func(kid *Node) {
		switch {
		case kid.Kind != Text:
			d.wrongElement(kid, f, "a text", `"text"`)
		case d.textFits(kid, f):
			list = append(list, NamedText{kid.Key, kid.Text})
		}
	})
	return list
}

func (d *decoder) groups(n *Node, f Field) []Group {
	list := []Group{}
	if n.Kind == Table {
		d.each(n, f, func(kid *Node) {
			if kid.Kind == Array && len(kid.Kids) == 0 {
				d.report(kid.At, "the list is empty", "write the names that "+quote(kid.Key)+" stands for")
				return
			}
			names, paths := d.members(kid, f)
			for i := range paths {
				paths[i] = append([]string{kid.Key}, paths[i]...)
			}
			list = append(list, Group{kid.Key, names, paths})
		})
		return list
	}
	names, paths := d.members(n, f)
	for i, name := range names {
		list = append(list, Group{name, []string{name}, paths[i : i+1]})
	}
	return list
}

// members reads a list of distinct names, or one name, with the path of each
// from n.
func (d *decoder) members(n *Node, f Field) (list []string, paths [][]string) {
	list = []string{}
	d.list(n, f, func(kid *Node) {
		msg, fix := "", ""
		switch {
		case kid == n && kid.Kind != Text:
			d.report(n.At, found(n)+" stands where "+f.wanted()+" is wanted", "write "+f.line())
			return
		case kid.Kind != Text:
			d.wrongElement(kid, f, "a name", `"A"`)
			return
		case slices.Contains(list, kid.Text):
			msg, fix = "the name "+quote(kid.Text)+" is listed twice", "leave one out"
		default:
			msg, fix = NameFault(kid.Text)
		}
		if msg != "" {
			d.report(kid.At, msg, fix)
			return
		}
		list = append(list, kid.Text)
		var path []string
		if kid != n {
			path = []string{kid.Key}
		}
		paths = append(paths, path)
	})
	return list, paths
}

// bound reads a value to compare with.
func (d *decoder) bound(n *Node, f Field) *Bound {
	fix := "write " + f.line()
	switch {
	case n.Kind == Whole || n.Kind == Real:
		return &Bound{Value: n.Num, Text: n.Text}
	case n.Kind != Text:
		d.wrong(n, f)
		return nil
	case strings.Contains(n.Text, ":"):
		r, err := unit.ParseRatio(n.Text)
		if err != nil {
			d.unit(n, err, fix)
			return nil
		}
		return &Bound{Value: r, Text: n.Text, Ratio: true}
	}
	q, err := unit.Parse(n.Text, unit.Unit{})
	if err != nil {
		d.unit(n, err, fix)
		return nil
	}
	if q.SD != 0 {
		d.report(n.At, "the bound "+quote(n.Text)+" has a ±", "write the value alone")
		return nil
	}
	b := &Bound{Value: q.SI, Text: n.Text}
	if q.Unit.Symbol != "" {
		b.Quantity = &q
	}
	return b
}
