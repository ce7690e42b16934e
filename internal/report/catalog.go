package report

import (
	"fmt"
	"io"
	"strings"

	"parch/catalog"
	"parch/internal/listing"
)

// ownMark follows what comes from the user's own files.
const ownMark = "own data"

// CatalogText lists the kinds of the catalog.
func CatalogText(w io.Writer, c *catalog.Catalog, kinds []listing.Kind) error {
	p := &page{w: w}
	p.say(0, 2, "Catalog of %s%s", c.Date, ownFiles(c))
	rows := make([][]string, len(kinds))
	for i, k := range kinds {
		rows[i] = []string{k.Name, fmt.Sprint(len(k.Entries)), ownCount(k), k.What}
	}
	p.line("")
	p.table([]column{{"Kind", false, 0}, {"Entries", true, 0}, {"Own", true, 0}, {"What", false, 0}}, rows)
	p.line("")
	p.say(3, 0, "parch catalog KIND lists the entries of a kind, parch catalog KIND KEY shows one.")
	return p.close()
}

func ownFiles(c *catalog.Catalog) string {
	if len(c.Own) == 0 {
		return ""
	}
	return " with own data of " + strings.Join(c.Own, ", ")
}

func ownCount(k listing.Kind) string {
	if n := k.Own(); n > 0 {
		return fmt.Sprint(n)
	}
	return ""
}

// KindText lists the entries of a kind.
func KindText(w io.Writer, k listing.Kind) error {
	p := &page{w: w}
	p.say(0, 2, "%s: %s", sentence(k.Name), k.What)
	rows := make([][]string, len(k.Entries))
	for i, e := range k.Entries {
		rows[i] = []string{e.Key, asOwn(e.Title, e.Own)}
	}
	p.line("")
	p.table([]column{{"Key", false, 30}, {"", false, 60}}, rows)
	return p.close()
}

func asOwn(text string, own bool) string {
	if !own {
		return text
	}
	if text == "" {
		return ownMark
	}
	return text + " (" + ownMark + ")"
}

// EntryText shows an entry: each fact with its unit, range, source and confidence.
func EntryText(w io.Writer, c *catalog.Catalog, k listing.Kind, e listing.Entry) error {
	p := &page{w: w}
	p.say(0, 2, "%s", asOwn(k.Name+" "+e.Key, e.Own))
	if e.Title != e.Key {
		p.say(3, 0, "%s", e.Title)
	}
	rows := make([][]string, len(e.Facts))
	for i, f := range e.Facts {
		rows[i] = []string{f.What, strings.TrimSpace(f.Value + " " + f.Unit), rangeText(f), restsOn(f)}
	}
	p.line("")
	p.table([]column{{"What", false, 23}, {"Value", false, 27}, {"Band or range", false, 16}, {"Rests on", false, 23}}, rows)
	p.factNotes(e)
	p.references(c, e)
	return p.close()
}

func rangeText(f listing.Fact) string {
	if f.Low != "" && f.High != "" {
		return f.Low + " to " + f.High
	}
	return f.Range
}

func restsOn(f listing.Fact) string {
	var parts []string
	for _, part := range []string{f.Source, string(f.Confidence)} {
		if part != "" && (len(parts) == 0 || strings.ReplaceAll(part, " ", "-") != parts[0]) {
			parts = append(parts, part)
		}
	}
	if f.Own {
		parts = append(parts, ownMark)
	}
	return strings.Join(parts, ", ")
}

// factNotes prints the notes of an entry, each once. What only says how a derived
// figure was made is left to the JSON.
func (p *page) factNotes(e listing.Entry) {
	var order []string
	facts := map[string][]string{}
	for _, f := range e.Facts {
		if f.Note == "" || f.Confidence == catalog.Derived && strings.HasPrefix(f.Note, "from the ") {
			continue
		}
		if facts[f.Note] == nil {
			order = append(order, f.Note)
		}
		facts[f.Note] = append(facts[f.Note], f.What)
	}
	notes := make([]string, len(order))
	for i, note := range order {
		notes[i] = strings.Join(facts[note], "; ") + ": " + note
	}
	p.notes("Notes", notes)
}

// references are those that the facts of an entry rest on, in their order.
func (p *page) references(c *catalog.Catalog, e listing.Entry) {
	var list []string
	seen := map[string]bool{}
	for _, f := range e.Facts {
		if source, ok := c.Sources[f.Source]; ok && !seen[f.Source] {
			seen[f.Source] = true
			list = append(list, asOwn(source.ID+": "+source.Reference, source.Own))
		}
	}
	p.notes("Sources", list)
}
