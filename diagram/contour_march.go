package diagram

import (
	"math"
	"sort"
)

// field is a function on a grid of places: at[i][k] at (xs[k], ys[i]); NaN: none.
type field struct {
	xs, ys []float64
	at     [][]float64
}

// contours gives the lines on which f is level, each joined as far as it goes; a
// closed one ends where it begins. What is at least level lies to one side of all.
//
// The method is marching squares (Lorensen and Cline, Comput. Graph. 21 (4), 163,
// 1987, in two dimensions). Where all four sides of a square are crossed, the mean
// of its corners tells which corners belong together, for every level alike, so
// that lines of two levels never cross. Squares with a corner without a value
// have no lines.
func (f field) contours(level float64) [][]spot {
	ny, nx := len(f.ys), len(f.xs)
	// Each side of a square is known by its first corner: 2(i·nx + k), to the right,
	// and one more, upwards in i.
	next := make([]int32, 2*ny*nx)
	into := make([]bool, len(next))
	for i := range next {
		next[i] = -1
	}
	join := func(from, to int) { next[from], into[to] = int32(to), true }
	for i := 0; i+1 < ny; i++ {
		for k := 0; k+1 < nx; k++ {
			// Corners and sides in turn: a to b, b to c, c to d, d to a.
			c := [4]float64{f.at[i][k], f.at[i][k+1], f.at[i+1][k+1], f.at[i+1][k]}
			low, high := min(c[0], c[1], c[2], c[3]), max(c[0], c[1], c[2], c[3])
			if low >= level || high < level || math.IsNaN(low) {
				continue
			}
			first := 2 * (i*nx + k)
			sides := [4]int{first, first + 3, first + 2*nx, first + 1}
			// Sides where the turn leaves and enters what is high.
			out, in := make([]int, 0, 2), make([]int, 0, 2)
			for s := range 4 {
				a, b := c[s] >= level, c[(s+1)%4] >= level
				if a && !b {
					out = append(out, s)
				}
				if !a && b {
					in = append(in, s)
				}
			}
			switch len(out) {
			case 1:
				join(sides[out[0]], sides[in[0]])
			case 2:
				// A line runs from a side out to a side in, with what is high on one
				// hand: around a low corner if the middle is high, else around a
				// high one.
				high := (c[0]+c[1]+c[2]+c[3])/4 >= level
				for _, s := range out {
					to := (s + 1) % 4 // around the low corner s+1
					if !high {
						to = (s + 3) % 4 // around the high corner s
					}
					join(sides[s], sides[to])
				}
			}
		}
	}
	var lines [][]spot
	trace := func(start int) {
		var line []spot
		e := start
		for {
			if p := f.crossing(e, level); len(line) == 0 || line[len(line)-1] != p {
				line = append(line, p)
			}
			n := next[e]
			next[e] = -1
			if n < 0 {
				break
			}
			e = int(n)
		}
		if e == start && len(line) > 2 && line[0] != line[len(line)-1] {
			line = append(line, line[0])
		}
		if len(line) > 1 {
			lines = append(lines, line)
		}
	}
	for e := range next {
		if next[e] >= 0 && !into[e] {
			trace(e)
		}
	}
	for e := range next {
		if next[e] >= 0 {
			trace(e)
		}
	}
	return lines
}

// crossing is the place on a side where f is level.
func (f field) crossing(side int, level float64) spot {
	nx := len(f.xs)
	i, k := side/2/nx, side/2%nx
	i2, k2 := i, k+1
	if side%2 == 1 {
		i2, k2 = i+1, k
	}
	a, b := f.at[i][k], f.at[i2][k2]
	t := math.Max(0, math.Min(1, (level-a)/(b-a)))
	return spot{f.xs[k] + t*(f.xs[k2]-f.xs[k]), f.ys[i] + t*(f.ys[i2]-f.ys[i])}
}

// padded is f with a rim of values below all, at the places of its border: the
// contours of it are closed and go around what is high.
func (f field) padded(low float64) field {
	rim := func(p []float64) []float64 {
		out := append([]float64{p[0]}, p...)
		return append(out, p[len(p)-1])
	}
	g := field{xs: rim(f.xs), ys: rim(f.ys)}
	for i := range g.ys {
		row := make([]float64, len(g.xs))
		for k := range row {
			row[k] = low
			if i > 0 && i <= len(f.ys) && k > 0 && k <= len(f.xs) {
				if v := f.at[i-1][k-1]; !math.IsNaN(v) {
					row[k] = math.Max(low, v)
				}
			}
		}
		g.at = append(g.at, row)
	}
	return g
}

