package course

import (
	"errors"
	"math"
	"testing"

	"saddlebook/kinetics"
	"saddlebook/kinetics/rate"
	"saddlebook/kinetics/thermo"
)

// A table gives what the mechanism gives, to the rounding of its logarithms,
// and its derivative is that of the logarithms.
func TestTableAgainstMechanism(t *testing.T) {
	cp := addition()
	for i := range cp.Species {
		h := *cp.Species[i].Energy.Heat
		h.Cp, h.T0 = 50+30*float64(i), 250
		cp.Species[i].Energy.Heat = &h
	}
	cp.Species[2].Energy = thermo.Energy{Conformers: []thermo.Energy{thermo.Following(-40e3, -130), thermo.Following(-45e3, -150), thermo.Following(-43e3, -140)}}
	absolute := addition() // electronic energies of some −1000 hartree
	for i := range absolute.Species {
		h := *absolute.Species[i].Energy.Heat
		h.H -= 2.6e9
		if i >= 2 {
			h.H -= 2.6e9
		}
		absolute.Species[i].Energy.Heat = &h
	}
	for i := range absolute.Steps {
		h := *absolute.Steps[i].Energy.Heat
		h.H -= 5.2e9
		absolute.Steps[i].Energy.Heat = &h
	}
	for _, tt := range []struct {
		name     string
		m        *kinetics.Mechanism
		from, to float64
		tol      float64
	}{
		{"cold ramp", addition(), 195.15, 293.15, 1e-12},
		{"cooling", addition(), 293.15, 195.15, 1e-12},
		{"narrow", addition(), 298.15, 298.16, 1e-12},
		{"wide", addition(), 77, 350, 1e-12},
		{"heat capacities and conformers", cp, 200, 350, 1e-12},
		{"absolute energies", absolute, 195.15, 293.15, 1e-8}, // as exact as such numbers are
	} {
		t.Run(tt.name, func(t *testing.T) {
			members := []int{2, 3}
			list, err := laws(tt.m, members, tt.from, tt.to, 0)
			if err != nil {
				t.Fatal(err)
			}
			if list[0].from != tt.from || list[len(list)-1].to != tt.to {
				t.Fatalf("the laws cover %g to %g", list[0].from, list[len(list)-1].to)
			}
			for i, r := range list {
				if i > 0 && list[i-1].to != r.from {
					t.Errorf("a gap between %g and %g", list[i-1].to, r.from)
				}
				if _, ok := r.law.(*table); !ok {
					t.Errorf("no table from %g to %g", r.from, r.to)
				}
				ln, slope := make([]float64, 6), make([]float64, 6)
				up, down, want := make([]float64, 6), make([]float64, 6), make([]float64, 6)
				for k := range 101 {
					T := r.from + (r.to-r.from)*float64(k)/100
					n, err := tt.m.At(T)
					if err != nil {
						t.Fatal(err)
					}
					columns(n, members, want)
					r.law.at(T, ln, slope)
					h := (r.to - r.from) * 1e-4
					if k == 0 || k == 100 {
						continue
					}
					r.law.at(T+h, up, nil)
					r.law.at(T-h, down, nil)
					for c := range ln {
						if d := math.Abs(ln[c] - want[c]); !(d <= tt.tol) {
							t.Fatalf("column %d at %g K is %.15g, want %.15g", c, T, ln[c], want[c])
						}
						if d := math.Abs(slope[c] - (up[c]-down[c])/(2*h)); d > 1e-5*math.Abs(slope[c])+2*tt.tol/math.Abs(h) {
							t.Fatalf("slope of column %d at %g K is %.12g, differences give %.12g", c, T, slope[c], (up[c]-down[c])/(2*h))
						}
					}
				}
			}
		})
	}
}

