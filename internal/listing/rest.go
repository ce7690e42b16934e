package listing

import (
	"fmt"
	"maps"
	"slices"
	"strings"

	"parch/catalog"
	"parch/internal/quantity"
)

func apparatus(key string, a *catalog.Apparatus) Entry {
	var f facts
	f.say("kind", a.Kind, catalog.Origin{Own: a.Own})
	f.say("returns", a.Returns, catalog.Origin{Own: a.Own})
	for _, v := range []struct {
		what  string
		value *catalog.Value
	}{
		{"set-up", a.SetUp}, {"volume", a.Volume}, {"fill volume", a.FillVolume}, {"largest fill", a.Fill}, {"power", a.Power}, {"load of a run", a.Load},
		{"energy of a run", a.Energy}, {"diameter", a.Diameter}, {"length", a.Length}, {"stages", a.Stages}, {"cooling", a.Cooling}, {"life", a.Life}, {"breakage per year", a.Breakage},
	} {
		f.value(v.what, v.value)
	}
	return Entry{Key: key, Title: a.Name, Own: a.Own, Facts: f}
}

func assay(key string, a catalog.Assay) Entry {
	var f facts
	f.value("repeatability r", &a.Repeatability)
	f.value("detection limit", &a.DetectionLimit)
	f.value("advised up to", &a.Highest)
	f.say("injections", fmt.Sprint(a.Injections), a.InjectionsFrom)
	f.value("sample", &a.Sample)
	return Entry{Key: key, Title: key + " Karl Fischer", Facts: f}
}

func carrier(key string, c *catalog.Carrier) Entry {
	var f facts
	accepted := "always"
	if c.ByName {
		accepted = "only where a job accepts it by name"
	}
	f.say("accepted", accepted, c.Origin)
	f.say("reason", c.Reason, c.Origin)
	f.say("never with", strings.Join(c.NotWith, ", "), c.NotWithOrigin)
	f.say("reason of that", c.NotWithReason, c.NotWithOrigin)
	return Entry{Key: key, Title: accepted, Facts: f}
}

func cautions(c *catalog.Catalog) (list []Entry) {
	for _, one := range c.Cautions {
		var f facts
		f.say("level", one.Level, one.Origin)
		f.say("text", one.Text, one.Origin)
		for _, scope := range []struct {
			what  string
			words []string
		}{{"steps", one.Steps}, {"agents", one.Agents}, {"classes", one.Classes}, {"solvents", one.Solvents}} {
			f.say(scope.what, strings.Join(scope.words, ", "), one.Origin)
		}
		for _, only := range []struct {
			what string
			on   bool
		}{{"peroxide formers", one.Peroxide}, {"flammable solvents", one.Flammable}, {"reclaimed lots", one.Reclaimed}, {"reduced pressure", one.ReducedPressure}} {
			if only.on {
				f.say("only for", only.what, one.Origin)
			}
		}
		list = append(list, Entry{Key: one.Code, Title: one.Level + ": " + one.Text, Facts: f}.marked())
	}
	slices.SortFunc(list, func(a, b Entry) int { return strings.Compare(a.Key, b.Key) })
	return list
}

// single lays out an entry that is one value.
func single(key, what string, v catalog.Value) Entry {
	var f facts
	f.value(what, &v)
	return Entry{Key: key, Title: v.Text, Facts: f}
}

func diameter(key string, v catalog.Value) Entry { return single(key, "kinetic diameter", v) }

func emission(key string, v catalog.Value) Entry { return single(key, "CO2 equivalent", v) }

func practice(key string, v catalog.Value) Entry { return single(key, key, v) }

func histories(c *catalog.Catalog) (list []Entry) {
	for _, h := range c.Histories {
		var f facts
		f.value("water still held", &h.ResidualKgPerKg)
		if h.TemperatureK > 0 {
			f.say("activated at", quantity.FormatTemperature(h.TemperatureK), h.ResidualKgPerKg.Origin)
		}
		list = append(list, Entry{Key: h.Key, Title: h.Text, Facts: f}.marked())
	}
	slices.SortFunc(list, func(a, b Entry) int { return strings.Compare(a.Key, b.Key) })
	return list
}

// matrix has an entry for each class or solvent and a fact for each agent.
func matrix(c *catalog.Catalog) []Entry {
	rows := map[string]facts{}
	for _, pair := range slices.SortedFunc(maps.Keys(c.Matrix), func(a, b [2]string) int { return strings.Compare(a[0]+" "+a[1], b[0]+" "+b[1]) }) {
		v := c.Matrix[pair]
		f := rows[pair[0]]
		one := fact(pair[1], v.Word, "", v.Origin)
		one.Note = strings.Trim(v.Reason+"; "+v.Note, "; ")
		rows[pair[0]] = append(f, one)
	}
	return each(rows, func(key string, f facts) Entry {
		what := "class"
		if c.Solvents[key] != nil {
			what = "solvent"
		}
		return Entry{Key: key, Title: what, Facts: f}
	})
}

func price(key string, p catalog.Price) Entry {
	one := fact("price", p.Amount, p.Currency+"/"+p.Unit, p.Origin)
	one.Low, one.High = p.Low, p.High
	f := facts{one}
	for _, pack := range p.Packs {
		size := fact("in packs of "+pack.Size+" "+packUnit(p.Unit), pack.Amount, p.Currency+"/"+p.Unit, p.Origin)
		size.Low, size.High = pack.Low, pack.High
		f = append(f, size)
	}
	f.say("kept under", p.Date, p.Origin)
	f.value("water at most", p.WaterMax)
	return Entry{Key: key, Title: fmt.Sprintf("%s: %s %s/%s", p.Label, p.Amount, p.Currency, p.Unit), Facts: f}
}

func packUnit(unit string) string {
	if unit == "litre" {
		return "L"
	}
	return unit
}

func source(key string, s catalog.Source) Entry {
	return Entry{Key: key, Title: s.Reference, Own: s.Own, Facts: []Fact{{What: "reference", Value: s.Reference, Own: s.Own}}}
}
