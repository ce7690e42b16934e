package bench

import (
	"fmt"
	"math"
	"strings"

	"parch/internal/assay"
	"parch/internal/quantity"
	"parch/internal/routes"
	"parch/internal/steps"
)

func (a *Answer) tell(topic, format string, args ...any) {
	a.Advice = append(a.Advice, Advice{topic, fmt.Sprintf(format, args...)})
}

// advise says what is worth knowing at the bench.
func (a *Answer) advise() {
	switch a.Kind {
	case steps.Soak:
		a.adviseSoak()
	case steps.Column:
		a.adviseColumn()
	case steps.Salt:
		a.adviseSalt()
	case steps.Trap, steps.Forerun:
		a.adviseBoiling()
	case steps.Reactive:
		a.adviseReactive()
	}
	a.adviseHours()
	for _, l := range a.Losses {
		if l.SolventKg > 0 {
			a.tell("lost", "%s of solvent: %s", trace(l.SolventKg/a.Question.KgPerM3(0)), l.Cause)
		}
	}
	for _, d := range a.Discards {
		if d.Kg > 0 {
			a.tell("waste", "%s of %s waste: %s", weighed(d.Kg), d.Class, d.What)
		}
	}
	a.adviseTest()
	a.adviseReaction()
}

// adviseHours tells hours and energy, and what of them is spent elsewhere: on
// activating the beads, on handing over what is spent.
func (a *Answer) adviseHours() {
	text := fmt.Sprintf("%s h in all, %s h attended", quantity.Significant(a.HoursTotal, 3), quantity.Significant(a.HoursAttended, 3))
	if more := a.HoursAttended - a.OwnHours; more > 1e-9 {
		besides := map[bool]string{false: " besides,"}[a.Kind == steps.Reactive] // whose hours in all have it
		text += fmt.Sprintf(": %s h at the step and %s h%s for %s", quantity.Significant(a.OwnHours, 3), quantity.Significant(more, 3), besides, a.elsewhere("technician"))
	}
	a.tell("time", "%s", text)
	if a.EnergyKWh > 0 || a.CoolingWaterL > 0 {
		text = quantity.Significant(a.EnergyKWh, 3) + " kWh" + cooling(a.CoolingWaterL)
		if other := a.elsewhere("electricity"); other != "" {
			text += "; " + other
		}
		a.tell("energy", "%s", text)
	}
}

// trace is a volume; what is less than a small drop is told as that.
func trace(m3 float64) string {
	const drop = 1e-8 // 0.01 mL
	if m3 < drop {
		return "under 0.01 mL"
	}
	return quantity.FormatVolume(m3)
}

// elsewhere is what is used of an item beside the step itself, in words.
func (a *Answer) elsewhere(item string) string {
	var parts []string
	for _, u := range a.Elsewhere {
		if u.Item == item {
			parts = append(parts, u.Basis)
		}
	}
	return strings.Join(parts, "; ")
}

// weighed is a mass as it is weighed at the bench: in g below a kilogram.
func weighed(kg float64) string {
	if kg > 0 && kg < 1e-6 {
		return "under 1 mg"
	}
	if kg < 1 {
		return quantity.Format(kg, quantity.Mass, "g", 3)
	}
	return quantity.Format(kg, quantity.Mass, "kg", 3)
}

func cooling(litres float64) string {
	if litres == 0 {
		return ""
	}
	return fmt.Sprintf(", and %s L of cooling water", quantity.Significant(litres, 3))
}

func (a *Answer) adviseSoak() {
	q := a.Question
	a.tell("sieve", "%s%s", weighed(a.AgentKg), a.takenApart())
	if q.Activation.Note != "" {
		a.tell("history", "%s", q.Activation.Note)
	}
	a.tell("history", "%s: holds %s g/100 g at the start%s; %s", q.Activation.Text, quantity.Significant(100*q.Activation.KgPerKg, 2), a.atTheEnd(), a.floorOfHistory())
	if q.Charges > 1 {
		a.adviseCharges()
	} else if next, ok := a.Case.Again(a.asked(), a.Single); ok {
		a.tell("again", "the same charge, not regenerated, would leave %s in the next such lot; it has taken %s of water",
			quantity.FormatWater(next), weighed(a.Figure("water taken up")/1e3))
	}
	a.adviseOven()
}