// Where a sampled transition state is raised to its side, a law ends.
func TestKink(t *testing.T) {
	m := addition()
	m.Species = m.Species[:3]
	m.Steps = m.Steps[:1]
	h := *m.Steps[0].Energy.Heat
	// The transition state passes the reactants, at zero, at 240 K.
	h.H, h.S = 1000, 1000.0/240
	m.Steps[0].Energy.Heat = &h
	m.RaiseLow = true
	list, err := laws(m, nil, 200, 300, 0)
	if err != nil {
		t.Fatal(err)
	}
	if len(list) != 2 || math.Abs(list[0].to-240) > 1e-9 {
		t.Fatalf("laws %v, want two that meet at 240 K", list)
	}
	m.RaiseLow = false
	var bad kinetics.Complaints
	if _, err := laws(m, nil, 200, 300, 0); !errors.As(err, &bad) {
		t.Errorf("error %v, want complaints of the mechanism", err)
	}
	r := Run{Charge: []float64{1, 1, 0}, Basis: 0, Programme: []Leg{{To: 200, Lasts: 1}, {Ramp: true, To: 300, Lasts: 100}}}
	m.RaiseLow = true
	c := simulate(t, m, r)
	if c.Balance > 1e-12 {
		t.Errorf("balance %g", c.Balance)
	}
}

// A law that no table follows is computed at every call, with the same result.
func TestDirect(t *testing.T) {
	m := addition()
	p, err := Prepare(m, coldRun())
	if err != nil {
		t.Fatal(err)
	}
	w := newWalk(t.Context(), p, m)
	if err := w.stretches(); err != nil {
		t.Fatal(err)
	}
	for i := range w.list {
		if w.list[i].net == nil {
			w.list[i].rates.law = &direct{m: m, species: p.members, width: 6}
		}
	}
	if err := w.run(); err != nil {
		t.Fatal(err)
	}
	want := simulate(t, m, coldRun())
	for s := range 4 {
		near(t, "concentration", last(w.c).C[s], last(want).C[s], 1e-9)
	}
	near(t, "changeover", w.c.Pairs[0].Changeover, want.Pairs[0].Changeover, 1e-9)
}

// Stated rates in a ramp: an Arrhenius constant against quadrature (as in
// TestRampAgainstQuadrature), and an exchange kept fast, whose constants have a
// kink where it changes its downhill direction.
func TestStatedLaws(t *testing.T) {
	ea := 60e3
	m := &kinetics.Mechanism{ID: "stated", Temperature: room, Species: []kinetics.Species{{Name: "A", Energy: thermo.Following(0, 0)}, {Name: "B", Energy: thermo.Following(3000, 10)}}}
	m.Steps = []kinetics.Step{{Name: "TS", From: side(0), To: side(1), Law: &kinetics.Law{Kind: kinetics.Measured, Forward: &kinetics.Constant{A: 1e7, Ea: &ea}}}}
	r := Run{Charge: []float64{1, 0}, Basis: 0, Programme: []Leg{{To: 280, Lasts: 1}, {Ramp: true, To: 330, Lasts: 3600}}}
	k := func(T float64) float64 { return 1e7 * math.Exp(-ea/(rate.R*T)) }
	const parts = 20000
	h := 50.0 / parts
	sum := k(280) + k(330)
	for i := 1; i < parts; i++ {
		sum += float64(2+2*(i%2)) * k(280+h*float64(i))
	}
	near(t, "A after the ramp", last(simulate(t, m, r)).C[0], math.Exp(-sum*h/3*3600/50-k(280)), 1e-9)

	m.Steps[0].Law = &kinetics.Law{Kind: kinetics.KeptFast}
	m.Steps[0].Returns = true
	list, err := laws(m, nil, 280, 330, 0)
	if err != nil {
		t.Fatal(err)
	}
	if len(list) != 2 || math.Abs(list[0].to-300) > 1e-9 {
		t.Errorf("laws %v, want two that meet at 300 K, where ΔG is zero", list)
	}
	c := simulate(t, m, r)
	// Kept at rest to the end: K = exp(−(3000 − 330·10)/(R·330)).
	near(t, "B:A", last(c).C[1]/last(c).C[0], math.Exp(300/(rate.R*330)), 1e-8)
}
