package thermo

import (
	"fmt"
	"math"
	"slices"

	"saddlebook/kinetics/rate"
)

// Atom is one nucleus of a geometry.
type Atom struct {
	Symbol  string  // "C"; an isotope as "13C", or "D" and "T"; else the most abundant one
	Mass    float64 `json:",omitempty"` // kg/mol; 0: of the isotope named
	X, Y, Z float64 // m
}

// Below this ratio of the smallest to the largest moment of inertia a geometry is
// taken as linear: coordinates are good to some 1e-13 m, which makes 1e-6 of it,
// and real molecules that are not linear stay above 1e-3.
const linearBelow = 1e-5

// shape is what translation and rotation need.
type shape struct {
	mass     float64   // kg/mol
	rotation []float64 // 1/m: none, one or three
}

func (m *Molecule) shape() (shape, error) {
	if len(m.Atoms) > 0 {
		if m.Mass != 0 || len(m.Rotation) > 0 {
			return shape{}, fmt.Errorf("%w: the shape is said twice; give atoms alone, or mass with rotation", rate.ErrDomain)
		}
		mass, moments, err := inertia(m.Atoms)
		return shape{mass, constants(moments)}, err
	}
	if !(m.Mass > 0) || math.IsInf(m.Mass, 0) {
		return shape{}, &rate.DomainError{What: "mass (kg/mol)", Value: m.Mass, Fix: "give a finite one above zero, or atoms"}
	}
	if n := len(m.Rotation); n != 0 && n != 1 && n != 3 {
		return shape{}, &rate.DomainError{What: "number of rotational constants", Value: float64(n), Fix: "give none for an atom, one for a linear molecule, three for any other"}
	}
	for i, b := range m.Rotation {
		if !(b > 0) || math.IsInf(b, 0) {
			return shape{}, &rate.DomainError{What: fmt.Sprintf("rotational constant %d (cm-1)", i+1), Value: b / perCentimetre, Fix: "give a finite one above zero; a linear molecule has one only"}
		}
	}
	return shape{m.Mass, m.Rotation}, nil
}

// Moments returns the principal moments of inertia, in kg m², from the smallest
// up: none of one atom, one of atoms on one line (within 1e-5 of the largest
// moment), else three. Errors match rate.ErrDomain.
func Moments(atoms []Atom) ([]float64, error) {
	if len(atoms) == 0 {
		return nil, &rate.DomainError{What: "number of atoms", Value: 0, Fix: "give one or more"}
	}
	if err := checkAtoms(atoms); err != nil {
		return nil, err
	}
	_, moments, err := inertia(atoms)
	return moments, err
}

// RotationalConstant returns the rotational constant, in 1/m, of a moment of
// inertia (kg m²): h/(8π²·c·I). A moment that is not positive gives NaN.
func RotationalConstant(moment float64) float64 {
	if !(moment > 0) {
		return math.NaN()
	}
	return rate.Planck / (8 * math.Pi * math.Pi * lightSpeed * moment)
}

func constants(moments []float64) []float64 {
	var out []float64
	for _, i := range moments {
		out = append(out, RotationalConstant(i))
	}
	return out
}

func inertia(atoms []Atom) (mass float64, moments []float64, err error) {
	masses := make([]float64, len(atoms))
	var centre [3]float64
	for i, a := range atoms {
		if masses[i], err = a.mass(); err != nil {
			return 0, nil, fmt.Errorf("atom %d: %w", i+1, err)
		}
		mass += masses[i]
		for k, x := range a.place() {
			centre[k] += masses[i] * x
		}
	}
	if len(atoms) == 1 {
		return mass, nil, nil
	}
	for k := range centre {
		centre[k] /= mass
	}
	var tensor [3][3]float64
	for i, a := range atoms {
		r := a.place()
		for k := range r {
			r[k] -= centre[k]
		}
		m := masses[i] / rate.Avogadro
		for k := range 3 {
			for l := range 3 {
				tensor[k][l] -= m * r[k] * r[l]
				tensor[k][k] += m * r[l] * r[l]
			}
		}
	}
	I := eigenvalues(tensor)
	if I[0] <= linearBelow*I[2] {
		return mass, []float64{(I[1] + I[2]) / 2}, nil
	}
	return mass, I[:], nil
}

// eigenvalues of a symmetric matrix, from the smallest up, by Jacobi's rotations.
func eigenvalues(a [3][3]float64) [3]float64 {
	for range 30 {
		done := true
		for p := range 2 {
			for q := p + 1; q < 3; q++ {
				if math.Abs(a[p][q]) <= 1e-17*(math.Abs(a[p][p])+math.Abs(a[q][q])) {
					continue
				}
				done = false
				theta := (a[q][q] - a[p][p]) / (2 * a[p][q])
				t := math.Copysign(1, theta) / (math.Abs(theta) + math.Hypot(theta, 1))
				c := 1 / math.Hypot(t, 1)
				s := t * c
				a[p][p], a[q][q] = a[p][p]-t*a[p][q], a[q][q]+t*a[p][q]
				a[p][q], a[q][p] = 0, 0
				r := 3 - p - q
				x, y := c*a[r][p]-s*a[r][q], s*a[r][p]+c*a[r][q]
				a[r][p], a[p][r], a[r][q], a[q][r] = x, x, y, y
			}
		}
		if done {
			break
		}
	}
	out := [3]float64{a[0][0], a[1][1], a[2][2]}
	slices.Sort(out[:])
	return out
}

func (a Atom) place() [3]float64 { return [3]float64{a.X, a.Y, a.Z} }

func (a Atom) mass() (float64, error) {
	if a.Mass != 0 {
		if !(a.Mass > 0) || math.IsInf(a.Mass, 0) {
			return 0, &rate.DomainError{What: "mass (kg/mol)", Value: a.Mass, Fix: "give a finite one above zero"}
		}
		return a.Mass, nil
	}
	m, ok := isotopeMass[a.Symbol]
	if !ok {
		return 0, fmt.Errorf("%w: no mass is known for the symbol %q; correct it, or give the mass of the atom", rate.ErrDomain, a.Symbol)
	}
	return m * MassUnit, nil
}

// checkAtoms refuses coordinates that cannot be those of a molecule in metres.
func checkAtoms(atoms []Atom) error {
	for i, a := range atoms {
		if _, err := a.mass(); err != nil {
			return fmt.Errorf("atom %d: %w", i+1, err)
		}
		for _, x := range a.place() {
			if !(math.Abs(x) < 1e-6) {
				return &rate.DomainError{What: fmt.Sprintf("coordinate (m) of atom %d", i+1), Value: x, Fix: "give metres within 1e-6 of zero; 1 Å is 1e-10 m"}
			}
		}
		for j, b := range atoms[:i] {
			if d := math.Hypot(math.Hypot(a.X-b.X, a.Y-b.Y), a.Z-b.Z); d < 2e-11 {
				return &rate.DomainError{What: fmt.Sprintf("distance (m) of atoms %d and %d", j+1, i+1), Value: d, Fix: "atoms of a molecule are 7e-11 m apart or more"}
			}
		}
	}
	return nil
}