// takenApart says how much of the charge capacity and speed ask for. A solvent
// that makes water on the sorbent has no such two sizes.
func (a *Answer) takenApart() string {
	asked := a.asked()
	if asked.Charges > 1 {
		return fmt.Sprintf(" in %d equal charges", asked.Charges)
	}
	size, err := a.Case.SizeOf(asked, a.Single)
	if err != nil || !size.Enough || a.Figure("water made by condensation") > 0 {
		return ""
	}
	wanted := a.Out.Water()
	if given(asked.Goal) && !given(asked.DoseKgPerM3) {
		wanted = asked.Goal
	}
	return fmt.Sprintf("; to come to %s in %s h, %s would do for capacity and %s for speed: %s rules", quantity.FormatWater(wanted),
		quantity.Significant(size.Hours, 3), weighed(size.CapacityGrams/1e3), weighed(size.SpeedGrams/1e3), size.Ruling)
}

func (a *Answer) asked() routes.Asked {
	q := a.Question
	return routes.Asked{Stage: q.stage(), Stages: q.Stages, Receiver: q.receiverKey(), Goal: q.Goal, DoseKgPerM3: q.DoseKgPerM3, TimeS: q.TimeS, RinseM3: q.RinseM3, Stirred: q.Stirred, Powder: q.Powder, Charges: q.Charges, ResidualLow: q.Activation.Low, ResidualHigh: q.Activation.High}
}

func (a *Answer) adviseOven() {
	margin, ok := a.Case.IgnitionMargin()
	oven := a.Question.Activation.OvenK
	switch {
	case oven == 0:
		return
	case !ok && a.Question.Solvent.FlashPoint != nil:
		a.tell("oven", "no autoignition temperature of %s is known: used beads are flushed free of it with dry gas before an oven at %s", a.Question.Solvent.Name, quantity.FormatTemperature(oven))
	case ok && margin < routes.IgnitionMarginK:
		a.tell("oven", "%s ignites at %s: used beads are flushed free of it with dry gas before an oven at %s, never put in wet", a.Question.Solvent.Name, a.Question.Solvent.Autoignition.Text, quantity.FormatTemperature(oven))
	}
}

func (a *Answer) adviseColumn() {
	column := a.Case.Catalog.Apparatus[a.Apparatus]
	a.tell("bed", "%s of beads, %s deep in the %s", weighed(a.AgentKg), quantity.FormatLength(a.Figure("bed length")), column.Name)
	a.tell("first", "the first %s go back to the feed; the lot is through in %s h of pumping",
		quantity.FormatVolume(a.Figure("first runnings to return")/1e3), quantity.Significant(a.Figure("pump time"), 3))
	switch v := a.Figure("volume to breakthrough"); {
	case v > 0:
		a.tell("last", "%s is passed after %s", quantity.FormatWater(a.Question.Goal), quantity.FormatVolume(v/1e3))
	case v == 0:
		a.tell("last", "the very first of it is above %s", quantity.FormatWater(a.Question.Goal))
	}
	a.tell("history", "%s: held %s g/100 g at the start, %s at the end on average", a.Question.Activation.Text,
		quantity.Significant(100*a.Question.Activation.KgPerKg, 2), quantity.Significant(a.Figure("loading after"), 3))
	if a.Question.Activation.Note != "" {
		a.tell("history", "%s", a.Question.Activation.Note)
	}
	a.adviseOven()
}

func (a *Answer) adviseSalt() {
	a.tell("salt", "%s, stirred in for %s min and filtered off", weighed(a.AgentKg), quantity.Significant(a.Figure("stirred or stood"), 3))
	for _, r := range a.Question.Agent.Residuals {
		if r.Solvent == a.Question.Solvent.Key {
			a.tell("measured", "%s (%s): left %s [%s, %s]", a.Question.Solvent.Name, r.How, r.Water.Text, r.Water.Source, r.Water.Confidence)
		}
	}
}

func ofEach(charges float64) string {
	if charges > 1 {
		return fmt.Sprintf(" in each of %.0f charges", charges)
	}
	return ""
}

func times(n float64) string {
	switch n {
	case 1:
		return "once"
	case 2:
		return "twice"
	}
	return fmt.Sprintf("%.0f times", n)
}

func (a *Answer) adviseReactive() {
	need, charged := a.Figure("agent needed"), a.Figure("agent charged")
	a.tell("agent", "%s g would take up all of the water, %s g are charged: %s g are surplus and become waste unspent",
		quantity.Significant(need, 3), quantity.Significant(charged, 3), quantity.Significant(charged-need, 3))
	now, later := a.Figure("hydrogen while drying"), a.Figure("hydrogen held by the surplus, set free at disposal")
	if now > 0 || later > 0 {
		held := "none is held by the surplus"
		if later > 0 {
			held = quantity.FormatVolume(later/1e3) + " are held by the surplus and come off at its disposal"
		}
		a.tell("hydrogen", "up to %s (at 20 °C) come off while drying, %s: vented, never sealed", quantity.FormatVolume(now/1e3), held)
	}
	for _, d := range a.Discards {
		a.tell("spent", "goes as %s waste, by people trained for it", d.Class)
	}
	if left, ok := a.Case.Beside(); ok {
		a.tell("instead", "without a reactive agent, %s over 100 g/L of sieve 3A, still, %s h, 300 °C furnace, would leave about %s",
			a.Question.Solvent.Name, quantity.Significant(routes.BesideHours, 3), quantity.FormatWater(left))
	}
}

