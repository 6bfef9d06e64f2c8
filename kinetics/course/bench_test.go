package course

import (
	"context"
	"math/rand/v2"
	"testing"

	"saddlebook/kinetics"
	"saddlebook/kinetics/thermo"
)

// cycle is a catalytic reaction of seven species: S + C ⇌ CS, CS ⇌ CP, CP ⇌ C + P,
// CS ⇌ CQ, CQ ⇌ C + Q, 2 C ⇌ C2.
func cycle() *kinetics.Mechanism {
	hs := func(h, s float64) thermo.Energy { return thermo.Following(h*kcal, s*cal) }
	m := &kinetics.Mechanism{ID: "cycle", Temperature: room}
	for _, s := range []struct {
		name string
		e    thermo.Energy
	}{{"S", hs(0, 0)}, {"C", hs(0, 0)}, {"CS", hs(-12, -32)}, {"CP", hs(-16, -32)}, {"P", hs(-6, 0)}, {"CQ", hs(-19, -33)}, {"Q", hs(-8, -1)}} {
		m.Species = append(m.Species, kinetics.Species{Name: s.name, Energy: s.e})
	}
	for _, s := range []struct {
		from, to []kinetics.Term
		e        thermo.Energy
	}{{side(0, 1), side(2), hs(3, -30)}, {side(2), side(3), hs(9, -30)}, {side(3), side(1, 4), hs(5, -25)},
		{side(2), side(5), hs(10.5, -30)}, {side(5), side(1, 6), hs(5, -25)}} {
		m.Steps = append(m.Steps, kinetics.Step{Name: "TS" + string(rune('a'+len(m.Steps))), From: s.from, To: s.to, Returns: true, Energy: s.e})
	}
	return m
}

func cycleRun() Run {
	return Run{Charge: []float64{0.5, 0.01, 0, 0, 0, 0, 0}, Basis: 0,
		Programme: []Leg{{To: 273.15, Lasts: 3600}, {Ramp: true, To: 323.15, Lasts: 7200}, {To: 323.15, Lasts: 36000}},
		Products:  []Product{{"P", []int{4}}, {"Q", []int{6}}}, Report: []float64{3600, 10800}, RTol: 1e-6}
}

// BenchmarkSampledRun is one draw of an uncertainty: seven species, hold, ramp
// and hold, with the kinetic limit, control and crossings.
func BenchmarkSampledRun(b *testing.B) {
	m := cycle()
	r := rand.New(rand.NewPCG(1, 1))
	var drawn []*kinetics.Mechanism
	for range 64 {
		d := make([]float64, len(m.Species)+len(m.Steps))
		for i := range d {
			d[i] = 2000 * r.NormFloat64()
		}
		drawn = append(drawn, m.Shifted(d))
	}
	p, err := Prepare(m, cycleRun())
	if err != nil {
		b.Fatal(err)
	}
	b.ReportAllocs()
	i := 0
	for b.Loop() {
		if _, err := p.Simulate(context.Background(), drawn[i%len(drawn)]); err != nil {
			b.Fatal(err)
		}
		i++
	}
}

// BenchmarkRun is the same run as a page shows it.
func BenchmarkRun(b *testing.B) {
	m, r := cycle(), cycleRun()
	r.RTol, r.Trace = 0, 200
	b.ReportAllocs()
	for b.Loop() {
		if _, err := Simulate(context.Background(), m, r); err != nil {
			b.Fatal(err)
		}
	}
}

// BenchmarkMap is a map of 60 temperatures by 60 times for ten species, of first
// order and not.
func BenchmarkMap(b *testing.B) {
	for _, name := range []string{"first-order", "second-order"} {
		b.Run("network="+name, func(b *testing.B) {
			m := &kinetics.Mechanism{ID: "map", Temperature: room}
			for i := range 10 {
				m.Species = append(m.Species, kinetics.Species{Name: string(rune('A' + i)), Energy: thermo.Following(-2e3*float64(i), 3*float64(i%4))})
			}
			for i := range 9 {
				from := side(i)
				if i == 0 && name == "second-order" {
					from = side(0, 1)
				}
				to := side(i + 1)
				if len(from) > 1 {
					to = side(2)
				}
				m.Steps = append(m.Steps, kinetics.Step{Name: "TS" + string(rune('a'+i)), From: from, To: to, Returns: true, Energy: thermo.Following(60e3+3e3*float64(i), -20)})
			}
			var times []float64
			for i := range 60 {
				times = append(times, 3600*float64(i+1))
			}
			b.ReportAllocs()
			for b.Loop() {
				for i := range 60 {
					r := Run{Charge: make([]float64, 10), Basis: 0, Programme: []Leg{{To: 230 + 2*float64(i), Lasts: times[59]}},
						Products: []Product{{"I", []int{8}}, {"J", []int{9}}}, Report: times}
					r.Charge[0], r.Charge[1] = 0.5, 0.4
					if _, err := Simulate(context.Background(), m, r); err != nil {
						b.Fatal(err)
					}
				}
			}
		})
	}
}
