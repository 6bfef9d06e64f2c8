package schema

import (
	"fmt"
	"reflect"
	"slices"
	"sort"
	"strings"

	"saddlebook/content/fault"
	"saddlebook/kinetics/unit"
)

// Check tells whether a field list and the struct it fills agree: the same keys
// in both, Go types that fit, every field documented, every required field with
// an example, every example one that decodes, and every unit of bare numbers one
// of the field's own kinds. into is a pointer to the struct. The error names
// the field; it is a fault of the program.
func Check(fields []Field, into any) error {
	t := reflect.TypeOf(into)
	if t == nil || t.Kind() != reflect.Pointer || t.Elem().Kind() != reflect.Struct {
		return fmt.Errorf("schema: %T is no pointer to a struct", into)
	}
	c := checker{root: fields}
	return c.table(fields, t.Elem(), nil, false)
}

type checker struct{ root []Field }

func (c *checker) table(fields []Field, t reflect.Type, path []string, named bool) error {
	slots := slotsOf(t)
	if err := doubleTags(t); err != nil {
		return err
	}
	if index, ok := slots["*"]; named != ok {
		return fmt.Errorf("schema: %s: a string tagged `key:\"*\"` belongs to Named structs, and to them alone", at(path, t))
	} else if ok && t.FieldByIndex(index).Type.Kind() != reflect.String {
		return fmt.Errorf("schema: %s: the field tagged `key:\"*\"` is no string", at(path, t))
	}
	delete(slots, "*")
	seen := map[string]bool{}
	for _, f := range fields {
		p := below(path, f.Key)
		if seen[f.Key] {
			return fmt.Errorf("schema: %s is listed twice", fault.Key(p))
		}
		seen[f.Key] = true
		index, ok := slots[f.Key]
		if !ok {
			return fmt.Errorf("schema: %s has no field tagged `key:%q` in %s", fault.Key(p), f.Key, t)
		}
		for i := 1; i < len(index); i++ {
			if t.FieldByIndex(index[:i]).Type.Kind() == reflect.Pointer {
				return fmt.Errorf("schema: %s lies behind an embedded pointer in %s", fault.Key(p), t)
			}
		}
		if sf := t.FieldByIndex(index); !sf.IsExported() {
			return fmt.Errorf("schema: %s fills the unexported field %s of %s", fault.Key(p), sf.Name, t)
		}
		if err := c.field(f, t.FieldByIndex(index).Type, p); err != nil {
			return err
		}
		delete(slots, f.Key)
	}
	left := make([]string, 0, len(slots))
	for key := range slots {
		left = append(left, key)
	}
	if sort.Strings(left); len(left) > 0 {
		return fmt.Errorf("schema: %s is tagged in %s and not in the field list", fault.Key(below(path, left[0])), t)
	}
	return nil
}

// doubleTags refuses one key on two fields, of which only one would be filled.
func doubleTags(t reflect.Type) error {
	seen := map[string]bool{}
	for _, f := range reflect.VisibleFields(t) {
		if key := f.Tag.Get("key"); key != "" {
			if seen[key] {
				return fmt.Errorf("schema: %s has two fields tagged `key:%q`", t, key)
			}
			seen[key] = true
		}
	}
	return nil
}

func at(path []string, t reflect.Type) string {
	if len(path) == 0 {
		return t.String()
	}
	return fault.Key(path)
}

func (c *checker) field(f Field, t reflect.Type, path []string) error {
	bad := func(format string, args ...any) error {
		return fmt.Errorf("schema: "+fault.Key(path)+": "+format, args...)
	}
	amounts := f.Type == Amount || f.Type == Amounts || f.Type == AmountsByName
	tables := f.Type == Table || f.Type == Tables || f.Type == Named
	texts := f.Type == Text || f.Type == Words
	switch {
	case f.Key == "" || f.Key == "*" || strings.TrimSpace(f.Key) != f.Key:
		return bad("%q is no key", f.Key)
	case strings.TrimSpace(f.Doc) == "":
		return bad("has no Doc")
	case f.Required && f.Example == "":
		return bad("is required and has no Example")
	case f.Required && f.Default != "":
		return bad("is required and has a Default")
	case amounts != (len(f.Dims) > 0):
		return bad("Dims belong to amounts, and every amount needs them")
	case f.Bare != "" && !amounts:
		return bad("Bare belongs to amounts")
	case tables != (len(f.Fields) > 0):
		return bad("Fields belong to tables, and every table needs them")
	case len(f.OneOf) > 0 && !texts, f.Name && !texts:
		return bad("OneOf and Name belong to texts")
	}
	if !fits(f.Type, t) {
		return bad("%s does not fit %s", t, f.wanted())
	}
	if err := c.bare(f); err != nil {
		return bad("%v", err)
	}
	if tables {
		for t.Kind() == reflect.Pointer || t.Kind() == reflect.Slice {
			t = t.Elem()
		}
		if err := c.table(f.Fields, t, path, f.Type == Named); err != nil {
			return err
		}
	}
	return c.example(f, path)
}

