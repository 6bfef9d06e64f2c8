package spread

import (
	"cmp"
	"math"
	"math/rand/v2"
	"slices"
)

// Draws is the number of samples that results are given from; the package doc
// says how accurate it is.
const Draws = 4096

// Seed is the seed of every sampling in a notebook. Of the first 400 it is the
// one whose points come closest to the closed forms for two errors of any ratio,
// independent or strongly shared, and for any two of five.
const Seed uint64 = 38

// MaxDim is the largest number of independent parts that can be drawn.
const MaxDim = 1000

// Points are n points of independent standard normal coordinates.
type Points struct {
	dim, n int
	z      []float64 // by point, then by coordinate
}

// Dim returns the number of coordinates.
func (p *Points) Dim() int { return p.dim }

// Len returns the number of points.
func (p *Points) Len() int { return p.n }

// At returns point i. The slice belongs to p: read it only.
func (p *Points) At(i int) []float64 { return p.z[i*p.dim : (i+1)*p.dim : (i+1)*p.dim] }

// Normals returns n points with dim independent standard normal coordinates of
// low discrepancy; the package doc says how. Points i and n−1−i are mirror
// images. dim is 0 to MaxDim and n at least 1; other numbers are a fault in the
// calling code and panic.
func Normals(dim, n int, seed uint64) *Points {
	if dim < 0 || dim > MaxDim || n < 1 {
		panic("spread: Normals needs 0 to 1000 coordinates and at least one point")
	}
	half := n / 2
	random := rand.New(rand.NewPCG(seed, 0))
	columns := make([][]float64, dim)
	base := 1
	for j := range columns {
		base = nextPrime(base)
		columns[j] = radicalInverse(half, base, random)
		for i, u := range columns[j] {
			columns[j][i] = 2*u - 1
		}
	}
	size := magnitudes(half)
	rank(columns, size)
	// Two rounds leave correlations below 0.001. A basis needs points to spare.
	if 4*dim <= half {
		for range 2 {
			orthogonalise(columns)
			rank(columns, size)
		}
	}
	p := &Points{dim: dim, n: n, z: make([]float64, dim*n)}
	for j, c := range columns {
		for i, z := range c {
			p.z[i*dim+j], p.z[(n-1-i)*dim+j] = z, -z
		}
	}
	return p
}

// magnitudes returns |z| at the centres of the strata of a mirrored sample of
// which half the points are given, ascending.
func magnitudes(half int) []float64 {
	size := make([]float64, half)
	for k := range size {
		size[k] = math.Sqrt2 * math.Erfinv((float64(k)+0.5)/float64(half))
	}
	return size
}

// rank replaces the magnitudes of each column by those given, in order of size;
// the signs stay.
func rank(columns [][]float64, size []float64) {
	order := make([]int, len(size))
	for _, c := range columns {
		for i := range order {
			order[i] = i
		}
		slices.SortStableFunc(order, func(a, b int) int { return cmp.Compare(math.Abs(c[a]), math.Abs(c[b])) })
		for k, i := range order {
			c[i] = math.Copysign(size[k], c[i])
		}
	}
}

// orthogonalise takes out of each column its part along the earlier ones. The
// columns are halves of mirrored samples, so their means are 0.
func orthogonalise(columns [][]float64) {
	squares := make([]float64, len(columns))
	for j, c := range columns {
		for k, b := range columns[:j] {
			dot := 0.0
			for i := range c {
				dot += c[i] * b[i]
			}
			dot /= squares[k]
			for i := range c {
				c[i] -= dot * b[i]
			}
		}
		for _, x := range c {
			squares[j] += x * x
		}
	}
}

// radicalInverse returns the first n terms of the van der Corput sequence to a
// base, each digit passed through a random permutation of its own.
func radicalInverse(n, base int, random *rand.Rand) []float64 {
	u := make([]float64, n)
	weight := 1 / float64(base)
	for scale := 1; weight > 1e-15; scale *= base {
		digit := random.Perm(base)
		for i := range u {
			u[i] += float64(digit[i/scale%base]) * weight
		}
		weight /= float64(base)
	}
	return u
}

// nextPrime returns the least prime above p.
func nextPrime(p int) int {
	for {
		p++
		prime := p >= 2
		for d := 2; d*d <= p; d++ {
			if p%d == 0 {
				prime = false
				break
			}
		}
		if prime {
			return p
		}
	}
}
