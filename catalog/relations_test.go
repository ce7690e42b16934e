package catalog_test

import (
	"fmt"
	"math"
	"path"
	"reflect"
	"slices"
	"strconv"
	"strings"
	"testing"

	"parch/catalog"
)

// Numbers that no reference prints still have to agree with each other.
func TestRelations(t *testing.T) {
	for _, problem := range strayRelations(load(t), checks(t)) {
		t.Error(problem)
	}
}

// strayRelations are the numbers of practice, apparatus, prices and emissions that
// do not fit the others. Where no source is named the relation is common practice.
func strayRelations(cat *catalog.Catalog, all *catalog.Checks) (problems []string) {
	r := &relations{cat: cat}
	r.bands()
	r.stills()
	r.receivers()
	r.sorbents()
	r.salts()
	r.reactions()
	r.site()
	r.doses(all)
	return r.problems
}

type relations struct {
	cat      *catalog.Catalog
	problems []string
}

func (r *relations) within(what string, x, low, high float64) {
	if !(x >= low && x <= high) {
		r.problems = append(r.problems, fmt.Sprintf("%s: %.4g, %.4g to %.4g is wanted", what, x, low, high))
	}
}

func (r *relations) same(what string, x, y float64) { r.within(what, x/y, 1-1e-9, 1+1e-9) }

func (r *relations) practice(key string) float64 { return r.cat.Practice[key].SI }

// atTheTop are values that say the most that is usual: their bands reach down only.
var atTheTop = []string{
	"Apparatus.still-*.Fill", "Practice.still-fill", "Apparatus.*oven-50l.Load", "Apparatus.furnace-10l.Load",
	"Apparatus.receiver-light.Volume", "Apparatus.receiver-heavy.Volume", "Prices.*.WaterMax",
}

// offCentre are bands that are not drawn around their value.
var offCentre = map[string]string{
	"Agents.magnesium.Residuals.0.Water":           "two groups found the ends of the band",
	"Agents.sodium-sulfate.Hydrates.0.Activity":    "the low end is that of gas tests",
	"Agents.magnesium-sulfate.Hydrates.2.Activity": "two sources, the ends of the band",
	"Agents.sieve-3a.Window":                       "two figures, the ends of the band",
	"Agents.sieve-5a.Window":                       "two figures, the ends of the band",
	"Agents.sieve-3a.BulkDensity":                  "the upper end is recalled only",
	"Practice.reactive-reflux":                     "hours are usual, two days are in print",
	"Emissions.electricity":                        "the world between its cleanest and its dirtiest grid",
}

// bands reach about as far up as down, as factors: the value stands in the middle
// three fifths of its band on a scale of logarithms, or at its top where it is the
// most that is usual.
func (r *relations) bands() {
	walk(reflect.ValueOf(r.cat).Elem(), "", func(path string, v catalog.Value) { r.band(path, v.SI, v.Low, v.High) })
	for key, p := range r.cat.Prices {
		r.band("Prices."+key, number64(p.Amount), number64(p.Low), number64(p.High))
	}
}

func (r *relations) band(where string, x, low, high float64) {
	if !(low > 0 && high > low) || offCentre[where] != "" {
		return
	}
	least, most := 0.2, 0.8
	if slices.ContainsFunc(atTheTop, func(pattern string) bool { ok, _ := path.Match(pattern, where); return ok }) {
		least, most = 0.79, 1
	}
	r.within("place of "+where+" in its band", math.Log(x/low)/math.Log(high/low), least-1e-9, most+1e-9)
}

func number64(text string) float64 {
	x, _ := strconv.ParseFloat(text, 64)
	return x
}

// walk visits the values of a catalog that lie in structs, maps and lists of it.
func walk(v reflect.Value, path string, visit func(string, catalog.Value)) {
	switch v.Kind() {
	case reflect.Pointer:
		if !v.IsNil() {
			walk(v.Elem(), path, visit)
		}
	case reflect.Struct:
		if value, ok := v.Interface().(catalog.Value); ok {
			visit(path, value)
			return
		}
		for i := range v.NumField() {
			if name := v.Type().Field(i).Name; v.Type().Field(i).IsExported() {
				walk(v.Field(i), strings.TrimPrefix(path+"."+name, "."), visit)
			}
		}
	case reflect.Map:
		for _, key := range v.MapKeys() {
			walk(v.MapIndex(key), path+"."+fmt.Sprint(key), visit)
		}
	case reflect.Slice, reflect.Array:
		for i := range v.Len() {
			walk(v.Index(i), path+"."+strconv.Itoa(i), visit)
		}
	}
}

// stills grow dearer and stronger with their volume, but less than in proportion
// (the six-tenths rule of plant costs); they are filled as far as practice says;
// the usual flow of cooling water carries off what the 22 L still can boil.
func (r *relations) stills() {
	var stills []*catalog.Apparatus
	for _, a := range r.cat.Apparatus {
		if a.Kind == "still" {
			stills = append(stills, a)
		}
	}
	slices.SortFunc(stills, func(a, b *catalog.Apparatus) int { return int(1e6 * (a.Volume.SI - b.Volume.SI)) })
	for i, a := range stills {
		r.same("fill of "+a.Key+" over that of practice", a.Fill.SI, r.practice("still-fill"))
		if i == 0 {
			continue
		}
		before := stills[i-1]
		larger := math.Log(a.Volume.SI / before.Volume.SI)
		price := func(a *catalog.Apparatus) float64 { return number64(r.cat.Prices[a.Key].Amount) }
		r.within("exponent of the price of "+a.Key, math.Log(price(a)/price(before))/larger, 0.2, 1)
		r.within("exponent of the power of "+a.Key, math.Log(a.Power.SI/before.Power.SI)/larger, 0.3, 1)
	}
	const waterJPerM3K = 4.18e6
	carried := r.practice("cooling-flow") * waterJPerM3K * r.practice("cooling-rise")
	r.within("heat that the cooling water carries off over the power of the 22 L still", carried/r.cat.Apparatus["still-20l"].Power.SI, 0.5, 1.3)
	r.within("least over usual flow of cooling water", r.practice("cooling-flow-minimum")/r.practice("cooling-flow"), 0.2, 0.4)
}

