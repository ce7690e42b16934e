package catalog

import (
	"maps"
	"math"
	"slices"
	"strings"

	"parch/internal/document"
	"parch/internal/quantity"
	"parch/internal/thermo"
)

// validate checks what only the whole shelf can tell.
func (s *shelf) validate() {
	s.checkAliases()
	s.checkPairs()
	s.checkCitations()
	s.checkPriceRatios()
	s.checkHistories()
	s.checkAssays()
}

const (
	standardPa           = 101325.0
	boilingPointWithinK  = 0.5  // vapour pressure curve against the stated boiling point
	clapeyronWithin      = 0.09 // its slope against the heat of vaporization
	clapeyronDifferenceK = 0.01
)

// checkSolvent compares the numbers of a solvent with each other.
func (s *shelf) checkSolvent(root *document.Node, f document.Fields, v *Solvent) {
	s.tops[v.Key] = root
	checkFormula(f, v)
	for _, p := range properties {
		checkCurve(f.Get(p.key), p, v)
	}
	tm, tb, tc := v.MeltingPoint.SI, v.BoilingPoint.SI, v.CriticalTemperature.SI
	if tm == 0 || tb == 0 || tc == 0 {
		return // said already
	}
	if !(tm < tb && tb < tc) {
		f.Get("boiling point").Fail("melting, boiling and critical temperature do not rise: %.4g, %.4g, %.4g K", tm, tb, tc)
		return
	}
	if v.FlashPoint != nil && v.FlashPoint.SI >= tb {
		f.Get("flash point").Fail("must lie below the boiling point")
	}
	if f.Has("heat of vaporization") && v.HeatOfVaporization.Check() == nil {
		checkTrouton(f, v)
	}
	if f.Has("vapour pressure") && v.VapourPressure.Check() == nil {
		may := readAllowance(f.Get("known miss"), v)
		checkBoiling(f, v, may)
		checkLiquid(f, v, may.slope)
	}
}

// molarMassWithin is how far a molar mass may be from the formula.
const molarMassWithin = 5e-4

// checkFormula compares the formula with the molar mass and the hazards.
func checkFormula(f document.Fields, v *Solvent) {
	count, err := parseFormula(v.Formula)
	if err != nil {
		f.Get("formula").Fail("%v", err)
		return
	}
	if sum := count.kgPerMol(); v.MolarMass.SI > 0 && math.Abs(v.MolarMass.SI/sum-1) > molarMassWithin {
		f.Get("molar mass").Fail("%s weighs %.3f g/mol, not %.3f", v.Formula, sum*1e3, v.MolarMass.SI*1e3)
	}
	if count.halogenated() != v.Hazards.Halogenated && f.Has("hazards") {
		f.Get("hazards").Fail("\"halogenated\" does not fit the formula, %s", v.Formula)
	}
	if why := count.notOf(v.Class); why != "" {
		f.Get("class").Fail("%s cannot be of class %q: %s", v.Formula, v.Class, why)
	}
}

// makeup is what the formula of a class must hold and may hold. The class decides
// which agents may meet a solvent, so a wrong one is dangerous.
var makeup = map[string]struct{ must, may []string }{
	"alkane":          {[]string{"C", "H"}, nil},
	"aromatic":        {[]string{"C", "H"}, nil},
	"ether":           {[]string{"C", "H", "O"}, nil},
	"ester":           {[]string{"C", "H", "O"}, nil},
	"carbonate-ester": {[]string{"C", "H", "O"}, nil},
	"ketone":          {[]string{"C", "H", "O"}, nil},
	"alcohol":         {[]string{"C", "H", "O"}, nil},
	"small-alcohol":   {[]string{"C", "H", "O"}, nil},
	"acid":            {[]string{"C", "H", "O"}, nil},
	"nitrile":         {[]string{"C", "H", "N"}, nil},
	"amide":           {[]string{"C", "H", "N", "O"}, nil},
	"amine":           {[]string{"C", "H", "N"}, []string{"O"}},
	"sulfoxide":       {[]string{"C", "H", "S", "O"}, nil},
}

// notOf says why a formula does not fit a class, or "". A halogenated solvent is
// chlorinated or an aryl chloride, whatever else it is called.
func (a atoms) notOf(class string) string {
	halogens := class == "chlorinated" || class == "aryl-chloride"
	if a.halogenated() != halogens {
		if halogens {
			return "it holds no halogen"
		}
		return "it is halogenated; write chlorinated or aryl-chloride"
	}
	m, known := makeup[class]
	if !known {
		return ""
	}
	for _, element := range m.must {
		if a[element] == 0 {
			return "it holds no " + element
		}
	}
	for _, element := range slices.Sorted(maps.Keys(a)) {
		if !slices.Contains(m.must, element) && !slices.Contains(m.may, element) {
			return "it holds " + element
		}
	}
	return ""
}

// allowance is how far the curves of a solvent may disagree.
type allowance struct{ boilingPointK, slope float64 }

