package diagram

import (
	"math"
	"sort"

	"saddlebook/diagram/lettering"
)

// levelLabels sets the labels of levels in gaps of their lines: one on the longest
// line of each level and on others that are long, where the line runs straight,
// other lines stand off and the ends are far. A level whose lines are too short
// for a gap is named from beside.
func (l *mapLayout) levelLabels() {
	for n := range l.levels {
		v := &l.levels[n]
		lines := append([][]spot{}, v.lines...)
		sort.SliceStable(lines, func(i, k int) bool { return long(lines[i]) > long(lines[k]) })
		if len(lines) == 0 {
			l.notes = append(l.notes, note{"nowhere on this map", v.text})
			continue
		}
		runs := lettering.Runs(v.text)
		w, h := lettering.Width(runs, tickSize)+4, (lettering.Ascent+lettering.Descent)*tickSize
		if len(runs) == 0 {
			continue
		}
		var set []spot
		for i, line := range lines {
			if len(set) == 3 || i > 0 && long(line) < math.Max(150, 3*w) || long(line) < w+16 {
				break
			}
			at, ok := l.gap(line, l.levelRaster[n], w, h, set)
			if !ok {
				continue
			}
			set = append(set, at)
			box := Rect{at.x - w/2, at.y - h/2, at.x + w/2, at.y + h/2}
			l.solid.box(box)
			l.boxes = append(l.boxes, box)
			l.over = append(l.over, Group{Role: "label", Marks: []Mark{
				Box{Role: shade(shadeAt(v.p)), X: box.X0, Y: box.Y0, W: w, H: h, Round: 2},
				Words{Role: onShade("level-text", v.p), X: at.x, Y: box.Y0 + lettering.Ascent*tickSize, Size: tickSize, Anchor: Middle, Runs: runs},
			}})
		}
		if len(set) == 0 {
			l.name(v.text, lines[0][len(lines[0])/2], false)
		}
	}
}

func long(line []spot) float64 {
	sum := 0.0
	for i := 1; i < len(line); i++ {
		sum += math.Hypot(line[i].x-line[i-1].x, line[i].y-line[i-1].y)
	}
	return sum
}

// gap finds the middle of the best gap for a label of w by h in a line of a level.
func (l *mapLayout) gap(line []spot, own *raster, w, h float64, set []spot) (spot, bool) {
	all := long(line)
	step := math.Max(3, all/160)
	best, at := math.Inf(1), spot{}
	gone, next := 0.0, 8.0
	for i := 1; i < len(line); i++ {
		a, b := line[i-1], line[i]
		d := math.Hypot(b.x-a.x, b.y-a.y)
		for ; next <= gone+d; next += step {
			if d == 0 {
				continue
			}
			t := (next - gone) / d
			p := spot{a.x + t*(b.x-a.x), a.y + t*(b.y-a.y)}
			box := Rect{p.x - w/2, p.y - h/2, p.x + w/2, p.y + h/2}
			if !l.clear(box) {
				continue
			}
			around := box.grown(textGap + 1)
			mine, total := own.count(around), l.room.lines.count(around)
			// A straight line crosses the box once, by its slope.
			dx, dy := math.Abs(b.x-a.x)/d, math.Abs(b.y-a.y)/d
			cut := math.Min((w+6)/math.Max(dx, 1e-9), (h+6)/math.Max(dy, 1e-9))
			cost := 6*float64(total-mine) + 4*math.Abs(float64(mine)-cut*math.Max(dx, dy)/square-1) +
				0.25*cut + 30*math.Abs(next/all-0.5)
			for _, s := range set {
				cost += 3000 / (10 + math.Hypot(s.x-p.x, s.y-p.y))
			}
			if cost < best {
				best, at = cost, p
			}
		}
		gone += d
	}
	// A gap that other lines need too is worth less than a name from beside.
	return at, best < 400
}
