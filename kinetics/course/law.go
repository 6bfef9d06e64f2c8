package course

import (
	"math"

	"saddlebook/kinetics"
	"saddlebook/kinetics/rate"
	"saddlebook/kinetics/stiff"
)

// A law gives logarithms over temperature: ln k of every direction of every
// step (forward, back, by reaction), then −G/RT of the product species against
// the first of them.
type law interface {
	// at writes them, and their derivatives by temperature if slope is not nil.
	at(kelvin float64, ln, slope []float64)
}

// columns writes the logarithms of a network.
func columns(n *kinetics.Network, species []int, out []float64) {
	for i := range n.Reactions {
		out[2*i], out[2*i+1] = n.Reactions[i].LnForward, n.Reactions[i].LnBack
	}
	at := 2 * len(n.Reactions)
	for i, s := range species {
		out[at+i] = (n.G[species[0]] - n.G[s]) / (rate.R * n.T)
	}
}

// roughness bounds what rounding does to the logarithms of a network.
func roughness(n *kinetics.Network) float64 {
	size := 0.0
	count := func(x float64) {
		if x = math.Abs(x); x > size && finite(x) {
			size = x
		}
	}
	for _, g := range n.G {
		count(g)
	}
	for i := range n.Reactions {
		r := &n.Reactions[i]
		count(r.TS)
		count(r.LnForward * rate.R * n.T)
		count(r.LnBack * rate.R * n.T)
	}
	return 1e-15 * math.Max(100, size/(rate.R*n.T))
}

// A table is a law as a Chebyshev series in 1/T, in which logarithms of rate
// constants are nearly straight. It is taken only if its last terms have come
// down to the rounding of the logarithms themselves.
type table struct {
	mid, half float64     // of 1/T
	value     [][]float64 // by column; nil: −Inf throughout
	slope     [][]float64 // of the derivative by (1/T − mid)/half
}

// Sizes of a table that are tried, and how often a range is cut in two before
// it is computed from the mechanism at every call.
const (
	smallest = 16
	largest  = 64
	cuts     = 6
)

// A reach is a law for temperatures between From and To.
type reach struct {
	from, to float64
	law      law
}

// laws returns the laws that cover the temperatures from one to the other, in
// that order. Constants have a kink where a sampled transition state begins to
// be raised to its side, and where a step at the diffusion limit changes its
// downhill direction: one law ends there.
func laws(m *kinetics.Mechanism, species []int, from, to float64, depth int) ([]reach, error) {
	nets := map[int]*kinetics.Network{}
	var err error
	for i, kelvin := range map[int]float64{0: from, largest: to} {
		if nets[i], err = m.At(kelvin); err != nil {
			return nil, err
		}
	}
	mid, half := (1/from+1/to)/2, (1/from-1/to)/2
	width := 2*len(nets[0].Reactions) + len(species)
	noise := math.Max(roughness(nets[0]), roughness(nets[largest]))
	bend := -1 // a kink lies before this node
	for n := smallest; n <= largest && bend < 0; n *= 2 {
		step := largest / n
		for i := 0; i <= largest; i += step {
			if nets[i] != nil {
				continue
			}
			if nets[i], err = m.At(1 / (mid + half*math.Cos(math.Pi*float64(i)/largest))); err != nil {
				return nil, err
			}
		}
		rows := make([][]float64, n+1)
		for i := range rows {
			rows[i] = make([]float64, width)
			columns(nets[i*step], species, rows[i])
		}
		if t := series(rows, width, mid, half, noise); t != nil {
			return []reach{{from, to, t}}, nil
		}
		for i := step; i <= largest && bend < 0; i += step {
			if !raisedAlike(nets[i-step], nets[i]) || n == largest && !downAlike(nets[i-step], nets[i]) {
				bend = i
				if at := kink(m, nets[i-step], nets[i]); depth < 4*cuts {
					return divide(m, species, from, at[0], at[1], to, depth)
				}
			}
		}
	}
	if depth >= cuts {
		return []reach{{from, to, &direct{m: m, species: species, width: width}}}, nil
	}
	return divide(m, species, from, 1/mid, 1/mid, to, depth)
}

// divide covers a to b, then c to d, where b and c are one temperature or
// neighbours. A part without width is left out.
func divide(m *kinetics.Mechanism, species []int, a, b, c, d float64, depth int) ([]reach, error) {
	var all []reach
	for _, r := range [2][2]float64{{a, b}, {c, d}} {
		if r[0] == r[1] {
			continue
		}
		part, err := laws(m, species, r[0], r[1], depth+1)
		if err != nil {
			return nil, err
		}
		all = append(all, part...)
	}
	all[0].from, all[len(all)-1].to = a, d
	return all, nil
}

func raisedAlike(a, b *kinetics.Network) bool {
	for i := range a.Reactions {
		if a.Reactions[i].Raised != b.Reactions[i].Raised {
			return false
		}
	}
	return true
}

// downAlike tells whether every step goes downhill the same way in both.
func downAlike(a, b *kinetics.Network) bool {
	for i := range a.Reactions {
		if (a.Reactions[i].DeltaG > 0) != (b.Reactions[i].DeltaG > 0) {
			return false
		}
	}
	return true
}

