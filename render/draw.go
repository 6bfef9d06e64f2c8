package render

import (
	"bytes"
	"context"
	"fmt"
	"os"
	"strings"

	"saddlebook/content/fault"
	"saddlebook/content/schema"
	"saddlebook/diagram/ink"
)

// NoFigure says that a note has no figure of that id.
type NoFigure struct{ Note, ID, Fix string }

func (e *NoFigure) Error() string {
	return fmt.Sprintf("note %q has no figure %q; %s", e.Note, e.ID, e.Fix)
}

// Draw writes the figure of one block as a stand-alone SVG.
func Draw(ctx context.Context, src Source, id, to string, o Options) (fault.List, error) {
	s, faults, err := open(ctx, src, o)
	if err != nil || faults.Failed() {
		return faults, err
	}
	var figures []string
	for _, b := range s.Blocks {
		if b.Source.Note.Path != src.Only {
			continue
		}
		sheet, err := lay(b)
		if err != nil {
			return faults, err
		}
		if len(sheet.Figures()) == 0 {
			continue
		}
		figures = append(figures, b.ID)
		if b.ID != id {
			continue
		}
		var svg bytes.Buffer
		if err := ink.Alone(&svg, sheet.Figures()[0].Scene); err != nil {
			return faults, err
		}
		return faults, os.WriteFile(to, svg.Bytes(), 0o666)
	}
	return faults, &NoFigure{src.Only, id, figureFix(id, figures)}
}

func figureFix(id string, figures []string) string {
	if near := schema.Nearest(id, figures); near != "" {
		return fmt.Sprintf("did you mean %q?", near)
	}
	if len(figures) == 0 {
		return "name a note with a profile or an equilibrium in it"
	}
	return "write one of " + strings.Join(figures, ", ")
}
