package workbook

import (
	"fmt"
	"math"
	"slices"
	"strings"
	"time"

	"parch/internal/costs"
	"parch/internal/quantity"
	"parch/internal/steps"
)

// best is the route to take, nil where there is none.
func (lot *lotModel) best() *routeModel {
	b := lot.Best()
	if b == nil {
		return nil
	}
	for _, r := range lot.routes {
		if r.ID == b.ID {
			return r
		}
	}
	return nil
}

// asked says what the lot is and what is asked of it.
func (lot *lotModel) asked() string {
	return fmt.Sprintf("%s of %s, %s batches a year, from %s to %s; accepted at or below %s", quantity.FormatVolume(lot.Job.BatchM3), lot.solventName(),
		significant(lot.batches), quantity.FormatWater(lot.Job.Water), quantity.FormatWater(lot.Job.Target), waterOr(lot.AcceptAt, "nothing: the target cannot be shown"))
}

func waterOr(kgPerKg float64, none string) string {
	if math.IsNaN(kgPerKg) {
		return none
	}
	return quantity.FormatWater(kgPerKg)
}

// verdict is the recommended route in a sentence with its reason.
func (l *layout) verdict(lot *lotModel) string {
	best := lot.best()
	if best == nil {
		return noVerdict(lot)
	}
	reach := 0
	for _, r := range lot.routes {
		if r.Rank > 0 {
			reach++
		}
	}
	text := fmt.Sprintf("%s (%s): %s; %s h in all", capital(best.Label), best.ID, l.aim(best, reach), significant(best.Run.HoursTotal))
	if head, share := largest(best); share > 0 {
		text += fmt.Sprintf("; %.0f %% of the cost is %s", 100*share, strings.ToLower(headNames[head]))
	}
	text += "."
	for _, r := range lot.Unsure() {
		text += fmt.Sprintf(" %s stands before it and is not recommended: %s.", r.ID, r.WhyNot)
	}
	return text
}

func noVerdict(lot *lotModel) string {
	switch {
	case lot.NothingToDo != "":
		return capital(lot.NothingToDo) + "."
	case len(lot.routes) == 0 && len(lot.NoPrice) > 0:
		return "Routes reach the limit, but none has all its prices: no price for " + strings.Join(lot.NoPrice, ", ") + ". Give those in the job and run parch again."
	case len(lot.routes) == 0:
		return "No route can be offered; the reasons stand on Compare."
	case lot.CannotShow != "":
		return "No route can be recommended: the target " + lot.CannotShow + "."
	}
	nearest := lot.routes[0]
	return fmt.Sprintf("No route reaches the target. The nearest, %s, leaves %s.", nearest.ID, quantity.FormatWater(nearest.Run.WaterOut))
}

func (l *layout) aim(best *routeModel, reach int) string {
	aims := map[string]string{"cost": "the lowest cost per litre", "time": "the shortest time", "waste": "the least waste", "energy": "the least energy"}
	of := fmt.Sprintf("of %d routes that reach the limit", reach)
	switch {
	case reach == 1:
		return "the only route that reaches the limit"
	case best.Rank > 1:
		return aims[l.report.Job.Objective] + " among those sure enough, " + of
	}
	return aims[l.report.Job.Objective] + " " + of
}

func capital(s string) string {
	if s == "" {
		return s
	}
	r := []rune(s)
	return strings.ToUpper(string(r[:1])) + string(r[1:])
}

// largest is the head that most of the cost falls to, and its share.
func largest(r *routeModel) (steps.Head, float64) {
	most := 0
	for h := range r.heads {
		if r.heads[h] > r.heads[most] {
			most = h
		}
	}
	if r.total <= 0 {
		return steps.Heads[most], 0
	}
	return steps.Heads[most], r.heads[most] / r.total
}

// hazards are what must be known of the solvent, then the cautions of the route,
// the gravest first.
func hazards(lot *lotModel, r *routeModel) (parts []string) {
	if s := lot.Solvent; s != nil {
		h := s.Hazards
		var facts []string
		for _, fact := range []string{h.Flammability, h.Toxicity} {
			if fact != "" {
				facts = append(facts, fact)
			}
		}
		if h.PeroxideClass != "" && h.PeroxideClass != "none" {
			facts = append(facts, "forms peroxides (class "+h.PeroxideClass+")")
		}
		if len(facts) > 0 {
			parts = append(parts, capital(lot.solventName())+": "+strings.Join(facts, "; ")+".")
		}
	}
	return append(parts, cautionTexts(r, "danger", "caution")...)
}

// shared are cautions that hold for the same lots.
type shared struct {
	lots  []string // their numbers
	texts []string
}

