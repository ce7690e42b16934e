package steps

import (
	"errors"
	"fmt"

	"parch/internal/quantity"
	"parch/internal/thermo"
)

// SettleRules are the practical sides of letting free water settle.
type SettleRules struct {
	TimeS, AttendedS float64
	InterfaceShare   float64 // of the lot, left behind with the interface
}

// ErrNothingSettles means that the lot is one liquid.
var ErrNothingSettles = errors.New("no free water to settle")

// RunSettle lets free water settle at tempK and draws it off. The solvent that
// is kept is saturated; the layers are those of the liquid-liquid equilibrium,
// their amounts by the lever rule.
func RunSettle(m *thermo.Mixture, feed Lot, tempK float64, rules SettleRules) (Outcome, error) {
	if err := checkLiquid(m.Solvent, tempK); err != nil {
		return Outcome{}, err
	}
	layers, err := m.LayersAt(tempK)
	if err != nil {
		return Outcome{}, err
	}
	if layers.Return == thermo.None {
		return Outcome{}, fmt.Errorf("%w: %s", ErrNothingSettles, layers.Reason)
	}
	x := m.MoleFraction(feed.Water())
	if x <= layers.XOrganic {
		return Outcome{}, fmt.Errorf("%w: %s holds %s at %.1f °C", ErrNothingSettles, m.Solvent.Called(), quantity.FormatWater(m.MassFraction(layers.XOrganic)), tempK-273.15)
	}
	if x >= layers.XAqueous {
		return Outcome{}, fmt.Errorf("%w: the lot is water with dissolved %s", ErrNothingSettles, m.Solvent.Called())
	}
	total := feed.WaterKg/m.Water.MolarMassKgPerMol + feed.SolventKg/m.Solvent.MolarMassKgPerMol
	aqueous := total * (x - layers.XOrganic) / (layers.XAqueous - layers.XOrganic)
	drawnWaterKg := aqueous * layers.XAqueous * m.Water.MolarMassKgPerMol
	drawnSolventKg := aqueous * (1 - layers.XAqueous) * m.Solvent.MolarMassKgPerMol

	organicKg := feed.MassKg() - drawnWaterKg - drawnSolventKg
	interfaceKg := rules.InterfaceShare * organicKg
	saturated := m.MassFraction(layers.XOrganic)
	kept := organicKg - interfaceKg
	o := Outcome{
		Kind: Settle, In: feed,
		Out:           Lot{SolventKg: kept * (1 - saturated), WaterKg: kept * saturated, TempK: tempK},
		Floor:         saturated,
		Why:           AtFloor,
		WhyText:       fmt.Sprintf("floor: %s saturated at %.1f °C holds %s", m.Solvent.Called(), tempK-273.15, quantity.FormatWater(saturated)),
		HoursTotal:    (rules.TimeS + rules.AttendedS) / secondsPerHour,
		HoursAttended: rules.AttendedS / secondsPerHour,
		Losses: []Loss{
			{"dissolved in the drawn water", drawnSolventKg},
			{"left with the interface", interfaceKg * (1 - saturated)},
		},
		Discards: []Discard{
			{AqueousWaste, "drawn water", drawnWaterKg + drawnSolventKg},
			{SolventWaste, "interface", interfaceKg},
		},
		Figures: []Figure{{"free water drawn", "mL", (drawnWaterKg/m.Water.DensityKgPerM3.At(tempK) + drawnSolventKg/m.Solvent.DensityKgPerM3.At(tempK)) * 1e6}},
	}
	o.account(m.Solvent, tempK)
	o.Balance.WaterRemovedKg = drawnWaterKg + interfaceKg*saturated
	return o, nil
}
