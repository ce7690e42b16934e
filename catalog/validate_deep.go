package catalog

import (
	"errors"
	"fmt"

	"parch/internal/thermo"
)

// ValidateDeep checks the activity models of the named solvents, of all where none
// is named: one stable gap for pairs that are partly miscible and none for others
// from 5 to 110 °C, as far as the liquids exist. It takes some milliseconds a
// solvent and is therefore not part of Load; the built-in catalog is checked by
// the tests, own solvents by LoadWith.
func (c *Catalog) ValidateDeep(keys ...string) error {
	if len(keys) == 0 {
		keys = keysOf(c.Solvents)
	}
	var problems []error
	for _, key := range keys {
		if v := c.Solvents[key]; v != nil && v.Water != nil {
			if err := c.checkGaps(v); err != nil {
				problems = append(problems, err)
			}
		}
	}
	return errors.Join(problems...)
}

// Where gaps are counted.
const (
	gapsFromK, gapsToK, gapStepK = 278.15, 383.15, 15.0
)

func (c *Catalog) checkGaps(v *Solvent) error {
	m := c.mixture(v)
	partly := m.CountGaps(gapsFromK) > 0
	for tK := gapsFromK; tK <= gapsToK; tK += gapStepK {
		want := 0
		if partly {
			want = 1
		}
		if n := m.CountGaps(tK); n != want {
			return fmt.Errorf("water and %s have %d miscibility gaps at %.0f °C and %d at %.0f °C", v.Name, n, tK-zeroCelsiusK, m.CountGaps(gapsFromK), gapsFromK-zeroCelsiusK)
		}
	}
	return nil
}

// validateDeep does the same for own solvents and reports at their entries.
func (s *shelf) validateDeep() error {
	for _, key := range keysOf(s.cat.Solvents) {
		v := s.cat.Solvents[key]
		if !v.Own || v.Water == nil {
			continue
		}
		if err := s.cat.checkGaps(v); err != nil {
			s.tops[key].Fail("%v", err)
		}
	}
	return s.err()
}

// mixture is water and a solvent in the activity model of the pair.
func (c *Catalog) mixture(v *Solvent) *thermo.Mixture {
	return &thermo.Mixture{Water: &c.Solvents[waterKey].Pure, Solvent: &v.Pure, NRTL: v.Water.NRTL}
}
