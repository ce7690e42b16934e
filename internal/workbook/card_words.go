package workbook

import (
	"fmt"
	"math"
	"slices"
	"strings"

	"parch/internal/quantity"
	"parch/internal/routes"
	"parch/internal/steps"
)

// cardWords are the texts of a bench card for one route.
type cardWords struct {
	stops, charge, settings, until []string
	waste, never                   []string
	expect                         []expected
}

// expected is what is to be seen at a time in a step.
type expected struct {
	step                                 string
	hours, collectedML, water, pot, head float64 // h, mL, mg/kg, °C; NaN where the step has none
}

// cardWords are the texts of a card for a route, with at most the given points of what
// to expect.
func (l *layout) cardWords(r *routeModel, points int) cardWords {
	w := cardWords{stops: l.stopChecks(r), waste: wasteWords(r), never: neverWords(r)}
	several := len(r.Run.Outcomes) > 1
	soaks, beds := 0, 0
	for i := range r.Run.Outcomes {
		o := &r.Run.Outcomes[i]
		name, short := capital(string(o.Kind)), stepOnCard(r, i)
		if several {
			name = fmt.Sprintf("Step %d, %s", i+1, o.Kind)
		}
		sieve := ""
		if o.Kind == steps.Soak || o.Kind == steps.Column {
			sieve = itemAt(r.Run.Settings.Sieve, beds)
			beds++
		}
		w.charge = append(w.charge, name+": "+l.chargeWords(r, o, sieve))
		stirred := false
		if o.Kind == steps.Soak {
			stirred = itemAt(r.Run.Settings.Stirred, soaks)
			soaks++
		}
		if s := settingWords(r, o, stirred); s != "" {
			w.settings = append(w.settings, name+": "+s)
		}
		w.until = append(w.until, name+": "+oneLine(why(*o))+".")
		w.expect = append(w.expect, expectations(short, o, expectPoints(r, points))...)
	}
	return w
}

func itemAt[T any](list []T, i int) (item T) {
	if i < len(list) {
		item = list[i]
	}
	return item
}

// mostStops are the checks before a start that fit on a card.
const mostStops = 7

func (l *layout) stopChecks(r *routeModel) []string {
	var out []string
	if p := r.lot.Job.Peroxide; p != nil {
		out = append(out, fmt.Sprintf("Peroxide reading of %s: %s. Test again today; go on only below the site's limit of %s.", p.Date,
			quantity.FormatConcentration(p.ReadingKgPerM3), quantity.FormatConcentration(l.report.Job.Site.PeroxideLimitKgPerM3)))
	}
	out = append(out, cautionTexts(r, "danger", "caution")...)
	if left := len(out) - mostStops; left > 0 {
		out = append(out[:mostStops-1], fmt.Sprintf("Read on Compare the %d cautions more for this route.", left+1))
	}
	return out
}

func (l *layout) chargeWords(r *routeModel, o *steps.Outcome, sieve string) string {
	lot := r.lot.Job
	agent := l.agentName(o.Agent)
	grams := quantity.Significant(o.AgentKg*1000, 3) + " g"
	switch o.Kind {
	case steps.Soak, steps.Column:
		s := fmt.Sprintf("%s of %s", grams, agent)
		if o.Kind == steps.Soak {
			s += fmt.Sprintf(" (%s g/L) on %s", significant(o.Figure("dose")), litres(o.In))
		} else {
			s += fmt.Sprintf(" in %s, bed %s long", strings.ReplaceAll(o.Apparatus, "-", " "), quantity.FormatLength(o.Figure("bed length")))
		}
		if lot.SieveTreatment != "" {
			s += "; beads: " + oneLine(lot.SieveTreatment)
		} else if lot.SieveHistoryK > 0 {
			s += "; beads activated at " + quantity.FormatTemperature(lot.SieveHistoryK)
		} else if lot.SieveHistory != "" {
			s += "; beads: " + strings.ReplaceAll(lot.SieveHistory, "-", " ")
		}
		s += sieveWords(o, sieve)
		return s + "."
	case steps.Salt, steps.Reactive:
		return fmt.Sprintf("%s of %s on %s.", grams, agent, litres(o.In))
	case steps.Buy:
		return fmt.Sprintf("%s of dry grade, sealed.", quantity.FormatVolume(lot.BatchM3))
	}
	charges := o.Figure("still charges")
	if o.CarrierKg > 0 {
		return fmt.Sprintf("%s of %s to %s, in %s.", quantity.FormatMass(o.CarrierKg), l.agentName(o.Carrier), litres(o.In), counted(charges, "charge"))
	}
	if charges > 1 {
		return fmt.Sprintf("%s in %s charges.", litres(o.In), significant(charges))
	}
	return litres(o.In) + " in one charge."
}

