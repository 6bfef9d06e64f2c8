package main

import (
	"context"
	"encoding/json"
	"fmt"
	"math"
	"os"

	"saddlebook/kinetics/stiff"
)

// The map: one invented mechanism of ten species at sixty temperatures, each
// run a problem of its own in the form of the others, read at sixty times.
const (
	mapRuns  = 60
	mapFirst = 250.0 // K
	mapStep  = 2.0   // K
	mapEnd   = 86400.0
)

var (
	mapSpecies = []string{"S", "R", "cat", "cat2", "cat.S", "int", "P", "epiP", "Q", "X"}
	mapStart   = []float64{0.5, 0.6, 0.004, 0.003, 0, 0, 0, 0, 0, 0.01}
	// kJ/mol at 1 mol/L
	mapEnergy = []float64{0, 0, 0, -22, -14, -6, -38, -44, -61, 3}
	mapSteps  = []struct {
		lhs, rhs []int
		top      float64
	}{
		{[]int{2, 2}, []int{3}, 38},    // the catalyst pairs off its cycle
		{[]int{2, 0}, []int{4}, 41},    // binds the substrate
		{[]int{4, 1}, []int{5}, 66},    // and the reagent
		{[]int{5}, []int{2, 6}, 70},    // gives the product
		{[]int{5}, []int{2, 7}, 74},    // or its epimer
		{[]int{0, 1}, []int{6}, 102},   // without catalyst
		{[]int{6}, []int{7}, 58},       // epimers exchange through
		{[]int{6, 9}, []int{7, 9}, 49}, // a base too
		{[]int{7, 1}, []int{8}, 57},    // a second addition
	}
)

// writeMap writes the problems of the map. The references are those of the
// integrator at a relative tolerance of 1e-12.
func writeMap(path string) error {
	const kB, h, R = 1.380649e-23, 6.62607015e-34, 8.31446261815324e-3 // J/K, J s, kJ/mol/K: SI Brochure, 9th ed.
	type reaction struct {
		K   float64 `json:"k"`
		LHS []int   `json:"lhs"`
		RHS []int   `json:"rhs"`
	}
	type entry struct {
		Name      string     `json:"name"`
		Species   []string   `json:"species"`
		Y0        []float64  `json:"y0"`
		TEnd      float64    `json:"t_end"`
		ATol      float64    `json:"atol_factor"`
		Floor     float64    `json:"floor"`
		Reactions []reaction `json:"reactions"`
		Reference []float64  `json:"reference"`
	}
	var all struct {
		RTols    []float64 `json:"rtols"`
		Problems []entry   `json:"problems"`
	}
	all.RTols = []float64{1e-4, 1e-6, 1e-8, 1e-10}
	for i := range mapRuns {
		T := mapFirst + mapStep*float64(i)
		e := entry{Name: fmt.Sprintf("map %g K", T), Species: mapSpecies, Y0: mapStart, TEnd: mapEnd, ATol: 1e-8, Floor: 1e-20}
		for _, s := range mapSteps {
			for _, side := range [2][2][]int{{s.lhs, s.rhs}, {s.rhs, s.lhs}} {
				g := 0.0
				for _, a := range side[0] {
					g += mapEnergy[a]
				}
				e.Reactions = append(e.Reactions, reaction{kB * T / h * math.Exp((g-s.top)/(R*T)), side[0], side[1]})
			}
		}
		p := problem{Y0: e.Y0, TEnd: e.TEnd, ATol: e.ATol}
		for _, r := range e.Reactions {
			p.Reactions = append(p.Reactions, listed{K: r.K, LHS: r.LHS, RHS: r.RHS})
		}
		c, err := compile(&p)
		if err != nil {
			return err
		}
		out, err := stiff.Solve(context.Background(), c.sys, c.options(1e-12), c.run, nil)
		if err != nil {
			return fmt.Errorf("%s: %w", e.Name, err)
		}
		e.Reference = out.Final
		all.Problems = append(all.Problems, e)
	}
	data, err := json.MarshalIndent(all, "", " ")
	if err != nil {
		return err
	}
	return os.WriteFile(path, append(data, '\n'), 0o644)
}

// reader returns a visitor that reads the state at points times, evenly spaced
// in their logarithms over the last six decades of the run; nil for none.
func (c *compiled) reader(points int) (visit func(*stiff.Step) error, begin func()) {
	if points == 0 {
		return nil, func() {}
	}
	at := make([]float64, points)
	for i := range at {
		at[i] = c.TEnd * math.Pow(10, 6*(float64(i+1)/float64(points)-1))
	}
	y := make([]float64, len(c.Y0)*points)
	next := 0
	return func(st *stiff.Step) error {
		for next < points && at[next] <= st.T1 {
			st.At(at[next], y[next*len(c.Y0):][:len(c.Y0)])
			next++
		}
		return nil
	}, func() { next = 0 }
}
