package workbook

import (
	"fmt"
	"math"
)

// Columns of a card. What the card shows for each route stands to the right of
// it, off the printed page; a card takes the column of the chosen route.
const (
	cardLabel  = 1
	cardText   = 2
	cardFirst  = 3 // hours, mL, mg/kg, pot, head
	cardLast   = 7 // of these
	cardField  = 8
	cardChosen = 9
	cardTime   = 10 // of the chart, h
	cardWater  = 11 // of the chart, mg/kg
	cardLevel  = 12 // acceptance limit, as drawn
	cardHelper = 13
)

// cardRouteEnd is the last column of the chosen route: an id of four steps is long.
const cardRouteEnd = cardFirst + 1

const (
	mostOnCard = 8  // routes
	cardPoints = 16 // of the chart
)

// What each route holds to the right of a card, in as many columns as there are
// routes.
const (
	helperText   = 0
	helperExpect = 1 // five figures
	helperName   = 6 // of the chart
	helperTime   = 7
	helperWater  = 8
	cardFigures  = 9
)

func (l *layout) benchCard() *grid {
	widths := []float64{18, 34, 7.5, 10, 9.5, 9, 8, 12, 14, 10, 10, 10}
	for range cardFigures * mostOnCard {
		widths = append(widths, 14)
	}
	g := newGrid(sheetBenchCard, "One printed side for each lot. Choose the route in the blue cell; the card follows. To the right stands what the card chooses from.",
		tabResult, checkCell(), widths...)
	g.mixed, g.frozenRows, g.portrait, g.printColumns = true, frameRows, true, cardField
	for _, lot := range l.lots {
		if len(lot.routes) > 0 {
			points, pixels := l.pointsThatFit(g, lot)
			l.card(g, lot, points, pixels)
		}
	}
	if len(g.printed) == 0 {
		g.put(1, g.next(), text(plain, "No lot has a route: there is nothing to put on a card."))
	}
	g.percent = g.cardScale()
	return g
}

// Rows of what to expect on a card: as many as its page holds in letters that can be
// read.
const (
	mostExpected  = 10
	leastExpected = 8
)

// expectHeights are those of the rows of what to expect and of the chart beside them, in
// pixels: as high as the page has room for without smaller letters, for a hand to write in.
var expectHeights = []int{30, 27, 24, 21}

func (l *layout) pointsThatFit(g *grid, lot *lotModel) (points, pixels int) {
	trial := func(points, pixels int) (*grid, rows) {
		g := &grid{widths: g.widths, printColumns: g.printColumns, heights: map[int]float64{}}
		l.card(g, lot, points, pixels)
		return g, g.printed[0]
	}
	for _, pixels := range expectHeights {
		if card, r := trial(mostExpected, pixels); card.pageScale(r) >= card.pageScale(rows{}) {
			return mostExpected, pixels
		}
	}
	for points := mostExpected; points > leastExpected; points-- {
		if card, r := trial(points, cardRowHeight); card.legible(r) {
			return points, cardRowHeight
		}
	}
	return leastExpected, cardRowHeight
}

// onCard are the routes that a card can be chosen for: the first of each chain of
// steps, and the first by rank.
func (lot *lotModel) onCard() []*routeModel {
	list := lot.unlike(mostOnCard)
	for _, r := range lot.routes {
		if len(list) < mostOnCard && !contains(list, r) && r.rank > 0 {
			list = append(list, r)
		}
	}
	sortBy(list, func(r *routeModel) float64 { return float64(r.no) })
	if best := lot.best(); best != nil && !contains(list, best) {
		list[len(list)-1] = best
	}
	return list
}

func contains(list []*routeModel, r *routeModel) bool {
	for _, x := range list {
		if x == r {
			return true
		}
	}
	return false
}

// cardModel is a card being laid out.
type cardModel struct {
	g      *grid
	lot    *lotModel
	list   []*routeModel
	words  []cardWords
	chosen int    // of list
	index  string // cell with the number of the chosen route
}

// helper is the column of a figure of a route.
func (c *cardModel) helper(figure, route int) int { return cardHelper + figure*mostOnCard + route }

