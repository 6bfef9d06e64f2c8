package course_test

import (
	"context"
	"fmt"

	"saddlebook/kinetics"
	"saddlebook/kinetics/course"
	"saddlebook/kinetics/thermo"
)

// An addition that gives A under kinetic control and B once warmed. The numbers
// are invented.
func Example() {
	const kcal, cal = 4184.0, 4.184
	hs := func(h, s float64) thermo.Energy { return thermo.Following(h*kcal, s*cal) }
	one := func(species ...int) []kinetics.Term {
		var side []kinetics.Term
		for _, s := range species {
			side = append(side, kinetics.Term{Species: s, N: 1})
		}
		return side
	}
	m := &kinetics.Mechanism{
		ID: "addition", Temperature: 195.15,
		Species: []kinetics.Species{
			{Name: "R", Energy: hs(0, 0)}, {Name: "X", Energy: hs(0, 0)},
			{Name: "A", Energy: hs(-11.5, -33)}, {Name: "B", Energy: hs(-17, -34)},
		},
		Steps: []kinetics.Step{
			{Name: "TSa", From: one(0, 1), To: one(2), Returns: true, Energy: hs(9, -24.6)},
			{Name: "TSb", From: one(0, 1), To: one(3), Returns: true, Energy: hs(9.9, -26.1)},
		},
	}
	c, err := course.Simulate(context.Background(), m, course.Run{
		Charge:    []float64{0.20, 0.22, 0, 0},
		Programme: []course.Leg{{To: 195.15, Lasts: 7200}, {Ramp: true, To: 293.15, Lasts: 10800}, {To: 293.15, Lasts: 43200}},
		Basis:     0,
		Products:  []course.Product{{Name: "A", Members: []int{2}}, {Name: "B", Members: []int{3}}},
		Report:    []float64{7200},
	})
	if err != nil {
		fmt.Println(err)
		return
	}
	for _, p := range c.Report {
		fmt.Printf("%5.1f h, %6.1f °C: conversion %5.1f %%, A %5.1f %%, B %5.1f %%, control %.2f\n",
			p.T/3600, p.Kelvin-273.15, 100*p.Conversion, 100*p.Yields[0], 100*p.Yields[1], p.Control[0])
	}
	fmt.Printf("A:B passes 1 at %.1f °C\n", c.Pairs[0].EvenKelvin-273.15)
	h, err := c.Heat(course.HeatData{Species: []float64{0, 0, -11.5 * kcal, -17 * kcal}, PerKelvin: 1600})
	if err != nil {
		fmt.Println(err)
		return
	}
	fmt.Printf("adiabatic rise of the whole charge %.1f K, of what is left at 2 h %.1f K\n", h.Rise, h.Report[0].Rise)
	// Output:
	//   2.0 h,  -78.0 °C: conversion  72.5 %, A  69.3 %, B   3.2 %, control 0.00
	//  17.0 h,   20.0 °C: conversion 100.0 %, A   0.0 %, B 100.0 %, control 1.00
	// A:B passes 1 at -2.2 °C
	// adiabatic rise of the whole charge 8.9 K, of what is left at 2 h 4.4 K
}
