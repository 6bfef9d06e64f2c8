package kinetics_test

import (
	"math"
	"testing"

	"saddlebook/kinetics"
	"saddlebook/kinetics/rate"
	"saddlebook/kinetics/thermo"
)

// species and steps of a test, energies in J/mol, and networks of them.
func tested(t *testing.T, T float64, species map[string]float64, names []string, steps []string, ts []float64) *kinetics.Network {
	t.Helper()
	m := &kinetics.Mechanism{ID: "outside", Temperature: T}
	for _, s := range names {
		m.Species = append(m.Species, kinetics.Species{Name: s, Energy: thermo.Constant(species[s])})
	}
	for i, text := range steps {
		from, to, returns, err := kinetics.ParseReaction(text, names)
		if err != nil {
			t.Fatal(err)
		}
		m.Steps = append(m.Steps, kinetics.Step{Name: "TS" + string(rune('a'+i)), From: from, To: to, Returns: returns, Energy: thermo.Constant(ts[i])})
	}
	return network(t, m, T)
}

const solomons = "Solomons and Fryhle, Organic Chemistry, section 13.10 (read in stored chapter notes)"

// Product ratios as published; the one at 15 °C is between the two kinds of control
// and stands as a ratio of barriers here. The differences of energy, RT ln(first/second) in
// kJ/mol, were computed by other code with exact constants.
var productRatios = []struct {
	name, source string
	kinetic      bool
	T            float64
	first, other float64
	ddG          float64
}{
	{"HBr and butadiene, -80 °C", solomons, true, 193.15, 80, 20, 2.2263034240510695},
	{"HBr and butadiene, 40 °C", solomons, false, 313.15, 20, 80, -3.609458541245624},
	{"HBr and butadiene, 0 °C", "OpenStax Organic Chemistry (McMurry), section 14.3, read", true, 273.15, 71, 29, 2.0335026479372287},
	{"HBr and butadiene, 40 °C", "OpenStax Organic Chemistry (McMurry), section 14.3, read", false, 313.15, 15, 85, -4.516335614296572},
	{"Br2 and butadiene, -15 °C", "a textbook problem, read in a stored page", true, 258.15, 60, 40, 0.8702816006299946},
	{"Br2 and butadiene, 60 °C", "a textbook problem, read in a stored page", false, 333.15, 10, 90, -6.086231268020992},
	{"Br2 and butadiene, 15 °C", solomons + "; the sign of the temperature is doubtful", true, 288.15, 54, 46, 0.384150909847485},
	{"naphthalene, 75 % H2SO4, 25 °C", "Cerfontain and Telder, Rec. Trav. Chim. 86, 527 (1967), abstract read", true, 298.15, 5.9, 1, 4.400030607501779},
	{"naphthalene, 95 % H2SO4, 25 °C", "Cerfontain and Telder, Rec. Trav. Chim. 86, 527 (1967), abstract read", true, 298.15, 4.1, 1, 3.497776077156454},
	{"naphthalene, 80 °C", "Fierz-David and Weissenbach 1920, textbook value, from memory, unverified", true, 353.15, 96, 4, 9.331568420595705},
	{"naphthalene, 160 °C", "textbook value, from memory, unverified", false, 433.15, 15, 85, -6.2470086901886},
	{"enolates, LDA, -78 °C", "an encyclopedia article on the aldol reaction, read", true, 195.15, 99, 1, 7.455891575709185},
	{"enolates, Ph3CLi, room temperature", "an encyclopedia article on the aldol reaction, read", false, 298.15, 10, 90, -5.446825311602757},
	{"silyl enol ethers, Et3N, 130 °C", "House et al., J. Org. Chem. 34, 2324 (1969), from memory, unverified", false, 403.15, 22, 78, -4.2424828068531575},
}

