package render

import (
	"encoding/json"
	"fmt"
	"io"
	"strings"

	"saddlebook/content/schema"
	"saddlebook/render/kind"
)

// UnknownKind says that a block kind does not exist.
type UnknownKind struct{ Name, Fix string }

func (e *UnknownKind) Error() string {
	return fmt.Sprintf("%q is not a kind of block; %s", e.Name, e.Fix)
}

// Reference writes what a block kind takes and gives, as text or as JSON
// Schema; without a name, the list of kinds.
func Reference(w io.Writer, name string, asSchema bool) error {
	if name == "" {
		if asSchema {
			all := map[string]any{}
			for _, n := range kind.Names() {
				k := kind.Find(n)
				all[n] = schema.JSONSchema(n, k.Doc, k.Fields)
			}
			return writeJSON(w, all)
		}
		for _, n := range kind.Names() {
			if _, err := fmt.Fprintf(w, "%-12s %s\n", n, kind.Find(n).Doc); err != nil {
				return err
			}
		}
		_, err := fmt.Fprintf(w, "\nMore on one of them: saddlebook reference KIND\n")
		return err
	}
	k := kind.Find(name)
	if k == nil {
		fix := "write one of " + strings.Join(kind.Names(), ", ")
		if near := schema.Nearest(name, kind.Names()); near != "" {
			fix = fmt.Sprintf("did you mean %q?", near)
		}
		return &UnknownKind{name, fix}
	}
	if asSchema {
		return writeJSON(w, schema.JSONSchema(k.Name, k.Doc, k.Fields))
	}
	if err := schema.Reference(w, k.Name, k.Doc, k.Fields); err != nil {
		return err
	}
	if len(k.Gives) == 0 {
		return nil
	}
	if _, err := fmt.Fprintf(w, "\nResults, as ID/...\n"); err != nil {
		return err
	}
	for _, g := range k.Gives {
		if _, err := fmt.Fprintf(w, "  %-28s %s\n", g.Key, g.Doc); err != nil {
			return err
		}
	}
	return nil
}

func writeJSON(w io.Writer, v any) error {
	enc := json.NewEncoder(w)
	enc.SetEscapeHTML(false)
	enc.SetIndent("", "  ")
	return enc.Encode(v)
}

// Kinds lists the block kinds, for completion.
func Kinds() []string { return kind.Names() }
