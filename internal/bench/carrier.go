package bench

import (
	"fmt"
	"maps"
	"slices"
	"strconv"
	"strings"

	"parch/catalog"
	"parch/internal/document"
	"parch/internal/quantity"
	"parch/internal/routes"
	"parch/internal/steps"
)

// stage is the step as a route would hold it.
func (q *Question) stage() routes.Stage {
	s := routes.Stage{Kind: q.Kind}
	if q.Agent != nil {
		s.Agent = q.Agent.Key
	}
	if q.Carrier != nil {
		s.Carrier = q.Carrier.Key
	}
	return s
}

// carrier finds the carrier by key, name, alias or CAS number.
func (r *reader) carrier() {
	typed, ok := r.flags["carrier"]
	if !ok || !slices.Contains(uses[r.q.Kind].takes, "carrier") {
		return
	}
	carriers := slices.Sorted(maps.Keys(r.cat.Carriers))
	for _, key := range carriers {
		if s := r.cat.Solvents[key]; s != nil && s.IsCalled(typed) { // nil: not read for this question
			r.q.Carrier = s
		}
	}
	switch wrong := r.cat.MistypedCAS(typed); {
	case r.q.Carrier == nil && wrong != "":
		r.mistake("--carrier: "+wrong, "")
	case r.q.Carrier == nil:
		hint := "carriers: " + strings.Join(carriers, ", ")
		if near := document.Nearest(typed, carriers); len(near) > 0 {
			hint = "did you mean " + strings.Join(near, " or ") + "?"
		}
		r.mistake(fmt.Sprintf("--carrier: %s is not a carrier of the catalog", quantity.Quote(typed)), hint)
	case r.q.Solvent != nil && r.q.Carrier.Key == r.q.Solvent.Key:
		r.mistake(fmt.Sprintf("--carrier: %s cannot carry water out of itself", r.q.Carrier.Name), "leave it out: parch step trap")
	}
}

// stages reads the height of the column.
func (r *reader) stages() {
	text, ok := r.flags["stages"]
	if !ok {
		return
	}
	n, err := strconv.Atoi(strings.TrimSpace(text))
	if err != nil || n < 0 || n > steps.MostStages {
		r.mistake(fmt.Sprintf("--stages: %s is not a number of stages; allowed: 0, a simple still, to %d", quantity.Quote(text), steps.MostStages), "")
		return
	}
	r.q.Stages = n
}

// peroxidesOfCarrier holds a carrier that forms peroxides back until a reading is
// given, which is then one of lot and carrier.
func peroxidesOfCarrier(k *routes.Case, q *Question) error {
	if q.Carrier == nil {
		return nil
	}
	h, limit := q.Carrier.Hazards, k.Job.Site.PeroxideLimitKgPerM3
	switch {
	case !h.FormsPeroxides():
		return nil
	case !given(q.PeroxideKgPerM3):
		return &Refusal{
			Reason: fmt.Sprintf("test first: the carrier %s forms peroxides (class %s) and no reading is given", q.Carrier.Name, h.PeroxideClass),
			Hint:   fmt.Sprintf(`give the higher reading of lot and carrier, under the limit of %s, with --peroxide "0 mg/L"`, quantity.FormatConcentration(limit)),
			Source: h.Source, Confidence: h.Confidence,
		}
	case q.PeroxideKgPerM3 > 0 && q.PeroxideKgPerM3 >= limit:
		return &Refusal{Reason: fmt.Sprintf("not heated: the peroxide reading of %s is not under the limit of %s", quantity.FormatConcentration(q.PeroxideKgPerM3), quantity.FormatConcentration(limit)), Source: h.Source, Confidence: h.Confidence}
	}
	return nil
}

// lessWasteful says what would take less of the lot.
func lessWasteful(k *routes.Case, q *Question) string {
	if q.Kind != steps.Forerun {
		return "a taller column (--stages) parts carrier and solvent better; another dose or carrier may"
	}
	if better := sparing(k, q); better != "" {
		return better
	}
	return noColumn
}

const noColumn = "no column of the catalog does better: another step may"

// sparing names the column over which a forerun comes to what is asked, or nothing.
func sparing(k *routes.Case, q *Question) string {
	stages, share, ok := k.SparingColumn(q.Goal)
	if !ok || stages == q.Stages {
		return ""
	}
	return fmt.Sprintf("over %d stages it takes %s %%: --stages %d", stages, quantity.Significant(100*share, 2), stages)
}

// restsOnCarrier lists what a carrier distillation rests on beside a trap.
func (a *Answer) restsOnCarrier() {
	if a.Question.Carrier == nil {
		return
	}
	c, pair := a.Case.Catalog, [2]string{a.Question.Solvent.Key, a.Question.Carrier.Key}
	what := a.Question.Solvent.Name + " with " + a.Question.Carrier.Name
	if set := c.Ternaries[pair]; set != nil {
		a.rests("activity of the three together", fmt.Sprintf("fitted to tie-lines, a factor of %.2g", set.Band), set.Origin)
	} else if p := c.Pairs[pair]; p != nil {
		a.rests(what+": activity", "", p.Origin)
	}
	if l := c.Layers[pair]; l != nil {
		a.rests("water of the organic layer in the receiver", fmt.Sprintf("measured tie-lines, a factor of %.2g", l.Factor), l.Origin)
	}
	a.rests("carrier", c.Carriers[a.Carrier].Reason, c.Carriers[a.Carrier].Origin)
	a.habit("carrier left in the product", "carrier-limit")
	a.restsOnColumn()
}

// restsOnForerun lists what drawing off rests on.
func (a *Answer) restsOnForerun() {
	a.habit("heat that reaches the liquid", "heat-share")
	a.habit("lowest outlet claimed", "trap-outlet-minimum")
	a.habit("share of it attended", "trap-attended-share")
	a.restsOnCondenser()
	a.restsOn("hottest pot", a.Question.Solvent.HottestPot)
	a.restsOnColumn()
	a.heater()
}

func (a *Answer) restsOnColumn() {
	a.habit("heel", "forerun-heel")
	if a.Question.Stages > 0 {
		a.habit("returned to the column per part drawn off", "forerun-reflux")
		a.rests("stages at total reflux", fmt.Sprintf("the best that %d stages can do", a.Question.Stages), catalog.Origin{Source: "assumption", Confidence: catalog.Assumption, Note: "a finite reflux parts less sharply"})
	}
}
