package catalog

import (
	"embed"
	"errors"
	"io/fs"
	"sync"
)

//go:embed checks/*.csv
var checkFiles embed.FS

// CheckKind says how far a check is a test of the catalog.
type CheckKind string

// The kinds of check.
const (
	Independent CheckKind = "independent" // not used to make the numbers that it tests
	FitTarget   CheckKind = "fitted"      // a target of the fit that it tests
	Recalled    CheckKind = "memory"      // from memory; it decides nothing
	// Contradicted is a figure in print that its own compilation, or every other entry,
	// marks as wrong. It is shown, so that nobody takes it for forgotten, and decides nothing.
	Contradicted CheckKind = "contradicted"
)

// Check is a figure from outside that the catalog's numbers must reproduce.
type Check struct {
	Quantity   string  // one of the keys of checkQuantities
	Subject    string  // solvent or agent
	Partner    string  // carrier, pair of hydrates or series; "" for most
	TempK      float64 // 0 where the quantity is a temperature
	PressurePa float64 // 0 where none is stated
	Value      float64 // in Unit
	Unit       string
	Limit      float64 // in LimitUnit
	LimitUnit  string  // "%" of the value, "factor", "% abs" or that of the value
	Kind       CheckKind
	Confidence Confidence
	Excuse     string  // why it may miss its limit; "" for most
	ExcusedTo  float64 // the deviation, in LimitUnit, that the excuse is held to; 0 where there is none
	Source     string  // in full
	File       string  // of the catalog, with the line
	Line       int
}

// Drying is a drying that was measured, with the time and dose it took.
type Drying struct {
	ID, Solvent, Agent string
	From               float64 // kg/kg; 0 where not stated
	DoseKgPerM3        float64 // 0 where not stated
	TimeS              float64 // 0 where not stated
	How                string  // "still", "stirred", "reflux", ...
	Form               string
	Left               float64 // kg/kg
	Kind               CheckKind
	Confidence         Confidence
	Source             string
}

// TieLine is a published pair of layers of water, an alcohol and a carrier, mass
// fractions in this order.
type TieLine struct {
	Alcohol, Carrier string
	TempK            float64
	Organic, Aqueous [3]float64
	Kind             CheckKind
	Source           string
}

// Checks are all figures from outside that the catalog is held against.
type Checks struct {
	Rows     []Check
	Dryings  []Drying
	TieLines []TieLine
}

// checkQuantities are the quantities of a Check and the unit of each.
var checkQuantities = map[string]string{
	"boiling-point": "°C", "vapour-pressure": "Pa", "density": "kg/m3", "heat-of-vaporization": "kJ/mol",
	"heat-capacity": "J/(mol K)", "viscosity": "mPa s",
	"water-solubility": "% m/m", "solvent-solubility": "% m/m", // water in the solvent, solvent in water
	"azeotrope-temperature": "°C", "azeotrope-water": "% m/m", "azeotrope-absent": "", // 0: none, as it should be
	"gamma-water": "", "gamma-solvent-in-carrier": "", "gamma-carrier-in-solvent": "", // at infinite dilution
	"ternary-azeotrope-temperature": "°C", "ternary-azeotrope-water": "% m/m", "ternary-azeotrope-solvent": "% m/m",
	"hydrate-activity": "", "loading": "g/100 g", "share-removed": "%",
}

var checkFileNames = []string{"pure.csv", "azeotropes.csv", "solubility.csv", "activity.csv", "ternary-azeotropes.csv", "agents.csv"}

var checkHeadings = []string{
	"quantity", "subject", "partner", "t_c", "p_kpa", "value", "unit", "limit", "limit_unit", "kind", "confidence", "excuse", "excused_to", "source",
}

var builtInChecks = sync.OnceValues(func() (*Checks, error) {
	cat, err := Load()
	if err != nil {
		return nil, err
	}
	folder, err := fs.Sub(checkFiles, "checks")
	if err != nil {
		return nil, err
	}
	return ParseChecks(folder, cat)
})

// LoadChecks returns the built-in checks, read once. They are no part of Load,
// which stays quick.
func LoadChecks() (*Checks, error) { return builtInChecks() }

