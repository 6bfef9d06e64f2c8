package stiff

import "math"

// A denseLU factorises a full matrix by rows with partial pivoting.
type denseLU struct {
	n    int
	val  []float64
	dinv []float64
	swap []int32
}

func newDenseLU(n int) *denseLU {
	return &denseLU{n: n, val: make([]float64, n*n), dinv: make([]float64, n), swap: make([]int32, n)}
}

// factor takes the matrix in val apart and reports whether it could.
func (s *denseLU) factor() bool {
	n, val := s.n, s.val
	for k := 0; k < n; k++ {
		rk := val[k*n:][:n]
		best, big := k, math.Abs(rk[k])
		for i, p := k+1, (k+1)*n+k; i < n; i, p = i+1, p+n {
			if m := math.Abs(val[p]); m > big {
				best, big = i, m
			}
		}
		s.swap[k] = int32(best)
		if best != k {
			ro := val[best*n:][:n]
			for j := range rk {
				rk[j], ro[j] = ro[j], rk[j]
			}
		}
		if !(big > 0) || big > math.MaxFloat64 {
			return false
		}
		inv := 1 / rk[k]
		s.dinv[k] = inv
		src := rk[k+1:]
		for i := k + 1; i < n; i++ {
			ri := val[i*n+k:][:n-k]
			l := ri[0]
			if l == 0 {
				continue
			}
			l *= inv
			ri[0] = l
			dst := ri[1:][:len(src)]
			for j, u := range src {
				dst[j] -= l * u
			}
		}
	}
	return true
}

func (s *denseLU) solve(b []float64) {
	n, val := s.n, s.val
	b = b[:n]
	for k, p := range s.swap[:n] {
		if int(p) != k {
			b[k], b[p] = b[p], b[k]
		}
	}
	for i := 1; i < n; i++ {
		x := b[i]
		for j, l := range val[i*n:][:i] {
			x -= l * b[j]
		}
		b[i] = x
	}
	for i := n - 1; i >= 0; i-- {
		x := b[i]
		row := val[i*n:][:n]
		for j := i + 1; j < n; j++ {
			x -= row[j] * b[j]
		}
		b[i] = x * s.dinv[i]
	}
}