// filled gives every place without a value the value of a near one.
func (f field) filled() field {
	g := field{xs: f.xs, ys: f.ys}
	type place struct{ i, k int }
	var row []place
	for i := range f.at {
		g.at = append(g.at, append([]float64{}, f.at[i]...))
		for k, v := range f.at[i] {
			if !math.IsNaN(v) {
				row = append(row, place{i, k})
			}
		}
	}
	for len(row) > 0 {
		var more []place
		for _, p := range row {
			for _, d := range []place{{0, 1}, {0, -1}, {1, 0}, {-1, 0}} {
				i, k := p.i+d.i, p.k+d.k
				if i >= 0 && k >= 0 && i < len(g.ys) && k < len(g.xs) && math.IsNaN(g.at[i][k]) {
					g.at[i][k] = g.at[p.i][p.k]
					more = append(more, place{i, k})
				}
			}
		}
		row = more
	}
	return g
}

// simpler leaves out points of a line that a straight stroke passes nearer than
// most. A closed line stays closed.
func simpler(line []spot, most float64) []spot {
	if len(line) < 3 {
		return line
	}
	keep := make([]bool, len(line))
	last := len(line) - 1
	keep[0], keep[last] = true, true
	far := 0
	if line[0] == line[last] {
		for i, p := range line {
			if math.Hypot(p.x-line[0].x, p.y-line[0].y) > math.Hypot(line[far].x-line[0].x, line[far].y-line[0].y) {
				far = i
			}
		}
		keep[far] = true
	}
	straighten(line, keep, 0, far, most)
	straighten(line, keep, far, last, most)
	var out []spot
	for i, k := range keep {
		if k {
			out = append(out, line[i])
		}
	}
	return out
}

const shadeError = 0.3 // how far the edge of a shade may move

// filledPath joins closed lines to one path, rounded to tenths.
func filledPath(lines [][]spot) []Command {
	var path []Command
	for _, line := range lines {
		line = simpler(line, shadeError)
		for i, p := range line { // a tenth of a unit is less than can be seen
			line[i] = spot{math.Round(10*p.x) / 10, math.Round(10*p.y) / 10}
		}
		if len(line) < 4 {
			continue // without an area
		}
		path = append(path, strokes(line[:len(line)-1])...)
		path = append(path, Command{Op: Close})
	}
	return path
}

// hatch gives parallel strokes inside closed lines, a step apart: upwards to the
// right, or downwards with down. Inside is where the lines wind around.
func hatch(lines [][]spot, step float64, down bool) [][]spot {
	way := 1.0
	if down {
		way = -1
	}
	type hit struct {
		x    float64
		turn int
	}
	hits := map[int][]hit{}
	for _, line := range lines {
		for i := range line {
			a, b := line[i], line[(i+1)%len(line)]
			p, q := (a.y+way*a.x)/step, (b.y+way*b.x)/step
			turn := 1
			if p > q {
				a, b, p, q, turn = b, a, q, p, -1
			}
			for n := int(math.Ceil(p)); float64(n) < q; n++ {
				t := (float64(n) - p) / (q - p)
				hits[n] = append(hits[n], hit{a.x + t*(b.x-a.x), turn})
			}
		}
	}
	var order []int
	for n := range hits {
		order = append(order, n)
	}
	sort.Ints(order)
	var out [][]spot
	for _, n := range order {
		h := hits[n]
		sort.Slice(h, func(i, k int) bool { return h[i].x < h[k].x })
		place := func(x float64) spot { return spot{x, float64(n)*step - way*x} }
		wind, from := 0, 0.0
		for _, p := range h {
			was := wind
			if wind += p.turn; was == 0 {
				// Where two parts touch, the stroke goes on.
				if k := len(out) - 1; k >= 0 && len(out[k]) == 2 && out[k][1] == place(p.x) {
					from, out = out[k][0].x, out[:k]
				} else {
					from = p.x
				}
			} else if wind == 0 && p.x > from {
				out = append(out, []spot{place(from), place(p.x)})
			}
		}
	}
	return out
}
