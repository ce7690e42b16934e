package catalog

import "parch/internal/quantity"

func (s *shelf) readApparatus() {
	s.cat.Apparatus = map[string]*Apparatus{}
	for _, e := range s.root(apparatusFile).Entries() {
		f := e.Node.Map("name", "kind", "returns", "set-up", "volume", "fill volume", "fill", "power", "load", "energy", "life", "breakage")
		a := &Apparatus{
			Key: e.Key, Name: f.Need("name").Text(), Kind: f.Need("kind").OneOf("still", "receiver", "vessel", "oven"),
			SetUp:      s.optional(f.Get("set-up"), quantity.Time),
			Volume:     s.optional(f.Need("volume"), quantity.Volume),
			FillVolume: s.optional(f.Get("fill volume"), quantity.Volume),
			Fill:       s.optional(f.Get("fill"), quantity.Share),
			Power:      s.optional(f.Get("power"), quantity.Power),
			Load:       s.optional(f.Get("load"), quantity.Mass),
			Energy:     s.optional(f.Get("energy"), quantity.Energy),
			Life:       s.optional(f.Need("life"), quantity.Time),
			Breakage:   s.optional(f.Get("breakage"), quantity.Share),
		}
		if n := f.Get("returns"); n != nil {
			a.Returns = n.OneOf("light", "heavy", "either")
		}
		for _, key := range needed[a.Kind] {
			f.Need(key)
		}
		s.cat.Apparatus[e.Key] = a
	}
}

// needed is what the steps ask of a kind of apparatus, beyond name, volume and life.
var needed = map[string][]string{
	"still":    {"fill", "power"},
	"receiver": {"returns", "fill volume"},
	"vessel":   {"fill"},
	"oven":     {"load", "energy"},
}