// choose shows the value that the chosen route has in a row.
func (c *cardModel) choose(column, row, figure int, l look, format, unit string, values []any) {
	for k, v := range values {
		x := cell{look: plain, value: v}
		if f, ok := v.(float64); ok {
			values[k] = cutTo(f, shownDigits)
			x = cell{look: program, value: values[k], unit: unit, format: format}
		}
		c.g.put(c.helper(figure, k), row, x)
	}
	from := fmt.Sprintf("$%s%d:$%s%d", columnName(c.helper(figure, 0)), row, columnName(c.helper(figure, len(c.list)-1)), row)
	v := values[c.chosen]
	out := cell{look: l, formula: fmt.Sprintf("INDEX(%s,%s)", from, c.index), value: v, unit: unit}
	if format != "" { // a number, or a dash below numbers
		out.format, out.right = numberOrWords(format), true
	}
	c.g.put(column, row, out)
}

// heads writes the headings over what the routes hold of a figure.
func (c *cardModel) heads(row, figure int, x column) {
	for k, r := range c.list {
		h := text(heading, column{r.ID + ", " + x.name, x.unit}.heading())
		h.right = true
		c.g.put(c.helper(figure, k), row, h)
	}
}

const dash = "–"

func (l *layout) card(g *grid, lot *lotModel, points, pixels int) {
	c := &cardModel{g: g, lot: lot, list: lot.onCard()}
	for k, r := range c.list {
		c.words = append(c.words, l.cardWords(r, points))
		if r == lot.best() {
			c.chosen = k
		}
	}
	first := g.next()
	l.cardTop(c, first)
	c.texts("Stop checks", "done", func(w cardWords) []string { return w.stops })
	c.texts("Charge", "", func(w cardWords) []string { return w.charge })
	c.texts("Set points", "", func(w cardWords) []string { return w.settings })
	c.texts("When to stop", "", func(w cardWords) []string { return w.until })
	beside := c.expectRows()
	l.cardChart(c, first+4, beside, points, pixels)
	l.testRowsOf(c)
	g.fixedTexts("Storage, label", l.labelWords(lot))
	c.texts("Waste, a batch", "weighed", func(w cardWords) []string { return w.waste })
	c.texts("Never mix", "read", func(w cardWords) []string { return w.never })
	g.signFields()
	g.printed = append(g.printed, rows{first, g.last()})
}

func (l *layout) cardTop(c *cardModel, row int) {
	g, lot := c.g, c.lot
	g.across(1, cardField, row, block, fmt.Sprintf("Bench card, lot %d: %s", lot.no, shortened(lot.Job.Name, mostTitle)))
	g.put(cardLabel, row+1, text(plain, "Route"))
	for column := cardText; column <= cardRouteEnd; column++ {
		g.put(column, row+1, blank(input))
	}
	g.put(cardText, row+1, text(input, c.list[c.chosen].ID))
	g.merged = append(g.merged, merge{row + 1, cardText, cardRouteEnd})
	for k, r := range c.list {
		g.put(c.helper(0, k), row+1, text(plain, r.ID))
	}
	choices := fixed(c.helper(0, 0), row+1) + ":" + fixed(c.helper(0, len(c.list)-1), row+1)
	c.index = fixed(cardChosen, row+1)
	g.put(cardChosen, row+1, derived(fmt.Sprintf("IFERROR(MATCH(%s,%s,0),1)", at(cardText, row+1), choices), float64(c.chosen+1)).shown("0"))
	g.limits = append(g.limits, limit{place: at(cardText, row+1) + ":" + at(cardRouteEnd, row+1), words: choices, prompt: "Choose the route that the card is for.", refuse: "Choose a route from the list."})
	state := fmt.Sprintf(`IF(%s>0,"Edited since the run: %s","Run of "&%s)`, changedName, runAgain, c.dateCell(row+2))
	g.put(cardRouteEnd+1, row+1, cell{look: formula, formula: state, value: "Run of " + l.runDate()})
	g.put(cardChosen, row+2, text(plain, l.runDate()))
	g.flags = append(g.flags, flag{at(cardRouteEnd+1, row+1) + ":" + at(cardField, row+1), changedName + ">0", fail},
		flag{at(cardText, row+4), changedName + ">0", fail})
	g.put(cardLabel, row+2, text(words, "In words"))
	values := make([]any, len(c.list))
	for k, r := range c.list {
		values[k] = capital(r.Label) + ". " + capital(lot.asked()) + "."
	}
	c.chooseAcross(cardField, row+2, values)
	l.cardFacts(c, row+3)
}

