// Command race runs the integrator on a set of stiff mass-action problems and
// writes one JSON line for each problem and tolerance: time, achieved error and
// counts, in the form the harness beside the problems compares.
//
//	race -problems DIR/problems.json [-budget 50ms] [-monte-carlo=false] [NAME...]
//	race -write-map DIR/problems.json
//
// The second form writes the problems of a map, one mechanism at many
// temperatures, in the same form; run them with -points 60 to read each at
// sixty times.
package main

import (
	"context"
	"encoding/json"
	"flag"
	"fmt"
	"io"
	"math"
	"os"
	"path/filepath"
	"slices"
	"sort"
	"strings"
	"time"

	"saddlebook/kinetics/stiff"
)

type problem struct {
	Name      string
	File      string
	Species   []string
	Y0        []float64
	TEnd      float64 `json:"t_end"`
	ATol      float64 `json:"atol_factor"`
	Floor     float64
	Exclude   bool
	Reference []float64
	Reactions []listed
}

type listed struct {
	K        float64
	LHS, RHS []int
	Barrier  float64
}

type collection struct {
	RTols      []float64
	MonteCarlo monteCarlo `json:"monte_carlo"`
	Problems   []*problem
}

func main() {
	path := flag.String("problems", "", "the problems, a JSON file")
	budget := flag.Duration("budget", 50*time.Millisecond, "least time of all repeats together")
	rtols := flag.String("rtols", "", "tolerances, instead of the default ones, with commas")
	mc := flag.Bool("monte-carlo", true, "run the sampled problem too")
	mcRTol := flag.Float64("monte-carlo-rtol", 3e-5, "tolerance of the sampled problem; with the default the means are about as far from those at 1e-10 as the reference's at its 1e-6")
	mcCount := flag.Int("monte-carlo-count", 0, "number of samples, instead of that of the problem")
	repeat := flag.Int("repeat", 0, "only run each problem this many times, without timing: for a profiler")
	points := flag.Int("points", 0, "times within each run at which the state is read")
	toMap := flag.String("write-map", "", "write the problems of the map to this file, and stop")
	flag.Parse()
	var err error
	if *toMap != "" {
		err = writeMap(*toMap)
	} else {
		err = run(os.Stdout, *path, *budget, *rtols, *mc, *mcRTol, *mcCount, *repeat, *points, flag.Args())
	}
	if err != nil {
		fmt.Fprintln(os.Stderr, "race:", err)
		os.Exit(1)
	}
}

func read(path string, v any) error {
	data, err := os.ReadFile(path)
	if err != nil {
		return err
	}
	if err := json.Unmarshal(data, v); err != nil {
		return fmt.Errorf("%s: %w", path, err)
	}
	return nil
}

func run(w io.Writer, path string, budget time.Duration, rtols string, mc bool, mcRTol float64, mcCount, repeat, points int, names []string) error {
	var all collection
	if err := read(path, &all); err != nil {
		return err
	}
	// Only error and time are compared, and errors at the end are far below the
	// tolerance on most problems: the loose ones reach the reference's errors.
	tols := []float64{1e-1, 3e-2, 1e-2, 1e-3, 1e-4, 1e-5, 1e-6, 1e-7, 1e-8}
	if rtols != "" {
		tols = nil
		for _, word := range strings.Split(rtols, ",") {
			var x float64
			if _, err := fmt.Sscan(word, &x); err != nil {
				return fmt.Errorf("tolerance %q: %w", word, err)
			}
			tols = append(tols, x)
		}
	}
	for _, p := range all.Problems {
		if len(names) > 0 && !slices.Contains(names, p.Name) {
			continue
		}
		if p.File != "" {
			if err := read(filepath.Join(filepath.Dir(path), p.File), p); err != nil {
				return err
			}
		}
		c, err := compile(p)
		if err != nil {
			return fmt.Errorf("%s: %w", p.Name, err)
		}
		for _, rtol := range tols {
			if repeat > 0 {
				for range repeat {
					s, err := stiff.NewSolver(c.sys, c.options(rtol))
					if err != nil {
						return err
					}
					if err := s.Run(context.Background(), &c.run, nil); err != nil {
						return err
					}
				}
				continue
			}
			if err := c.measure(w, rtol, budget, points); err != nil {
				return fmt.Errorf("%s: %w", p.Name, err)
			}
		}
		if mc && repeat == 0 && p.Name == all.MonteCarlo.Problem {
			all.MonteCarlo.RTol = mcRTol
			if mcCount > 0 {
				all.MonteCarlo.Count = mcCount
			}
			for _, reuse := range []bool{false, true} {
				if err := all.MonteCarlo.measure(w, c, reuse); err != nil {
					return err
				}
			}
		}
	}
	return nil
}