// ParseChecks reads the tables of checks of a folder. All problems are reported at
// once. Heteroazeotropes that contradict the activity of water are problems unless
// the row says so.
func ParseChecks(fsys fs.FS, cat *Catalog) (*Checks, error) {
	c := &Checks{}
	var problems []error
	for _, name := range checkFileNames {
		t := readTable(fsys, name, checkHeadings...)
		for _, r := range t.rows {
			c.Rows = append(c.Rows, readCheck(r, cat))
		}
		checkAzeotropes(t, c.Rows[len(c.Rows)-len(t.rows):], cat)
		problems = append(problems, t.err())
	}
	problems = append(problems, c.readDryings(fsys, cat), c.readTieLines(fsys, cat))
	if err := errors.Join(problems...); err != nil {
		return nil, err
	}
	return c, nil
}

func readCheck(r row, cat *Catalog) Check {
	c := Check{
		Quantity: r.oneOf("quantity", keysOf(checkQuantities)...), Subject: r.text("subject"), Partner: r.text("partner"),
		Value: r.number("value", 0, 1e9), Limit: r.number("limit", 0, 1e3), Unit: r.text("unit"), LimitUnit: r.text("limit_unit"),
		Kind:       CheckKind(r.oneOf("kind", string(Independent), string(FitTarget), string(Recalled), string(Contradicted))),
		Confidence: Confidence(r.oneOf("confidence", grades...)),
		Excuse:     r.text("excuse"), Source: r.text("source"), File: r.table.name, Line: r.line,
	}
	if cat.Solvents[c.Subject] == nil && cat.Agents[c.Subject] == nil {
		r.fail("subject", "%q is neither a solvent nor an agent", c.Subject)
	}
	if want := checkQuantities[c.Quantity]; c.Unit != want {
		r.fail("unit", "%q is not the unit of %s, %q", c.Unit, c.Quantity, want)
	}
	r.oneOf("limit_unit", "%", "factor", "K", "% m/m", "% abs", "")
	if c.Source == "" {
		r.fail("source", "is empty")
	}
	readExcuse(r, &c)
	if celsius, ok := r.maybe("t_c", -100, 400); ok {
		c.TempK = celsius + zeroCelsiusK
	}
	if kPa, ok := r.maybe("p_kpa", 0, 1e4); ok {
		c.PressurePa = kPa * 1e3
	}
	return c
}

// readExcuse reads the figure that an excuse is held to. A row of memory or one that
// is contradicted needs none; an excuse for the activity of an azeotrope's water
// (checkAzeotropes) needs none either.
func readExcuse(r row, c *Check) {
	if to, ok := r.maybe("excused_to", 0, 1e4); ok {
		c.ExcusedTo = to
	}
	decides := c.Kind != Recalled && c.Kind != Contradicted && c.Confidence != Memory
	switch {
	case c.ExcusedTo > 0 && c.Excuse == "":
		r.fail("excused_to", "%g is given without an excuse", c.ExcusedTo)
	case c.ExcusedTo > 0 && c.ExcusedTo <= c.Limit:
		r.fail("excused_to", "%g is no more than the limit, %g", c.ExcusedTo, c.Limit)
	case c.ExcusedTo == 0 && c.Excuse != "" && decides && c.Quantity != "azeotrope-water":
		r.fail("excused_to", "is missing: an excuse names the deviation that it is held to")
	case c.Kind == Contradicted && c.Excuse == "":
		r.fail("excuse", "is missing: a contradicted row says by what")
	}
}

// Deviation of a computed value from the check, in the unit of its limit: per
// cent, a factor (at least 1) or a difference.
func (c *Check) Deviation(computed float64) float64 {
	switch c.LimitUnit {
	case "%":
		return 100 * (computed/c.Value - 1)
	case "factor":
		if computed < c.Value {
			return c.Value / computed
		}
		return computed / c.Value
	}
	return computed - c.Value
}

// Holds reports whether a computed value meets the check.
func (c *Check) Holds(computed float64) bool { return c.within(computed, c.Limit) }

// Excuses reports whether a computed value lies within what the excuse is held to.
func (c *Check) Excuses(computed float64) bool {
	return c.Excuse != "" && c.within(computed, c.ExcusedTo)
}

func (c *Check) within(computed, limit float64) bool {
	d := c.Deviation(computed)
	return d <= limit && d >= -limit
}