func (c *cardModel) dateCell(row int) string { return fixed(cardChosen, row) }

// cardFacts are the figures of the lot, which follow the inputs.
func (l *layout) cardFacts(c *cardModel, row int) {
	lot := c.lot
	c.g.put(cardLabel, row, text(heading, "The lot"))
	c.g.put(cardText, row, text(heading, "follows the sheet Inputs"))
	c.g.put(cardLabel, row+1, text(words, lot.solventName()))
	state := fmt.Sprintf(`IF(%s>0,"Edited since: %s. Below stands the run.","Amounts below are those of the run.")`, changedName, runAgain)
	c.g.put(cardText, row+1, cell{look: words, formula: state, value: "Amounts below are those of the run."})
	for i, f := range []struct {
		name, unit string
		v          float64
		of         string
	}{{"Batch", "L", lot.batchLitres, "batch_litres"}, {"Start", "mg/kg", lot.start, "start_water"}, {"Target", "mg/kg", lot.target, "target_water"}, {"Accept", "mg/kg", lot.acceptAt, "accept_limit"}} {
		h := text(heading, column{f.name, f.unit}.heading())
		h.right = true
		c.g.put(cardFirst+i, row, h)
		c.g.put(cardFirst+i, row+1, derived(l.lotName(lot, f.of), f.v).in(f.unit).shown(formatFor(f.v)))
	}
	for _, column := range []int{cardFirst + 4, cardField} {
		c.g.put(column, row, blank(heading))
	}
	c.g.heights[row] = linesHigh(2)
}

// chooseAcross shows a text of the chosen route over the columns up to the last, in
// a row that has room for its longest choice.
func (c *cardModel) chooseAcross(last, row int, values []any) {
	c.choose(cardText, row, helperText, words, "", "", values)
	for column := cardText + 1; column <= last; column++ {
		c.g.put(column, row, blank(words))
	}
	c.g.merged = append(c.g.merged, merge{row, cardText, last})
	c.fit(cardText, row, values)
}

// fit gives a row the height of its longest choice.
func (c *cardModel) fit(column, row int, values []any) {
	lines := 1
	for _, v := range values {
		if s, ok := v.(string); ok {
			lines = max(lines, wrapped(s, c.g.roomFor(column, row), paints[words].size, false))
		}
	}
	c.g.heights[row] = linesHigh(lines)
}

// texts is a part of a card whose sentences differ by route.
func (c *cardModel) texts(label, tick string, of func(cardWords) []string) {
	most := 0
	for _, w := range c.words {
		most = max(most, len(of(w)))
	}
	row := c.g.last() + 1
	c.head(row, label, tick)
	for i := range most {
		row++
		values := make([]any, len(c.list))
		for k, w := range c.words {
			values[k] = dash
			if list := of(w); i < len(list) {
				values[k] = clean(oneLine(list[i]))
			}
		}
		c.g.put(cardLabel, row, text(plain, fmt.Sprintf("%d)", i+1)))
		if tick == "" {
			c.chooseAcross(cardField, row, values)
			continue
		}
		c.chooseAcross(cardLast, row, values)
		c.g.put(cardField, row, blank(field))
	}
}

// head starts a part of a card.
func (c *cardModel) head(row int, label, last string) {
	c.g.put(cardLabel, row, text(heading, label))
	for column := cardText; column < cardField; column++ {
		c.g.put(column, row, blank(heading))
	}
	c.g.put(cardField, row, text(heading, last))
}

// fixedTexts is a part of a card that is the same for all routes.
func (g *grid) fixedTexts(label string, list []string) {
	row := g.last() + 1
	for column := cardLabel; column <= cardField; column++ {
		g.put(column, row, blank(heading))
	}
	g.put(cardLabel, row, text(heading, label))
	for i, s := range list {
		row++
		g.put(cardLabel, row, text(plain, fmt.Sprintf("%d)", i+1)))
		g.across(cardText, cardField, row, words, s)
	}
}