var (
	quantityType = reflect.TypeFor[unit.Quantity]()
	goTypes      = map[Type][]reflect.Type{
		Text:          {reflect.TypeFor[string]()},
		Words:         {reflect.TypeFor[[]string]()},
		Flag:          {reflect.TypeFor[bool](), reflect.TypeFor[*bool]()},
		Whole:         {reflect.TypeFor[int](), reflect.TypeFor[*int]()},
		Real:          {reflect.TypeFor[float64](), reflect.TypeFor[*float64]()},
		Amount:        {quantityType, reflect.PointerTo(quantityType)},
		Amounts:       {reflect.SliceOf(quantityType)},
		AmountsByName: {reflect.TypeFor[[]NamedAmount]()},
		TextsByName:   {reflect.TypeFor[[]NamedText]()},
		Groups:        {reflect.TypeFor[[]Group]()},
		Bounds:        {reflect.TypeFor[*Bound]()},
	}
)

// fits tells whether a Go type can hold a type of field.
func fits(typ Type, t reflect.Type) bool {
	switch typ {
	case Table:
		return t.Kind() == reflect.Struct || t.Kind() == reflect.Pointer && t.Elem().Kind() == reflect.Struct
	case Tables, Named:
		return t.Kind() == reflect.Slice && t.Elem().Kind() == reflect.Struct
	}
	return slices.Contains(goTypes[typ], t)
}

// bare checks the unit of bare numbers, and that of every word that may name it.
func (c *checker) bare(f Field) error {
	symbols := []string{f.Bare}
	if key, named := strings.CutPrefix(f.Bare, "@"); named {
		i := slices.IndexFunc(c.root, func(f Field) bool { return f.Key == key })
		if i < 0 || c.root[i].Type != Text {
			return fmt.Errorf("its bare unit names %q, which is no text of the block", key)
		}
		symbols = append([]string{c.root[i].Default}, c.root[i].OneOf...)
		if c.root[i].Required {
			symbols = c.root[i].OneOf
		}
	}
	for _, s := range symbols {
		if s == "" {
			continue
		}
		if _, err := unit.Lookup(s, f.Dims...); err != nil {
			return fmt.Errorf("the unit of bare numbers: %w", err)
		}
	}
	return nil
}

// example decodes the example of a field as an author would write it.
func (c *checker) example(f Field, path []string) error {
	if f.Example == "" {
		return nil
	}
	line := f.line()
	n, faults := Parse(line, func(offset int) fault.Place { return fault.Place{Line: 1, Col: offset + 1} })
	if !n.Broken {
		d := &decoder{root: n, fields: c.root}
		if kid := n.kid(f.Key); kid != nil {
			d.value(kid, f, reflect.New(goType(f)).Elem())
		}
		faults = d.faults
	}
	if len(faults) > 0 {
		return fmt.Errorf("schema: %s: the example %s: %s", fault.Key(path), line, faults[0].Msg)
	}
	return nil
}

// goType makes a type that holds the field, tables without the caller's structs.
func goType(f Field) reflect.Type {
	switch f.Type {
	case Table:
		return structOf(f.Fields, false)
	case Tables:
		return reflect.SliceOf(structOf(f.Fields, false))
	case Named:
		return reflect.SliceOf(structOf(f.Fields, true))
	}
	return goTypes[f.Type][0]
}

func structOf(fields []Field, named bool) reflect.Type {
	var parts []reflect.StructField
	add := func(key string, t reflect.Type) {
		parts = append(parts, reflect.StructField{
			Name: fmt.Sprintf("F%d", len(parts)), Type: t, Tag: reflect.StructTag(fmt.Sprintf("key:%q", key)),
		})
	}
	if named {
		add("*", reflect.TypeFor[string]())
	}
	for _, f := range fields {
		add(f.Key, goType(f))
	}
	return reflect.StructOf(parts)
}
