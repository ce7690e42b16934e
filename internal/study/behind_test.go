package study_test

import (
	"slices"
	"strings"
	"testing"

	"parch/catalog"
	"parch/internal/study"
)

// What stands behind a carrier distillation are the curves of the carrier, its pairs, the
// set of three and the layer, each with the source that the catalog names for it.
func TestBehindACarrierStandItsSources(t *testing.T) {
	c, err := catalog.Load()
	if err != nil {
		t.Fatal(err)
	}
	r := compare(t, "exclude: {steps: [soak, column, reactive, salt]}\n"+
		"lots: [{solvent: ethanol, batch: 10 L, batches: 20 /yr, water: 4 %, target: 4000 mg/kg}]\n", study.Options{})
	l := &r.Lots[0]
	at := slices.IndexFunc(l.Routes, func(r study.Route) bool { return r.Run.Route.CarrierOf() != "" })
	if at < 0 {
		t.Fatalf("no route with a carrier among %d", len(l.Routes))
	}
	carrier := c.Solvents[l.Routes[at].Run.Route.CarrierOf()]
	inputs, sources := r.Behind(l, &l.Routes[at])
	cited := func(id string) bool {
		return slices.ContainsFunc(sources, func(s catalog.Source) bool { return s.ID == id })
	}
	pair := [2]string{"ethanol", carrier.Key}
	for what, id := range map[string]string{
		"water + ethanol":   c.Solvents["ethanol"].Water.Source,
		"water + carrier":   carrier.Water.Source,
		"ethanol + carrier": c.Pairs[pair].Source,
		"vapour pressure":   carrier.VapourPressure.Source,
	} {
		if id == "" || !cited(id) {
			t.Errorf("%s: source %q is not among %d", what, id, len(sources))
		}
	}
	if set := c.Ternaries[pair]; set != nil && !cited(set.Source) {
		t.Errorf("the set of three cites %q", set.Source)
	}
	for _, want := range []string{carrier.Name + ": vapour pressure", "ethanol: vapour pressure", "water + " + carrier.Name + ": activity model"} {
		if !slices.ContainsFunc(inputs, func(w study.Weak) bool { return w.What == want }) {
			t.Errorf("%q is not among the %d inputs", want, len(inputs))
		}
	}
	for _, w := range inputs {
		if strings.Contains(w.What, "toluene") {
			t.Errorf("%q has no part in this route", w.What)
		}
	}
}