// receivers: light and heavy return cost the same; one assembled from common
// glassware costs more than a made one and less than one with a tap, and holds
// more. The reading of a trap is 0.1 mL (ASTM D95): 115 mg/kg in a litre of toluene.
func (r *relations) receivers() {
	price := func(key string) float64 { return number64(r.cat.Prices["receiver-"+key].Amount) }
	r.same("price of a light over a heavy receiver", price("light"), price("heavy"))
	r.within("price of an assembled over a made receiver", price("assembled")/price("light"), 1.2, 2.5)
	r.within("price of a receiver with a tap over an assembled one", price("convertible")/price("assembled"), 1, 2)
	for _, key := range []string{"receiver-light", "receiver-heavy", "receiver-convertible", "receiver-assembled"} {
		a := r.cat.Apparatus[key]
		r.within("what "+key+" holds over its volume for water", a.FillVolume.SI/a.Volume.SI, 1, 2.2)
	}
	const waterKgPerM3, tolueneKgPerM3 = 998, 867
	r.within("reading of a trap in 1 L of toluene, mg/kg", 1e6*r.practice("trap-reading")*waterKgPerM3/(1e-3*tolueneKgPerM3), 110, 120)
}

// sorbents are thrown away before regenerating has cost a tenth of their capacity,
// and not much earlier; charged to the highest dose they fill a third to a half of
// the vessel.
func (r *relations) sorbents() {
	for key, a := range r.cat.Agents {
		if a.Isotherm == nil {
			continue
		}
		if a.Lives != nil && a.Fade != nil {
			r.within("capacity lost by "+key+" in its lives", 1-math.Pow(1-a.Fade.SI, a.Lives.SI), 0.03, 0.08)
		}
		if a.BulkDensity != nil {
			r.within("share of the vessel that the highest dose of "+key+" fills", r.practice("dose-maximum")/a.BulkDensity.SI, 0.3, 0.55)
		}
		if a.BeadPorosity != nil && a.BeadTortuosity != nil {
			r.within("porosity times tortuosity of "+key, a.BeadPorosity.SI*a.BeadTortuosity.SI, 0.3, 1.2)
		}
	}
}

// salts: all claims belong to the same dose (one article measured them), and none is
// the last step below twice what it may claim. Water bound in a hydrate has lost about
// 31 J/mol/K against the liquid (70 less 39, Latimer's figure for water in hydrates,
// from memory), 20 to 48 here: heat and activity of a pair go together by
// R T ln a = -q + T dS.
func (r *relations) salts() {
	const roomK, gasConstant = 298.15, 8.314
	for key, a := range r.cat.Agents {
		if a.Claim != nil {
			r.same("dose of the claim of "+key, a.Claim.Dose.SI, r.cat.Agents["calcium-chloride"].Claim.Dose.SI)
			r.same("least target over least outlet of "+key, a.Claim.Target.SI, 2*a.Claim.Least.SI)
		}
		for _, h := range a.Hydrates {
			effective := h.Activity.Source == "assumption" || h.Activity.High > 3*h.Activity.Low // not the activity of the pair itself
			if h.Heat.SI > 0 && !effective {
				r.within("entropy lost in "+h.Pair+", J/mol/K", (h.Heat.SI+gasConstant*roomK*math.Log(h.Activity.SI))/roomK, 20, 48)
			}
		}
	}
}

// reactions: every molecule of an alcohol gives half a hydrogen.
func (r *relations) reactions() {
	for key, a := range r.cat.Agents {
		if a.Reaction != nil && a.Reaction.Solvent > 0 {
			r.same("solvent over hydrogen of "+key, a.Reaction.Solvent, 2*a.Reaction.Hydrogen)
		}
	}
}

// site is an ordinary laboratory: 20 °C give or take 4 K, between sea level and
// 1500 m, neither parched nor damp, a shift of eight hours with breaks, a receiver
// at or a little above the room.
func (r *relations) site() {
	r.within("room, °C", r.practice("site-room")-zeroCelsiusK, 16, 25)
	r.within("receiver over room, K", r.practice("site-receiver")-r.practice("site-room"), 0, 8)
	r.within("pressure, hPa", r.practice("site-pressure")/100, 840, 1086)
	r.within("humidity", r.practice("site-humidity"), 0.3, 0.7)
	r.within("attended hours a day", r.practice("site-attended-per-day")/3600, 5, 9)
	for key, assay := range r.cat.Assays { // duplicates: ASTM D1364
		r.within("injections of "+key, float64(assay.Injections), 2, 3)
	}
}

// doses: no less is charged than the least dose of a drying by which the rate of a
// still vessel was fitted.
func (r *relations) doses(all *catalog.Checks) {
	least := math.Inf(1)
	for _, d := range all.Dryings {
		if r.cat.Agents[d.Agent].Isotherm != nil && d.How == "still" && d.DoseKgPerM3 > 0 {
			least = min(least, d.DoseKgPerM3)
		}
	}
	r.same("least dose over that of the dryings", r.practice("dose-minimum"), least)
}