// adviseTest says how the result is shown.
func (a *Answer) adviseTest() {
	k, water := a.Case, a.Out.Water()
	wanted := water
	if given(a.Question.Goal) {
		wanted = a.Question.Goal
	}
	method := k.Catalog.Assays["coulometric"]
	if wanted > method.Highest.SI {
		a.tell("to show", "volumetric Karl Fischer; the coulometric method is advised up to %s", quantity.FormatWater(method.Highest.SI))
		return
	}
	sample := assay.SampleFor(math.Max(wanted, k.Assay.DetectionLimit), method.Sample.High)
	text := fmt.Sprintf("coulometric Karl Fischer, %s, mean of %d injections", grams(sample.LowKg, sample.HighKg), k.Assay.Injections)
	limit := assay.Accept(wanted, k.Assay)
	switch {
	case given(a.Question.Goal) && limit.CannotShow != "":
		a.tell("to show", "%s; %s %s", text, quantity.FormatWater(wanted), limit.CannotShow)
	case given(a.Question.Goal):
		a.tell("to show", "%s: %s is shown by a mean at or below %s (uncertainty %s, k = 2)", text, quantity.FormatWater(wanted), quantity.FormatWater(limit.AcceptAt), quantity.FormatWater(limit.Uncertainty))
	case water < k.Assay.DetectionLimit:
		a.tell("to show", "%s: %s lies under the detection limit of %s and cannot be shown as a number", text, quantity.FormatWater(water), quantity.FormatWater(k.Assay.DetectionLimit))
	default:
		a.tell("to show", "%s: good to %s (k = 2)", text, quantity.FormatWater(limit.Uncertainty))
	}
	a.adviseKeeping()
}

func grams(lowKg, highKg float64) string {
	low, high := quantity.Significant(lowKg*1e3, 2), quantity.Significant(highKg*1e3, 2)
	if low == high {
		return low + " g each"
	}
	return fmt.Sprintf("%s to %s g each", low, high)
}

// adviseKeeping says how fast the lot gets wet again.
func (a *Answer) adviseKeeping() {
	volume := steps.LotVolume(a.Case.Mixture, a.Out, a.Question.TempK)
	store := a.Case.Store(&routes.Run{WaterOut: a.Out.Water(), LitresDelivered: volume * 1e3})
	a.tell("to keep", "under dry gas: with room air (%s) the first tenth drawn adds %s, %s for each litre of it; a day under the closure adds about %s (memory)",
		a.Case.Catalog.Practice["site-humidity"].Text, quantity.FormatWater(store.After(volume/10, 0)-a.Out.Water()),
		quantity.FormatWater(store.PerLitre()), quantity.FormatWater(store.LeakPerDay))
	if goal := a.Question.Goal; given(goal) && a.Out.Water() < goal*(1-1e-6) {
		const hardlyAny = 1e-3 // of the lot
		switch use, err := store.UseBy(goal); {
		case err != nil:
		case use.LeastVolumeM3 < hardlyAny*volume:
			a.tell("to keep", "it stays under %s until the last of it is drawn; undrawn it passes it after %s d: use it by then", quantity.FormatWater(goal), quantity.Significant(use.Days, 2))
		default:
			a.tell("to keep", "it passes %s with %s left of it, or undrawn after %s d: use it by then", quantity.FormatWater(goal), quantity.FormatVolume(use.LeastVolumeM3), quantity.Significant(use.Days, 2))
		}
	}
}

// adviseReaction says what the water is to a reaction.
func (a *Answer) adviseReaction() {
	q := a.Question
	w := a.Out.Water()
	kgPerM3 := q.KgPerM3(w)
	text := fmt.Sprintf("%s of water in the lot at the end", quantity.Format(w*kgPerM3*q.VolumeM3/waterKgPerMol, quantity.Amount, "mmol", 3))
	if given(q.ReagentMol) {
		text += fmt.Sprintf(", %s of %s of a reagent used in the whole of it", quantity.FormatOfReagent(w, quantity.Solution{ReagentMol: q.ReagentMol, SolventKg: q.VolumeM3 * kgPerM3}),
			quantity.Format(q.ReagentMol, quantity.Amount, "mol", 3))
	}
	a.tell("reaction", "%s", text)
}

const waterKgPerMol = 0.018015
