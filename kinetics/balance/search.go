package balance

import (
	"math"
	"slices"
)

const (
	steps  = 4000  // Newton steps before giving up; hard cases take some hundred
	settle = 1e-9  // a Newton step this small is followed by one more, which squares it
	far    = 1e5   // R·T; with reaction energies beyond, ln c keeps too few digits
	sound  = 1e-12 // the largest relative error of a law in an answer
)

// search holds the state of the Newton iteration over the species of the laws.
type search struct {
	*laws
	start    []float64 // mol/L
	g        []float64 // G/RT, shifted along the laws to small numbers
	strength float64   // the energies count by this factor, on the way from 0 to 1

	ln    []float64 // ln of the concentrations
	step  []float64 // Newton step of ln
	leads []bool    // whether a species leads a law
	links [][]link  // of each species that leads none: its laws; none if it can form from nothing
	form  []float64 // of each such species: G/RT of forming it from the leads
	total []float64 // of each law, per lead
	off   []float64 // of each law: relative error

	residual   float64
	iterations int
}

// link is a law that a species stands in, and how many leads it is worth there.
type link struct {
	law int
	n   float64
}

func newSearch(l *laws, start, G []float64, RT float64, guess []float64) *search {
	n := len(start)
	s := &search{laws: l, start: start, g: make([]float64, n), ln: make([]float64, n), step: make([]float64, n),
		leads: make([]bool, n), links: make([][]link, n), form: make([]float64, n), total: make([]float64, len(l.lead)), off: make([]float64, len(l.lead))}
	// Total electronic energies would drown the differences: take away, along the
	// laws, what makes the leads zero, before anything is rounded.
	common := int64(1)
	for k, lead := range l.lead {
		p := l.row[k][lead]
		if c := common / gcd(common, p) * p; c <= largest {
			common = c
		}
	}
	for j := range n {
		s.g[j] = formation(l, j, G, common) / RT
	}
	for i, c := range guess {
		s.ln[i] = math.Log(c)
	}
	s.rewrite()
	return s
}

// formation returns G of species j less that of the leads it is made of.
func formation(l *laws, j int, G []float64, common int64) float64 {
	whole := make([]int64, len(G))
	whole[j] = common
	rest := 0.0
	for k, lead := range l.lead {
		n, p := l.row[k][j], l.row[k][lead]
		if common%p != 0 || abs(n) > largest/common {
			rest -= float64(n) / float64(p) * G[lead]
			continue
		}
		whole[lead] -= n * (common / p)
	}
	return total(whole, G)/float64(common) + rest
}

// rewrite follows a change of leads.
func (s *search) rewrite() {
	clear(s.leads)
	for k, lead := range s.lead {
		s.leads[lead] = true
		s.total[k] = total(s.row[k], s.start) / float64(s.row[k][lead])
	}
	for j := range s.ln {
		s.links[j] = s.links[j][:0]
		if s.leads[j] {
			s.form[j] = 0
			continue
		}
		s.form[j] = s.g[j]
		for k, lead := range s.lead {
			if s.row[k][j] != 0 {
				n := float64(s.row[k][j]) / float64(s.row[k][lead])
				s.links[j] = append(s.links[j], link{k, n})
				s.form[j] -= n * s.g[lead]
			}
		}
	}
}

// follow computes the other species from the leads.
func (s *search) follow() {
	for j := range s.ln {
		if s.leads[j] {
			continue
		}
		x := -s.strength * s.form[j]
		for _, a := range s.links[j] {
			x += a.n * s.ln[s.lead[a.law]]
		}
		s.ln[j] = x
	}
}

// relead hands the laws to the most abundant independent species.
func (s *search) relead() error {
	for {
		best, law, species := math.Ln2, -1, -1 // within a factor of 2 nothing is gained
		for j := range s.ln {
			for _, a := range s.links[j] {
				if gain := s.ln[j] - s.ln[s.lead[a.law]]; gain > best {
					best, law, species = gain, a.law, j
				}
			}
		}
		if law < 0 {
			return nil
		}
		if err := s.swap(law, species); err != nil {
			return err
		}
		s.rewrite()
	}
}

// run finds the equilibrium. The energies are turned on by stages, each the
// start of the next: a cold start with strong energies is far from its end.
func (s *search) run() error {
	widest := 0.0
	for _, f := range s.form {
		widest = max(widest, math.Abs(f))
	}
	stages := []float64{1}
	for x := 1.0; x*widest > 12; x /= 2 {
		stages = append(stages, x/2)
	}
	if widest > 12 {
		stages = append(stages, 0)
	}
	slices.Reverse(stages)

	var before []float64
	var last float64
	for i, stage := range stages {
		if i > 0 {
			now := slices.Clone(s.ln)
			if before != nil {
				for _, lead := range s.lead {
					s.ln[lead] += (now[lead] - before[lead]) * (stage - s.strength) / (s.strength - last)
				}
			}
			before, last = now, s.strength
		}
		s.strength = stage
		s.follow()
		if err := s.descend(stage == 1); err != nil {
			return err
		}
	}
	if !s.measure() {
		return &NoConvergence{Residual: s.residual, Iterations: s.iterations}
	}
	return nil
}

// descend takes Newton steps until they are small; for the final stage, until
// they no longer matter.
func (s *search) descend(final bool) error {
	for near := false; ; {
		if s.iterations >= steps {
			s.measure()
			return &NoConvergence{Residual: s.residual, Iterations: s.iterations}
		}
		if err := s.relead(); err != nil {
			return err
		}
		s.newton()
		s.iterations++
		size := 0.0
		for _, d := range s.step {
			size = max(size, math.Abs(d))
		}
		t := s.length()
		for _, lead := range s.lead {
			s.ln[lead] += t * s.step[lead]
		}
		s.follow()
		if near || !final && size < 0.1 || math.IsNaN(size) {
			return nil // measure, in the end, tells NaN from an answer
		}
		near = final && size <= settle
	}
}

// measure puts the largest error of a law, relative to the sum of its parts, into
// s.residual, and reports whether the answer is sound.
func (s *search) measure() bool {
	size := s.errors()
	s.residual = 0
	for k, e := range s.off {
		if r := math.Abs(e) / size[k]; !(r <= s.residual) {
			s.residual = r
		}
	}
	for _, x := range s.ln {
		if math.IsNaN(x) || math.IsInf(x, 0) {
			s.residual = math.NaN()
		}
	}
	return s.residual <= sound
}

// errors fills s.off with (Σ row·c − total)/c of the lead, law by law, and
// returns the sums of the absolute parts.
func (s *search) errors() (size []float64) {
	size = make([]float64, len(s.lead))
	for k, lead := range s.lead {
		x := 0.0
		if s.total[k] != 0 {
			// Far from the end this may leave the range of numbers.
			x = math.Copysign(math.Exp(min(math.Log(math.Abs(s.total[k]))-s.ln[lead], 600)), s.total[k])
		}
		s.off[k], size[k] = 1-x, 1+math.Abs(x)
	}
	for j := range s.ln {
		for _, a := range s.links[j] {
			x := a.n * math.Exp(s.ln[j]-s.ln[s.lead[a.law]])
			s.off[a.law] += x
			size[a.law] += math.Abs(x)
		}
	}
	return size
}
