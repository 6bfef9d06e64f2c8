package main

import (
	"context"
	"encoding/json"
	"io"
	"math"
	"time"

	"saddlebook/kinetics/stiff"
)

// monteCarlo is the sampling rule that comes with the problems: a weak
// generator of whole numbers, so that every program draws the same.
type monteCarlo struct {
	Problem   string
	Count     int
	RTol      float64
	Sigma     float64 `json:"sigma_kcal"`
	Seed      uint32
	Constants struct {
		KB float64 `json:"kB"`
		H  float64 `json:"h"`
		R  float64 `json:"R_kcal"`
		T  float64 `json:"T"`
	}
}

type drawer uint32

func (d *drawer) normal() float64 {
	sum := 0.0
	for range 12 {
		*d = (1103515245**d + 12345) & 0x7fffffff
		sum += float64(*d) / 2147483648
	}
	return sum - 6
}

func (m *monteCarlo) measure(w io.Writer, c *compiled, reuse bool) error {
	rt := m.Constants.R * m.Constants.T
	pre := m.Constants.KB * m.Constants.T / m.Constants.H
	n := len(c.Y0)
	mean, y := make([]float64, n), make([]float64, n)
	z := make([]float64, len(c.k)/2)
	k := make([]float64, len(c.k))
	run := c.run
	run.Rates = stiff.Constant(k)
	opt := c.options(m.RTol)
	d := drawer(m.Seed)
	steps, failed := 0, 0
	square := 0.0
	begin := time.Now()
	var s *stiff.Solver
	var err error
	for range m.Count {
		for j := range z {
			z[j] = m.Sigma * d.normal()
		}
		for i, r := range c.Reactions {
			k[i] = pre * math.Exp(-(r.Barrier+z[i/2])/rt)
		}
		if s == nil || !reuse {
			if s, err = stiff.NewSolver(c.sys, opt); err != nil {
				return err
			}
		}
		if err := s.Run(context.Background(), &run, nil); err != nil {
			failed++
		}
		steps += s.Stats().Steps
		s.Y(y)
		for i, v := range y {
			mean[i] += v / float64(m.Count)
		}
		square += y[n-1] * y[n-1] / float64(m.Count)
	}
	wall := time.Since(begin).Seconds()
	variant := "setup"
	if reuse {
		variant = "nosetup"
	}
	return json.NewEncoder(w).Encode(map[string]any{
		"program": "saddlebook", "problem": "monte_carlo", "variant": variant, "rtol": m.RTol, "count": m.Count,
		"wall_s": wall, "us_each": 1e6 * wall / float64(m.Count), "steps": steps, "failed": failed,
		"sd_P": math.Sqrt(square - mean[n-1]*mean[n-1]), "mean": mean, "last": y,
	})
}
