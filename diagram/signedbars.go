package diagram

import (
	"math"
	"strings"

	"saddlebook/diagram/axis"
	"saddlebook/diagram/lettering"
)

// SignedBars is a figure of signed numbers without a unit, such as degrees of rate
// control, as horizontal bars to both sides of a rule at zero. The axis reaches as
// far to one side as to the other, and at least from −1 to 1.
type SignedBars struct {
	ID     string
	Title  string // default: the axis, such as "Degree of rate control"
	Desc   string // default: the largest by size, then all in words
	Axis   string // what the numbers are, default "degree of rate control"
	Groups []SignedGroup
	Width  float64 // default 720
}

// SignedGroup is the bars of one condition.
type SignedGroup struct {
	Name string // empty: no heading
	Bars []SignedBar
}

// SignedBar is one signed number.
type SignedBar struct {
	Name      string
	Value     float64
	Text      string   // as printed; default Value to two decimals
	Low, High *float64 // ends of an interval; both or none
}

// Scene lays the bars out. The error is an *Error.
func (b SignedBars) Scene() (Scene, error) {
	if b.Axis == "" {
		b.Axis = "degree of rate control"
	}
	if b.Title == "" {
		b.Title = sentence(b.Axis)
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
	if b.Desc == "" {
		b.Desc = b.words()
	}
	return frame(b.ID, b.Title, b.Desc, b.Width, b.marks()), nil
}

func (b SignedBars) check() error {
	n := 0
	for _, g := range b.Groups {
		for _, bar := range g.Bars {
			n++
			if !(math.Abs(bar.Value) <= mostValue) {
				return refuse("use numbers within ±1e12", "%q has the value %g", bar.Name, bar.Value)
			}
			if (bar.Low == nil) != (bar.High == nil) {
				return refuse("give both or none", "%q has one end of its interval only", bar.Name)
			}
			if bar.Low != nil && !(*bar.Low <= *bar.High && math.Abs(*bar.Low) <= mostValue && math.Abs(*bar.High) <= mostValue) {
				return refuse("use numbers within ±1e12, the lower one first", "%q has the interval %g to %g", bar.Name, *bar.Low, *bar.High)
			}
		}
	}
	if n == 0 {
		return refuse("add one", "a figure of signed numbers without a bar")
	}
	return nil
}

func (b SignedBar) printed() string {
	if b.Text != "" {
		return b.Text
	}
	return axis.Text(b.Value, 2)
}

// reach is how far the bar and its interval go to the left and to the right of
// zero.
func (b SignedBar) reach() (low, high float64) {
	low, high = math.Min(0, b.Value), math.Max(0, b.Value)
	if b.Low != nil {
		low, high = math.Min(low, *b.Low), math.Max(high, *b.High)
	}
	return low, high
}

func (b SignedBars) words() string {
	largest := SignedBar{}
	some := false
	var parts []string
	for _, g := range b.Groups {
		if len(g.Bars) == 0 {
			continue
		}
		var values []string
		for _, bar := range g.Bars {
			values = append(values, bar.Name+" "+bar.printed())
			if !some || math.Abs(bar.Value) > math.Abs(largest.Value) {
				largest, some = bar, true
			}
		}
		text := strings.Join(values, ", ") + "."
		if g.Name != "" {
			text = g.Name + ": " + text
		}
		parts = append(parts, text)
	}
	return "Largest: " + largest.Name + ", " + largest.printed() + ". " + strings.Join(parts, " ")
}

// scale makes the bars as long as they and their texts allow between left and
// right; the axis is at least 120 long, and the figure then wider.
func (b SignedBars) scale(end, gap, left, right float64) axis.Scale {
	type side struct{ length, text float64 } // in numbers; in px
	const tick = 14                          // half the room of the last number of the axis
	before, behind := []side{{end, tick}}, []side{{end, tick}}
	for _, g := range b.Groups {
		for _, bar := range g.Bars {
			low, high := bar.reach()
			w := lettering.Width(lettering.Runs(bar.printed()), valueSize) + gap
			if bar.Value < 0 {
				before = append(before, side{-low, w})
			} else {
				behind = append(behind, side{high, w})
			}
		}
	}
	unit := math.Inf(1)
	for _, p := range before {
		for _, q := range behind {
			if sum := p.length + q.length; sum > 0 {
				unit = math.Min(unit, (right-left-p.text-q.text)/sum)
			}
		}
	}
	unit = math.Max(unit, 60/end)
	zero := 0.0
	for _, p := range before {
		zero = math.Max(zero, left+p.length*unit+p.text)
	}
	return axis.Scale{Low: -end, High: end, From: zero - end*unit, To: zero + end*unit}
}

func (b SignedBars) marks() []Mark {
	const thick, space, gap = 16.0, 9.0, 7.0
	widest, reach := 0.0, 1.0
	names := map[[2]int]*block{}
	for i, g := range b.Groups {
		for k, bar := range g.Bars {
			var t block
			for _, line := range lettering.Wrap(bar.Name, nameSize, math.Min(190, b.Width/4)) {
				t.add("name", line, nameSize)
			}
			names[[2]int{i, k}] = &t
			widest = math.Max(widest, t.w)
			low, high := bar.reach()
			reach = math.Max(reach, math.Max(high, -low))
		}
	}
	ticks, decimals := axis.Ticks(-reach, reach, 5)
	end := math.Max(-ticks[0], ticks[len(ticks)-1])
	left := margin + widest + 10
	scale := b.scale(end, gap, left, b.Width-margin)
	zero := scale.At(0)
	var marks []Mark
	y := 0.0
	for i, g := range b.Groups {
		if len(g.Bars) == 0 {
			continue
		}
		if y > 0 {
			y += 12
		}
		var heading block
		for _, line := range lettering.Wrap(g.Name, nameSize, b.Width-2*margin) {
			heading.add("group-text", line, nameSize)
		}
		if len(heading.lines) > 0 {
			marks = append(marks, Group{Role: "label", Marks: heading.at(margin, y, Start)})
			y += heading.h
		}
		y += 5
		start := y
		for k, bar := range g.Bars {
			t := names[[2]int{i, k}]
			height := math.Max(thick, t.h)
			middle := y + height/2
			if len(t.lines) > 0 {
				marks = append(marks, Group{Role: "label", Marks: t.at(left-10-t.w, middle-t.h/2, End)})
			}
			at := scale.At(bar.Value)
			role := Role("bar")
			if bar.Value < 0 {
				role = "bar minus"
			}
			marks = append(marks, Box{Role: role, X: math.Min(zero, at), Y: middle - thick/2, W: math.Abs(at - zero), H: thick})
			if bar.Low != nil {
				low, high := scale.At(*bar.Low), scale.At(*bar.High)
				marks = append(marks,
					Line{Role: "whisker", X1: low, Y1: middle, X2: high, Y2: middle},
					Line{Role: "whisker", X1: low, Y1: middle - 4, X2: low, Y2: middle + 4},
					Line{Role: "whisker", X1: high, Y1: middle - 4, X2: high, Y2: middle + 4})
			}
			low, high := bar.reach()
			text := Words{Role: "value", X: scale.At(high) + gap, Y: middle + 0.35*valueSize, Size: valueSize, Runs: lettering.Runs(bar.printed())}
			if bar.Value < 0 {
				text.X, text.Anchor = scale.At(low)-gap, End
			}
			marks = append(marks, text)
			y += height + space
		}
		marks = append(marks, Line{Role: "axis", X1: zero, Y1: start - 3, X2: zero, Y2: y - space + 3})
	}
	y += 2
	marks = append(marks, Line{Role: "axis", X1: scale.From, Y1: y, X2: scale.To, Y2: y})
	wide := 0.0
	for _, v := range ticks {
		wide = math.Max(wide, lettering.Width(lettering.Plain(axis.Text(v, decimals)), tickSize))
	}
	every := int(math.Ceil((wide + 6) / (scale.At(ticks[1]) - scale.At(ticks[0]))))
	for i, v := range ticks {
		x := scale.At(v)
		marks = append(marks, Line{Role: "tick", X1: x, Y1: y, X2: x, Y2: y + 4})
		if steps := i - len(ticks)/2; steps%every == 0 { // zero has a text
			marks = append(marks, Words{Role: "tick-text", X: x, Y: y + 18, Size: tickSize, Anchor: Middle, Runs: lettering.Plain(axis.Text(v, decimals))})
		}
	}
	foot := y + 36
	for _, line := range lettering.WrapRuns(lettering.Quantity(b.Axis, ""), tickSize, scale.To-margin) {
		marks = append(marks, Words{Role: "axis-text", X: scale.To, Y: foot, Size: tickSize, Anchor: End, Runs: line})
		foot += lettering.Leading * tickSize
	}
	return marks
}
