package steps

import (
	"errors"
	"fmt"
	"math"

	"parch/internal/history"
	"parch/internal/quantity"
	"parch/internal/thermo"
)

// UsedSieve is a charge of beads as it comes out of a soak.
type UsedSieve struct {
	Sorbent        Sorbent
	Kg             float64 // dry
	LoadingKgPerKg float64 // of water
	SolventKg      float64 // held by the drained beads
	IgnitionK      float64 // autoignition temperature of that solvent; 0: not known
	Flammable      bool
}

// Flush sweeps the solvent off the beads before they see heat.
type Flush struct {
	Done           bool
	GasM3PerKg     float64 // of dry gas, per kg of beads
	TimeS          float64
	AttendedS      float64
	LeftShare      float64 // of the solvent, still on the beads after it
	CondensedShare float64 // of what is swept off; the rest is vented to the extraction
}

// Oven is what the beads are activated in.
type Oven struct {
	Name         string
	EnergyJ      float64 // of a whole run, whatever the load
	LoadKg       float64 // beads of a full run
	Shared       bool    // other beads fill the rest of the run
	HeatingS     float64
	CoolingS     float64 // under dry gas or vacuum, before the beads are used
	AttendedS    float64 // a run: load, empty, bottle
	PurgeM3PerS  float64 // dry gas swept through while hot
	SpareMarginK float64 // below the autoignition temperature; 50 K
}

// Errors that keep a sieve out of the oven.
var (
	ErrIgnition   = errors.New("the oven is too hot for the solvent on the beads")
	ErrNoIgnition = errors.New("no autoignition temperature is known")
)

// RunRegenerate flushes and heats a used sieve. In and Out are what the beads
// hold: solvent and water. The solvent was counted as lost by the step that
// wetted the beads and is not counted again.
func RunRegenerate(m *thermo.Mixture, used UsedSieve, flush Flush, oven Oven, past history.Activation, pickup history.Pickup) (Outcome, error) {
	if err := used.admit(flush, oven, past.OvenK); err != nil {
		return Outcome{}, err
	}
	left, err := history.ResidualLoading(used.Sorbent.held, past, pickup)
	if err != nil {
		return Outcome{}, err
	}
	r := regeneration{m: m, used: used, flush: flush, oven: oven, history: past}
	r.runs = math.Ceil(used.Kg / oven.LoadKg)
	if oven.Shared {
		r.runs = used.Kg / oven.LoadKg
	}
	loading := math.Min(left.KgPerKg, used.LoadingKgPerKg)
	o := r.outcome(loading)
	o.WhyText = fmt.Sprintf("%.2g g/100 g left: %s", 100*loading, left.Notes[0])
	if left.KgPerKg >= used.LoadingKgPerKg {
		o.Warnings = append(o.Warnings, fmt.Sprintf("the beads hold %.2g g/100 g: this history would leave %.2g and gains nothing", 100*used.LoadingKgPerKg, 100*left.KgPerKg))
	}
	o.Warnings = append(o.Warnings, left.Notes[1:]...)
	o.RuledBy = left.Notes[0]
	o.Figures = append(o.Figures, Figure{"loading after, low", "g/100 g", 100 * left.Low}, Figure{"loading after, high", "g/100 g", 100 * left.High})
	return o, nil
}

// Admit refuses beads that must not see an oven at ovenK: see ErrIgnition and
// ErrNoIgnition.
func (u UsedSieve) Admit(f Flush, oven Oven, ovenK float64) error { return u.admit(f, oven, ovenK) }

// meteredK is the temperature at which gas is metered and paid for (common practice,
// no source).
const meteredK = 293.15

// FlushGasM3PerKg is the dry gas, as it is metered at 20 °C and 101.325 kPa, that
// carries a kilogram of solvent off at tK when it leaves with a share s of the
// solvent's vapour pressure:
//
//	n_gas = n (P/(s psat) - 1),  V = n_gas R T_metered/P
//
// None where the solvent boils at tK.
func FlushGasM3PerKg(solvent *thermo.Pure, tK, saturation float64) float64 {
	vapourPa := saturation * solvent.VapourPressurePa.At(tK)
	return math.Max(0, atmospherePa/vapourPa-1) / solvent.MolarMassKgPerMol * thermo.GasConstant * meteredK / atmospherePa
}

// admit refuses beads whose solvent could ignite: within SpareMarginK of its
// autoignition temperature, or where that is not known, unless they are flushed.
func (u UsedSieve) admit(f Flush, oven Oven, ovenK float64) error {
	if err := errors.Join(
		checkAmount("an amount of sieve", "kg", u.Kg, 1e-6, 1e5),
		checkAmount("a loading", "g/100 g", 100*u.LoadingKgPerKg, 0, 60),
		checkAmount("an oven load", "kg", oven.LoadKg, 1e-3, 1e5)); err != nil {
		return err
	}
	if u.SolventKg == 0 || f.Done || !u.Flammable {
		return nil
	}
	switch {
	case u.IgnitionK == 0:
		return fmt.Errorf("%w for the solvent on the beads: flush it off before an oven at %s", ErrNoIgnition, quantity.FormatTemperature(ovenK))
	case ovenK > u.IgnitionK-oven.SpareMarginK:
		return fmt.Errorf("%w: set to %s, it may ignite at %s and a margin of %.0f K is kept; flush the solvent off first", ErrIgnition,
			quantity.FormatTemperature(ovenK), quantity.FormatTemperature(u.IgnitionK), oven.SpareMarginK)
	}
	return nil
}

