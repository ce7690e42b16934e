package workbook

import (
	"fmt"
	"regexp"
	"slices"
	"strconv"
	"strings"
)

// mostListed is how many characters a list of routes takes that a text is for: hundreds
// of chains may share one, and a cell that names them all would be higher than a row can be.
const mostListed = 900

// mostNotOffered is how many characters a list of routes that are not offered takes.
const mostNotOffered = 300

// listed names routes as far as a number of characters has room for and counts the rest.
func listed(ids []string, room int) string {
	for i, id := range ids {
		if room -= len(id) + 2; room < 0 && i > 0 {
			return fmt.Sprintf("%s, and %d more", strings.Join(ids[:i], ", "), len(ids)-i)
		}
	}
	return strings.Join(ids, ", ")
}

// excludedBlock lists what is not offered. Routes whose reasons differ in their figures
// alone share a line, and so do those of a lot that a cheaper route keeps out.
func (l *layout) excludedBlock(g *grid) {
	row := 0
	for _, lot := range l.lots {
		var list []*excludedGroup
		for _, x := range lot.Excluded {
			list = grouped(list, oneLine(cited(x.Reason, x.Source)), x.ID)
		}
		list = dearerTogether(list)
		for _, e := range list {
			if row == 0 {
				row = l.listBlock(g, "Not offered, and why; what a line leaves out, the JSON of the run names", "Lot", "Routes", "Reason and source")
			}
			g.entry(row, words, lot.Job.Name, listed(e.ids, mostNotOffered), e.reason())
			row++
		}
	}
}

// excludedGroup are routes with the same reason but for its figures.
type excludedGroup struct {
	pieces []string    // of the reason, between its figures
	low    []float64   // the least of each figure
	high   []float64   // the largest
	ends   [][2]string // as they are written
	ids    []string
}

// figure is a number that stands by itself, no part of a name.
var figure = regexp.MustCompile(`(^|[ (])([0-9]+(?:\.[0-9]+)?)( |%|$)`)

// splitAtFigures takes a reason apart at its figures.
func splitAtFigures(reason string) (pieces, figures []string) {
	at := 0
	for _, m := range figure.FindAllStringSubmatchIndex(reason, -1) {
		pieces, figures = append(pieces, reason[at:m[4]]), append(figures, reason[m[4]:m[5]])
		at = m[5]
	}
	return append(pieces, reason[at:]), figures
}

func grouped(list []*excludedGroup, reason, id string) []*excludedGroup {
	pieces, figures := splitAtFigures(reason)
	k := slices.IndexFunc(list, func(e *excludedGroup) bool { return slices.Equal(e.pieces, pieces) })
	if k < 0 {
		e := &excludedGroup{pieces: pieces, ids: []string{id}}
		for _, s := range figures {
			v, _ := strconv.ParseFloat(s, 64)
			e.low, e.high, e.ends = append(e.low, v), append(e.high, v), append(e.ends, [2]string{s, s})
		}
		return append(list, e)
	}
	e := list[k]
	e.ids = append(e.ids, id)
	for i, s := range figures {
		v, _ := strconv.ParseFloat(s, 64)
		if v < e.low[i] {
			e.low[i], e.ends[i][0] = v, s
		}
		if v > e.high[i] {
			e.high[i], e.ends[i][1] = v, s
		}
	}
	return list
}

func (e *excludedGroup) reason() string {
	var s strings.Builder
	for i, piece := range e.pieces {
		s.WriteString(piece)
		if i == len(e.ends) {
			break
		}
		s.WriteString(e.ends[i][0])
		if e.ends[i][0] != e.ends[i][1] {
			s.WriteString(" to " + e.ends[i][1])
		}
	}
	return s.String()
}

// dearer is a reason that names a cheaper route, of a chain that is known in its beginning
// alone with the steps that may come next.
var dearer = regexp.MustCompile(`^((?:at best )?dearer than )([^ ,]+)(?:, with .* next)?(, and what it saves .*)$`)

// dearerTogether joins the groups that cheaper routes keep out into one that names these.
// A beginning that several keep out, each with other steps next, is named once.
func dearerTogether(list []*excludedGroup) (out []*excludedGroup) {
	type joined struct {
		*excludedGroup
		cheaper []string
	}
	var all []*joined
	for _, e := range list {
		m := dearer.FindStringSubmatch(e.reason())
		if m == nil {
			out = append(out, e)
			continue
		}
		pieces := []string{m[1], m[3]}
		k := slices.IndexFunc(all, func(j *joined) bool { return slices.Equal(j.pieces, pieces) })
		if k < 0 {
			k = len(all)
			all = append(all, &joined{excludedGroup: &excludedGroup{pieces: pieces}})
			out = append(out, all[k].excludedGroup)
		}
		all[k].cheaper = addTo(all[k].cheaper, m[2])
		all[k].ids = addTo(all[k].ids, e.ids...)
	}
	for _, j := range all {
		j.pieces = []string{j.pieces[0] + anyOf(j.cheaper) + j.pieces[1]}
	}
	return out
}

// addTo adds what a list does not hold yet.
func addTo(list []string, more ...string) []string {
	for _, s := range more {
		if !slices.Contains(list, s) {
			list = append(list, s)
		}
	}
	return list
}

// anyOf lists routes of which each will do.
func anyOf(ids []string) string {
	last := len(ids) - 1
	if last == 0 {
		return ids[0]
	}
	return strings.Join(ids[:last], ", ") + " or " + ids[last]
}