// Under kinetic control the difference of the barriers gives the ratio, under
// thermodynamic control that of the products; the other difference does nothing.
func TestOutsideProductRatios(t *testing.T) {
	names := []string{"R", "A", "B"}
	for _, a := range productRatios {
		t.Run(a.name, func(t *testing.T) {
			const low = -40e3
			g, ts := map[string]float64{"A": low, "B": low}, []float64{70e3, 70e3}
			if a.kinetic {
				ts[1] += 1000 * a.ddG
			} else {
				g["A"] -= 1000 * a.ddG
			}
			n := tested(t, a.T, g, names, []string{"R <=> A", "R <=> B"}, ts)
			l, err := n.KineticLimit(kinetics.Limit{From: 0, Products: []int{1, 2}})
			if err != nil {
				t.Fatal(err)
			}
			eq, err := n.Equilibrium([]float64{0.1, 0, 0})
			if err != nil {
				t.Fatal(err)
			}
			ratio, ok := n.EquilibriumRatio(1, 2)
			want, kinetic, rest := a.first/a.other, l.Shares[0]/l.Shares[1], eq.C[1]/eq.C[2]
			switch {
			case !ok || !within(ratio, rest, 1e-12):
				t.Errorf("at equilibrium %v by the energies, %v by the composition", ratio, rest)
			case a.kinetic && (!within(kinetic, want, 1e-12) || !within(rest, 1, 1e-12)):
				t.Errorf("kinetic %v, at equilibrium %v; want %v and 1\nsource: %s", kinetic, rest, want, a.source)
			case !a.kinetic && (!within(rest, want, 1e-12) || !within(kinetic, 1, 1e-12)):
				t.Errorf("kinetic %v, at equilibrium %v; want 1 and %v\nsource: %s", kinetic, rest, want, a.source)
			}
		})
	}
}

// The excess of an enantiomer by the difference of two barriers, tanh(ΔΔG‡/2RT).
func TestOutsideEnantiomers(t *testing.T) {
	const source = "ee = tanh(ΔΔG‡/2RT), common practice; recomputed with 30 digits from exact SI constants"
	for _, a := range []struct{ T, kcal, percent, er float64 }{
		{195.15, 0.5, 56.80623501943322, 3.6302979166086033},
		{195.15, 1.0, 85.89469554390142, 13.179062963332767},
		{195.15, 1.5, 95.90532495612078, 47.84392481864054},
		{195.15, 2.0, 98.85509970465692, 173.68770059148943},
		{195.15, 2.5, 99.68331285038742, 630.5380975978226},
		{195.15, 3.0, 99.91266532450993, 2289.041142051728},
		{273.15, 0.5, 43.05492235149717, 2.512156067896033},
		{273.15, 1.0, 72.64369215434881, 6.310928109466858},
		{273.15, 1.5, 88.13340638913482, 15.854036344252807},
		{273.15, 2.0, 95.10137863502945, 39.82781360285893},
		{273.15, 2.5, 98.0208539377443, 100.05368361345424},
		{273.15, 3.0, 99.20745144138546, 251.3504684048889},
		{298.15, 0.5, 39.857331438871135, 2.325426104043263},
		{298.15, 1.0, 68.78709734130167, 5.40760656536583},
		{298.15, 1.5, 85.2670235598444, 12.57498946749743},
		{298.15, 2.0, 93.38672642765908, 29.242208765787627},
		{298.15, 2.5, 97.10147429526167, 68.00059560384528},
		{298.15, 3.0, 98.74316880911552, 158.1303601076713},
		// The inverse, from a stated excess.
		{298.15, 1.7445357805066748, 90, 19},
		{298.15, 2.170605137680397, 95, 39},
		{298.15, 3.1362034428965138, 99, 199},
		{195.15, 2.052759020228928, 99, 199},
	} {
		n := tested(t, a.T, map[string]float64{"R": -30e3, "S": -30e3}, []string{"P", "R", "S"}, []string{"P -> R", "P -> S"}, []float64{60e3, 60e3 + a.kcal*kcal})
		l, err := n.KineticLimit(kinetics.Limit{From: 0, Products: []int{1, 2}})
		if err != nil {
			t.Fatal(err)
		}
		ee, er := 100*(l.Shares[0]-l.Shares[1]), l.Shares[0]/l.Shares[1]
		if !within(ee, a.percent, 1e-12) || !within(er, a.er, 1e-12) {
			t.Errorf("%g kcal/mol at %g K: ee %v %%, ratio %v; want %v %%, %v\nsource: %s", a.kcal, a.T, ee, er, a.percent, a.er, source)
		}
	}
}

