package diagram

import (
	"fmt"
	"math"

	"saddlebook/diagram/lettering"
	"saddlebook/kinetics/unit"
)

// netText is the text of a node or a step and the frame around it.
type netText struct {
	block
	share  *float64
	strong bool
	framed bool
	w, h   float64 // with the frame
}

const (
	netPadX  = 8.0
	netPadY  = 5.0
	netStrip = 6.0 // height of the strip that shows a share
)

// nodeText sets a node; count stands before the name where it is not 1.
func (n Network) nodeText(d NetworkNode, count int, framed bool, wrap float64) *netText {
	t := &netText{share: d.Share, strong: d.Note != "", framed: framed || d.Note != "" || d.Share != nil}
	name := d.shown()
	if count > 1 {
		name = fmt.Sprint(count, " ", name)
	}
	t.set("name", name, nameSize, wrap)
	text := d.Text
	if text == "" && d.Share != nil {
		text = unit.Percent(*d.Share)
	}
	t.set("value", text, valueSize, wrap)
	t.set("aside", d.Note, tickSize, math.Max(wrap, 90))
	t.w, t.h = t.block.w+6, t.block.h+4
	if t.framed {
		t.w, t.h = math.Max(28, t.block.w+2*netPadX), math.Max(24, t.block.h+2*netPadY)
	}
	if t.share != nil {
		t.w = math.Max(t.w, 56)
		t.h += netStrip + 3
	}
	return t
}

func (n Network) stepText(s NetworkStep, wrap float64) *netText {
	t := &netText{}
	t.set("name", s.shown(), valueSize, wrap)
	t.set("value", s.Text, valueSize, wrap)
	t.set("aside", s.Note, tickSize, math.Max(wrap, 90))
	t.w, t.h = t.block.w, t.block.h
	return t
}

// set wraps text; a word is parted only where it is wider than any name may be.
func (t *netText) set(role Role, text string, size, wrap float64) {
	for _, line := range lettering.Wrap(text, size, math.Max(wrap, math.Min(widestName, lettering.Widest(text, size)))) {
		t.add(role, line, size)
	}
}

// centred draws it around a place.
func (t *netText) centred(x, y float64) []Mark {
	var marks []Mark
	foot := y + t.h/2
	if t.framed {
		role := Role("node")
		if t.strong {
			role = "node noted"
		}
		marks = append(marks, Box{role, x - t.w/2, y - t.h/2, t.w, t.h, 5})
	}
	top := y - t.block.h/2
	if t.share != nil {
		foot -= netStrip + 5
		w := t.w - 2*netPadX
		share := math.Max(0, math.Min(1, *t.share))
		marks = append(marks, Box{Role: "bar", X: x - w/2, Y: foot, W: w * share, H: netStrip}, Box{Role: "tick", X: x - w/2, Y: foot, W: w, H: netStrip})
		top -= (netStrip + 3) / 2
	}
	return append(marks, t.label(x-t.block.w/2, top, Middle))
}

// label is the text alone, its top left corner at a place.
func (t *netText) label(x, y float64, align Anchor) Mark {
	return Group{Role: "label", Marks: t.at(x, y, align)}
}

// number is a count beside a line, its left end and middle at a place.
func number(n int, x, y float64) Words {
	return Words{Role: "value", X: x, Y: y + (lettering.Ascent-lettering.Descent)/2*valueSize, Size: valueSize, Runs: lettering.Plain(fmt.Sprint(n))}
}

const numberHeight = (lettering.Ascent + lettering.Descent) * valueSize

func numberWidth(n int) float64 { return lettering.Width(lettering.Plain(fmt.Sprint(n)), valueSize) }

// key says what the width of lines means, in rows within the width, y being its
// top.
func (n Network) key(full, width, y float64) []Mark {
	type item struct {
		sample Curve
		text   string
	}
	stroke := func(role Role, w float64) Curve {
		path := []Command{{Op: Move}, {Op: To, X: 26}}
		if w > 0 {
			path = ribbon(path, w/2, -w/2)
		}
		return Curve{role, path}
	}
	var items []item
	if full > 0 {
		value := func(v float64) string {
			text := unit.Digits(v, 2)
			if n.FluxUnit != "" {
				text += " " + n.FluxUnit
			}
			return text
		}
		round := roundBelow(full)
		items = append(items, item{stroke("flow", netMost*round/full), value(round)},
			item{stroke("flow", netMost*round/full/2), value(round / 2)},
			item{stroke("reaction idle", 0), "less than " + value(netRest*full)})
	} else if n.Steps[0].Flux != nil {
		items = append(items, item{stroke("reaction idle", 0), "none"})
	}
	var marks []Mark
	x := 0.0
	line := (lettering.Ascent + lettering.Descent) * tickSize
	write := func(role Role, text string, indent float64) {
		for i, runs := range lettering.Wrap(text, tickSize, width-indent) {
			if i > 0 {
				y += rowHeight
			}
			marks = append(marks, Words{Role: role, X: x + indent, Y: y + lettering.Ascent*tickSize, Size: tickSize, Runs: runs})
		}
	}
	if len(items) > 0 {
		write("aside", n.Flux, 0)
		x = lettering.Width(lettering.Runs(n.Flux), tickSize) + 16
	}
	if len(n.Cycle) > 0 {
		items = append(items, item{stroke("band fill-1", 12), n.CycleName})
	}
	for _, it := range items {
		w := 33 + lettering.Width(lettering.Runs(it.text), tickSize)
		if x > 0 && x+w > width {
			x, y = 0, y+rowHeight+2
		}
		marks = append(marks, moved([]Mark{it.sample}, x, y+line/2)...)
		write("aside", it.text, 33)
		x += w + 18
	}
	return marks
}

// roundBelow is the greatest of 1, 2 and 5 times a power of ten that v reaches.
func roundBelow(v float64) float64 {
	power := math.Floor(math.Log10(v))
	for ; ; power-- {
		for _, u := range []float64{5, 2, 1} {
			if r := u * math.Pow(10, power); r <= v*(1+1e-9) && r > 0 {
				return r
			}
		}
		if power < -300 {
			return v
		}
	}
}
