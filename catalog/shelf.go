package catalog

import (
	"fmt"
	"strings"

	"parch/internal/document"
	"parch/internal/quantity"
)

// shelf is a catalog while it is being read.
type shelf struct {
	cat    *Catalog
	files  []file
	own    []file // the user's own
	owning bool   // whether an own file is being read
	tables []*table
	cited  map[string]bool           // source ids that a number rests on
	tops   map[string]*document.Node // of the solvents, by key

	agentTops map[string]*document.Node // of the agents, by key
}

type file struct {
	name  string
	root  *document.Node
	err   error
	kinds document.Fields // of an own file
}

func newShelf(names []string) *shelf {
	s := &shelf{cat: &Catalog{}, cited: map[string]bool{}, tops: map[string]*document.Node{}, agentTops: map[string]*document.Node{}}
	for _, name := range names {
		s.files = append(s.files, file{name: name})
	}
	return s
}

var grades = []string{
	string(Published), string(Fitted), string(Derived), string(Assumption), string(CommonPractice), string(Memory), string(Invented),
}

// with adds the keys of an origin to the other keys of an entry.
func with(keys ...string) []string { return append(keys, "source", "confidence", "note") }

// origin reads where the numbers of an entry come from. The catalog's own files
// leave the grade out where it follows from the source; the user's own say it.
func (s *shelf) origin(f document.Fields) Origin {
	o := Origin{Source: s.cite(f.Need("source")), Note: f.Get("note").Text(), Own: s.owning}
	if s.owning || f.Has("confidence") {
		o.Confidence = Confidence(f.Need("confidence").OneOf(grades...))
	} else {
		o.Confidence = gradeOf(o.Source)
	}
	return o
}

// gradeOf is the grade of a number that rests on a source as it stands there.
func gradeOf(source string) Confidence {
	switch source {
	case "memory":
		return Memory
	case "common-practice":
		return CommonPractice
	case "assumption":
		return Assumption
	case stoichiometry:
		return Derived
	}
	if strings.HasSuffix(source, "-fit") {
		return Fitted
	}
	return Published
}

// originOr is origin where a part of a file has an origin in common.
func (s *shelf) originOr(f document.Fields, common *Origin) Origin {
	if common == nil || f.Has("source") || f.Has("confidence") {
		return s.origin(f)
	}
	o := *common
	if f.Has("note") {
		o.Note = join(f.Get("note").Text(), o.Note)
	}
	return o
}

// common reads the origin that holds where a row names none of its own.
func (s *shelf) common(n *document.Node) *Origin {
	if n == nil {
		return nil
	}
	o := s.origin(n.Map(with()...))
	return &o
}

// cite reads a source id and checks that the reference is known.
func (s *shelf) cite(n *document.Node) string {
	id := n.Text()
	if id == "" {
		return ""
	}
	if _, ok := s.cat.Sources[id]; !ok {
		where := sourcesFile
		if s.owning {
			where += " or the own files"
		}
		n.Fail("%q is not in %s%s", id, where, n.Offer(id, keysOf(s.cat.Sources)))
	}
	s.cited[id] = true
	return id
}

// value reads a number with its unit, band and origin. A missing node gives the
// zero Value; whoever needs it has said so already.
func (s *shelf) value(n *document.Node, d quantity.Dimension) Value { return s.valueOr(n, d, nil) }

// valueOr is value where a part of a file has an origin in common.
func (s *shelf) valueOr(n *document.Node, d quantity.Dimension, common *Origin) Value {
	if n == nil {
		return Value{}
	}
	f := n.Map(with("value", "band")...)
	v := Value{Origin: s.originOr(f, common)}
	number := f.Need("value")
	reading, ok := number.Quantity(d)
	if !ok {
		return v
	}
	v.SI, v.Text = reading.SI, number.Text()
	checkRange(number, v.SI, d)
	if band := f.Get("band"); band != nil {
		v.Low, v.High = span(band, d)
		if v.Banded() && (v.SI < v.Low || v.SI > v.High) {
			band.Fail("%q does not hold the value, %q", band.Text(), v.Text)
		}
	}
	return v
}

