package stiff

import (
	"context"
	"encoding/json"
	"fmt"
	"math"
	"os"
	"testing"
)

// TestMechanisms compares time courses of small invented mechanisms (Eyring
// constants, a programme, doses, a feed, a removal) with those of two
// independent integrators; testdata/mechanisms.py wrote the values.
func TestMechanisms(t *testing.T) {
	type flow struct {
		From, To, Rate, K float64
		Species           int
	}
	var file struct {
		By         string
		Mechanisms []struct {
			Name    string
			Species []string
			Steps   []struct {
				LHS, RHS []int
				H, S     float64
			}
			Start []float64
			Nodes [][2]float64
			Doses []struct {
				T, Amount float64
				Species   int
			}
			Feed, Removal *flow
			Times         []float64
			Want          [][]float64
			Agreement     float64
		}
	}
	data, err := os.ReadFile("testdata/mechanisms.json")
	if err != nil {
		t.Fatal(err)
	}
	if err := json.Unmarshal(data, &file); err != nil {
		t.Fatal(err)
	}
	if len(file.Mechanisms) == 0 {
		t.Fatal("no mechanisms in testdata/mechanisms.json")
	}
	const kB, h, R = 1.380649e-23, 6.62607015e-34, 8.31446261815324 // exact since 2019: BIPM, SI Brochure, 9th ed.
	for _, p := range file.Mechanisms {
		t.Run(p.Name, func(t *testing.T) {
			var steps []step
			for _, s := range p.Steps {
				steps = append(steps, step{1, s.LHS, s.RHS})
			}
			sys, _ := build(t, len(p.Start), steps)
			var nodes []Node
			for _, n := range p.Nodes {
				nodes = append(nodes, Node{n[0], n[1]})
			}
			rates, err := NewProgramme(nodes, func(T float64, k, dk []float64) {
				for j, s := range p.Steps {
					k[j] = kB * T / h * math.Exp(s.S/R-s.H/(R*T))
					if dk != nil {
						dk[j] = k[j] * (1/T + s.H/(R*T*T))
					}
				}
			})
			if err != nil {
				t.Fatal(err)
			}
			run := Problem{To: p.Times[len(p.Times)-1], Start: p.Start, Rates: rates}
			for _, d := range p.Doses {
				add := make([]float64, len(p.Start))
				add[d.Species] = d.Amount
				run.Jumps = append(run.Jumps, Jump{T: d.T, Add: add})
			}
			if f := p.Feed; f != nil {
				run.Feeds = []Feed{{f.From, f.To, f.Species, f.Rate}}
			}
			if r := p.Removal; r != nil {
				run.Removals = []Removal{{r.From, r.To, r.Species, r.K}}
			}
			c, err := Solve(context.Background(), sys, Options{RTol: 1e-10, ATol: 1e-18}, run, p.Times)
			if err != nil {
				t.Fatal(err)
			}
			if len(c.T) != len(p.Want) {
				t.Fatalf("%d times, want %d", len(c.T), len(p.Want))
			}
			worst := 0.0
			for j, at := range p.Times {
				for s, w := range p.Want[j] {
					near(t, fmt.Sprintf("[%s](%g s)", p.Species[s], at), c.Y[j][s], w, 3e-9, fmt.Sprintf("%s; the two differ by %.1g", file.By, p.Agreement))
					worst = max(worst, math.Abs(c.Y[j][s]/w-1))
				}
			}
			t.Logf("largest relative difference %.1e", worst)
		})
	}
}