// Two conformers of one carrier (Curtin and Hammett), the reference case.
func TestOutsideFastExchange(t *testing.T) {
	const source = "Y/X = K·k(B)/k(A) = exp(−(G(TSB) − G(TSA))/RT), Seeman, Chem. Rev. 83, 83 (1983); recomputed with 30 digits from exact SI constants"
	n := tested(t, 298.15, map[string]float64{"B": kcal, "X": -20 * kcal, "Y": -20 * kcal}, []string{"A", "B", "X", "Y"},
		[]string{"A <=> B", "A -> X", "B -> Y"}, []float64{6 * kcal, 20 * kcal, 19 * kcal})
	l, err := n.KineticLimit(kinetics.Limit{From: 0, Products: []int{2, 3}})
	if err != nil {
		t.Fatal(err)
	}
	if got := l.PreEquilibrium[1] / l.PreEquilibrium[0]; !within(got, 5.407606565365828, 1e-13) {
		t.Errorf("pre-equilibrium Y/X %v, want 5.407606565365828\nsource: %s", got, source)
	}
	if got := l.Shares[1] / l.Shares[0]; !within(got, 5.407606565365828, 1e-8) || !l.FastExchange {
		t.Errorf("Y/X %v, fast exchange %v; want 5.4076 and true\nsource: %s", got, l.FastExchange, source)
	}
	if got, ok := n.EquilibriumRatio(1, 0); !ok || !within(got, 0.1849246959652564, 1e-13) {
		t.Errorf("B/A %v, want 0.1849246959652564\nsource: %s", got, source)
	}
}

// A values: the share of the equatorial chair at 25 °C. The tables that package
// balance does not test, and those of the OpenStax book in kJ/mol.
func TestOutsideConformers(t *testing.T) {
	const (
		table = "a table of A values, read in a stored page; share and constant recomputed from exact SI constants"
		most  = "1.74 kcal/mol, the value most quoted (Eliel; Booth and Everett 1976, 1980), read in a stored page; share and constant recomputed"
		open  = "OpenStax Organic Chemistry (2023), section 4.7, twice the printed 1,3-diaxial strain; share recomputed"
	)
	for _, a := range []struct {
		group      string
		A, percent float64 // J/mol
		K          float64 // 0: not given
		source     string
	}{
		{"CH3", 1.8 * kcal, 95.42638789015018, 20.864556415844337, table},
		{"C2H5", 1.9 * kcal, 96.10905887069114, 24.70072295536455, table},
		{"CH(CH3)2", 2.1 * kcal, 97.19248550906566, 34.61869415915993, table},
		{"C(CH3)3", 5.4 * kcal, 99.98899158684759, 9082.961386217115, table},
		{"C6H5", 2.8 * kcal, 99.12147622555167, 112.82731225776551, table},
		{"Cl", 0.5 * kcal, 69.92866571943557, 2.325426104043263, table},
		{"Br", 0.6 * kcal, 73.35450742311954, 2.7529799725589306, table},
		{"CN", 0.2 * kcal, 58.359801635143626, 1.401525543269225, table},
		{"OH", 1.0 * kcal, 84.39354867065084, 5.40760656536583, table},
		{"OCH3", 0.6 * kcal, 73.35450742311954, 2.7529799725589306, table},
		{"CH3", 1.74 * kcal, 94.96351075233476, 18.8551004643476, most},
		{"CH3", 7.6e3, 95.54600095050105, 0, open},
		{"C(CH3)3", 22.8e3, 99.9898709474473, 0, open},
	} {
		n := tested(t, 298.15, map[string]float64{"axial": a.A}, []string{"axial", "equatorial"}, []string{"axial <=> equatorial"}, []float64{45e3})
		eq, err := n.Equilibrium([]float64{1, 0})
		if err != nil {
			t.Fatal(err)
		}
		if !within(100*eq.C[1], a.percent, 1e-13) || a.K != 0 && !within(n.Reactions[0].K, a.K, 1e-12) {
			t.Errorf("%s: %v %% equatorial, K %v; want %v %%, %v\nsource: %s", a.group, 100*eq.C[1], n.Reactions[0].K, a.percent, a.K, a.source)
		}
	}

	// Butane: the gauche form is two forms.
	const butane = "gauche 3.8 kJ/mol (0.9 kcal/mol) above anti: OpenStax Organic Chemistry (2023), section 4.7; shares recomputed"
	for _, a := range []struct{ gauche, percent float64 }{{3.8e3, 69.84137295420096}, {0.9 * kcal, 69.54828079284218}} {
		m := &kinetics.Mechanism{Temperature: 298.15, Species: []kinetics.Species{{Name: "anti"}, {Name: "gauche", Forms: 2, Energy: thermo.Constant(a.gauche)}},
			Steps: []kinetics.Step{{Name: "turn", From: []kinetics.Term{{Species: 0, N: 1}}, To: []kinetics.Term{{Species: 1, N: 1}}, Returns: true, Energy: thermo.Constant(15e3)}}}
		eq, err := network(t, m, 298.15).Equilibrium([]float64{0, 1})
		if err != nil || !within(100*eq.C[0], a.percent, 1e-13) {
			t.Errorf("anti %v %%, %v; want %v %%\nsource: %s", 100*eq.C[0], err, a.percent, butane)
		}
	}
}

