package study

import (
	"fmt"
	"math"
	"strings"

	"parch/internal/quantity"
	"parch/internal/routes"
	"parch/internal/steps"
)

// afterwards says what becomes of the sieve and of the dry solvent of the best
// route: when the beads have to be regenerated, and how fast the lot gets wet
// again.
func afterwards(k *routes.Case, r *Route) []string {
	var notes []string
	add := func(format string, args ...any) { notes = append(notes, fmt.Sprintf(format, args...)) }
	for place, s := range r.Run.Route {
		o := &r.Run.Outcomes[place]
		if s.Kind != steps.Soak || o.AgentKg == 0 {
			continue
		}
		if use, err := k.UseOf(&r.Run, place); err == nil {
			notes = append(notes, sieveUse(k, s.Agent, use))
		}
		if o.Figure(steps.LotsServed) > 1 || o.Figure("charges") > 1 {
			continue
		}
		if life, err := k.Life(&r.Run, place); err == nil {
			add("the charge of %s used again as it is, batch after batch: %s", k.Catalog.Agents[s.Agent].Name, life.Verdict)
		}
	}
	const aDropM3 = 0.05e-6 // no one stops short of the last drop
	store := k.Store(&r.Run)
	if use, err := store.UseBy(k.Lot.Target); err == nil && r.Run.Meets {
		switch {
		case use.LeastVolumeM3 > aDropM3 && !math.IsInf(use.LeastVolumeM3, 0):
			add("kept under room air, the first litre drawn adds %s; draw dry gas in, or stop at %s left: from there it passes the target",
				quantity.FormatWater(store.PerLitre()), quantity.FormatVolume(use.LeastVolumeM3))
		case store.AirWaterKgPerM3 > 0:
			add("kept under room air, the first litre drawn adds %s", quantity.FormatWater(store.PerLitre()))
		}
	}
	return notes
}

// sieveUse tells what a charge of beads takes, what it would do next, and what wears
// it out.
func sieveUse(k *routes.Case, agent string, u routes.SieveUse) string {
	a := k.Catalog.Agents[agent]
	var taken, held []string
	for i, kg := range u.TakenKg {
		taken, held = append(taken, quantity.FormatMass(kg)), append(held, fmt.Sprintf("%.2g", 100*u.LoadingKgPerKg[i]))
	}
	charge := quantity.FormatMass(u.ChargeKg)
	if n := len(taken); n > 1 {
		charge = fmt.Sprintf("%d charges, %s together,", n, charge)
	}
	text := fmt.Sprintf("%s: %s have taken %s of water after %s and hold %s g/100 g; ", a.Plain(),
		charge, strings.Join(taken, " and "), lotsWord(u.Lots), strings.Join(held, " and "))
	if math.IsNaN(u.NextOutlet) {
		text += "the next lot would come out wetter than it went in"
	} else {
		text += fmt.Sprintf("the next, without an oven between, would be left at %s", quantity.FormatWater(u.NextOutlet))
	}
	if u.Uses > 1 {
		text += fmt.Sprintf("; of the capacity of new beads %s are left at the last of %s uses (%s lost each time, %s)",
			quantity.FormatShare(u.CapacityLeft), quantity.Significant(u.Uses, 3), quantity.FormatShare(a.Fade.SI), a.Fade.Confidence)
	}
	return text + fmt.Sprintf("; dust, taken as %s a lot (%s), takes %s of fresh beads a year, which are not billed",
		quantity.FormatShare(u.DustShare), k.Catalog.Practice[routes.SieveDust].Confidence, quantity.FormatMass(u.DustKgPerYear))
}

func lotsWord(n int) string {
	if n == 1 {
		return "one lot"
	}
	return fmt.Sprintf("%d lots", n)
}

// ovenWarning is shown on every route whose wet beads go into an oven again.
func ovenWarning(k *routes.Case, r routes.Run) []string {
	for _, after := range r.Settings.Sieve {
		if after != routes.Regenerate {
			continue
		}
		if k.Burns() && !k.Regeneration().Flushed {
			return []string{fmt.Sprintf("the job says sieve flush: none, and drained beads go into an oven at %s with what they hold of %s: solvent-wet sieve never goes into an oven; flush it first", quantity.FormatTemperature(k.OvenK()), k.Solvent.Name)}
		}
		margin, ok := k.IgnitionMargin()
		oven := quantity.FormatTemperature(k.Lot.SieveHistoryK)
		switch {
		case !ok && k.Solvent.FlashPoint != nil && k.Lot.SieveHistoryK > 0:
			return []string{fmt.Sprintf("no autoignition temperature of %s is known: used beads are flushed free of it with dry gas before an oven at %s", k.Solvent.Name, oven)}
		case ok && margin < routes.IgnitionMarginK:
			return []string{fmt.Sprintf("%s ignites at %s: used beads are flushed free of it with dry gas before an oven at %s, never put in wet",
				k.Solvent.Name, quantity.FormatTemperature(k.Solvent.Autoignition.SI), oven)}
		}
	}
	return nil
}
