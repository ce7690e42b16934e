package catalog

import (
	"parch/internal/quantity"
)

// readEmissions files the factors under "making/KEY", "burning/KEY" and
// "electricity". Electricity is kept per kWh, as it is used, not per joule.
func (s *shelf) readEmissions() {
	f := s.root(emissionsFile).Map("electricity", "making", "burning")
	grid := s.value(f.Need("electricity"), quantity.MassPerEnergy)
	grid.SI, grid.Low, grid.High = grid.SI*jPerKWh, grid.Low*jPerKWh, grid.High*jPerKWh
	s.cat.Emissions = map[string]Value{"electricity": grid}
	for _, kind := range []string{"making", "burning"} {
		for _, e := range f.Need(kind).Entries() {
			if s.cat.Solvents[e.Key] == nil && s.cat.Agents[e.Key] == nil {
				keys := append(keysOf(s.cat.Solvents), keysOf(s.cat.Agents)...)
				e.Node.Fail("%q is neither a solvent nor an agent%s", e.Key, e.Node.Offer(e.Key, keys))
			}
			s.cat.Emissions[kind+"/"+e.Key] = s.value(e.Node, quantity.MassRatio)
		}
	}
}
