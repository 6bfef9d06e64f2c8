package schema

import (
	"fmt"
	"reflect"
	"slices"
	"strings"

	"saddlebook/content/fault"
	"saddlebook/content/place"
	"saddlebook/kinetics/unit"
)

// Decode fills a struct from a block by its field list, and reports everything
// that does not fit, in source order, with the label of the root. into is a
// pointer to a struct whose fields are tagged `key:"name"`; Check says which Go
// types fit. Whatever is wrong is left at its zero value or out of its list, and the
// rest is decoded. What Parse has reported is not reported again.
// A Broken root decodes to nothing.
func Decode(n *Node, fields []Field, into any) fault.List {
	if n.Broken {
		return nil
	}
	d := &decoder{root: n, fields: fields}
	d.table(n, fields, reflect.ValueOf(into).Elem())
	d.faults.Sort()
	return d.faults
}

type decoder struct {
	root   *Node
	fields []Field         // of the root
	path   []string        // of the node in hand
	below  map[string]bool // keys of the root that stand under a header
	faults fault.List
}

func (d *decoder) report(at fault.Place, msg, fix string) {
	d.faults = append(d.faults, fault.Diagnostic{At: at, Block: d.root.Label, Key: fault.Key(d.path), Msg: msg, Fix: fix})
}

// unit reports an error of package unit at its character in a text.
func (d *decoder) unit(n *Node, err error, fix string) {
	e, ok := err.(*unit.Error)
	if !ok {
		e = &unit.Error{Msg: err.Error()}
	}
	if e.Fix != "" {
		fix = e.Fix
	}
	d.faults = append(d.faults, fault.Diagnostic{At: n.inside(e.At), Block: d.root.Label, Key: fault.Key(d.path), Msg: e.Msg, Fix: fix, Err: err})
}

// in runs f with key added to the path.
func (d *decoder) in(key string, f func()) {
	d.path = append(d.path, key)
	f()
	d.path = d.path[:len(d.path)-1]
}

// table fills a struct from the entries of a table.
func (d *decoder) table(n *Node, fields []Field, into reflect.Value) {
	slots := slotsOf(into.Type())
	misspelt := map[string]bool{} // keys that are there under a wrong name
	for _, kid := range n.Kids {
		if kid.refused {
			continue
		}
		i := slices.IndexFunc(fields, func(f Field) bool { return f.Key == kid.Key })
		d.in(kid.Key, func() {
			if i < 0 {
				misspelt[d.unknown(kid, fields)] = true
				return
			}
			d.value(kid, fields[i], into.FieldByIndex(slots[kid.Key]))
		})
	}
	for _, f := range fields {
		if f.Required && n.kid(f.Key) == nil && !misspelt[f.Key] && !(len(d.path) == 0 && d.below[f.Key]) {
			d.in(f.Key, func() {
				d.report(n.KeyAt, "the key "+quote(f.Key)+" is missing", "write "+f.line())
			})
		}
	}
}

// unknown reports a key that is not in the list, and returns the key that was
// most likely meant, or "".
func (d *decoder) unknown(n *Node, fields []Field) string {
	msg := "the key " + quote(n.Key) + " is not known here"
	known := keys(fields)
	near := Nearest(n.Key, known)
	switch all := strings.Join(known, ", "); {
	case near != "":
		d.report(n.KeyAt, msg, "write "+near)
	case d.misplaced(n.Key):
		d.report(n.KeyAt, msg, d.move(n.Key))
	case len(all) <= 100:
		d.report(n.KeyAt, msg, "write one of "+all)
	default:
		kind, _, _ := strings.Cut(d.root.Label, " ")
		d.report(n.KeyAt, msg, strings.TrimSpace("take one from the list of keys: saddlebook reference "+kind))
	}
	return near
}

// misplaced tells whether a key inside a table is one of the block's own: keys
// after a [header] belong to its table.
func (d *decoder) misplaced(key string) bool {
	return len(d.path) > 1 && slices.Contains(keys(d.fields), key)
}

// move words the remedy for a misplaced key.
func (d *decoder) move(key string) string {
	if d.below == nil {
		d.below = map[string]bool{}
	}
	d.below[key] = true
	return fmt.Sprintf("move it above the first [%s] header, for it belongs to no table", d.path[0])
}

func keys(fields []Field) []string {
	list := make([]string, len(fields))
	for i, f := range fields {
		list[i] = f.Key
	}
	return list
}

// value fills one field.
func (d *decoder) value(n *Node, f Field, into reflect.Value) {
	switch f.Type {
	case Text:
		if text, ok := d.text(n, f); ok {
			into.SetString(text)
		}
	case Words:
		into.Set(reflect.ValueOf(d.words(n, f)).Convert(into.Type()))
	case Flag:
		if n.Kind != Flag {
			d.wrong(n, f)
			return
		}
		fill(into).SetBool(n.Truth)
	case Whole:
		if n.Kind != Whole {
			d.wrong(n, f)
			return
		}
		const most = 1 << 53 // beyond it a float skips whole numbers
		if n.Num > most || n.Num < -most {
			d.report(n.At, "the number "+n.Text+" is out of range", "write a smaller one")
			return
		}
		fill(into).SetInt(int64(n.Num))
	case Real:
		if n.Kind != Real && n.Kind != Whole {
			d.wrong(n, f)
			return
		}
		fill(into).SetFloat(n.Num)
	case Amount:
		if q, ok := d.amount(n, f); ok {
			fill(into).Set(reflect.ValueOf(q))
		}
	case Amounts:
		into.Set(reflect.ValueOf(d.amounts(n, f)))
	case Table:
		if n.Kind != Table {
			d.wrong(n, f)
			return
		}
		d.table(n, f.Fields, fill(into))
	case Tables:
		d.tables(n, f, into)
	case Named:
		d.named(n, f, into)
	case AmountsByName:
		into.Set(reflect.ValueOf(d.amountsByName(n, f)))
	case TextsByName:
		into.Set(reflect.ValueOf(d.textsByName(n, f)))
	case Groups:
		into.Set(reflect.ValueOf(d.groups(n, f)))
	case Bounds:
		if b := d.bound(n, f); b != nil {
			into.Set(reflect.ValueOf(b))
		}
	default:
		panic(fmt.Sprintf("schema: field %q has an unknown type", f.Key))
	}
}