// Half-lives of nth order and equilibria of two molecules.
func TestOutsideRateLaws(t *testing.T) {
	const source = "Atkins and de Paula, Physical Chemistry, integrated rate laws; evaluated with 30 digits"
	const T = 298.15
	for _, a := range []struct {
		reaction        string
		each            float64 // molecules used up
		k, a0, halfLife float64
	}{
		{"2 A -> P", 2, 0.3, 2, 1.666666666666667},
		{"3 A -> P", 3, 0.3, 2, 1.25},
	} {
		barrier, err := rate.Barrier(a.k/a.each, T) // -da/dt = k·aⁿ
		if err != nil {
			t.Fatal(err)
		}
		n := tested(t, T, nil, []string{"A", "P"}, []string{a.reaction}, []float64{barrier})
		if got := n.Reactions[0].HalfLife(false, a.a0); !within(got, a.halfLife, 1e-13) {
			t.Errorf("%s: half-life %v s, want %v\nsource: %s", a.reaction, got, a.halfLife, source)
		}
	}
	for _, a := range []struct{ a0, b0, K, c float64 }{{1, 1, 10, 0.7298437881283576}, {1, 2, 100, 0.9901942113767562}} {
		n := tested(t, T, map[string]float64{"C": -rate.R * T * math.Log(a.K)}, []string{"A", "B", "C"}, []string{"A + B <=> C"}, []float64{60e3})
		eq, err := n.Equilibrium([]float64{a.a0, a.b0, 0})
		if err != nil || !within(eq.C[2], a.c, 1e-13) {
			t.Errorf("K %g: C %v, %v; want %v\nsource: %s", a.K, eq.C[2], err, a.c, source)
		}
	}
}

// Reactions among gases of the JANAF tables: enthalpies and entropies at 1 bar give
// the equilibrium constants that the tables' free energies give, at 1 mol/L.
func TestOutsideGasReactions(t *testing.T) {
	const source = "NIST-JANAF thermochemical tables, 4th ed. (1998): formation enthalpies, free energies and entropies at 298.15 K and 1 bar, read in a public data set"
	const T = 298.15
	gases := map[string]struct{ H, G, S float64 }{ // kJ/mol, kJ/mol, J/mol/K
		"HCHO": {-115.897, -109.921, 218.95}, "CH4": {-74.873, -50.768, 186.251}, "C2H4": {52.467, 68.421, 219.33},
		"C2H2": {226.731, 209.2, 200.958}, "HCN": {135.143, 124.725, 201.828}, "CO2": {-393.522, -394.389, 213.795},
		"CO": {-110.527, -137.163, 197.653}, "NH3": {-45.898, -16.367, 192.774}, "H2O": {-241.826, -228.582, 188.834},
		"N2O": {82.048, 104.179, 219.957}, "NO": {90.291, 86.6, 210.758}, "NO2": {33.095, 51.258, 240.034},
	}
	for _, text := range []string{
		"N2O + NO2 <=> 3 NO", "CH4 + CO2 <=> 2 HCHO", "C2H4 + H2O <=> CH4 + HCHO", "C2H2 + H2O <=> CH4 + CO", "HCN + H2O <=> NH3 + CO",
	} {
		names := []string{"HCHO", "CH4", "C2H4", "C2H2", "HCN", "CO2", "CO", "NH3", "H2O", "N2O", "NO", "NO2"}
		from, to, returns, err := kinetics.ParseReaction(text, names)
		if err != nil {
			t.Fatal(err)
		}
		bar := rate.Standard{Pressure: rate.Bar}
		m := &kinetics.Mechanism{Temperature: T}
		for _, s := range names {
			m.Species = append(m.Species, kinetics.Species{Name: s, Energy: thermo.Following(1000*gases[s].H, gases[s].S), Standard: bar})
		}
		m.Steps = []kinetics.Step{{Name: "TS", From: from, To: to, Returns: returns, Above: true, Energy: thermo.Constant(500e3), Standard: bar}}
		table, more := 0.0, 0
		for i, x := range netOf(from, to, len(names)) {
			table += float64(x) * 1000 * gases[names[i]].G
			more += int(x)
		}
		want := table + float64(more)*bar.Shift(T)
		// The tables have three decimals, of which a reaction has some six.
		if got := network(t, m, T).Reactions[0].DeltaG; math.Abs(got-want) > 15 {
			t.Errorf("%s: ΔG %v J/mol, want %v\nsource: %s", text, got, want, source)
		}
	}
}
