package diagram

import (
	"fmt"
	"math"
	"slices"

	"saddlebook/diagram/axis"
	"saddlebook/diagram/lettering"
)

const fineStep = 5.0 // between the places of the grid that lines and shades follow

// MapShades is the number of bands of a value scale. The roles shade-1 to shade-N
// colour them.
const MapShades = 25

// FirstLightShade is the first shade, from 0, on which black reads better than white.
const FirstLightShade = 12

func shade(k int) Role { return Role(fmt.Sprintf("shade-%d", k+1)) }

func shadeAt(p float64) int { return max(0, min(MapShades-1, int(math.Floor(p*MapShades)))) }

// onShade is a role in the colour that reads on the shade at p.
func onShade(role string, p float64) Role {
	if shadeAt(p) < FirstLightShade {
		return Role(role + " on-dark")
	}
	return Role(role + " on-light")
}

// mapLayout turns a map into marks. From top to bottom: the value bar, the title of
// the temperature axis, the plot, the time axis and notes.
type mapLayout struct {
	m        ContourMap
	values   valueScale
	barTicks []axis.Tick
	barTitle []lettering.Run

	left, right float64 // of the plot
	top, bottom float64
	height      float64
	time        courseLayout // for the time axis

	grid   field // values on their scale
	fine   field // grid made finer, without gaps
	levels []levelLines
	strips []strip // strokes that give way to text

	room
	levelRaster []*raster // where the lines of each level run
	blanks      [][]spot  // around places without a value
	blankBoxes  []Rect    // the same
}

// levelLines is a level and its lines.
type levelLines struct {
	MapLevel
	text  string
	p     float64 // on the value scale
	lines [][]spot
}

// strip is a stroke and its roles, first to last.
type strip struct {
	roles []Role
	line  []spot
}

func (l *mapLayout) marks() []Mark {
	m := &l.m
	ticks, decimals := l.tempTicks()
	wide := 0.0
	for _, v := range ticks {
		wide = math.Max(wide, lettering.Width(lettering.Plain(axis.Text(v, decimals)), tickSize))
	}
	l.left = margin + wide + 9
	l.right = m.Width - margin - 22 // half of the last time
	marks, y := l.bar(margin)
	y += 8
	for _, line := range lettering.WrapRuns(lettering.Quantity(m.TempAxis, m.TempUnit), tickSize, m.Width-2*margin) {
		marks = append(marks, Words{Role: "axis-text", X: margin, Y: y + lettering.Ascent*tickSize, Size: tickSize, Runs: line})
		y += rowHeight
	}
	l.top = y + 8
	l.bottom = l.top + 2*math.Round(math.Min(210, math.Max(95, 0.26*m.Width)))
	n := len(m.Times)
	l.time = courseLayout{c: TimeCourse{Log: m.Log}, from: m.Times[0], to: m.Times[n-1], left: l.left, right: l.right, bottom: l.bottom}

	l.measure()
	marks = append(marks, l.shading()...)
	marks = append(marks, l.blank()...)
	l.feasible()
	l.borders()
	l.contours()
	l.label()
	marks = append(marks, l.strokes()...)
	marks = append(marks, l.frame(ticks, decimals)...)
	marks = append(marks, l.over...)
	timeAxis, y := l.time.timeAxis()
	marks = append(marks, timeAxis...)
	marks = append(marks, l.below(&y)...)
	l.height = math.Ceil(y + margin)
	return marks
}

// tempTicks gives round temperatures within the map.
func (l *mapLayout) tempTicks() ([]float64, int) {
	low, high := l.m.Temps[0], l.m.Temps[len(l.m.Temps)-1]
	for n := 6; ; n++ {
		all, decimals := axis.Ticks(low, high, n)
		var in []float64
		for _, v := range all {
			if v >= low-1e-9*math.Abs(low) && v <= high+1e-9*math.Abs(high) {
				in = append(in, v)
			}
		}
		if len(in) >= 2 || n == 12 {
			return in, decimals
		}
	}
}

func (l *mapLayout) x(t float64) float64 { return l.time.x(t) }

func (l *mapLayout) y(temp float64) float64 {
	return axis.Scale{Low: l.m.Temps[0], High: l.m.Temps[len(l.m.Temps)-1], From: l.bottom, To: l.top}.At(temp)
}

func (l *mapLayout) plot() Rect { return Rect{l.left, l.top, l.right, l.bottom} }

// measure puts the values on their places and scale.
func (l *mapLayout) measure() {
	m := &l.m
	l.grid = l.field(func(i, k int) float64 { return l.values.at(m.Values[i][k]) })
	l.fine = l.grid.filled().refined(fineStep)
	l.room = newRoom(l.plot(), true)
}

func (l *mapLayout) field(at func(i, k int) float64) field {
	f := field{}
	for _, t := range l.m.Times {
		f.xs = append(f.xs, l.x(t))
	}
	for i, temp := range l.m.Temps {
		f.ys = append(f.ys, l.y(temp))
		row := make([]float64, len(f.xs))
		for k := range row {
			row[k] = at(i, k)
		}
		f.at = append(f.at, row)
	}
	return f
}

// shading draws each band over all lower ones, so that nothing shows between them.
func (l *mapLayout) shading() []Mark {
	low, f := l.values.floor-1, l.fine
	least, most := math.Inf(1), math.Inf(-1)
	for _, row := range f.at {
		for _, v := range row {
			least, most = math.Min(least, v), math.Max(most, v)
		}
	}
	first := shadeAt(least)
	p := l.plot()
	marks := []Mark{Box{Role: shade(first), X: p.X0, Y: p.Y0, W: p.X1 - p.X0, H: p.Y1 - p.Y0}}
	g := f.padded(low)
	for k := first + 1; k < MapShades; k++ {
		edge := float64(k) / MapShades
		if edge > most {
			break
		}
		if path := filledPath(g.contours(edge)); len(path) > 0 {
			marks = append(marks, Curve{shade(k), path})
		}
	}
	return marks
}

