package stiff

import (
	"context"
	"encoding/json"
	"fmt"
	"math"
	"os"
	"testing"
)

// TestAgainstSciPy compares whole runs, with ramps, a feed, a removal and a
// dose, with an independent integrator; testdata/reference.py wrote the values.
func TestAgainstSciPy(t *testing.T) {
	var file struct {
		By       string
		Problems []struct {
			Steps []struct {
				LnK, E   float64
				LHS, RHS []int
			}
			Start   []float64
			Nodes   [][2]float64
			Feed    Feed
			Removal Removal
			Dose    struct {
				T, Amount float64
				Species   int
			}
			Times []float64
			Want  [][]float64
		}
	}
	data, err := os.ReadFile("testdata/reference.json")
	if err != nil {
		t.Fatal(err)
	}
	if err := json.Unmarshal(data, &file); err != nil {
		t.Fatal(err)
	}
	for i, p := range file.Problems {
		t.Run(fmt.Sprintf("%d species", len(p.Start)), func(t *testing.T) {
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
					k[j] = math.Exp(s.LnK + s.E*(1/300.0-1/T))
					if dk != nil {
						dk[j] = k[j] * s.E / (T * T)
					}
				}
			})
			if err != nil {
				t.Fatal(err)
			}
			add := make([]float64, len(p.Start))
			add[p.Dose.Species] = p.Dose.Amount
			c, err := Solve(context.Background(), sys, Options{RTol: 1e-10, ATol: 1e-15},
				Problem{To: 100, Start: p.Start, Rates: rates, Feeds: []Feed{p.Feed}, Removals: []Removal{p.Removal}, Jumps: []Jump{{T: p.Dose.T, Add: add}}}, p.Times)
			if err != nil {
				t.Fatal(err)
			}
			for j, at := range p.Times {
				for s, w := range p.Want[j] {
					near(t, fmt.Sprintf("problem %d, t = %g, y[%d]", i, at, s), c.Y[j][s], w, 1e-7, file.By)
				}
			}
		})
	}
}