// sieveWords say in what way a sieve is used and what becomes of it.
func sieveWords(o *steps.Outcome, sieve string) (s string) {
	if n := o.Figure("charges"); n > 1 {
		s = fmt.Sprintf("; in %s equal charges, one after the other", significant(n))
	}
	lots := o.Figure(steps.LotsServed)
	switch {
	case lots > 1 && sieve == routes.Regenerate:
		return s + fmt.Sprintf("; the same beads for %s lots, kept wet and shut, then to regeneration", significant(lots))
	case lots > 1:
		return s + fmt.Sprintf("; the same beads for %s lots, kept wet and shut, then given up", significant(lots))
	case sieve == routes.Regenerate:
		return s + "; drained beads go to regeneration"
	case sieve != "":
		return s + "; beads are used once"
	}
	return s
}

func counted(n float64, what string) string {
	if n == 1 {
		return "one " + what
	}
	return significant(n) + " " + what + "s"
}

func litres(lot steps.Lot) string { return quantity.FormatMass(lot.MassKg()) + " of the lot" }

func (l *layout) agentName(key string) string {
	if p, ok := l.report.Book[key]; ok && p.Label != "" {
		return p.Label
	}
	return strings.ReplaceAll(key, "-", " ")
}

// settingFigures are the figures of a step that are set or watched, by kind.
var settingFigures = map[steps.Kind][]string{
	steps.Settle:   {"settling time"},
	steps.Trap:     {"boiling temperature at the start", "heat-up, each charge", "reflux, each charge", "aqueous layer, each charge", "drainings, each charge"},
	steps.Forerun:  {"equilibrium stages of the column", "boiling temperature at the start", "boiling temperature at the end", "heat-up, each charge", "drawing off, each charge", "volume drawn off, each charge"},
	steps.Salt:     {"stirred or stood", "rinse"},
	steps.Soak:     {"vessels", "liquid height", "temperature rise if no heat is lost"},
	steps.Column:   {"superficial velocity", "contact time, empty bed", "pump time", "first runnings to return", "pressure drop"},
	steps.Reactive: {"charges", "heat-up, each charge", "reflux, each charge", "distillation, each charge", "heel", "hydrogen while drying"},
}

func settingWords(r *routeModel, o *steps.Outcome, stirred bool) string {
	var parts []string
	if o.Kind == steps.Soak {
		way := "still"
		if stirred {
			way = "stirred"
		}
		if n := len(o.Course); n > 0 {
			way += fmt.Sprintf(" for %s h", significant(o.Course[n-1].Hours))
		}
		parts = append(parts, way)
	}
	var each []string
	for _, name := range settingFigures[o.Kind] {
		v := o.Figure(name)
		if math.IsNaN(v) || math.IsInf(v, 0) || v == 0 {
			continue
		}
		short, ofCharge := strings.CutSuffix(name, ", each charge")
		said := strings.TrimSpace(fmt.Sprintf("%s %s %s", short, significant(v), unitOf(o, name)))
		if ofCharge {
			each = append(each, said)
		} else {
			parts = append(parts, said)
		}
	}
	if len(each) > 0 {
		parts = append(parts, "each charge: "+strings.Join(each, ", "))
	}
	if o.Condenser.RunM3PerS > 0 {
		parts = append(parts, fmt.Sprintf("cooling water %s L/min, warms by %s K", significant(o.Condenser.RunM3PerS*6e4), significant(o.Condenser.RunRiseK)))
	}
	if r.lot.Job.HeaterW > 0 && o.Kind.Heated() {
		parts = append(parts, "heater "+quantity.FormatPower(r.lot.Job.HeaterW))
	}
	if len(parts) == 0 {
		return ""
	}
	return strings.Join(parts, "; ") + "."
}

func unitOf(o *steps.Outcome, name string) string {
	for _, f := range o.Figures {
		if f.Name == name {
			return f.Unit
		}
	}
	return ""
}

// stepOnCard is how what is to be expected names a step, in the list and in its chart.
func stepOnCard(r *routeModel, i int) string {
	kind := string(r.Run.Outcomes[i].Kind)
	if len(r.Run.Outcomes) == 1 {
		return capital(kind)
	}
	return fmt.Sprintf("%d %s", i+1, kind)
}

// expectPoints is how many of the points each step with a course may take.
func expectPoints(r *routeModel, points int) int {
	n := 0
	for _, o := range r.Run.Outcomes {
		if len(o.Course) > 0 {
			n++
		}
	}
	return max(2, points/max(n, 1))
}

// expectations picks points evenly from the course of a step.
func expectations(name string, o *steps.Outcome, most int) (out []expected) {
	celsius := func(k float64) float64 {
		if k == 0 {
			return math.NaN()
		}
		return quantity.In(k, quantity.Temperature, "°C")
	}
	for _, i := range spaced(len(o.Course), most) {
		p := o.Course[i]
		e := expected{step: name, hours: p.Hours, collectedML: math.NaN(), water: p.Water * mgPerKg, pot: celsius(p.PotK), head: celsius(p.HeadK)}
		switch o.Kind {
		case steps.Trap:
			e.step, e.collectedML = name+": aqueous layer", p.AqueousM3*1e6
		case steps.Forerun:
			e.step, e.collectedML = name+": drawn off", p.DrawnM3*1e6
		case steps.Column:
			e.step = name + ": outlet"
		}
		out = append(out, e)
	}
	return out
}

