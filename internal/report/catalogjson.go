package report

import (
	"encoding/json"
	"io"
	"strconv"

	"parch/catalog"
	"parch/internal/listing"
)

type catalogOut struct {
	CatalogDate string    `json:"catalog_date"`
	OwnFiles    []string  `json:"own_files"`
	Kinds       []kindOut `json:"kinds"`
}

type kindOut struct {
	Kind    string `json:"kind"`
	What    string `json:"what"`
	Entries int    `json:"entries"`
	Own     int    `json:"own"`
}

type entriesOut struct {
	Kind    string     `json:"kind"`
	What    string     `json:"what"`
	Entries []titleOut `json:"entries"`
}

type titleOut struct {
	Key   string `json:"key"`
	Title string `json:"title"`
	Own   bool   `json:"own"`
}

type entryOut struct {
	Kind  string    `json:"kind"`
	Key   string    `json:"key"`
	Title string    `json:"title"`
	Own   bool      `json:"own"`
	Facts []factOut `json:"facts"`
}

type factOut struct {
	What       string  `json:"what"`
	Value      any     `json:"value"` // a number, or words
	Unit       *string `json:"unit"`
	Low        any     `json:"low"`
	High       any     `json:"high"`
	Range      *string `json:"range"`
	Source     *string `json:"source"`
	Reference  *string `json:"reference"`
	Confidence *string `json:"confidence"`
	Note       *string `json:"note"`
	Own        bool    `json:"own"`
}

// CatalogJSON lists the kinds of the catalog.
func CatalogJSON(w io.Writer, c *catalog.Catalog, kinds []listing.Kind) error {
	out := catalogOut{CatalogDate: c.Date, OwnFiles: append([]string{}, c.Own...), Kinds: []kindOut{}}
	for _, k := range kinds {
		out.Kinds = append(out.Kinds, kindOut{k.Name, k.What, len(k.Entries), k.Own()})
	}
	return writeJSON(w, out)
}

// KindJSON lists the entries of a kind.
func KindJSON(w io.Writer, k listing.Kind) error {
	out := entriesOut{Kind: k.Name, What: k.What, Entries: []titleOut{}}
	for _, e := range k.Entries {
		out.Entries = append(out.Entries, titleOut{e.Key, e.Title, e.Own})
	}
	return writeJSON(w, out)
}

// EntryJSON writes an entry with its facts.
func EntryJSON(w io.Writer, c *catalog.Catalog, k listing.Kind, e listing.Entry) error {
	out := entryOut{Kind: k.Name, Key: e.Key, Title: e.Title, Own: e.Own, Facts: []factOut{}}
	for _, f := range e.Facts {
		out.Facts = append(out.Facts, factOut{
			What: f.What, Value: numberOrWords(f.Value), Unit: known(f.Unit), Low: numberOrNull(f.Low), High: numberOrNull(f.High), Range: known(f.Range),
			Source: known(f.Source), Reference: known(c.Sources[f.Source].Reference), Confidence: known(string(f.Confidence)), Note: known(f.Note), Own: f.Own,
		})
	}
	return writeJSON(w, out)
}

func numberOrWords(text string) any {
	if _, err := strconv.ParseFloat(text, 64); err == nil && json.Valid([]byte(text)) {
		return json.Number(text)
	}
	return text
}

func numberOrNull(text string) any {
	if text == "" {
		return nil
	}
	return numberOrWords(text)
}