type compiled struct {
	*problem
	sys *stiff.System
	k   []float64
	run stiff.Problem
}

func compile(p *problem) (*compiled, error) {
	c := &compiled{problem: p}
	var list []stiff.Reaction
	for i, r := range p.Reactions {
		x := stiff.Reaction{In: r.LHS, K: i}
		for _, a := range r.LHS {
			x.Net = append(x.Net, stiff.Term{Species: a, Coef: -1})
		}
		for _, a := range r.RHS {
			x.Net = append(x.Net, stiff.Term{Species: a, Coef: 1})
		}
		list = append(list, x)
		c.k = append(c.k, r.K)
	}
	var err error
	c.sys, err = stiff.NewSystem(len(p.Y0), len(c.k), list)
	c.run = stiff.Problem{To: p.TEnd, Start: p.Y0, Rates: stiff.Constant(c.k)}
	return c, err
}

func (c *compiled) options(rtol float64) stiff.Options {
	return stiff.Options{RTol: rtol, ATol: rtol * c.ATol}
}

type line struct {
	Program     string  `json:"program"`
	Problem     string  `json:"problem"`
	N           int     `json:"n"`
	RTol        float64 `json:"rtol"`
	ATol        float64 `json:"atol"`
	Status      string  `json:"status"`
	US          float64 `json:"us,omitempty"`
	USNoSetup   float64 `json:"us_nosetup,omitempty"`
	Q1          float64 `json:"us_q1,omitempty"`
	Q3          float64 `json:"us_q3,omitempty"`
	NoSetupQ1   float64 `json:"us_nosetup_q1,omitempty"`
	NoSetupQ3   float64 `json:"us_nosetup_q3,omitempty"`
	Repeats     int     `json:"repeats,omitempty"`
	RepeatsNo   int     `json:"repeats_nosetup,omitempty"`
	Err         float64 `json:"err,omitempty"`
	Exclude     bool    `json:"exclude,omitempty"`
	Steps       int     `json:"steps"`
	RHS         int     `json:"rhs"`
	Jac         int     `json:"jac"`
	LU          int     `json:"lu"`
	ErrFails    int     `json:"errfails"`
	NegativeRej int     `json:"negative"`
	Exchanges   int     `json:"exchanges"`
	Rebuilds    int     `json:"rebuilds"`
}

func (c *compiled) measure(w io.Writer, rtol float64, budget time.Duration, points int) error {
	ctx := context.Background()
	opt := c.options(rtol)
	visit, begin := c.reader(points)
	run := func(s *stiff.Solver) error {
		begin()
		return s.Run(ctx, &c.run, visit)
	}
	fresh := func() (*stiff.Solver, error) {
		s, err := stiff.NewSolver(c.sys, opt)
		if err == nil {
			err = run(s)
		}
		return s, err
	}
	s, err := fresh()
	out := line{Program: "saddlebook", Problem: c.Name, N: len(c.Y0), RTol: rtol, ATol: opt.ATol, Status: "ok", Exclude: c.Exclude}
	if err != nil {
		fmt.Fprintf(os.Stderr, "%s at %g: %v\n", c.Name, rtol, err)
		out.Status = "failed"
		return json.NewEncoder(w).Encode(out)
	}
	st := s.Stats()
	out.Steps, out.RHS, out.Jac, out.LU, out.ErrFails = st.Steps, st.Evaluations, st.Jacobians, st.Factorisations, st.Rejected
	out.NegativeRej, out.Exchanges, out.Rebuilds = st.Negative, st.Exchanges, st.Rebuilds
	y := make([]float64, len(c.Y0))
	s.Y(y)
	for i, r := range c.Reference {
		out.Err = math.Max(out.Err, math.Abs(y[i]-r)/math.Max(math.Abs(r), c.Floor))
	}
	out.US, out.Q1, out.Q3, out.Repeats = sample(budget, func() { fresh() })
	out.USNoSetup, out.NoSetupQ1, out.NoSetupQ3, out.RepeatsNo = sample(budget, func() { run(s) })
	return json.NewEncoder(w).Encode(out)
}

// sample answers the median and quartiles, in microseconds, of at least five
// calls that take at least the budget together.
func sample(budget time.Duration, f func()) (median, q1, q3 float64, count int) {
	var us []float64
	for total := time.Duration(0); len(us) < 20001 && (total < budget || len(us) < 5); {
		t := time.Now()
		f()
		d := time.Since(t)
		total += d
		us = append(us, float64(d.Nanoseconds())/1e3)
	}
	sort.Float64s(us)
	n := len(us)
	return (us[(n-1)/2] + us[n/2]) / 2, us[n/4], us[3*n/4], n
}
