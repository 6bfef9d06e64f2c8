package stiff

import (
	"math"
	"math/rand/v2"
	"testing"
)

// TestJacobian meets the plain and the careful matrix with central differences
// of the right side, at points that are not special; rates are at most cubic,
// so the differences are exact but for rounding.
func TestJacobian(t *testing.T) {
	r := rand.New(rand.NewPCG(21, 22))
	for i := range 40 {
		n := 2 + r.IntN(7)
		sys, k := build(t, n, randomNetwork(r, n, 3+r.IntN(12), 2))
		s, err := NewSolver(sys, Options{})
		if err != nil {
			t.Fatal(err)
		}
		e := &s.e
		e.rates = k
		e.ratesAt(0, false)
		for j := range n {
			e.y[j] = 0.5 + r.Float64()
			e.out[j] = r.Float64()
			e.feed[j] = r.Float64()
		}
		e.sourced = true
		for _, careful := range []bool{false, true} {
			jac, find := e.jac, e.order.find
			if careful {
				e.speed = make([]float64, len(sys.channels))
				e.net.speeds(e.y, e.speed)
				c := newCareful(e, sys, e.speed, 0)
				e.careful, e.net = c, c.net
				jac = c.jac
				o := ordering{rowAt: c.lu.rowAt, cols: c.lu.cols}
				find = func(a, b int32) int32 {
					p := o.find(c.place[a], c.place[b])
					if p == o.rowAt[c.place[a]+1] || o.cols[p] != c.place[b] {
						return -1
					}
					return p
				}
			}
			e.prepare(0)
			up, down := make([]float64, n), make([]float64, n)
			for col := range n {
				const d = 1e-3
				y := e.y[col]
				clear(up)
				e.y[col] = y + d
				e.rhs(e.y, up)
				clear(down)
				e.y[col] = y - d
				e.rhs(e.y, down)
				e.y[col] = y
				for row := range n {
					want := (up[row] - down[row]) / (2 * d)
					got := 0.0
					if p := find(int32(row), int32(col)); p >= 0 && (careful || e.order.cols[min(int(p), len(e.order.cols)-1)] == int32(col) && p < e.order.rowAt[row+1]) {
						got = jac[p]
					}
					if !(math.Abs(got-want) <= 1e-5*(1+math.Abs(want))) {
						t.Errorf("network %d, careful %v: J[%d][%d] = %g, central difference %g", i, careful, row, col, got, want)
					}
				}
			}
		}
	}
}
