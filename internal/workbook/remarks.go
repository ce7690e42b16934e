package workbook

import (
	"fmt"
	"slices"
	"strings"

	"parch/internal/costs"
)

// remark is a text that holds for some routes of some lots.
type remark struct {
	level, text string
	routes      map[int][]string // ids by lot number; none: the whole lot
}

// remarks collects texts, each once, in the order in which they come.
type remarks struct{ all []*remark }

func (rs *remarks) add(level, text string, lot int, routes ...string) {
	text = oneLine(text)
	if text == "" {
		return
	}
	for _, r := range rs.all {
		if r.level == level && r.text == text {
			r.routes[lot] = append(r.routes[lot], routes...)
			return
		}
	}
	rs.all = append(rs.all, &remark{level, text, map[int][]string{lot: routes}})
}

// mostLotsNamed lots are named beside a text that holds for routes of each.
const mostLotsNamed = 4

// whom names lots and routes in as few words as possible.
func (l *layout) whom(r *remark) string {
	var parts []string
	every := true
	for _, lot := range l.lots {
		ids, ok := r.routes[lot.no]
		switch {
		case !ok:
			every = every && len(lot.routes) == 0
		case len(ids) == 0:
			parts, every = append(parts, lot.Job.Name), false
		case len(ids) == len(lot.routes):
			parts = append(parts, lot.Job.Name+": every route")
		default:
			parts, every = append(parts, lot.Job.Name+": "+listed(ids, mostListed/min(len(r.routes), mostLotsNamed))), false
		}
	}
	if every && len(parts) > 0 {
		return "every route"
	}
	if len(parts) > mostLotsNamed {
		parts = append(parts[:mostLotsNamed], fmt.Sprintf("and %d lots more", len(parts)-mostLotsNamed))
	}
	return strings.Join(parts, "; ")
}

// Columns of the lists of text: a word, routes, running text.
const (
	listRoutes = 2
	listText   = 7
)

// listSpared is the share of its room that a list is laid out in: other typefaces are wider.
const listSpared = 0.92

// listBlock starts a list of text and returns the row of its first entry.
func (l *layout) listBlock(g *grid, name, a, b, c string) int {
	row := max(g.last(), g.drawnTo()) + 2
	g.put(1, row, text(block, name))
	g.entry(row+1, heading, a, b, c)
	return row + 2
}

// entry writes a row of a list: its texts run over as many columns as they need.
func (g *grid) entry(row int, l look, a, b, c string) {
	g.put(1, row, text(l, oneLine(a)))
	g.across(listRoutes, listText-1, row, l, b)
	if l != heading {
		g.put(listRoutes, row, text(l, lined(b, g.roomFor(listRoutes, row)*listSpared, paints[l].size)))
	}
	g.across(listText, g.printColumns, row, l, c)
}

func cited(s, source string) string {
	if source == "" {
		return s
	}
	return s + " [" + source + "]"
}

var levels = []string{"danger", "caution", "info"}

// cautionBlock lists each caution once, the gravest first, with the routes it is for.
func (l *layout) cautionBlock(g *grid) {
	var rs remarks
	for _, r := range l.routes {
		for _, c := range r.Cautions {
			rs.add(c.Level, cited(c.Text, c.Source), r.lot.no, r.ID)
		}
	}
	if len(rs.all) == 0 {
		return
	}
	slices.SortStableFunc(rs.all, func(a, b *remark) int { return slices.Index(levels, a.level) - slices.Index(levels, b.level) })
	row := l.listBlock(g, "Cautions: site rules, safety data sheets, local codes and licensed practice decide", "Level", "Lots and routes", "Caution and source")
	for _, r := range rs.all {
		g.entry(row, words, r.level, l.whom(r), r.text)
		row++
	}
}

// priceDoubts says what kinds of prices to check a route's total rests on.
func (l *layout) priceDoubts(r *routeModel) (texts []string) {
	for _, flag := range []costs.Flag{costs.Expired, costs.Old, costs.Undated, costs.Indicative} {
		if slices.ContainsFunc(r.lines, func(line lineModel) bool { return l.report.Book[line.Item].Flag == flag }) {
			texts = append(texts, "the total rests on prices that are "+string(flag)+"; Prices marks which")
		}
	}
	return texts
}

// noteBlock says what must be known of a lot or a route besides its numbers.
func (l *layout) noteBlock(g *grid) {
	var rs remarks
	for _, lot := range l.lots {
		for _, s := range append([]string{lot.NothingToDo, lot.CannotShow}, lot.Warnings...) {
			rs.add("lot", s, lot.no)
		}
	}
	for _, r := range l.routes {
		for _, s := range slices.Concat(r.Route.Warnings, r.Run.Warnings, l.priceDoubts(r)) {
			rs.add("route", s, r.lot.no, r.ID)
		}
	}
	if len(rs.all)+len(l.report.Warnings) == 0 {
		return
	}
	row := l.listBlock(g, "Notes", "About", "Lots and routes", "Note")
	for _, s := range l.report.Warnings {
		g.entry(row, words, "job", l.report.Job.File, s)
		row++
	}
	for _, r := range rs.all {
		g.entry(row, words, r.level, l.whom(r), r.text)
		row++
	}
}