var expectColumns = []column{{"Time", "h"}, {"Collected", "mL"}, {"Water", "mg/kg"}, {"Pot", "°C"}, {"Head", "°C"}}

// expectRows list what is to be seen at which time of a step. They leave room for a
// chart between the step and its figures, from the row returned.
func (c *cardModel) expectRows() (first int) {
	row := c.g.last() + 1
	c.head(row, "Expect, from the start of the step", "measured")
	c.g.put(cardText, row, text(heading, "Water in the first step that boils, else the first known; each charge alike"))
	for i, x := range expectColumns {
		h := text(heading, x.heading())
		h.right = true
		c.g.put(cardFirst+i, row, h)
		c.heads(row, helperExpect+i, x)
	}
	c.g.heights[row] = linesHigh(2)
	first = row + 1
	most := 1
	for _, w := range c.words {
		most = max(most, len(w.expect))
	}
	formats := c.expectFormats()
	for i := range most {
		row++
		c.g.put(cardField, row, blank(field))
		c.expectRow(row, i, formats)
	}
	return first
}

func (e expected) figures() [5]float64 {
	return [5]float64{e.hours, e.collectedML, e.water, e.pot, e.head}
}

func (c *cardModel) expectFormats() (out [5]string) {
	for f := range out {
		var all []float64
		for _, w := range c.words {
			for _, e := range w.expect {
				if v := e.figures()[f]; !math.IsNaN(v) && v >= 1 {
					all = append(all, tidy(v))
				}
			}
		}
		out[f] = formatFor(all...)
	}
	out[0], out[3], out[4] = "0.00", "0.0", "0.0"
	return out
}

func (c *cardModel) expectRow(row, i int, formats [5]string) {
	steps := make([]any, len(c.list))
	for k, w := range c.words {
		steps[k] = dash
		if i < len(w.expect) {
			steps[k] = w.expect[i].step
		}
	}
	c.choose(cardLabel, row, helperText, words, "", "", steps)
	c.fit(cardLabel, row, steps)
	for f := range expectColumns {
		values := make([]any, len(c.list))
		for k, w := range c.words {
			values[k] = dash
			if i < len(w.expect) && !math.IsNaN(w.expect[i].figures()[f]) {
				values[k] = w.expect[i].figures()[f]
			}
		}
		c.choose(cardFirst+f, row, helperExpect+f, formula, formats[f], expectColumns[f].unit, values)
	}
}

func (l *layout) testRowsOf(c *cardModel) {
	lot := c.lot
	say := fmt.Sprintf("Karl Fischer, %s: accept a mean of %d injections at or below %s (%s less %s for uncertainty).",
		l.report.Job.Site.KarlFischer, lot.Injections, waterOr(lot.AcceptAt, "–"), significant(lot.target), significant(lot.uncertainty))
	if lot.CannotShow != "" {
		say = "Karl Fischer: the target " + oneLine(lot.CannotShow) + "."
	}
	c.g.fixedTexts("Test", []string{say})
	row := c.g.last() + 1
	c.g.put(cardLabel, row, text(words, "Readings / (mg/kg)"))
	c.g.put(cardText, row, text(words, "Injections one by one, then their mean; drift of the cell; sample weighed"))
	for column := cardFirst; column <= cardField; column++ {
		c.g.put(column, row, blank(field))
	}
	c.g.heights[row] = max(signHeight, linesHigh(2))
}

// signFields are left open: two in a row, each a label and a field.
func (g *grid) signFields() {
	row := g.last() + 1
	for i, labels := range [][2]string{{"Operator, date", "Started, ended at"}, {"Litres out, mg/kg", "Released by, date"}} {
		g.put(cardLabel, row+i, text(words, labels[0]))
		g.put(cardText, row+i, blank(field))
		g.across(cardFirst, cardFirst+1, row+i, words, labels[1])
		for column := cardFirst + 2; column <= cardField; column++ {
			g.put(column, row+i, blank(field))
		}
		g.merged = append(g.merged, merge{row + i, cardFirst + 2, cardField})
		g.heights[row+i] = signHeight
	}
}
