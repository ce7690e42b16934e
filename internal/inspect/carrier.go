package inspect

import (
	"fmt"
	"slices"

	"parch/catalog"
	"parch/internal/mixture"
	"parch/internal/thermo"
)

// Carrier is what a carrier does with water and the solvent.
type Carrier struct {
	*catalog.Carrier
	Name      string
	Azeotrope thermo.TernaryAzeotrope // Kind is NoAzeotrope where Trouble says why
	Mass      thermo.Fractions        // of the azeotrope, kg/kg
	Layers    thermo.TernaryLayers    // of its condensate in the receiver
	Model     string                  // what the activity model rests on
	Trouble   string                  // why there is no ternary azeotrope; ""
}

// AddCarrier solves for the azeotrope of water, the solvent and a carrier of the
// catalog. Where there is none, Trouble says why.
func (s *Sheet) AddCarrier(c *catalog.Catalog, key string) error {
	listed, ok := c.Carriers[key]
	switch {
	case !ok:
		return fmt.Errorf("%s is not a carrier of the catalog", c.Solvents[key].Name)
	case key == s.Solvent.Key:
		return fmt.Errorf("%s cannot carry water out of itself", s.Solvent.Name)
	}
	k := &Carrier{Carrier: listed, Name: c.Solvents[key].Name, Azeotrope: thermo.TernaryAzeotrope{Kind: thermo.NoAzeotrope}}
	s.Carrier = k
	k.solve(c, s)
	s.Notes = append(s.Notes, k.notes(c, s)...)
	s.addSources(c, k.origins(c, s.Solvent.Key)...)
	return nil
}

func (k *Carrier) solve(c *catalog.Catalog, s *Sheet) {
	m, err := mixture.Ternary(c, s.Solvent.Key, k.Key)
	if err != nil {
		k.Trouble = err.Error()
		return
	}
	k.Model = "the three pairs"
	if c.Ternaries[[2]string{s.Solvent.Key, k.Key}] != nil {
		k.Model = "a set fitted to the three together"
	}
	a, err := m.FindAzeotrope(s.PressurePa)
	if err == nil {
		err = m.CheckTemperature(a.TempK)
	}
	switch {
	case err != nil:
		k.Trouble = err.Error()
		return
	case a.Kind == thermo.NoAzeotrope:
		k.Trouble = "the lowest-boiling mixture of the three lacks one of them"
		return
	}
	k.Azeotrope, k.Mass = a, m.Mass(a.Y)
	k.Layers = condensed(m, a, s.ReceiverK)
}

// condensed splits the condensate of an azeotrope in the receiver.
func condensed(m *thermo.Ternary, a thermo.TernaryAzeotrope, receiverK float64) thermo.TernaryLayers {
	none := func(why string) thermo.TernaryLayers { return thermo.TernaryLayers{Return: thermo.None, Reason: why} }
	if err := m.CheckReceiver(receiverK); err != nil {
		return none(err.Error())
	}
	if receiverK >= a.TempK {
		return none("the receiver is not below the azeotrope")
	}
	split, err := m.Flash(a.Y, receiverK)
	if err != nil {
		return none(err.Error())
	}
	return m.Settle(split, receiverK)
}

func (k *Carrier) notes(c *catalog.Catalog, s *Sheet) (list []string) {
	say := func(format string, args ...any) { list = append(list, fmt.Sprintf(format, args...)) }
	if k.ByName {
		say("%s is a carrier only where a job accepts it by name: %s", k.Name, k.Reason)
	}
	if k.Carrier.Own {
		say("%s as a carrier is from own data", k.Name)
	}
	if k.Trouble != "" {
		say("no ternary azeotrope of water, %s and %s is given: %s", s.Solvent.Name, k.Name, k.Trouble)
		return list
	}
	key := [2]string{s.Solvent.Key, k.Key}
	if set := c.Ternaries[key]; set != nil {
		say("the ternary set is of quality %s; the water of its organic layer is known to a factor of %.2g", set.Quality, set.Band)
	} else if s.isAlcohol() && slices.Contains(hydrocarbons, c.Solvents[k.Key].Class) {
		say("the three pairs alone give a factor of 2 to 18 too little water in the organic layer of an alcohol and a hydrocarbon")
	}
	if k.Azeotrope.TempK < kelvinAt0C {
		say("the ternary azeotrope lies below 0 °C, where water freezes: it cannot be run")
	}
	return list
}

// hydrocarbons are the classes of carriers in which an alcohol is hard to model.
var hydrocarbons = []string{"alkane", "aromatic"}

func (s *Sheet) isAlcohol() bool {
	return s.Solvent.Class == "alcohol" || s.Solvent.Class == "small-alcohol"
}

// origins of the numbers behind a carrier.
func (k *Carrier) origins(c *catalog.Catalog, solvent string) []string {
	ids := []string{k.Source, c.Solvents[k.Key].VapourPressure.Source, c.Solvents[k.Key].Water.Source}
	key := [2]string{solvent, k.Key}
	if set := c.Ternaries[key]; set != nil {
		return append(ids, set.Source)
	}
	if pair := c.Pairs[key]; pair != nil {
		return append(ids, pair.Source)
	}
	return ids
}
