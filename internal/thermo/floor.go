package thermo

import (
	"fmt"
	"math"
)

// Floor is where a trap stops drying: the condensate of the boiling pot no
// longer splits in the receiver.
type Floor struct {
	Return Returns
	Reason string  // why there is no floor, where Return is None
	XPot   float64 // mole fraction of water in the pot at the floor
	Water  float64 // the same as a mass fraction, kg/kg
	Layers Layers  // in the receiver
	PotK   float64 // boiling temperature at the floor
}

const smallestMoleFraction = 1e-9

// WarmReceiver is a receiver in which the condensate would boil.
type WarmReceiver struct {
	Solvent                       string
	ReceiverK, BoilsK, PressurePa float64
}

func (e *WarmReceiver) Error() string {
	return fmt.Sprintf("the receiver at %.1f °C is not below %.1f °C, where wet %s boils at %.4g kPa",
		e.ReceiverK-273.15, e.BoilsK-273.15, e.Solvent, e.PressurePa/1e3)
}

// TrapFloor solves y_w(x_pot, T_b) = x_w,sat(T_rec) for the pot. A receiver that
// gives no layers has no floor; Reason says why.
func (m *Mixture) TrapFloor(receiverK, pressurePa float64) (Floor, error) {
	if err := m.CheckPressure(pressurePa); err != nil {
		return Floor{Return: None, Reason: err.Error(), XPot: math.NaN(), Water: math.NaN(), PotK: math.NaN()}, nil
	}
	layers, err := m.LayersAt(receiverK)
	if err != nil || layers.Return == None {
		return Floor{Return: None, Reason: layers.Reason, XPot: math.NaN(), Water: math.NaN(), PotK: math.NaN(), Layers: layers}, err
	}
	dryBoil, err := Boil(m.Solvent, pressurePa)
	if err != nil {
		return Floor{}, err
	}
	wet, err := m.BubbleFrom(layers.XOrganic, pressurePa, dryBoil)
	if err != nil {
		return Floor{}, err
	}
	if receiverK >= wet.TempK {
		boilsK := wet.TempK // of one liquid; two layers boil together at their azeotrope
		if az, err := m.FindAzeotrope(pressurePa); err == nil && az.Kind == Heterogeneous {
			boilsK = az.TempK
		}
		return Floor{}, &WarmReceiver{m.Solvent.Called(), receiverK, boilsK, pressurePa}
	}
	var failed error
	guess := dryBoil
	wetter := func(lnX float64) float64 {
		v, err := m.BubbleFrom(math.Exp(lnX), pressurePa, guess)
		if err != nil {
			failed = err
			return math.NaN()
		}
		guess = v.TempK
		return math.Log(v.YWater / layers.XOrganic)
	}
	lnX, err := Brent(wetter, math.Log(smallestMoleFraction), math.Log(layers.XOrganic), 1e-12)
	if failed != nil {
		return Floor{}, failed
	}
	if err != nil {
		return Floor{
			Return: None, XPot: math.NaN(), Water: math.NaN(), PotK: math.NaN(), Layers: layers,
			Reason: fmt.Sprintf("the vapour of a pot saturated at %.1f °C is no wetter than the pot: nothing settles", receiverK-273.15),
		}, nil
	}
	x := math.Exp(lnX)
	v, err := m.BubbleFrom(x, pressurePa, guess)
	if err != nil {
		return Floor{}, err
	}
	return Floor{Return: layers.Return, XPot: x, Water: m.MassFraction(x), Layers: layers, PotK: v.TempK}, nil
}
