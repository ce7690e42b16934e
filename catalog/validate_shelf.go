package catalog

import (
	"math"
	"slices"
	"strconv"
	"strings"

	"parch/internal/document"
	"parch/internal/quantity"
	"parch/internal/thermo"
)

// usualDryRatio is what a dry grade costs over the reagent grade (from memory).
const leastDryRatio, mostDryRatio = 2, 6

// checkPriceRatios compares the price of each dry grade with that of the reagent
// grade. Prices of the user's own are what they are.
func (s *shelf) checkPriceRatios() {
	items := s.root(pricesFile).Map("kept under", "common", "dry grades", "pack sizes", "items").Get("items")
	for _, e := range items.Entries() {
		dry, plain := s.cat.Prices[e.Key], s.cat.Prices[strings.TrimSuffix(e.Key, "-dry")]
		if plain.Item == dry.Item || plain.Item == "" || dry.Own || plain.Own || dry.Currency != plain.Currency {
			continue
		}
		a, _ := strconv.ParseFloat(dry.Amount, 64)
		b, _ := strconv.ParseFloat(plain.Amount, 64)
		if ratio := a / b; b > 0 && (ratio < leastDryRatio || ratio > mostDryRatio) {
			e.Node.Fail("costs %.2g times the reagent grade; %d to %d times is usual", ratio, leastDryRatio, mostDryRatio)
		}
	}
}

// checkHistories: the hotter a sieve was activated, the less it still holds. Of two
// at one temperature the order does not matter.
func (s *shelf) checkHistories() {
	ovens := slices.DeleteFunc(slices.Clone(s.cat.Histories), func(h History) bool { return h.TemperatureK == 0 })
	for _, cold := range ovens {
		for _, hot := range ovens {
			if cold.TemperatureK < hot.TemperatureK && cold.ResidualKgPerKg.SI <= hot.ResidualKgPerKg.SI && !cold.ResidualKgPerKg.Own && !hot.ResidualKgPerKg.Own {
				s.root(historiesFile).Fail("%q leaves no more water than %q", cold.Text, hot.Text)
			}
		}
	}
}

// checkAssays: a method with the repeatability r sees what lies about 3.3 standard
// deviations, 1.2 r, above nothing (IUPAC's rule for a detection limit, from
// memory); and it is used above that.
func (s *shelf) checkAssays() {
	const factor, within = 3.3 / 2.77, 1.6
	a := s.cat.Assays["coulometric"]
	ratio := a.DetectionLimit.SI / (factor * a.Repeatability.SI)
	if a.Repeatability.SI > 0 && (ratio > within || ratio < 1/within) {
		s.root(assaysFile).Fail("the coulometric detection limit is %.2g times what its repeatability gives", ratio)
	}
	if v := s.cat.Assays["volumetric"]; v.DetectionLimit.SI != a.Highest.SI {
		s.root(assaysFile).Fail("the volumetric method begins at %s, the coulometric one ends at %s", v.DetectionLimit.Text, a.Highest.Text)
	}
	if a.Highest.SI <= 5*a.DetectionLimit.SI {
		s.root(assaysFile).Fail("the coulometric method has no range between %s and %s", a.DetectionLimit.Text, a.Highest.Text)
	}
}

// A mantle of a flask of 1 L draws about 380 W, and the power rises with the volume
// to the power 0.55 (heaters of the catalog, from memory), within a factor of 1.6.
const (
	mantleW, mantlePower, mantleWithin = 380.0, 0.55, 1.6
)

// checkApparatus compares the numbers of a piece with its name and with each other.
func checkApparatus(f document.Fields, a *Apparatus) {
	for _, v := range []struct {
		key   string
		value *Value
		d     quantity.Dimension
	}{{"volume", a.Volume, quantity.Volume}, {"diameter", a.Diameter, quantity.Length}, {"length", a.Length, quantity.Length}, {"cooling", a.Cooling, quantity.Power}} {
		if v.value != nil && !named(a.Name, v.value.SI, v.d) {
			f.Get(v.key).Fail("%q does not stand in the name, %q", v.value.Text, a.Name)
		}
	}
	if a.Kind == "still" && !a.Own && a.Volume != nil && a.Power != nil && a.Volume.SI > 0 {
		usual := mantleW * math.Pow(a.Volume.SI*1e3, mantlePower)
		if ratio := a.Power.SI / usual; ratio > mantleWithin || ratio < 1/mantleWithin {
			f.Get("power").Fail("%q is %.2g times what a flask of %s usually has", a.Power.Text, ratio, a.Volume.Text)
		}
	}
}

// named reports whether the quantity stands in the name, which need not hold any
// of its dimension.
func named(name string, si float64, d quantity.Dimension) bool {
	words := strings.Fields(strings.NewReplacer(",", " ").Replace(name))
	any := false
	for i := 0; i+1 < len(words); i++ {
		reading, err := quantity.Parse(words[i]+" "+words[i+1], d)
		if err != nil {
			continue
		}
		any = true
		if math.Abs(reading.SI/si-1) < 1e-9 {
			return true
		}
	}
	return !any
}

// What beads of clay and oxide take up: heat per kelvin of zeolites and oxides in
// J/(kg K), from memory.
const leastBeadHeat, mostBeadHeat = 700, 1300

// Macropores of beads and how crooked they are (from memory).
const leastPores, mostPores, leastTortuosity, mostTortuosity = 0.08, 0.35, 2, 5

// isostericWithin is how far the heat of uptake may lie from that of the isotherm.
const isostericWithin = 0.2

// checkUptake compares the stated heat of uptake with the isotherm: at a constant
// loading, Q = -R d ln p/d(1/T), here between 25 and 40 °C at the loading of 3 Pa.
func checkUptake(f document.Fields, a *Agent) {
	if c := a.HeatCapacity; c != nil && a.Isotherm != nil && (c.SI < leastBeadHeat || c.SI > mostBeadHeat) {
		f.Get("heat capacity").Fail("%q is outside 0.7 to 1.3 kJ/kg/K for beads", c.Text)
	}
	if p := a.BeadPorosity; p != nil && (p.SI < leastPores || p.SI > mostPores) {
		f.Get("bead porosity").Fail("%q is outside 8 to 35 %% for macropores", p.Text)
	}
	if t := a.BeadTortuosity; t != nil && (t.SI < leastTortuosity || t.SI > mostTortuosity) {
		f.Get("bead tortuosity").Fail("%q is outside %d to %d", t.Text, leastTortuosity, mostTortuosity)
	}
	if a.HeatOfUptake == nil || a.Isotherm == nil {
		return
	}
	const coldK, warmK, pPa = 298.15, 313.15, 3.0
	q := a.Isotherm.LoadingKgPerKg(pPa, coldK)
	lnRatio, err := thermo.Brent(func(x float64) float64 { return a.Isotherm.LoadingKgPerKg(pPa*math.Exp(x), warmK) - q }, 0, 6, 1e-6)
	if err != nil {
		f.Get("isotherm").Fail("no pressure up to 1.2 kPa at 40 °C gives the loading of 3 Pa at 25 °C")
		return
	}
	heatJ := thermo.GasConstant * lnRatio / (1/coldK - 1/warmK)
	if ratio := a.HeatOfUptake.SI / heatJ; math.Abs(ratio-1) > isostericWithin {
		f.Get("heat of uptake").Fail("%q is %.2f times that of the isotherm, %.3g kJ/mol", a.HeatOfUptake.Text, ratio, heatJ/1e3)
	}
}