type regeneration struct {
	m       *thermo.Mixture
	used    UsedSieve
	flush   Flush
	oven    Oven
	history history.Activation
	runs    float64
}

// beadsJ is the heat that the beads themselves need: their own warming, the
// water driven off and the solvent still on them.
func (r *regeneration) beadsJ(waterKg, solventKg float64) float64 {
	warming := r.used.Kg * r.used.Sorbent.HeatCapacityJPerKgK * (r.history.OvenK - r.history.RoomK)
	water := waterKg / r.m.Water.MolarMassKgPerMol * r.used.Sorbent.HeatOfSorptionJPerMol
	solvent := solventKg / r.m.Solvent.MolarMassKgPerMol * r.m.Solvent.HeatOfVaporizationJ.At(r.history.RoomK)
	return warming + water + solvent
}

func (r *regeneration) outcome(loading float64) Outcome {
	u := r.used
	inKg, outKg := u.Kg*u.LoadingKgPerKg, u.Kg*loading
	intoOvenKg := u.SolventKg
	var flushS, flushAttendedS, gasM3, condensedKg float64
	if r.flush.Done {
		intoOvenKg = u.SolventKg * r.flush.LeftShare
		flushS, flushAttendedS, gasM3 = r.flush.TimeS, r.flush.AttendedS, r.flush.GasM3PerKg*u.Kg
		condensedKg = (u.SolventKg - intoOvenKg) * r.flush.CondensedShare
	}
	hotS := math.Ceil(r.runs) * (r.oven.HeatingS + r.oven.CoolingS)
	beadsJ := r.beadsJ(inKg-outKg, intoOvenKg)
	ovenJ := r.runs * r.oven.EnergyJ
	o := Outcome{
		Kind: Regenerate, Agent: u.Sorbent.Key,
		In:            Lot{SolventKg: u.SolventKg, WaterKg: inKg, TempK: r.history.RoomK},
		Out:           Lot{WaterKg: outKg, TempK: r.history.RoomK},
		Floor:         math.NaN(),
		Why:           AtFloor,
		HoursTotal:    (flushS + hotS + flushAttendedS + r.runs*r.oven.AttendedS) / secondsPerHour,
		HoursAttended: (flushAttendedS + r.runs*r.oven.AttendedS) / secondsPerHour,
		EnergyKWh:     math.Max(beadsJ, ovenJ) / joulePerKWh,
		AgentKg:       u.Kg,
	}
	if condensedKg > 0 {
		o.Discards = append(o.Discards, Discard{SolventWaste, "solvent flushed off the beads", condensedKg})
		o.WasteKg = condensedKg
	}
	o.Balance = Balance{
		WaterInKg: inKg, WaterOutKg: outKg, WaterRemovedKg: inKg - outKg,
		SolventInKg: u.SolventKg, SolventRemovedKg: u.SolventKg,
		HeatInJ: math.Max(beadsJ, ovenJ), HeatUsedJ: math.Max(beadsJ, ovenJ),
	}
	o.Figures = r.figures(loading, beadsJ, gasM3, intoOvenKg)
	o.Warnings = r.warnings(intoOvenKg)
	return o
}

func (r *regeneration) figures(loading, beadsJ, gasM3, intoOvenKg float64) []Figure {
	u := r.used
	return []Figure{
		{"sieve", "kg", u.Kg},
		{"loading before", "g/100 g", 100 * u.LoadingKgPerKg},
		{"loading after", "g/100 g", 100 * loading},
		{"water driven off", "g", u.Kg * (u.LoadingKgPerKg - loading) * 1e3},
		{"heat the beads need", "kWh", beadsJ / joulePerKWh},
		{"energy of a whole run", "kWh", r.oven.EnergyJ / joulePerKWh},
		{"oven runs, or share of one", "", r.runs},
		{"dry gas", "m3", gasM3 + r.oven.PurgeM3PerS*r.oven.HeatingS*r.runs},
		{"solvent taken into the oven", "g", intoOvenKg * 1e3},
	}
}

func (r *regeneration) warnings(intoOvenKg float64) []string {
	var w []string
	switch {
	case r.used.SolventKg > 0 && !r.flush.Done:
		w = append(w, fmt.Sprintf("danger: %s of solvent would go into the oven with the beads: solvent-wet sieve never goes into an oven; flush it first", quantity.FormatMass(intoOvenKg)))
	case r.used.Flammable && r.used.IgnitionK > 0 && r.history.OvenK > r.used.IgnitionK-r.oven.SpareMarginK:
		w = append(w, fmt.Sprintf("the oven is set within %.0f K of where the solvent may ignite (%s): make sure by weighing that the flush is complete before heating", r.oven.SpareMarginK, quantity.FormatTemperature(r.used.IgnitionK)))
	}
	return w
}