// sharedCautions are those of the recommended routes of at least two lots, grouped by
// the lots, the most lots first.
func sharedCautions(lots []*lotModel) (groups []shared) {
	byText, order := map[string][]string{}, []string{}
	for _, lot := range lots {
		best := lot.best()
		if best == nil {
			continue
		}
		for _, s := range hazards(lot, best) {
			if byText[s] == nil {
				order = append(order, s)
			}
			if no := fmt.Sprint(lot.no); !slices.Contains(byText[s], no) {
				byText[s] = append(byText[s], no)
			}
		}
	}
	for _, s := range order {
		of := byText[s]
		if len(of) < 2 {
			continue
		}
		i := slices.IndexFunc(groups, func(g shared) bool { return slices.Equal(g.lots, of) })
		if i < 0 {
			i, groups = len(groups), append(groups, shared{lots: of})
		}
		groups[i].texts = append(groups[i].texts, s)
	}
	sortBy(groups, func(g shared) float64 { return -float64(len(g.lots)) })
	return groups
}

// ownHazards are those of a lot that no other lot shares.
func ownHazards(lot *lotModel, all []*lotModel) []string {
	said := sharedCautions(all)
	return slices.DeleteFunc(slices.Clone(hazards(lot, lot.best())), func(s string) bool {
		return slices.ContainsFunc(said, func(g shared) bool { return slices.Contains(g.texts, s) })
	})
}

func cautionTexts(r *routeModel, levels ...string) (out []string) {
	for _, level := range levels {
		for _, c := range r.Cautions {
			if c.Level == level {
				out = append(out, oneLine(c.Text))
			}
		}
	}
	return out
}

// turns are the break-evens of a lot, at most as many as given.
func turns(lot *lotModel, most int) string {
	var parts []string
	for _, b := range lot.BreakEvens {
		if b.Answer != "" && !b.Never && len(parts) < most {
			parts = append(parts, sentence(capital(strings.TrimSuffix(oneLine(b.What), ", at which the best route changes"))+": "+b.Answer))
		}
	}
	if len(lot.BreakEvens) > 0 && len(parts) == 0 {
		return "Nothing within the ranges that were searched; see Ranges."
	}
	if len(parts) == 0 {
		return "No break-evens were sought in this run; see the cost against litres a month on Ranges."
	}
	return strings.Join(parts, " ")
}

func sentence(s string) string {
	s = capital(strings.TrimSpace(s))
	if strings.HasSuffix(s, ".") {
		return s
	}
	return s + "."
}

// doubts are what the result turns on, the strongest first, at most as many as given.
// Ranges says in full what each spread rests on.
func doubts(lot *lotModel, r *routeModel, most int) string {
	var parts []string
	for _, m := range lot.Doubts[:min(len(lot.Doubts), most)] {
		parts = append(parts, fmt.Sprintf("%s moves the %s (%+.2f; %s)", m.Input, m.Of, m.Correlation, inShort(m.Why)))
	}
	if len(parts) > 0 {
		return sentence("By rank correlation: " + strings.Join(parts, "; "))
	}
	if len(parts) == 0 {
		for _, o := range r.Run.Outcomes {
			if o.RuledBy != "" {
				parts = append(parts, fmt.Sprintf("%s: %s", o.Kind, o.RuledBy))
			}
		}
	}
	if len(parts) == 0 {
		return "None named."
	}
	return sentence(strings.Join(parts, "; "))
}

// inShort keeps of a remark in brackets what kind of figure it is, not all that it
// rests on.
func inShort(s string) string {
	head, rest, bracketed := strings.Cut(oneLine(s), " (")
	if !bracketed {
		return head
	}
	kind, _, several := strings.Cut(rest, ":")
	if !several {
		return oneLine(s)
	}
	return head + ", " + kind
}

// assumed is a figure that the recommendation rests on.
type assumed struct {
	what, value, rests string
	date               string
	weight             float64 // money a year that rests on it
}

// assumptions are the prices that carry most of the recommended routes, the
// heaviest first.
func (l *layout) assumptions(most int) []assumed {
	weight := map[string]float64{}
	for _, lot := range l.lots {
		if best := lot.best(); best != nil {
			for _, line := range best.lines {
				weight[line.Item] += line.amount * lot.batches
			}
		}
	}
	var out []assumed
	for _, item := range sortedKeys(weight) {
		p := l.report.Book[item]
		rests := ownOrDefault(p)
		if mark := priceMark(p); mark != "" {
			rests += "; " + mark
		} else if p.Flag != costs.NoFlag {
			rests += "; " + string(p.Flag)
		}
		out = append(out, assumed{"price of " + p.Label, fmt.Sprintf("%s %s", significantMoney(p), l.money(p.Unit)), rests, p.Date, weight[item]})
	}
	sortBy(out, func(a assumed) float64 { return -a.weight })
	return out[:min(len(out), most)]
}

func significantMoney(p costs.Price) string { return quantity.Significant(float(p.PerUnit), 5) }

// ageDays counts the days from a date to the day of the run; NaN where there is none.
func (l *layout) ageDays(date string) float64 {
	then, err1 := time.Parse(time.DateOnly, date)
	now, err2 := time.Parse(time.DateOnly, l.runDate())
	if err1 != nil || err2 != nil {
		return math.NaN()
	}
	return math.Round(now.Sub(then).Hours() / 24)
}
