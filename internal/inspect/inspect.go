// Package inspect puts together what the models say of one solvent and water:
// boiling, azeotrope, solubility, and how far a trap can dry.
package inspect

import (
	"fmt"
	"math"
	"slices"
	"strings"

	"parch/catalog"
	"parch/internal/thermo"
)

// Sheet is what is known of a solvent at a pressure and a receiver temperature.
type Sheet struct {
	Solvent       *catalog.Solvent
	PressurePa    float64
	ReceiverK     float64
	BoilingK      float64
	Azeotrope     thermo.Azeotrope
	AzeotropeMass float64 // kg/kg water in its vapour; NaN where there is none
	Solubility    []Solubility
	GammaInfinite float64 // of water in the solvent at 25 °C
	Floor         thermo.Floor
	Pairs         []Pair
	Sources       []catalog.Source
	Notes         []string
}

// Solubility is the water that the solvent holds at a temperature, kg/kg; NaN
// where the two mix in all proportions.
type Solubility struct{ TempK, Water float64 }

// Pair is what the agent matrix says of a drying agent.
type Pair struct {
	Agent string
	catalog.Verdict
}

// NoData is the word for a pair that the matrix does not know: it is refused.
const NoData = "no data"

// kelvinAt0C is 0 °C in kelvin.
const kelvinAt0C = 273.15

// Solvent computes the sheet of a solvent.
func Solvent(c *catalog.Catalog, s *catalog.Solvent, pressurePa, receiverK float64) (*Sheet, error) {
	if err := thermo.CheckPressure(pressurePa); err != nil {
		return nil, err
	}
	water, ok := c.Solvents["water"]
	if !ok || s.Water == nil {
		return nil, fmt.Errorf("no data on water in %s", s.Name)
	}
	m := &thermo.Mixture{Water: &water.Pure, Solvent: &s.Pure, NRTL: s.Water.NRTL}
	sheet := &Sheet{Solvent: s, PressurePa: pressurePa, ReceiverK: receiverK, GammaInfinite: m.GammaInfinite(25 + kelvinAt0C)}
	var err error
	if sheet.BoilingK, err = thermo.Boil(&s.Pure, pressurePa); err != nil {
		return nil, err
	}
	if sheet.Azeotrope, err = m.FindAzeotrope(pressurePa); err != nil {
		return nil, err
	}
	sheet.AzeotropeMass = math.NaN()
	if sheet.Azeotrope.Kind != thermo.NoAzeotrope {
		sheet.AzeotropeMass = m.MassFraction(sheet.Azeotrope.YWater)
	}
	if sheet.Solubility, err = solubility(m, sheet.BoilingK); err != nil {
		return nil, err
	}
	if sheet.Floor, err = m.TrapFloor(receiverK, pressurePa); err != nil {
		sheet.Floor = thermo.Floor{Return: thermo.None, Reason: err.Error(), Water: math.NaN()}
	}
	sheet.Pairs = pairs(c, s)
	sheet.Sources = sources(c, s, sheet.Pairs)
	sheet.Notes = notes(sheet)
	return sheet, nil
}

// solubility goes from 0 to 80 °C in steps of 10 as far as the solvent is liquid.
func solubility(m *thermo.Mixture, boilingK float64) (table []Solubility, err error) {
	for celsius := 0; celsius <= 80; celsius += 10 {
		tK := float64(celsius) + kelvinAt0C
		if tK < m.Solvent.MeltingK || tK > boilingK {
			continue
		}
		holds, partly, err := m.Solubility(tK)
		if err != nil {
			return nil, err
		}
		if !partly {
			holds = math.NaN()
		}
		table = append(table, Solubility{tK, holds})
	}
	return table, nil
}

func pairs(c *catalog.Catalog, s *catalog.Solvent) (list []Pair) {
	for key := range c.Agents {
		v, ok := c.Verdict(s, key)
		if !ok {
			v = catalog.Verdict{Word: NoData}
		}
		list = append(list, Pair{key, v})
	}
	slices.SortFunc(list, func(a, b Pair) int { return strings.Compare(a.Agent, b.Agent) })
	return list
}

// sources are those that the sheet rests on, sorted by id.
func sources(c *catalog.Catalog, s *catalog.Solvent, pairs []Pair) []catalog.Source {
	ids := []string{
		s.BoilingPoint.Source, s.MeltingPoint.Source, s.VapourPressure.Source, s.Density.Source, s.HeatOfVaporization.Source,
		s.Water.Source, s.Hazards.Source,
	}
	for _, v := range []*catalog.Value{s.FlashPoint, s.Autoignition} {
		if v != nil {
			ids = append(ids, v.Source)
		}
	}
	for _, p := range pairs {
		if !p.Allowed() {
			ids = append(ids, p.Source)
		}
	}
	slices.Sort(ids)
	var list []catalog.Source
	for _, id := range slices.Compact(ids) {
		if source, ok := c.Sources[id]; ok {
			list = append(list, source)
		}
	}
	return list
}

func notes(s *Sheet) (list []string) {
	pair := s.Solvent.Water
	outside := func(what string, tK float64) {
		if pair.TMaxK > 0 && (tK < pair.TMinK || tK > pair.TMaxK) {
			list = append(list, fmt.Sprintf("%s, %.0f °C, lies outside the %.0f to %.0f °C that the model of water and %s was fitted to",
				what, tK-kelvinAt0C, pair.TMinK-kelvinAt0C, pair.TMaxK-kelvinAt0C, s.Solvent.Name))
		}
	}
	outside("the boiling point", s.BoilingK)
	if s.BoilingK < s.Solvent.Pure.MeltingK {
		list = append(list, fmt.Sprintf("%s freezes above the boiling point computed for this pressure: no liquid boils", s.Solvent.Name))
	}
	if s.Azeotrope.Kind != thermo.NoAzeotrope {
		outside("the azeotrope", s.Azeotrope.TempK)
		if s.Azeotrope.TempK < kelvinAt0C {
			list = append(list, "the azeotrope lies below 0 °C, where water freezes: it cannot be run")
		}
	}
	if s.Floor.Return != thermo.None {
		outside("the receiver", s.ReceiverK)
	}
	if band := pair.SolubilityBand; band > 1 {
		list = append(list, fmt.Sprintf("published solubilities scatter by a factor of %.3g; the trap's floor shares that band", band))
	}
	if s.Solvent.VapourPressure.Extrapolated(s.BoilingK) {
		list = append(list, "the boiling point lies outside the range of the vapour pressure curve")
	}
	return list
}
