package diagram

import (
	"fmt"
	"math"
)

// label sets markers, then names of runs and regions, then the labels of levels.
// Texts keep clear of each other; lines give way to them where they must.
func (l *mapLayout) label() {
	type named struct {
		name string
		at   spot
	}
	var runs []named
	points := l.m.Runs
	if l.m.Best != nil {
		points = append([]MapPoint{*l.m.Best}, points...)
	}
	for i, r := range points {
		at := spot{l.x(r.T), l.y(r.Temp)}
		first, last := l.m.Times[0], l.m.Times[len(l.m.Times)-1]
		if r.T < first || r.T > last || r.Temp < l.m.Temps[0] || r.Temp > l.m.Temps[len(l.m.Temps)-1] {
			l.notes = append(l.notes, note{"outside the map", l.pointWords(r)})
			continue
		}
		if l.m.Best != nil && i == 0 {
			l.over = append(l.over, Curve{"run", star(at, 7.5)})
		} else {
			l.over = append(l.over, Dot{Role: "run", X: at.x, Y: at.y, R: dotSize})
		}
		l.solid.box(Rect{at.x, at.y, at.x, at.y}.grown(dotSize + 1))
		if r.Name != "" {
			runs = append(runs, named{r.Name, at})
		}
	}
	// Markers may reach over the frame, not over the figure.
	for _, r := range runs {
		l.name(r.name, r.at, true)
	}
	if f := l.m.Feasible; f != nil && f.Name != "" {
		l.regionName(*f)
	}
	for _, r := range l.m.Regions {
		l.regionName(r)
	}
	l.levelLabels()
}

// star is a star with five points.
func star(at spot, size float64) []Command {
	var path []Command
	for k := range 10 {
		r := size
		if k%2 == 1 {
			r = 0.45 * size
		}
		a := math.Pi * (float64(k)/5 - 0.5)
		path = append(path, Command{Op: To, X: at.x + r*math.Cos(a), Y: at.y + r*math.Sin(a)})
	}
	path[0].Op = Move
	return append(path, Command{Op: Close})
}

// regionName writes the name of a region into its largest free part: where the
// name would still fit if it were larger, by the most. Where it would not fit, a
// number stands that is explained below.
func (l *mapLayout) regionName(r MapRegion) {
	out, inside := l.outsideOf(r)
	if inside == (spot{}) {
		l.notes = append(l.notes, note{"nowhere on this map", r.Name})
		return
	}
	wide, narrow := newPlate("name", r.Name, 180), newPlate("name", r.Name, 90)
	if len(wide.text.lines) == 0 {
		return
	}
	for _, grow := range []float64{6, 4.5, 3.5, 2.7, 2.1, 1.7, 1.35, 1.1} {
		for _, p := range []plate{wide, narrow} {
			if box, ok := l.inside(p, grow, out, false); ok {
				l.put(p, box)
				return
			}
		}
	}
	for _, p := range []plate{wide, narrow} {
		if box, ok := l.inside(p, 1, out, true); ok {
			l.put(p, box)
			return
		}
	}
	number := newPlate("name", fmt.Sprint(len(l.key)+1), 100)
	if box, ok := l.inside(number, 1, out, true); ok {
		l.key = append(l.key, r.Name)
		l.put(number, box)
		return
	}
	l.name(r.Name, inside, false)
}

// outsideOf is taken where a region is not, and a place in it that stands well
// inside; the zero spot if it is nowhere.
func (l *mapLayout) outsideOf(r MapRegion) (*raster, spot) {
	out := newRaster(l.plot())
	f := l.region(r)
	i, inside := 0, make([]int, out.w) // how far down a column the region goes on
	best, at := 0, spot{}
	for y := range out.h {
		py := l.bottom - square*(0.5+float64(y)) // ys fall
		for i+2 < len(f.ys) && f.ys[i+1] > py {
			i++
		}
		t := (py - f.ys[i]) / (f.ys[i+1] - f.ys[i])
		k, row := 0, 0
		for x := range out.w {
			px := out.frame.X0 + square*(0.5+float64(x))
			for k+2 < len(f.xs) && f.xs[k+1] < px {
				k++
			}
			s := (px - f.xs[k]) / (f.xs[k+1] - f.xs[k])
			v := (1-t)*((1-s)*f.at[i][k]+s*f.at[i][k+1]) + t*((1-s)*f.at[i+1][k]+s*f.at[i+1][k+1])
			if !(v > 0) {
				at, _ := out.squareAt(spot{px, py})
				out.taken[at] = true
				inside[x], row = 0, 0
				continue
			}
			inside[x], row = inside[x]+1, row+1
			if n := min(inside[x], row); n > best {
				best, at = n, spot{px - square*float64(n)/2, py + square*float64(n)/2}
			}
		}
	}
	return out, at
}
