package catalog

import (
	"parch/internal/document"
	"parch/internal/quantity"
)

var apparatusKinds = []string{"still", "receiver", "vessel", "oven", "column", "fractionating column", "chiller", "vacuum pump", "vacuum oven", "furnace"}

func (s *shelf) readApparatus() {
	s.cat.Apparatus = map[string]*Apparatus{}
	s.each(apparatusFile, func(n *document.Node) {
		for _, e := range n.Entries() {
			s.cat.Apparatus[e.Key] = s.apparatus(e.Key, e.Node)
		}
	})
}

func (s *shelf) apparatus(key string, n *document.Node) *Apparatus {
	f := n.Map("name", "kind", "returns", "pre-filled", "set-up", "volume", "fill volume", "fill", "power", "load", "energy",
		"diameter", "length", "stages", "cooling", "life", "breakage")
	a := &Apparatus{
		Key: key, Name: f.Need("name").Text(), Kind: f.Need("kind").OneOf(apparatusKinds...), Own: s.owning,
		SetUp:      s.optional(f.Get("set-up"), quantity.Time),
		Volume:     s.optional(f.Get("volume"), quantity.Volume),
		FillVolume: s.optional(f.Get("fill volume"), quantity.Volume),
		Fill:       s.optional(f.Get("fill"), quantity.Share),
		Power:      s.optional(f.Get("power"), quantity.Power),
		Load:       s.optional(f.Get("load"), quantity.Mass),
		Energy:     s.optional(f.Get("energy"), quantity.Energy),
		Diameter:   s.optional(f.Get("diameter"), quantity.Length),
		Length:     s.optional(f.Get("length"), quantity.Length),
		Stages:     s.optional(f.Get("stages"), quantity.Number),
		Cooling:    s.optional(f.Get("cooling"), quantity.Power),
		Life:       s.optional(f.Need("life"), quantity.Time),
		Breakage:   s.optional(f.Get("breakage"), quantity.Share),
	}
	if n := f.Get("returns"); n != nil {
		a.Returns = n.OneOf("light", "heavy", "either")
	}
	if n := f.Get("pre-filled"); n != nil {
		a.PreFilled = n.OneOf("yes", "no") == "yes"
	}
	for _, key := range needed[a.Kind] {
		f.Need(key)
	}
	checkApparatus(f, a)
	return a
}

// needed is what the steps ask of a kind of apparatus, beyond name and life.
var needed = map[string][]string{
	"still":                {"volume", "fill", "power"},
	"receiver":             {"volume", "returns", "fill volume"},
	"vessel":               {"volume", "fill"},
	"oven":                 {"volume", "load", "energy"},
	"column":               {"diameter", "length"},
	"fractionating column": {"length", "stages"},
	"chiller":              {"cooling", "power"},
	"vacuum pump":          {"power"},
	"vacuum oven":          {"volume", "load", "energy"},
	"furnace":              {"volume", "load", "energy"},
}