// blank covers the cells around points without a value.
func (l *mapLayout) blank() []Mark {
	edges := func(at []float64) []float64 {
		out := []float64{at[0]}
		for i := 1; i < len(at); i++ {
			out = append(out, (at[i-1]+at[i])/2)
		}
		return append(out, at[len(at)-1])
	}
	xs, ys := edges(l.grid.xs), edges(l.grid.ys)
	type run struct{ from, to, since int }
	var open []run
	end := func(r run, i int) {
		a, b, c, d := xs[r.from], xs[r.to], ys[i], ys[r.since]
		l.blanks = append(l.blanks, []spot{{a, c}, {b, c}, {b, d}, {a, d}, {a, c}})
		l.blankBoxes = append(l.blankBoxes, Rect{a, math.Min(c, d), b, math.Max(c, d)})
	}
	for i, row := range l.grid.at {
		var now []run
		for k := 0; k < len(row); k++ {
			if !math.IsNaN(row[k]) {
				continue
			}
			r := run{k, k, i}
			for r.to < len(row) && math.IsNaN(row[r.to]) {
				r.to++
			}
			k = r.to
			now = append(now, r)
		}
		for _, o := range open {
			going := false
			for n := range now {
				if now[n].from == o.from && now[n].to == o.to {
					now[n].since, going = o.since, true
				}
			}
			if !going {
				end(o, i)
			}
		}
		open = now
	}
	for _, o := range open {
		end(o, len(l.grid.at))
	}
	if len(l.blanks) == 0 {
		return nil
	}
	for _, s := range hatch(l.blanks, 9, true) {
		l.strips = append(l.strips, strip{[]Role{"hatch-blank"}, s})
	}
	return []Mark{Curve{"blank", filledPath(l.blanks)}}
}

// region is the measure of a region on the plot.
func (l *mapLayout) region(r MapRegion) field {
	return l.field(func(i, k int) float64 { return r.Measure[i][k] }).refined(fineStep)
}

// closed gives closed lines around a region.
func (f field) closed() [][]spot {
	low := -1.0
	for _, row := range f.at {
		for _, v := range row {
			if v < low {
				low = v
			}
		}
	}
	return f.padded(low).contours(math.SmallestNonzeroFloat64)
}

// feasible hatches the conditions that meet all wishes.
func (l *mapLayout) feasible() {
	if l.m.Feasible == nil {
		return
	}
	f := l.region(*l.m.Feasible)
	for _, s := range hatch(f.closed(), 12, false) {
		l.strips = append(l.strips, strip{[]Role{"hatch-under", "hatch"}, s})
	}
	for _, line := range f.closed() {
		line = simpler(line, thinError)
		l.strips = append(l.strips, strip{[]Role{"outline-under", "outline"}, line})
		l.room.lines.line(line)
	}
}

// borders draws the borders of regions that ask for it.
func (l *mapLayout) borders() {
	for _, r := range l.m.Regions {
		if !r.Border {
			continue
		}
		for _, line := range l.region(r).contours(math.SmallestNonzeroFloat64) {
			line = simpler(line, thinError)
			l.strips = append(l.strips, strip{[]Role{"border-under", "border"}, line})
			l.room.lines.line(line)
		}
	}
}

// contours finds the lines of all levels.
func (l *mapLayout) contours() {
	for _, v := range l.m.Levels {
		lines := levelLines{MapLevel: v, text: l.m.levelText(v), p: l.values.at(v.Value)}
		own := newRaster(l.plot())
		for _, whole := range l.fine.contours(lines.p) {
			for _, line := range outside(simpler(whole, thinError), l.blankBoxes, 0) {
				lines.lines = append(lines.lines, line)
				l.strips = append(l.strips, strip{[]Role{onShade("contour", lines.p)}, line})
				l.room.lines.line(line)
				own.line(line)
			}
		}
		l.levels, l.levelRaster = append(l.levels, lines), append(l.levelRaster, own)
	}
}

// strokes draws what gives way to text, with gaps; neighbours of one look are one
// path.
func (l *mapLayout) strokes() []Mark {
	var marks []Mark
	for i := 0; i < len(l.strips); {
		roles := l.strips[i].roles
		var path []Command
		for ; i < len(l.strips) && slices.Equal(l.strips[i].roles, roles); i++ {
			for _, piece := range outside(l.strips[i].line, l.boxes, textGap) {
				path = append(path, strokes(piece)...)
			}
		}
		if len(path) == 0 {
			continue
		}
		for _, role := range roles {
			marks = append(marks, Curve{role, path})
		}
	}
	return marks
}

// frame draws the sides of the plot and the temperature axis.
func (l *mapLayout) frame(ticks []float64, decimals int) []Mark {
	p := l.plot()
	marks := []Mark{
		Line{Role: "axis", X1: p.X0, Y1: p.Y0, X2: p.X0, Y2: p.Y1},
		Line{Role: "axis", X1: p.X1, Y1: p.Y0, X2: p.X1, Y2: p.Y1},
		Line{Role: "axis", X1: p.X0, Y1: p.Y0, X2: p.X1, Y2: p.Y0},
	}
	for _, v := range ticks {
		y := l.y(v)
		marks = append(marks,
			Line{Role: "tick", X1: p.X0 - courseTick, Y1: y, X2: p.X0, Y2: y},
			Words{Role: "tick-text", X: p.X0 - 8, Y: y + 0.35*tickSize, Size: tickSize, Anchor: End, Runs: lettering.Plain(axis.Text(v, decimals))})
	}
	return marks
}
