package catalog

import (
	"parch/internal/document"
	"parch/internal/quantity"
)

// readEmissions files the factors under "making/KEY", "burning/KEY" and
// "electricity". Electricity is kept per kWh, as it is used, not per joule.
// What a solvent gives when it is burnt follows from its formula.
func (s *shelf) readEmissions() {
	s.cat.Emissions = map[string]Value{}
	for key, v := range s.cat.Solvents {
		if key != waterKey {
			s.cat.Emissions["burning/"+key] = burning(v)
		}
	}
	s.each(emissionsFile, func(n *document.Node) {
		f := n.Map("common", "electricity", "making", "burning")
		common := s.common(f.Get("common"))
		if !s.owning {
			f.Need("electricity")
		}
		if n := f.Get("electricity"); n != nil {
			grid := s.value(n, quantity.MassPerEnergy)
			grid.SI, grid.Low, grid.High = grid.SI*jPerKWh, grid.Low*jPerKWh, grid.High*jPerKWh
			s.cat.Emissions["electricity"] = grid
		}
		for _, kind := range []string{"making", "burning"} {
			for _, e := range f.Get(kind).Entries() {
				if s.cat.Solvents[e.Key] == nil && s.cat.Agents[e.Key] == nil {
					keys := append(keysOf(s.cat.Solvents), keysOf(s.cat.Agents)...)
					e.Node.Fail("%q is neither a solvent nor an agent%s", e.Key, e.Node.Offer(e.Key, keys))
				}
				s.cat.Emissions[kind+"/"+e.Key] = s.valueOr(e.Node, quantity.MassRatio, common)
			}
		}
	})
}

// burning is the carbon dioxide of complete combustion, kg/kg, with no credit
// for the heat.
func burning(v *Solvent) Value {
	const carbonDioxideKgPerMol = 44.009e-3
	atoms, err := parseFormula(v.Formula)
	if err != nil {
		return Value{} // said where the formula stands
	}
	mass := atoms.kgPerMol()
	si := float64(atoms["C"]) * carbonDioxideKgPerMol / mass
	return Value{SI: si, Text: quantity.Format(si, quantity.MassRatio, "kg/kg", 3), Origin: Origin{
		Source: stoichiometry, Confidence: Derived, Note: "complete combustion of " + v.Formula, Own: v.Own,
	}}
}