// optional is value for what need not be known.
func (s *shelf) optional(n *document.Node, d quantity.Dimension) *Value {
	if n == nil {
		return nil
	}
	v := s.value(n, d)
	return &v
}

// span reads "0 to 120 °C"; the first number may leave out the unit.
func span(n *document.Node, d quantity.Dimension) (low, high float64) {
	from, to, ok := strings.Cut(n.Text(), " to ")
	if !ok {
		if n.Text() != "" {
			n.Fail(`%s is not a range; write it like "0 to 120 °C"`, quantity.Quote(n.Text()))
		}
		return 0, 0
	}
	last, err := quantity.Parse(to, d)
	if err != nil {
		n.Fail("%v", err)
		return 0, 0
	}
	first, err := quantity.Parse(from, d)
	if err != nil {
		first, err = quantity.Parse(from+" "+last.Unit, d)
	}
	if err != nil {
		n.Fail("%v", err)
		return 0, 0
	}
	if first.SI >= last.SI {
		n.Fail("%s does not rise", quantity.Quote(n.Text()))
	}
	return first.SI, last.SI
}

// limit is what a number of a dimension may be, in SI units; the text says it as people do.
type limit struct {
	low, high float64
	text      string
}

var limits = map[quantity.Dimension]limit{
	quantity.Temperature:           {70, 1000, "70 to 1000 K"},
	quantity.TemperatureDifference: {0, 200, "0 to 200 K"},
	quantity.Pressure:              {1e3, 2e5, "1 to 200 kPa"},
	quantity.Share:                 {0, 1, "0 to 100 %"},
	quantity.WaterContent:          {0, 1, "0 to 100 % m/m"},
	quantity.MassRatio:             {0, 10, "0 to 10 kg/kg"},
	quantity.MassPerEnergy:         {0, 5 / jPerKWh, "0 to 5 kg/kWh"},
	quantity.MolarMass:             {0.01, 0.5, "10 to 500 g/mol"},
	quantity.Density:               {100, 5000, "100 to 5000 kg/m3"},
	quantity.MassConcentration:     {0, 2000, "0 to 2000 g/L"},
	quantity.Volume:                {0, 1, "0 to 1000 L"},
	quantity.Mass:                  {0, 1000, "0 to 1000 kg"},
	quantity.Length:                {0, 5, "0 to 5 m"},
	quantity.Power:                 {0, 1e5, "0 to 100 kW"},
	quantity.Velocity:              {0, 0.1, "0 to 100 mm/s"},
	quantity.Energy:                {0, 1e3 * jPerKWh, "0 to 1000 kWh"},
	quantity.Time:                  {0, 3.2e9, "0 to 100 yr"},
	quantity.Rate:                  {0, 1, "0 to 1 1/s"},
	quantity.Flow:                  {0, 1e-2, "0 to 600 L/min"},
	quantity.HoldUp:                {0, 5e-3, "0 to 5 L/kg"},
	quantity.Number:                {0, 1000, "0 to 1000"},
	quantity.HeatPerMole:           {0, 3e5, "0 to 300 kJ/mol"},
	quantity.InversePressure:       {0, 1, "0 to 1 1/Pa"},
	quantity.HeatCapacity:          {100, 10e3, "0.1 to 10 kJ/kg/K"},
}

const jPerKWh = 3.6e6

// checkRange refuses what cannot be, such as a temperature typed in the wrong unit.
func checkRange(n *document.Node, si float64, d quantity.Dimension) {
	l, ok := limits[d]
	if !ok {
		panic(fmt.Sprintf("catalog: no limits for %s", d))
	}
	if si < l.low || si > l.high {
		n.Fail("%q is outside %s", n.Text(), l.text)
	}
}

// items are those of a list that may be left out.
func items(n *document.Node) []*document.Node {
	if n == nil {
		return nil
	}
	return n.Items()
}

// checkKey refuses a key that could not stand in a route, a price or a workbook name.
func (s *shelf) checkKey(e document.Entry) {
	for i, r := range e.Key {
		letter := r >= 'a' && r <= 'z' || r >= '0' && r <= '9'
		if !letter && (r != '-' || i == 0 || i == len(e.Key)-1) {
			e.Node.Fail("the key %q is not made of small letters, digits and hyphens", e.Key)
			return
		}
	}
}