// fill returns what a value is written to: the field, or a new value it points to.
func fill(into reflect.Value) reflect.Value {
	if into.Kind() != reflect.Pointer {
		return into
	}
	into.Set(reflect.New(into.Type().Elem()))
	return into.Elem()
}

// slotsOf returns where the tagged fields of a struct are, embedded ones too.
func slotsOf(t reflect.Type) map[string][]int {
	slots := map[string][]int{}
	for _, f := range reflect.VisibleFields(t) {
		if key := f.Tag.Get("key"); key != "" {
			slots[key] = f.Index
		}
	}
	return slots
}

// tables fills a slice of structs from an array of tables.
func (d *decoder) tables(n *Node, f Field, into reflect.Value) {
	if n.Kind == Table {
		fix := "write its header as [[" + place.Name(n.Key) + "]]"
		if n.inline {
			fix = "put it in brackets: " + place.Name(n.Key) + " = [{ ... }]"
		}
		d.report(n.At, "a single table stands where a list of tables is wanted", fix)
		return
	}
	if n.Kind != Array {
		d.wrong(n, f)
		return
	}
	list := reflect.MakeSlice(into.Type(), 0, len(n.Kids))
	for _, kid := range n.Kids {
		d.in(kid.Key, func() {
			if kid.Kind != Table {
				d.report(kid.At, found(kid)+" stands where a table is wanted", "write { "+inner(f.Fields)+" }")
				return
			}
			v := reflect.New(into.Type().Elem()).Elem()
			d.table(kid, f.Fields, v)
			list = reflect.Append(list, v)
		})
	}
	if len(n.Kids) == 0 {
		d.empty(n, f)
	}
	into.Set(list)
}

// named fills a slice of structs from a table of tables.
func (d *decoder) named(n *Node, f Field, into reflect.Value) {
	list := reflect.MakeSlice(into.Type(), 0, len(n.Kids))
	d.each(n, f, func(kid *Node) {
		if kid.Kind != Table {
			fix := "write " + place.Name(kid.Key) + " = { " + inner(f.Fields) + " }"
			if d.misplaced(kid.Key) {
				fix = d.move(kid.Key)
			}
			d.report(kid.At, found(kid)+" stands where a table is wanted", fix)
			return
		}
		v := reflect.New(into.Type().Elem()).Elem()
		v.FieldByIndex(slotsOf(v.Type())["*"]).SetString(kid.Key)
		d.table(kid, f.Fields, v)
		list = reflect.Append(list, v)
	})
	into.Set(list)
}

// each calls do for every entry of a table whose keys are names.
func (d *decoder) each(n *Node, f Field, do func(kid *Node)) {
	if n.Kind != Table {
		d.wrong(n, f)
		return
	}
	for _, kid := range n.Kids {
		if kid.refused {
			continue
		}
		d.in(kid.Key, func() {
			if msg, fix := NameFault(kid.Key); msg != "" && f.Type != TextsByName {
				d.report(kid.KeyAt, msg, fix)
			}
			do(kid)
		})
	}
	if len(n.Kids) == 0 && f.Required {
		d.empty(n, f)
	}
}

// empty reports a list or table with nothing in it.
func (d *decoder) empty(n *Node, f Field) {
	what := "list"
	if n.Kind == Table {
		what = "table"
	}
	fix := "write " + f.line()
	if !f.Required {
		fix += ", or leave the key out"
	}
	d.report(n.At, "the "+what+" is empty", fix)
}

// found says what stands at a node, value quoted.
func found(n *Node) string {
	switch n.Kind {
	case Table:
		return "a table"
	case Array:
		return "a list"
	case Text:
		return "the text " + quote(n.Text)
	case Flag:
		return "the truth value " + n.Text
	case Date:
		return "the date " + n.Text
	}
	return "the number " + n.Text
}

// wrong reports a value of the wrong type, with the remedy that comes nearest.
func (d *decoder) wrong(n *Node, f Field) {
	fix, key := "write "+f.line(), place.Name(f.Key)
	scalar := n.Kind != Table && n.Kind != Array
	switch f.Type {
	case Text, Words:
		if scalar && n.Kind != Text && len(f.OneOf) == 0 {
			fix = "write " + key + " = " + place.Literal(n.Text)
		}
	case Whole:
		if n.Kind == Text && isWhole(n.Text) {
			fix = "write " + key + " = " + n.Text
		} else if n.Kind == Real && n.Num == float64(int64(n.Num)) {
			fix = fmt.Sprintf("write %s = %d", key, int64(n.Num))
		}
	case Real:
		if n.Kind == Text && isNumber(n.Text) {
			fix = "write " + key + " = " + n.Text
		}
	case Flag:
		if word := strings.ToLower(n.Text); n.Kind == Text && (word == "true" || word == "false") {
			fix = "write " + key + " = " + word
		}
	}
	d.report(n.At, found(n)+" stands where "+f.wanted()+" is wanted", fix)
}
