package diagram

import (
	"fmt"
	"math"
	"strings"

	"saddlebook/diagram/axis"
	"saddlebook/diagram/lettering"
)

// Bars is a figure of shares as horizontal bars from 0 to 100 %, in groups such
// as temperatures.
type Bars struct {
	ID     string
	Title  string // default "Shares"
	Desc   string // default: the shares in words
	Axis   string // what is shared, default "share"
	Groups []BarGroup
	Width  float64 // default 720
}

// BarGroup is the bars of one condition.
type BarGroup struct {
	Name string // empty: no heading
	Bars []Bar
}

// Bar is one share.
type Bar struct {
	Name      string
	Share     float64  // a fraction, 0 to 1
	Text      string   // as printed; default the share in percent
	Low, High *float64 // ends of an interval, fractions; both or none
}

// Scene lays the bars out. The error is an *Error.
func (b Bars) Scene() (Scene, error) {
	if b.Title == "" {
		b.Title = "Shares"
	}
	if b.Axis == "" {
		b.Axis = "share"
	}
	if b.Width == 0 {
		b.Width = 720
	}
	if !(b.Width >= 240 && b.Width <= 4000) {
		return Scene{}, refuse("use 240 to 4000", "bars cannot be %g wide", b.Width)
	}
	if err := b.check(); err != nil {
		return Scene{}, err
	}
	b.complete()
	if b.Desc == "" {
		b.Desc = b.words()
	}
	return frame(b.ID, b.Title, b.Desc, b.Width, b.marks()), nil
}

func (b Bars) check() error {
	n := 0
	for _, g := range b.Groups {
		for _, bar := range g.Bars {
			n++
			if !fraction(bar.Share) {
				return refuse("use a fraction of 0 to 1", "%q has the share %g", bar.Name, bar.Share)
			}
			if (bar.Low == nil) != (bar.High == nil) {
				return refuse("give both or none", "%q has one end of its interval only", bar.Name)
			}
			if bar.Low != nil && !(fraction(*bar.Low) && fraction(*bar.High) && *bar.Low <= *bar.High) {
				return refuse("use fractions of 0 to 1, the lower one first", "%q has the interval %g to %g", bar.Name, *bar.Low, *bar.High)
			}
		}
	}
	if n == 0 {
		return refuse("add one", "a figure of shares without a bar")
	}
	return nil
}

// fraction allows for the last digits of a computed share.
func fraction(x float64) bool { return x >= -1e-9 && x <= 1+1e-9 }

func (b *Bars) complete() {
	groups := make([]BarGroup, len(b.Groups))
	for i, g := range b.Groups {
		groups[i] = BarGroup{g.Name, append([]Bar{}, g.Bars...)}
		for k := range g.Bars {
			if bar := &groups[i].Bars[k]; bar.Text == "" {
				bar.Text = axis.Text(100*bar.Share, 1) + " %"
			}
		}
	}
	b.Groups = groups
}

func (b Bars) words() string {
	var parts []string
	for _, g := range b.Groups {
		var shares []string
		for _, bar := range g.Bars {
			shares = append(shares, bar.Name+" "+bar.Text)
		}
		text := strings.Join(shares, ", ") + "."
		if g.Name != "" {
			text = g.Name + ": " + text
		}
		parts = append(parts, text)
	}
	return strings.Join(parts, " ")
}

func (b Bars) marks() []Mark {
	const thick, space = 16.0, 9.0
	names := make([][]*block, len(b.Groups))
	widest, print := 0.0, 0.0
	for i, g := range b.Groups {
		for _, bar := range g.Bars {
			var t block
			for _, line := range lettering.Wrap(bar.Name, nameSize, math.Min(190, b.Width/3)) {
				t.add("name", line, nameSize)
			}
			names[i] = append(names[i], &t)
			widest = math.Max(widest, t.w)
			print = math.Max(print, lettering.Width(lettering.Runs(bar.Text), valueSize))
		}
	}
	left := margin + widest + 10
	scale := axis.Scale{Low: 0, High: 1, From: left, To: math.Max(left+120, b.Width-margin-print-12)}
	var marks []Mark
	y := 0.0
	for i, g := range b.Groups {
		if len(g.Bars) == 0 {
			continue
		}
		if i > 0 {
			y += 12
		}
		for _, line := range lettering.Wrap(g.Name, nameSize, scale.To-margin) {
			marks = append(marks, Words{Role: "group-text", X: left, Y: y + lettering.Ascent*nameSize, Size: nameSize, Runs: line})
			y += lettering.Leading * nameSize
		}
		y += 5
		from := y
		for k, bar := range g.Bars {
			t := names[i][k]
			height := math.Max(thick, t.h)
			middle := y + height/2
			marks = append(marks, Group{Role: "label", Marks: t.at(left-10-t.w, middle-t.h/2, End)})
			end := scale.At(math.Min(1, math.Max(0, bar.Share)))
			marks = append(marks, Box{Role: "bar", X: left, Y: middle - thick/2, W: end - left, H: thick})
			if bar.Low != nil {
				low, high := scale.At(math.Max(0, *bar.Low)), scale.At(math.Min(1, *bar.High))
				marks = append(marks,
					Line{Role: "whisker", X1: low, Y1: middle, X2: high, Y2: middle},
					Line{Role: "whisker", X1: low, Y1: middle - 4, X2: low, Y2: middle + 4},
					Line{Role: "whisker", X1: high, Y1: middle - 4, X2: high, Y2: middle + 4})
				end = math.Max(end, high)
			}
			marks = append(marks, Words{Role: "value", X: end + 7, Y: middle + 0.35*valueSize, Size: valueSize, Runs: lettering.Runs(bar.Text)})
			y += height + space
		}
		marks = append(marks, Line{Role: "axis", X1: left, Y1: from - 3, X2: left, Y2: y - space + 3})
	}
	y += 2
	marks = append(marks, Line{Role: "axis", X1: left, Y1: y, X2: scale.To, Y2: y})
	for _, v := range []float64{0, 20, 40, 60, 80, 100} {
		x := scale.At(v / 100)
		marks = append(marks,
			Line{Role: "tick", X1: x, Y1: y, X2: x, Y2: y + 4},
			Words{Role: "tick-text", X: x, Y: y + 18, Size: tickSize, Anchor: Middle, Runs: lettering.Plain(fmt.Sprint(v))})
	}
	title := lettering.Quantity(b.Axis, "%")
	return append(marks, Words{Role: "axis-text", X: scale.To, Y: y + 36, Size: tickSize, Anchor: End, Runs: title})
}
