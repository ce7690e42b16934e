// Package inspect puts together what the models say of one solvent and water:
// boiling, azeotrope, solubility, and how far a trap can dry.
package inspect

import (
	"errors"
	"fmt"
	"math"
	"slices"
	"strings"

	"parch/catalog"
	"parch/internal/mixture"
	"parch/internal/thermo"
)

// Sheet is what is known of a solvent at a pressure and a receiver temperature.
type Sheet struct {
	Solvent          *catalog.Solvent
	PressurePa       float64
	ReceiverK        float64
	BoilingK         float64
	Azeotrope        thermo.Azeotrope
	AzeotropeTrouble string  // why no azeotrope could be computed; "" for most
	AzeotropeMass    float64 // kg/kg water in its vapour; NaN where there is none
	Changes          []Change
	Solubility       []Solubility
	GammaInfinite    float64 // of water in the solvent at 25 °C; NaN outside the limits of the model
	Floor            thermo.Floor
	Carrier          *Carrier // nil where none was asked for
	Pairs            []Pair
	Sources          []catalog.Source
	Notes            []string
}

// Solubility is the water that the solvent holds at a temperature, kg/kg; NaN
// where the two mix in all proportions or Outside says why nothing is given.
type Solubility struct {
	TempK, Water float64
	Outside      string
}

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
	if err := errors.Join(thermo.CheckPressure(pressurePa), CheckReceiver(receiverK)); err != nil {
		return nil, err
	}
	if s.Water == nil {
		return nil, fmt.Errorf("no data on water in %s", s.Name)
	}
	m := mixture.Pair(c, s)
	sheet := &Sheet{Solvent: s, PressurePa: pressurePa, ReceiverK: receiverK, GammaInfinite: math.NaN(), AzeotropeMass: math.NaN()}
	if m.CheckTemperature(ambientK) == nil {
		sheet.GammaInfinite = m.GammaInfinite(ambientK)
	}
	var err error
	if sheet.BoilingK, err = thermo.Boil(&s.Pure, pressurePa); err != nil {
		return nil, err
	}
	if sheet.Azeotrope, err = azeotrope(m, pressurePa); err != nil {
		sheet.Azeotrope, sheet.AzeotropeTrouble = thermo.Azeotrope{Kind: thermo.NoAzeotrope, TempK: math.NaN(), YWater: math.NaN()}, err.Error()
	} else if sheet.Azeotrope.Kind != thermo.NoAzeotrope {
		sheet.AzeotropeMass = m.MassFraction(sheet.Azeotrope.YWater)
	}
	sheet.Changes = changes(m)
	if sheet.Solubility, err = solubility(m, sheet.BoilingK); err != nil {
		return nil, err
	}
	if sheet.Floor, err = m.TrapFloor(receiverK, pressurePa); err != nil {
		sheet.Floor = thermo.Floor{Return: thermo.None, Reason: err.Error(), Water: math.NaN()}
	}
	sheet.Pairs = pairs(c, s)
	sheet.addSources(c, origins(s, sheet.Pairs)...)
	sheet.Notes = append(notes(sheet), sheet.changeNotes(m)...)
	if sheet.BoilingK < s.Pure.MeltingK {
		sheet.BoilingK = math.NaN() // the notes say that no liquid boils
	}
	sheet.Notes = append(sheet.Notes, knownNotes(c, s)...)
	return sheet, nil
}

const ambientK = 25 + kelvinAt0C

// Temperatures that a receiver may be asked for. Most of them return nothing, and
// the sheet says why.
const (
	coldestReceiverK = kelvinAt0C - 80
	hottestReceiverK = kelvinAt0C + 250
)

// CheckReceiver refuses a receiver that nobody could run.
func CheckReceiver(tK float64) error {
	if !(tK >= coldestReceiverK && tK <= hottestReceiverK) {
		return fmt.Errorf("a receiver at %.4g °C is outside %.0f to %.0f °C", tK-kelvinAt0C, coldestReceiverK-kelvinAt0C, hottestReceiverK-kelvinAt0C)
	}
	return nil
}

// solubility goes from 0 to 80 °C in steps of 10 as far as the solvent is liquid.
func solubility(m *thermo.Mixture, boilingK float64) (table []Solubility, err error) {
	for celsius := 0; celsius <= 80; celsius += 10 {
		tK := float64(celsius) + kelvinAt0C
		if tK < m.Solvent.MeltingK || tK > boilingK {
			continue
		}
		row := Solubility{TempK: tK, Water: math.NaN()}
		if err := m.CheckTemperature(tK); err != nil {
			row.Outside = err.Error()
		} else if holds, partly, err := m.Solubility(tK); err != nil {
			return nil, err
		} else if partly {
			row.Water = holds
		}
		table = append(table, row)
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

// origins are the ids of the sources behind a solvent.
func origins(s *catalog.Solvent, pairs []Pair) []string {
	ids := []string{
		s.BoilingPoint.Source, s.MeltingPoint.Source, s.VapourPressure.Source, s.Density.Source, s.HeatOfVaporization.Source,
		s.Water.Source, s.Water.BandOrigin.Source, s.Hazards.Source,
	}
	for _, v := range []*catalog.Value{s.FlashPoint, s.Autoignition} {
		if v != nil {
			ids = append(ids, v.Source)
		}
	}
	for _, fact := range s.Hazards.Facts {
		ids = append(ids, fact.Source)
	}
	for _, p := range pairs {
		if !p.Allowed() {
			ids = append(ids, p.Source)
		}
	}
	return ids
}

// addSources lists sources by id, each once, sorted.
func (s *Sheet) addSources(c *catalog.Catalog, ids ...string) {
	for _, known := range s.Sources {
		ids = append(ids, known.ID)
	}
	slices.Sort(ids)
	s.Sources = nil
	for _, id := range slices.Compact(ids) {
		if source, ok := c.Sources[id]; ok {
			s.Sources = append(s.Sources, source)
		}
	}
}

// knownNotes say where the entry is known to be off, and what of it is the user's own.
func knownNotes(c *catalog.Catalog, s *catalog.Solvent) (list []string) {
	for _, miss := range []string{s.KnownMiss, s.Water.KnownMiss} {
		if miss != "" {
			list = append(list, "known miss: "+miss)
		}
	}
	if s.Own {
		list = append(list, fmt.Sprintf("%s is from own data (%s)", s.Name, strings.Join(c.Own, ", ")))
	}
	for _, estimate := range s.Estimates {
		list = append(list, "estimated: "+estimate)
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
	if s.AzeotropeTrouble != "" {
		list = append(list, "no azeotrope is given: "+s.AzeotropeTrouble)
	}
	if s.Azeotrope.Kind != thermo.NoAzeotrope {
		outside("the azeotrope", s.Azeotrope.TempK)
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