// spaced picks most of n places evenly, the first and the last among them.
func spaced(n, most int) (out []int) {
	if n <= most {
		most = n
	}
	for i := range most {
		place := 0
		if most > 1 {
			place = (i*(n-1) + (most-1)/2) / (most - 1)
		}
		out = append(out, place)
	}
	return out
}

// leastWaste is the waste of a batch that a bench balance still shows, in kg or L: less
// needs no line of its own (common practice, no source).
const leastWaste = 1e-5

// wasteWords say where what is left goes, from the lines of the bill: a sentence for
// each bin.
func wasteWords(r *routeModel) (out []string) {
	var bins []string
	into := map[string][]string{}
	for _, line := range r.lines {
		if line.Head != steps.Waste || line.perBatch < leastWaste {
			continue
		}
		amount := significant(line.perBatch) + " " + symbol(line.Unit)
		if line.Unit == "kg" {
			amount = quantity.FormatMass(line.perBatch)
		}
		bin := capital(orWords(line.Label, line.Item))
		if into[bin] == nil {
			bins = append(bins, bin)
		}
		into[bin] = append(into[bin], amount+" of "+oneLine(line.Basis))
	}
	for _, bin := range bins {
		out = append(out, fmt.Sprintf("%s: %s.", bin, strings.Join(into[bin], "; ")))
	}
	if len(out) == 0 {
		out = append(out, "No waste is counted for this route; what is spilt or drained goes to the site's solvent waste.")
	}
	return out
}

// mostNever reasons stand on a card; Compare lists all pairs.
const mostNever = 4

// neverWords name the agents that must not meet the solvent, by the reason, the
// dangerous first.
func neverWords(r *routeModel) []string {
	dangerous, unsuitable := &byReason{}, &byReason{}
	for _, x := range r.lot.Excluded {
		_, agent, ok := strings.Cut(x.ID, ":")
		if !ok || strings.Contains(x.ID, "+") {
			continue
		}
		agent = strings.ReplaceAll(agent, "-", " ")
		switch reason := oneLine(x.Reason); {
		case strings.HasPrefix(reason, "dangerous"):
			dangerous.add(agent, reason)
		case strings.HasPrefix(reason, "unsuitable") && strings.HasPrefix(x.ID, string(steps.Reactive)):
			unsuitable.add(agent, reason)
		}
	}
	out := slices.Concat(dangerous.sentences(), unsuitable.sentences())
	out = out[:min(len(out), mostNever)]
	if len(out) == 0 {
		out = append(out, "No pair is refused as dangerous here beyond the cautions above; keep acids, bases and oxidizers away.")
	}
	return out
}

// byReason are agents by the reason for which they are refused, in the order in which
// the reasons come.
type byReason struct {
	reasons []string
	agents  map[string][]string
}

func (b *byReason) add(agent, reason string) {
	if b.agents == nil {
		b.agents = map[string][]string{}
	}
	if b.agents[reason] == nil {
		b.reasons = append(b.reasons, reason)
	}
	if !slices.Contains(b.agents[reason], agent) {
		b.agents[reason] = append(b.agents[reason], agent)
	}
}

func (b *byReason) sentences() (out []string) {
	for _, reason := range b.reasons {
		out = append(out, fmt.Sprintf("%s: %s.", capital(strings.Join(b.agents[reason], ", ")), reason))
	}
	return out
}

// labelWords are what the label of the dry lot says.
func (l *layout) labelWords(lot *lotModel) []string {
	name := lot.solventName()
	parts := []string{capital(name)}
	if s := lot.Solvent; s != nil {
		if s.CAS != "" {
			parts = append(parts, "CAS "+s.CAS)
		}
		if s.Hazards.Flammability != "" {
			parts = append(parts, s.Hazards.Flammability)
		}
	}
	label := "Label: " + strings.Join(append(parts, "dried for "+oneLine(lot.Job.Name), "water as read, date of the reading, name"), "; ")
	if s := lot.Solvent; s != nil && s.Hazards.PeroxideClass != "" && s.Hazards.PeroxideClass != "none" {
		label += "; forms peroxides (class " + s.Hazards.PeroxideClass + "): date of the last test and of the next"
	}
	out := []string{label + ".", "Store closed, cool and dark, under dry gas; air that is drawn in with each litre brings water."}
	if best := lot.best(); best != nil {
		for _, s := range best.Route.Warnings {
			if strings.HasPrefix(s, "kept under room air") {
				out[1] = sentence(s)
			}
		}
	}
	return out
}