// readAllowance widens the usual limits for a solvent that is known to be off,
// which must say why.
func readAllowance(n *document.Node, v *Solvent) allowance {
	a := allowance{boilingPointWithinK, clapeyronWithin}
	if n == nil {
		return a
	}
	f := n.Map("boiling point", "slope", "why")
	v.KnownMiss = f.Need("why").Text()
	if k := f.Get("boiling point"); k != nil {
		reading, _ := k.Quantity(quantity.TemperatureDifference)
		a.boilingPointK = reading.SI
	}
	if share := f.Get("slope"); share != nil {
		reading, _ := share.Quantity(quantity.Share)
		a.slope = reading.SI
	}
	return a
}

// checkBoiling compares the vapour pressure with the boiling point and, through
// Clausius-Clapeyron for an ideal vapour, with the heat of vaporization.
func checkBoiling(f document.Fields, v *Solvent, may allowance) {
	computedK, err := thermo.Boil(&v.Pure, standardPa)
	if err != nil {
		f.Get("vapour pressure").Fail("%v", err)
		return
	}
	if diff := computedK - v.BoilingPoint.SI; math.Abs(diff) > may.boilingPointK {
		f.Get("vapour pressure").Fail("gives a boiling point of %.2f K, %+.2f K from the one stated; within %.2g K is wanted",
			computedK, diff, may.boilingPointK)
	}
	if f.Has("heat of vaporization") && v.HeatOfVaporization.Check() == nil {
		slopeJ := clapeyronJ(v.Pure.VapourPressurePa, computedK)
		ratio := slopeJ / v.HeatOfVaporization.At(computedK)
		if !(math.Abs(ratio-1) <= may.slope) {
			f.Get("heat of vaporization").Fail("the slope of the vapour pressure at the boiling point gives %.4g kJ/mol, %.2f times the curve; within %.0f %% is wanted",
				slopeJ/1e3, ratio, 100*may.slope)
		}
	}
}

// clapeyronJ is R T^2 d ln P/dT, J/mol: the heat of vaporization if the vapour
// were ideal and the liquid without volume. At the boiling point it is 2 to 5 %
// above the real one.
func clapeyronJ(pressure thermo.Correlation, tK float64) float64 {
	const d = clapeyronDifferenceK
	slope := math.Log(pressure.At(tK+d)/pressure.At(tK-d)) / (2 * d)
	return thermo.GasConstant * tK * tK * slope
}

// checkAliases makes sure that a name means one solvent.
func (s *shelf) checkAliases() {
	owner := map[string]string{}
	for _, key := range keysOf(s.cat.Solvents) {
		v := s.cat.Solvents[key]
		own := map[string]bool{}
		for _, name := range append([]string{v.Key, v.Name, v.CAS}, v.Aliases...) {
			folded := strings.ToLower(name)
			if other, taken := owner[folded]; taken && !own[folded] {
				s.tops[v.Key].Fail("%q also names %s", name, other)
			}
			owner[folded], own[folded] = v.Key, true
		}
	}
}

// checkPairs makes sure that the matrix speaks of every solvent with every agent.
// A gap is reported where it can be closed: at an own solvent or own agent, in one
// line, or in the matrix.
func (s *shelf) checkPairs() {
	agents := keysOf(s.cat.Agents)
	classes := map[string][]string{} // without a verdict, by own agent
	for _, key := range keysOf(s.cat.Solvents) {
		v := s.cat.Solvents[key]
		if key == waterKey {
			continue
		}
		var missing []string
		for _, agent := range agents {
			switch _, ok := s.cat.Verdict(v, agent); {
			case ok:
			case v.Own:
				missing = append(missing, agent)
			case s.cat.Agents[agent].Own:
				if !slices.Contains(classes[agent], v.Class) {
					classes[agent] = append(classes[agent], v.Class)
				}
			default:
				s.root(matrixFile).Fail("nothing is said of %s with %s (class %q)", v.Key, agent, v.Class)
			}
		}
		if len(missing) > 0 {
			s.tops[key].Fail("nothing is said of %s (class %q) with %s%s", key, v.Class, strings.Join(missing, ", "), s.classHint(key, v.Class))
		}
	}
	for _, agent := range keysOf(classes) {
		slices.Sort(classes[agent])
		s.agentTops[agent].Fail(`nothing is said of %s with the classes %s; give a verdict for each under "matrix"`, agent, strings.Join(classes[agent], ", "))
	}
}

// classHint says what may be done about a class that the matrix is silent of.
func (s *shelf) classHint(key, class string) string {
	known := map[string]bool{}
	for _, v := range s.cat.Solvents {
		if v.Key != waterKey && !v.Own {
			known[v.Class] = true
		}
	}
	if known[class] {
		return `; give the verdicts under "matrix"`
	}
	if near := s.tops[key].Offer(class, keysOf(known)); near != "" {
		return near
	}
	return "; classes: " + strings.Join(keysOf(known), ", ") + `; a class of your own needs its verdicts under "matrix"`
}
