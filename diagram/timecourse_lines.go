package diagram

import (
	"fmt"
	"math"
)

// lines draws bands and lines, those with emphasis last, and markers.
func (l *courseLayout) lines() []Mark {
	var bands, lines, heavy, markers []Mark
	all := make([][][]spot, len(l.c.Lines))
	for i, line := range l.c.Lines {
		if line.Low != nil {
			bands = append(bands, l.band(i)...)
		}
		role := Role(fmt.Sprintf("path path-%d", i+1))
		into := &lines
		if line.Emphasis {
			role, into = Role(fmt.Sprintf("path heavy path-%d", i+1)), &heavy
		}
		all[i] = l.pieces(line.T, line.Y)
		for k, p := range all[i] {
			if len(p) == 1 {
				markers = append(markers, marker(i, p[0], markerSize))
				continue
			}
			all[i][k] = thin(p)
			*into = append(*into, Curve{role, strokes(all[i][k])})
		}
	}
	// With measured points, markers are theirs alone.
	if len(all) > 1 && len(l.c.Points) == 0 {
		for i, places := range l.markerPlaces(all) {
			for _, p := range places {
				markers = append(markers, marker(i, p, markerSize))
			}
		}
	}
	return append(append(append(bands, lines...), heavy...), markers...)
}

// pieces gives the places of a line, parted where it has no value and cut where
// it leaves the plot. Nothing is left of times before the beginning.
func (l *courseLayout) pieces(times, values []float64) [][]spot {
	var out [][]spot
	var piece []spot
	end := func() {
		if len(piece) > 0 {
			out = append(out, piece)
		}
		piece = nil
	}
	for i, t := range times {
		v := values[i]
		y, ok := l.y(v)
		if i > 0 && t > l.from && times[i-1] < l.from && !math.IsNaN(values[i-1]) && !math.IsNaN(v) {
			// Cut at the beginning.
			f := (l.from - times[i-1]) / (t - times[i-1])
			if y0, ok0 := l.y(values[i-1] + f*(v-values[i-1])); ok0 {
				piece = append(piece, spot{l.left, y0})
			}
		}
		if t < l.from {
			continue
		}
		// Cut at the floor of a logarithmic axis.
		if i > 0 && l.c.LogY && times[i-1] >= l.from && !math.IsNaN(v) && !math.IsNaN(values[i-1]) {
			if _, was := l.y(values[i-1]); was != ok {
				f := (l.floor - values[i-1]) / (v - values[i-1])
				foot, _ := l.y(l.floor)
				piece = append(piece, spot{l.x(times[i-1] + f*(t-times[i-1])), foot})
			}
		}
		if !ok {
			end()
			continue
		}
		piece = append(piece, spot{l.x(t), y})
	}
	end()
	return out
}

// band draws the soft band of line i.
func (l *courseLayout) band(i int) []Mark {
	line := l.c.Lines[i]
	low, high := append([]float64{}, line.Low...), append([]float64{}, line.High...)
	for k := range low {
		if math.IsNaN(low[k]) || math.IsNaN(high[k]) {
			low[k], high[k] = math.NaN(), math.NaN()
		}
		if l.c.LogY {
			// The band goes down to the floor where its lower end lies below.
			low[k], high[k] = math.Max(low[k], l.floor), math.Max(high[k], l.floor)
		}
	}
	var marks []Mark
	below, above := l.pieces(line.T, low), l.pieces(line.T, high)
	for k := range above {
		path := strokes(thin(above[k]))
		back := strokes(thin(below[k]))
		for m := len(back) - 1; m >= 0; m-- {
			path = append(path, Command{Op: To, X: back[m].X, Y: back[m].Y})
		}
		marks = append(marks, Curve{Role(fmt.Sprintf("band fill-%d", i%4+1)), append(path, Command{Op: Close})})
	}
	return marks
}

// markerPlaces gives each line places for its markers: in each stretch of the
// plot the one where it is farthest from other lines and their markers.
func (l *courseLayout) markerPlaces(lines [][][]spot) [][]spot {
	n := len(lines)
	stretches := int(math.Max(1, math.Floor((l.right-l.left)/math.Max(150, 22*float64(n)))))
	const step, enough = 4.0, 24.0
	columns := int((l.right - l.left) / step)
	heights := make([][]float64, n)
	for i, pieces := range lines {
		heights[i] = heightsAt(pieces, l.left+step/2, step, columns)
	}
	out := make([][]spot, n)
	var placed []spot
	for i := range lines {
		for k := range stretches {
			best, at := 0.0, spot{}
			from, to := columns*k/stretches, columns*(k+1)/stretches
			for c := from; c < to; c++ {
				p := spot{l.left + step*(float64(c)+0.5), heights[i][c]}
				if math.IsNaN(p.y) || p.x < l.left+8 || p.x > l.right-8 {
					continue
				}
				room := math.Min(enough, (l.bottom-p.y)/2+4)
				steep := slopeAt(heights[i], c, step)
				for j := range heights {
					if y := heights[j][c]; j != i && !math.IsNaN(y) {
						d := math.Abs(y-p.y) / math.Hypot(1, math.Max(steep, slopeAt(heights[j], c, step)))
						room = math.Min(room, d)
					}
				}
				for _, q := range placed {
					room = math.Min(room, math.Hypot(q.x-p.x, q.y-p.y)-6)
				}
				// Between equals each line takes its own place.
				own := float64(from) + float64(to-from)*(float64(i)+0.5)/float64(n)
				if room -= math.Abs(float64(c)-own) / float64(columns); room > best {
					best, at = room, p
				}
			}
			if best > 3 || best > 0 && k == stretches-1 && len(out[i]) == 0 {
				out[i], placed = append(out[i], at), append(placed, at)
			}
		}
	}
	return out
}

