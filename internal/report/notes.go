package report

import (
	"slices"
	"strings"

	"parch/catalog"
	"parch/internal/study"
)

// levels orders cautions, the gravest first.
var levels = []string{"danger", "caution", "info"}

// cautions prints each caution of a lot once, naming the routes where it does
// not hold for all.
func (p *page) cautions(l *study.Lot) {
	var all []catalog.Caution
	holds := map[string]map[string]bool{} // code, route id
	for i := range l.Routes {
		for _, c := range l.Routes[i].Cautions {
			if holds[c.Code] == nil {
				holds[c.Code] = map[string]bool{}
				all = append(all, c)
			}
			holds[c.Code][l.Routes[i].ID] = true
		}
	}
	if len(all) == 0 {
		return
	}
	slices.SortStableFunc(all, func(a, b catalog.Caution) int {
		return slices.Index(levels, a.Level) - slices.Index(levels, b.Level)
	})
	p.heading("Cautions:")
	for _, c := range all {
		p.say(5, 4, "%s, %s: %s%s%s", c.Level, c.Code, c.Text, cite(c.Source), scope(l, holds[c.Code]))
	}
}

// warningsOf joins the warnings of a route and of its run, each once.
func warningsOf(r *study.Route) []string {
	var all []string
	for _, w := range slices.Concat(r.Warnings, r.Run.Warnings) {
		if !slices.Contains(all, w) {
			all = append(all, w)
		}
	}
	return all
}

// lotWarnings joins the warnings of a lot and of its routes, each once.
func (p *page) lotWarnings(l *study.Lot) []string {
	var texts []string
	holds := map[string]map[string]bool{} // text, route id
	reach, _ := p.first(ranked(l), firstRanked)
	miss, _ := p.first(missed(l), firstMissed)
	for _, route := range slices.Concat(reach, miss) {
		for _, w := range warningsOf(route) {
			if holds[w] == nil {
				holds[w] = map[string]bool{}
				texts = append(texts, w)
			}
			holds[w][route.ID] = true
		}
	}
	all := slices.DeleteFunc(slices.Clone(l.Warnings), func(w string) bool {
		return l.CannotShow != "" && w == "target "+l.CannotShow // stands at the head of the lot
	})
	for _, w := range texts {
		if !slices.Contains(l.Warnings, w) {
			all = append(all, w+scope(l, holds[w]))
		}
	}
	return all
}

func (p *page) notes(heading string, notes []string) {
	if len(notes) == 0 {
		return
	}
	p.heading(heading + ":")
	for _, n := range notes {
		p.say(5, 4, "%s", n)
	}
}

// weakShown is how many weak numbers of a kind the terminal shows; the workbook
// lists them all.
const weakShown = 12

// weak names the numbers that rest on memory, practice or an assumption.
func (p *page) weak(weak []study.Weak) {
	if len(weak) == 0 {
		return
	}
	p.line("")
	heading := "Numbers that do not rest on a published source:"
	if slices.ContainsFunc(weak, func(w study.Weak) bool { return strings.HasPrefix(w.Confidence, ownMark) }) {
		heading = "Numbers that do not rest on a published source, or are your own:"
	}
	p.say(0, 0, "%s", heading)
	var grades []string
	by := map[string][]string{}
	for _, w := range weak {
		if by[w.Confidence] == nil {
			grades = append(grades, w.Confidence)
		}
		by[w.Confidence] = append(by[w.Confidence], strings.TrimSpace(w.What+" "+w.Value))
	}
	for _, grade := range grades {
		items := by[grade]
		more := ""
		if len(items) > weakShown {
			more = "; and " + count(float64(len(items)-weakShown), "more", "more") + " on the sheet Sources of the workbook"
			items = items[:weakShown]
		}
		p.say(2, 2, "%s: %s%s", grade, strings.Join(items, "; "), more)
	}
}