// kink returns neighbouring temperatures between which steps change. Where the
// mechanism has no constants the caller finds the same.
func kink(m *kinetics.Mechanism, a, b *kinetics.Network) [2]float64 {
	from, to := a.T, b.T
	for range 100 {
		mid := from + (to-from)/2
		if mid == from || mid == to {
			break
		}
		n, err := m.At(mid)
		if err != nil {
			break
		}
		if raisedAlike(a, n) && downAlike(a, n) {
			from = mid
		} else {
			to = mid
		}
	}
	return [2]float64{from, to}
}

// series returns the table through values at the extrema of the last Chebyshev
// polynomial, or nil if they do not suffice.
func series(rows [][]float64, width int, mid, half, noise float64) *table {
	n := len(rows) - 1
	t := &table{mid: mid, half: half, value: make([][]float64, width), slope: make([][]float64, width)}
	cos := make([]float64, 2*n)
	for i := range cos {
		cos[i] = math.Cos(math.Pi * float64(i) / float64(n))
	}
	for c := range width {
		dead := 0
		for _, r := range rows {
			switch {
			case math.IsInf(r[c], -1):
				dead++
			case math.IsInf(r[c], 0) || math.IsNaN(r[c]):
				return nil
			}
		}
		if dead == n+1 {
			continue
		}
		if dead > 0 {
			return nil
		}
		co := make([]float64, n+1)
		for k := range co {
			sum := (rows[0][c] + rows[n][c]*cos[k*n%(2*n)]) / 2
			for i := 1; i < n; i++ {
				sum += rows[i][c] * cos[k*i%(2*n)]
			}
			co[k] = sum * 2 / float64(n)
		}
		co[0] /= 2
		co[n] /= 2
		for _, x := range co[n-2:] {
			if !(math.Abs(x) <= noise) {
				return nil
			}
		}
		// Terms at the level of rounding only roughen the derivative.
		keep := n + 1
		for keep > 2 && math.Abs(co[keep-1]) <= noise/4 {
			keep--
		}
		co = co[:keep]
		d := make([]float64, keep)
		for k := keep - 2; k >= 0; k-- {
			if k+2 < keep {
				d[k] = d[k+2]
			}
			d[k] += 2 * float64(k+1) * co[k+1]
		}
		d[0] /= 2
		t.value[c], t.slope[c] = co, d
	}
	return t
}

func (t *table) at(kelvin float64, ln, slope []float64) {
	x := (1/kelvin - t.mid) / t.half
	x = math.Max(-1, math.Min(1, x))
	for c, co := range t.value {
		if co == nil {
			ln[c] = math.Inf(-1)
		} else {
			ln[c] = clenshaw(co, x)
		}
	}
	if slope == nil {
		return
	}
	per := -1 / (kelvin * kelvin * t.half)
	for c, d := range t.slope {
		if d == nil {
			slope[c] = 0
		} else {
			slope[c] = clenshaw(d, x) * per
		}
	}
}

func clenshaw(co []float64, x float64) float64 {
	a, b := 0.0, 0.0
	for k := len(co) - 1; k > 0; k-- {
		a, b = co[k]+2*x*a-b, a
	}
	return co[0] + x*a - b
}

// direct is a law computed from the mechanism at every call, for constants
// that no series of moderate length follows.
type direct struct {
	m       *kinetics.Mechanism
	species []int
	width   int
	err     error // the first that At returned
}

func (d *direct) at(kelvin float64, ln, slope []float64) {
	d.one(kelvin, ln)
	if slope == nil {
		return
	}
	h := 1e-5 * kelvin
	up, down := make([]float64, d.width), make([]float64, d.width)
	d.one(kelvin+h, up)
	d.one(kelvin-h, down)
	for i := range slope {
		if slope[i] = (up[i] - down[i]) / (2 * h); math.IsNaN(slope[i]) || math.IsInf(slope[i], 0) {
			slope[i] = 0
		}
	}
}

func (d *direct) one(kelvin float64, ln []float64) {
	n, err := d.m.At(kelvin)
	if err != nil {
		if d.err == nil {
			d.err = err
		}
		for i := range ln {
			ln[i] = math.NaN()
		}
		return
	}
	columns(n, d.species, ln)
}

// constants are the rate constants of one stretch: two by reaction, then those
// of what is removed.
type constants struct {
	held  []float64 // all of them; nil: they follow the temperature
	law   law
	leg   *leg
	steps int       // directions
	share []float64 // by direction: the concentrations of the fixed species in it
	sinks []float64 // 1/s
	ln    []float64
	slope []float64
}

var _ stiff.Rates = (*constants)(nil)

func (c *constants) Corners() []float64 { return nil }

func (c *constants) Held(int) bool { return c.held != nil }

func (c *constants) At(_ int, t float64, k, dk []float64) {
	if c.held != nil {
		copy(k, c.held)
		for i, f := range c.share {
			k[i] *= f
		}
		clear(dk)
		return
	}
	var slope []float64
	if dk != nil {
		slope = c.slope
	}
	c.law.at(c.leg.kelvin(t), c.ln, slope)
	for i := range c.steps {
		k[i] = c.share[i] * math.Exp(c.ln[i])
		if dk != nil {
			dk[i] = k[i] * c.slope[i] * c.leg.slope
		}
	}
	copy(k[c.steps:], c.sinks)
	if dk != nil {
		clear(dk[c.steps:])
	}
}
