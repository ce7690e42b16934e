package thermo

// BubblePressure is the pressure (Pa) at which a liquid of overall water mole
// fraction xWater boils at tK, as one liquid or two.
func (m *Mixture) BubblePressure(xWater, tK float64) float64 {
	if s, err := m.SplitAt(tK); err == nil && s.Exists && xWater > s.XOrganic && xWater < s.XAqueous {
		xWater = s.XOrganic
	}
	water, solvent := m.partials(xWater, tK)
	return water + solvent
}

// BubblePressure is the pressure (Pa) at which a liquid of overall mole fractions x
// boils at tK, as one liquid or two.
func (m *Ternary) BubblePressure(x Fractions, tK float64) float64 {
	if s, err := m.Flash(x, tK); err == nil && s.Exists {
		x = s.Organic
	}
	_, sumPa := m.partials(&x, tK)
	return sumPa
}
