package study

import (
	"fmt"
	"math"
	"slices"

	"parch/catalog"
	"parch/internal/quantity"
	"parch/internal/routes"
	"parch/internal/steps"
)

// leastRoomPa is the pressure of a room at about 3000 m: less is a vacuum (assumption).
const leastRoomPa = 70e3

// boilsReduced reports whether a route boils under less than any room has. Settings name
// the pressures of foreruns in kPa, 0 where it is the site's.
func boilsReduced(k *routes.Case, s routes.Settings) bool {
	return k.Job.Site.PressurePa < leastRoomPa ||
		slices.ContainsFunc(s.PressureKPa, func(kPa float64) bool { return kPa > 0 && 1e3*kPa < leastRoomPa })
}

// cautions that apply to a route on a lot and to how it ran, in the catalog's order.
func cautions(k *routes.Case, r routes.Route, s routes.Settings, outcomes ...steps.Outcome) []catalog.Caution {
	out := hotPot(k.Solvent, outcomes)
	for _, c := range k.Catalog.Cautions {
		if applies(c, k, r) && (!c.ReducedPressure || boilsReduced(k, s)) {
			out = append(out, ownCaution(c))
		}
	}
	for _, s := range r {
		if s.Agent == "" {
			continue
		}
		if v, ok := k.Catalog.Verdict(k.Solvent, s.Agent); ok && v.Word != "ok" {
			out = append(out, ownCaution(catalog.Caution{
				Code: "pair-" + s.Agent, Level: "caution", Origin: v.Origin,
				Text: k.Catalog.Agents[s.Agent].Name + " with " + k.Solvent.Name + verdictWords(v) + v.Reason + ".",
			}))
		}
	}
	return out
}

// hotPot speaks of a pot that became hotter than its solvent should, as it does where a
// carrier is stripped off a high boiler: the solvent then boils by itself.
func hotPot(s *catalog.Solvent, outcomes []steps.Outcome) []catalog.Caution {
	hottestK := 0.0
	for _, o := range outcomes {
		for _, p := range o.Course {
			hottestK = math.Max(hottestK, p.PotK)
		}
	}
	if s.HottestPot == nil || hottestK <= s.HottestPot.SI {
		return nil
	}
	return []catalog.Caution{ownCaution(catalog.Caution{
		Code: "hot-pot", Level: "danger", Origin: s.HottestPot.Origin,
		Text: fmt.Sprintf("The pot reaches %s, above the %s that %s should not pass (%s). A forerun under reduced pressure stays below it; so may a carrier there (parch step trap, --pressure).",
			quantity.FormatTemperature(hottestK), s.HottestPot.Text, s.Name, s.HottestPot.Note),
	})}
}

// verdictWords leads over from a pair to the reason.
func verdictWords(v catalog.Verdict) string {
	if v.Word == "caution" {
		return " asks for care: "
	}
	return " is " + v.Word + ", accepted by the job: "
}

// ownCaution marks a caution that is the user's own.
func ownCaution(c catalog.Caution) catalog.Caution {
	if c.Own {
		c.Text += " (own data)"
	}
	return c
}

func applies(c catalog.Caution, k *routes.Case, r routes.Route) bool {
	h := k.Solvent.Hazards
	switch {
	case c.Peroxide && !h.FormsPeroxides():
		return false
	case c.Flammable && k.Solvent.FlashPoint == nil && !k.Solvent.Own: // an own solvent is held to burn
		return false
	case c.Reclaimed && !k.Lot.Reclaimed:
		return false
	case len(c.Classes) > 0 && !slices.Contains(c.Classes, k.Solvent.Class):
		return false
	case len(c.Solvents) > 0 && !slices.Contains(c.Solvents, k.Solvent.Key):
		return false
	}
	return anyStep(r, func(s routes.Stage) bool {
		return (len(c.Steps) == 0 || slices.Contains(c.Steps, string(s.Kind)) || s.Carrier != "" && slices.Contains(c.Steps, "carrier")) &&
			(len(c.Agents) == 0 || slices.Contains(c.Agents, s.Agent))
	})
}

func anyStep(r routes.Route, ok func(routes.Stage) bool) bool { return slices.ContainsFunc(r, ok) }
