package diagram

import "math"

const square = 2.0 // the side of a square of a raster

// raster counts what stands in the squares of a frame, for any box at once.
type raster struct {
	frame Rect
	w, h  int
	taken []bool
	sums  []int32 // of all squares above and to the left; nil: to be counted
}

func newRaster(frame Rect) *raster {
	r := &raster{frame: frame, w: int(math.Ceil((frame.X1 - frame.X0) / square)), h: int(math.Ceil((frame.Y1 - frame.Y0) / square))}
	r.taken = make([]bool, r.w*r.h)
	return r
}

func (r *raster) squareAt(p spot) (int, bool) {
	x, y := int(math.Floor((p.x-r.frame.X0)/square)), int(math.Floor((p.y-r.frame.Y0)/square))
	return y*r.w + x, x >= 0 && y >= 0 && x < r.w && y < r.h
}

func (r *raster) line(line []spot) {
	r.sums = nil
	for i := 1; i < len(line); i++ {
		a, b := line[i-1], line[i]
		steps := math.Ceil(math.Hypot(b.x-a.x, b.y-a.y)) + 1
		for k := 0.0; k <= steps; k++ {
			if at, ok := r.squareAt(spot{a.x + (b.x-a.x)*k/steps, a.y + (b.y-a.y)*k/steps}); ok {
				r.taken[at] = true
			}
		}
	}
}

func (r *raster) box(b Rect) {
	r.sums = nil
	x0, y0, x1, y1 := r.squares(b)
	for y := y0; y < y1; y++ {
		for x := x0; x < x1; x++ {
			r.taken[y*r.w+x] = true
		}
	}
}

func (r *raster) squares(b Rect) (x0, y0, x1, y1 int) {
	return max(0, int(math.Floor((b.X0-r.frame.X0)/square))), max(0, int(math.Floor((b.Y0-r.frame.Y0)/square))),
		min(r.w, int(math.Ceil((b.X1-r.frame.X0)/square))), min(r.h, int(math.Ceil((b.Y1-r.frame.Y0)/square)))
}

// count gives how many squares that b touches are taken.
func (r *raster) count(b Rect) int {
	if r.sums == nil {
		r.sums = make([]int32, (r.w+1)*(r.h+1))
		for y := range r.h {
			row := int32(0)
			for x := range r.w {
				if r.taken[y*r.w+x] {
					row++
				}
				r.sums[(y+1)*(r.w+1)+x+1] = r.sums[y*(r.w+1)+x+1] + row
			}
		}
	}
	x0, y0, x1, y1 := r.squares(b)
	if x0 >= x1 || y0 >= y1 {
		return 0
	}
	w := r.w + 1
	return int(r.sums[y1*w+x1] - r.sums[y0*w+x1] - r.sums[y1*w+x0] + r.sums[y0*w+x0])
}

// along counts the taken squares under a stroke.
func (r *raster) along(a, b spot) int {
	n, last := 0, -1
	steps := math.Ceil(math.Hypot(b.x-a.x, b.y-a.y)) + 1
	for k := 0.0; k <= steps; k++ {
		if at, ok := r.squareAt(spot{a.x + (b.x-a.x)*k/steps, a.y + (b.y-a.y)*k/steps}); ok && at != last && r.taken[at] {
			n, last = n+1, at
		}
	}
	return n
}

// holds reports whether b lies in the frame.
func (r *raster) holds(b Rect) bool {
	return b.X0 >= r.frame.X0 && b.Y0 >= r.frame.Y0 && b.X1 <= r.frame.X1 && b.Y1 <= r.frame.Y1
}

// within gives the part of the stroke from a to b, as shares of its length, that
// lies in r.
func within(a, b spot, r Rect) (t0, t1 float64, ok bool) {
	t0, t1 = 0, 1
	for _, side := range [4][2]float64{
		{a.x - b.x, a.x - r.X0}, {b.x - a.x, r.X1 - a.x},
		{a.y - b.y, a.y - r.Y0}, {b.y - a.y, r.Y1 - a.y},
	} {
		d, q := side[0], side[1]
		switch {
		case d == 0 && q < 0:
			return 0, 0, false
		case d < 0:
			t0 = math.Max(t0, q/d)
		case d > 0:
			t1 = math.Min(t1, q/d)
		}
	}
	return t0, t1, t0 < t1
}

const textGap = 2.0 // around a text, between it and the strokes that give way

// outside gives what is left of a line outside all boxes and a gap around each.
func outside(line []spot, boxes []Rect, gap float64) [][]spot {
	var out [][]spot
	var piece []spot
	end := func() {
		if len(piece) > 1 {
			out = append(out, piece)
		}
		piece = nil
	}
	type part struct{ from, to float64 }
	for i := 1; i < len(line); i++ {
		a, b := line[i-1], line[i]
		parts := []part{{0, 1}}
		for _, box := range boxes {
			t0, t1, ok := within(a, b, box.grown(gap))
			if !ok {
				continue
			}
			var left []part
			for _, p := range parts {
				if t0 > p.from {
					left = append(left, part{p.from, math.Min(p.to, t0)})
				}
				if t1 < p.to {
					left = append(left, part{math.Max(p.from, t1), p.to})
				}
			}
			parts = left
		}
		for _, p := range parts {
			if !(p.to > p.from) {
				continue
			}
			if p.from > 0 {
				end()
			}
			if len(piece) == 0 {
				piece = append(piece, spot{a.x + p.from*(b.x-a.x), a.y + p.from*(b.y-a.y)})
			}
			if p.to == 1 {
				piece = append(piece, b)
				continue
			}
			piece = append(piece, spot{a.x + p.to*(b.x-a.x), a.y + p.to*(b.y-a.y)})
			end()
		}
		if len(parts) == 0 {
			end()
		}
	}
	end()
	return out
}
