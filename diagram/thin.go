package diagram

import "math"

// spot is a place on the figure.
type spot struct{ x, y float64 }

const (
	thinColumn = 0.25 // width of the columns in which only the ends and extremes stay
	thinError  = 0.06 // how far a line may move
)

// thin leaves out points of a line, which runs to the right, where nothing can be
// seen of it: no point of the line moves by more than half a unit, and its first,
// last, highest and lowest points and its turning points stay.
//
// Within narrow columns the first, last, highest and lowest stay; what is left is
// thinned between turning points by the method of Ramer (Comput. Graph. Image
// Process. 1, 244, 1972) and of Douglas and Peucker (Cartographica 10, 112, 1973).
func thin(line []spot) []spot {
	line = inColumns(line)
	if len(line) < 3 {
		return line
	}
	keep := make([]bool, len(line))
	turns := turning(line)
	for i := range turns {
		keep[turns[i]] = true
		if i > 0 {
			straighten(line, keep, turns[i-1], turns[i], thinError)
		}
	}
	var out []spot
	for i, k := range keep {
		if k {
			out = append(out, line[i])
		}
	}
	return out
}

// inColumns keeps the first, lowest, highest and last point of each column.
func inColumns(line []spot) []spot {
	var out []spot
	for i := 0; i < len(line); {
		column := math.Floor(line[i].x / thinColumn)
		low, high, end := i, i, i
		for end < len(line) && math.Floor(line[end].x/thinColumn) == column {
			if line[end].y < line[low].y {
				low = end
			}
			if line[end].y > line[high].y {
				high = end
			}
			end++
		}
		last := -1
		for _, k := range []int{i, min(low, high), max(low, high), end - 1} {
			if k > last {
				out, last = append(out, line[k]), k
			}
		}
		i = end
	}
	return out
}

// turning gives the ends of a line, its first highest and lowest points and all
// others at which it turns by more than thinError, in order.
func turning(line []spot) []int {
	n := len(line)
	keep := make([]bool, n)
	keep[0], keep[n-1] = true, true
	low, high := 0, 0
	for i, p := range line {
		if p.y < line[low].y {
			low = i
		}
		if p.y > line[high].y {
			high = i
		}
	}
	keep[low], keep[high] = true, true
	extreme, way := 0, 0.0 // the farthest point since the last turn, and the way there
	for i, p := range line {
		d := p.y - line[extreme].y
		switch {
		case way == 0 && math.Abs(d) > thinError:
			way, extreme = math.Copysign(1, d), i
		case way != 0 && d*way > 0:
			extreme = i
		case way != 0 && d*way < -thinError:
			keep[extreme] = true
			way, extreme = -way, i
		}
	}
	var out []int
	for i, k := range keep {
		if k {
			out = append(out, i)
		}
	}
	return out
}

// straighten marks the points between two others that a straight line would miss
// by more than an error.
func straighten(line []spot, keep []bool, from, to int, most float64) {
	stack := [][2]int{{from, to}}
	for len(stack) > 0 {
		a, b := stack[len(stack)-1][0], stack[len(stack)-1][1]
		stack = stack[:len(stack)-1]
		far, at := most, -1
		for i := a + 1; i < b; i++ {
			if d := apart(line[i], line[a], line[b]); d > far {
				far, at = d, i
			}
		}
		if at >= 0 {
			keep[at] = true
			stack = append(stack, [2]int{at, b}, [2]int{a, at})
		}
	}
}

// apart is the distance of p from the stroke between a and b.
func apart(p, a, b spot) float64 {
	dx, dy := b.x-a.x, b.y-a.y
	along := 0.0
	if d := dx*dx + dy*dy; d > 0 {
		along = math.Max(0, math.Min(1, ((p.x-a.x)*dx+(p.y-a.y)*dy)/d))
	}
	return math.Hypot(p.x-a.x-along*dx, p.y-a.y-along*dy)
}

// strokes turns a line into the commands that draw it.
func strokes(line []spot) []Command {
	path := make([]Command, 0, len(line))
	for i, p := range line {
		op := To
		if i == 0 {
			op = Move
		}
		path = append(path, Command{Op: op, X: p.x, Y: p.y})
	}
	return path
}
