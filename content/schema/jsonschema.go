package schema

import (
	"slices"

	"saddlebook/content/fault"
	"saddlebook/kinetics/unit"
)

// namePattern is NameFault as a regular expression.
const namePattern = `^[^/@:{}|+\s]([^/@:{}|+\t\r\n]*[^/@:{}|+\s])?$`

// JSONSchema describes a block kind as a JSON Schema (draft 2020-12) of its TOML
// read as JSON, for editors that complete and check TOML by such a schema. The
// quantities inside texts are described and not checked.
func JSONSchema(name, doc string, fields []Field) map[string]any {
	s := objectSchema(fields)
	s["$schema"] = "https://json-schema.org/draft/2020-12/schema"
	s["title"] = name
	s["description"] = doc
	return s
}

func objectSchema(fields []Field) map[string]any {
	properties := map[string]any{}
	required := []any{}
	for _, f := range fields {
		properties[f.Key] = f.schema()
		if f.Required {
			required = append(required, f.Key)
		}
	}
	s := map[string]any{"type": "object", "additionalProperties": false, "properties": properties}
	if len(required) > 0 {
		s["required"] = required
	}
	return s
}

// schema describes one field.
func (f Field) schema() map[string]any {
	s := f.shape()
	description := f.Doc
	if len(f.Dims) > 0 {
		description += "; " + f.wanted() + "; " + f.bareWords()
	}
	if f.Wants != "" {
		description += "; names a " + f.Wants
	}
	if f.Default != "" {
		description += "; without it: " + f.Default
	}
	s["description"] = description
	if v := f.exampleValue(); v != nil {
		s["examples"] = []any{v}
	}
	return s
}

func (f Field) shape() map[string]any {
	text := map[string]any{"type": "string", "minLength": 1}
	name := map[string]any{"type": "string", "pattern": namePattern}
	if len(f.OneOf) > 0 {
		words := make([]any, len(f.OneOf))
		for i, w := range f.OneOf {
			words[i] = w
		}
		text = map[string]any{"type": "string", "enum": words}
	}
	if f.Name {
		text["pattern"] = namePattern
	}
	switch f.Type {
	case Text:
		return text
	case Words:
		return oneOrMore(text)
	case Flag:
		return map[string]any{"type": "boolean"}
	case Whole:
		return map[string]any{"type": "integer"}
	case Real:
		return map[string]any{"type": "number"}
	case Amount:
		return f.amountSchema()
	case Amounts:
		return oneOrMore(f.amountSchema())
	case Table:
		return objectSchema(f.Fields)
	case Tables:
		return map[string]any{"type": "array", "minItems": 1, "items": objectSchema(f.Fields)}
	case Named:
		return f.byName(objectSchema(f.Fields), name)
	case AmountsByName:
		return f.byName(f.amountSchema(), name)
	case TextsByName:
		return f.byName(text, nil)
	case Groups:
		list := map[string]any{"type": "array", "minItems": 1, "uniqueItems": true, "items": name}
		return map[string]any{"anyOf": []any{name, list, f.byName(map[string]any{"anyOf": []any{name, list}}, name)}}
	}
	return map[string]any{"type": []any{"number", "string"}} // Bounds
}

// byName describes a table whose keys are names.
func (f Field) byName(value, name map[string]any) map[string]any {
	s := map[string]any{"type": "object", "additionalProperties": value}
	if name != nil {
		s["propertyNames"] = name
	}
	if f.Required {
		s["minProperties"] = 1
	}
	return s
}

func oneOrMore(item map[string]any) map[string]any {
	return map[string]any{"anyOf": []any{item, map[string]any{"type": "array", "minItems": 1, "items": item}}}
}

// amountSchema describes a quantity: a text, or a number where a bare one has a
// meaning. Zero needs no unit, save for a temperature.
func (f Field) amountSchema() map[string]any {
	text := map[string]any{"type": "string", "minLength": 1}
	switch {
	case f.Bare != "" || slices.Contains(f.Dims, unit.None):
		return map[string]any{"anyOf": []any{text, map[string]any{"type": "number"}}}
	case slices.Contains(f.Dims, unit.Temperature):
		return text
	}
	return map[string]any{"anyOf": []any{text, map[string]any{"const": 0}}}
}

// exampleValue is the example as JSON, or nil.
func (f Field) exampleValue() any {
	if f.Example == "" {
		return nil
	}
	n, faults := Parse(f.line(), func(int) fault.Place { return fault.Place{Line: 1, Col: 1} })
	if len(faults) > 0 {
		return nil // Check refuses such an example
	}
	return n.kid(f.Key).json()
}

// json returns a node as the values of encoding/json.
func (n *Node) json() any {
	switch n.Kind {
	case Table:
		m := map[string]any{}
		for _, k := range n.Kids {
			m[k.Key] = k.json()
		}
		return m
	case Array:
		list := []any{}
		for _, k := range n.Kids {
			list = append(list, k.json())
		}
		return list
	case Whole, Real:
		return n.Num
	case Flag:
		return n.Truth
	}
	return n.Text
}
