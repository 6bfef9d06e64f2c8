package skeleton

import "math"

// Point is a place in the drawing.
type Point struct{ X, Y float64 }

func (p Point) plus(q Point, f float64) Point { return Point{p.X + f*q.X, p.Y + f*q.Y} }

func (p Point) minus(q Point) Point { return Point{p.X - q.X, p.Y - q.Y} }

func (p Point) length() float64 { return math.Hypot(p.X, p.Y) }

func dot(p, q Point) float64 { return p.X*q.X + p.Y*q.Y }

// toSegment is the distance of a point from a segment.
func toSegment(o, p, q Point) float64 {
	d := q.minus(p)
	f := 0.0
	if l := dot(d, d); l > 0 {
		f = math.Max(0, math.Min(1, dot(o.minus(p), d)/l))
	}
	return o.minus(p.plus(d, f)).length()
}

func (b box) at(p Point) box { return box{b.x0 + p.X, b.y0 + p.Y, b.x1 + p.X, b.y1 + p.Y, b.round} }

// to is the distance of a point from the box; 0 inside.
func (b box) to(p Point) float64 {
	x := math.Max(0, math.Max(b.x0+b.round-p.X, p.X-b.x1+b.round))
	y := math.Max(0, math.Max(b.y0+b.round-p.Y, p.Y-b.y1+b.round))
	return math.Max(0, math.Hypot(x, y)-b.round)
}

// apart is the distance between two boxes, corners taken as square.
func (b box) apart(c box) float64 {
	x := math.Max(0, math.Max(b.x0-c.x1, c.x0-b.x1))
	y := math.Max(0, math.Max(b.y0-c.y1, c.y0-b.y1))
	return math.Hypot(x, y)
}

// far reports whether a segment is further from the box than d by its extent alone.
func (b box) far(p, q Point, d float64) bool {
	return math.Max(p.X, q.X) < b.x0-d || math.Min(p.X, q.X) > b.x1+d || math.Max(p.Y, q.Y) < b.y0-d || math.Min(p.Y, q.Y) > b.y1+d
}

// line is the distance of a segment from the box: 0 where they meet. The square
// of the distance is convex along the segment, so a search by thirds finds it.
func (b box) line(p, q Point) float64 {
	lo, hi := 0.0, 1.0
	d := q.minus(p)
	for range 40 {
		u, v := lo+(hi-lo)/3, hi-(hi-lo)/3
		a, c := b.to(p.plus(d, u)), b.to(p.plus(d, v))
		switch {
		case a == 0:
			return 0
		case a < c:
			hi = v
		default:
			lo = u
		}
	}
	return math.Min(b.to(p.plus(d, (lo+hi)/2)), math.Min(b.to(p), b.to(q)))
}
