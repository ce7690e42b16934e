// Package listing lays the catalog out as plain lists: kinds, entries and the
// facts of an entry, each with its unit, range, source and confidence.
package listing

import (
	"maps"
	"slices"

	"parch/catalog"
)

// Kind is one kind of entry.
type Kind struct {
	Name, What string
	Entries    []Entry // sorted by key
}

// Entry is one entry of the catalog.
type Entry struct {
	Key, Title string
	Own        bool // it, or one of its facts, is from the user's own file
	Facts      []Fact
}

// Fact is one statement of an entry.
type Fact struct {
	What        string
	Value, Unit string // Value is a number or words
	Low, High   string // in Unit, "" where no band is given
	Range       string // within which it holds, "" where none is stated
	Source      string // id
	Confidence  catalog.Confidence
	Note        string
	Own         bool
}

// Of lists the whole catalog.
func Of(c *catalog.Catalog) []Kind {
	return []Kind{
		{"agents", "drying agents: isotherms, hydrates, reactions, beads", each(c.Agents, agent)},
		{"apparatus", "stills, receivers, vessels, columns, ovens, chillers", each(c.Apparatus, apparatus)},
		{"assays", "Karl Fischer methods as they are practised", each(c.Assays, assay)},
		{"carriers", "solvents that may carry water out of another", each(c.Carriers, carrier)},
		{"cautions", "warnings and where they apply", cautions(c)},
		{"diameters", "sizes of molecules", each(c.Diameters, diameter)},
		{"doubt", "how far off may be what is not known exactly, as factors", each(c.Doubts, practice)},
		{"emissions", "CO2 equivalents of making, burning and electricity", each(c.Emissions, emission)},
		{"histories", "how a sieve was activated, and the water it still holds", histories(c)},
		{"layers", "water in the organic layer of alcohol, carrier and water", paired(c.Layers, layer)},
		{"matrix", "which agent may meet which class or solvent", matrix(c)},
		{"pairs", "activity models of a solvent and a carrier", paired(c.Pairs, carrierPair)},
		{"practice", "operating figures that the steps rely on", each(c.Practice, practice)},
		{"prices", "indicative prices", each(c.Prices, price)},
		{"solvents", "solvents and water: curves, water pair, hazards", each(c.Solvents, solvent)},
		{"sources", "references in full", each(c.Sources, source)},
		{"ternaries", "activity models of water, an alcohol and a carrier together", paired(c.Ternaries, ternary)},
	}
}

// Find returns a kind by name.
func Find(kinds []Kind, name string) (Kind, bool) {
	i := slices.IndexFunc(kinds, func(k Kind) bool { return k.Name == name })
	if i < 0 {
		return Kind{}, false
	}
	return kinds[i], true
}

// Find returns an entry by key.
func (k Kind) Find(key string) (Entry, bool) {
	i := slices.IndexFunc(k.Entries, func(e Entry) bool { return e.Key == key })
	if i < 0 {
		return Entry{}, false
	}
	return k.Entries[i], true
}

// Keys of a kind, sorted.
func (k Kind) Keys() (keys []string) {
	for _, e := range k.Entries {
		keys = append(keys, e.Key)
	}
	return keys
}

// Own counts the entries that come from the user's own files.
func (k Kind) Own() (n int) {
	for _, e := range k.Entries {
		if e.Own {
			n++
		}
	}
	return n
}

// each lays out a map by key.
func each[V any](all map[string]V, lay func(key string, v V) Entry) (list []Entry) {
	for _, key := range slices.Sorted(maps.Keys(all)) {
		list = append(list, lay(key, all[key]).marked())
	}
	return list
}

// paired lays out a map by two keys, written with a plus.
func paired[V any](all map[[2]string]V, lay func(key string, v V) Entry) (list []Entry) {
	byKey := map[string]V{}
	for pair, v := range all {
		byKey[pair[0]+"+"+pair[1]] = v
	}
	return each(byKey, lay)
}

// marked marks an entry that holds something of the user's own.
func (e Entry) marked() Entry {
	e.Own = e.Own || slices.ContainsFunc(e.Facts, func(f Fact) bool { return f.Own })
	return e
}