// slopeAt is how steep a line is in place c, upwards or downwards.
func slopeAt(heights []float64, c int, step float64) float64 {
	slope := 0.0
	for _, k := range []int{c - 1, c + 1} {
		if k >= 0 && k < len(heights) && !math.IsNaN(heights[k]) {
			slope = math.Max(slope, math.Abs(heights[k]-heights[c])/step)
		}
	}
	return slope
}

// heightsAt gives where a line is in n places from x on; NaN where it is not.
func heightsAt(pieces [][]spot, x, step float64, n int) []float64 {
	out := make([]float64, n)
	for i := range out {
		out[i] = math.NaN()
	}
	for _, p := range pieces {
		for i := 1; i < len(p); i++ {
			a, b := p[i-1], p[i]
			for k := max(0, int(math.Ceil((a.x-x)/step))); k < n && x+float64(k)*step < b.x; k++ {
				out[k] = a.y + (b.y-a.y)*(x+float64(k)*step-a.x)/(b.x-a.x)
			}
		}
	}
	return out
}

// measured draws the measured points with their error bars.
func (l *courseLayout) measured() []Mark {
	index := map[string]int{}
	for i, line := range l.c.Lines {
		index[line.key()] = i
	}
	var marks []Mark
	for _, p := range l.c.Points {
		y, ok := l.y(p.Y)
		if !ok || p.T < l.from {
			continue
		}
		x := l.x(p.T)
		if p.Low != nil {
			low, _ := l.y(*p.Low) // the bottom where it is too low
			high, ok := l.y(*p.High)
			if ok {
				marks = append(marks,
					Line{Role: "whisker", X1: x, Y1: low, X2: x, Y2: high},
					Line{Role: "whisker", X1: x - 3, Y1: low, X2: x + 3, Y2: low},
					Line{Role: "whisker", X1: x - 3, Y1: high, X2: x + 3, Y2: high})
			}
		}
		i, ok := index[p.Line]
		if !ok || p.Line == "" && l.c.Lines[i].key() != "" {
			marks = append(marks, Dot{Role: "point", X: x, Y: y, R: markerSize})
			continue
		}
		marks = append(marks, marker(i, spot{x, y}, markerSize))
	}
	return marks
}

const markerSize = 3.6 // half the height of a marker

// shapes are the markers, as corners around the middle; none is a turn of
// another by less than 45°. The first is a circle.
var shapes = [][]spot{
	nil, // circle
	{{-0.85, -0.85}, {0.85, -0.85}, {0.85, 0.85}, {-0.85, 0.85}},
	{{0, -1.1}, {1.05, 0.8}, {-1.05, 0.8}},
	{{0, -1.2}, {1.2, 0}, {0, 1.2}, {-1.2, 0}},
	{{0, 1.1}, {1.05, -0.8}, {-1.05, -0.8}},
	{{-0.35, -1.1}, {0.35, -1.1}, {0.35, -0.35}, {1.1, -0.35}, {1.1, 0.35}, {0.35, 0.35}, {0.35, 1.1}, {-0.35, 1.1}, {-0.35, 0.35}, {-1.1, 0.35}, {-1.1, -0.35}, {-0.35, -0.35}},
	{{-1, -0.55}, {-0.55, -1}, {0, -0.45}, {0.55, -1}, {1, -0.55}, {0.45, 0}, {1, 0.55}, {0.55, 1}, {0, 0.45}, {-0.55, 1}, {-1, 0.55}, {-0.45, 0}},
	{{-1.1, 0}, {0.8, -1.05}, {0.8, 1.05}},
	{{1.1, 0}, {-0.8, -1.05}, {-0.8, 1.05}},
	{{-1, -1}, {1, 1}, {1, -1}, {-1, 1}},
	{{-1, -1}, {1, 1}, {-1, 1}, {1, -1}},
	{{-0.5, -1.1}, {0.5, -1.1}, {0.5, 1.1}, {-0.5, 1.1}},
}

// marker draws the marker of line i.
func marker(i int, at spot, size float64) Mark {
	role := Role(fmt.Sprintf("marker fill-%d", i%4+1))
	corners := shapes[i%len(shapes)]
	if corners == nil {
		return Dot{Role: role, X: at.x, Y: at.y, R: size}
	}
	path := make([]Command, len(corners), len(corners)+1)
	for k, c := range corners {
		path[k] = Command{Op: To, X: at.x + size*c.x, Y: at.y + size*c.y}
	}
	path[0].Op = Move
	return Curve{role, append(path, Command{Op: Close})}
}
