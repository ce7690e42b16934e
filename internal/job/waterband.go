package job

import (
	"math"
	"strings"

	"parch/internal/document"
	"parch/internal/quantity"
)

const wetEnough = "0.01 mg/kg to 500000 mg/kg"

func bandLimits() limits { return between(1e-8, 0.5, wetEnough) }

// isRange tells "300 to 600 mg/kg" from a content.
func isRange(n *document.Node) bool { return strings.Contains(n.Text(), " to ") }

// waterRange reads "300 to 600 mg/kg": nine lots in ten lie between, about the
// geometric mean. The first number may leave out the unit.
func (r *reader) waterRange(n *document.Node, lot *Lot) bool {
	from, to, _ := strings.Cut(n.Text(), " to ")
	high, ok := r.contentOf(n, to, lot, bandLimits())
	if !ok {
		return false
	}
	if last, _ := r.parseContent(to, lot); isNumber(from) {
		from += " " + last.Unit
	}
	low, ok := r.contentOf(n, from, lot, bandLimits())
	if !ok {
		return false
	}
	lot.Water = math.Sqrt(low * high)
	return r.setBand(n, lot, WaterBand{Low: low, High: high})
}

func isNumber(text string) bool {
	_, err := quantity.Parse(text, quantity.Number)
	return err == nil
}

// Distributions of the water of a lot.
const (
	lognormal = "lognormal"
	uniform   = "uniform"
)

// waterBand reads the ends of a band and how the lots lie in it.
func (r *reader) waterBand(n *document.Node, lot *Lot) bool {
	f := n.Map("low", "typical", "high", "distribution")
	low, okLow := r.content(f.Need("low"), lot, bandLimits())
	high, okHigh := r.content(f.Need("high"), lot, bandLimits())
	kind := lognormal
	if d := f.Get("distribution"); d != nil {
		kind = d.OneOf(lognormal, uniform)
	}
	if !okLow || !okHigh || kind == "" {
		return false
	}
	lot.Water = math.Sqrt(low * high)
	if kind == uniform {
		lot.Water = (low + high) / 2
	}
	if t := f.Get("typical"); t != nil {
		typical, ok := r.content(t, lot, bandLimits())
		switch {
		case !ok:
			return false
		case kind == uniform:
			t.Fail("a uniform band has no typical value: all of it is alike")
			return false
		case low < high && !(typical > low && typical < high):
			t.Fail("%s does not lie between %s and %s", quantity.Quote(t.Text()), quantity.FormatWater(low), quantity.FormatWater(high))
			return false
		}
		lot.Water = typical
	}
	return r.setBand(n, lot, WaterBand{Low: low, High: high, Uniform: kind == uniform})
}

// leastSpread is how far apart the ends of a band are at least, as a factor.
const leastSpread = 1.001

func (r *reader) setBand(n *document.Node, lot *Lot, b WaterBand) bool {
	switch {
	case b.Low > b.High:
		n.Fail("the lower end of the band, %s, is above its upper end, %s", quantity.FormatWater(b.Low), quantity.FormatWater(b.High))
		return false
	case b.High < leastSpread*b.Low:
		n.Fail("a band from %s to %s has no spread; give one content instead", quantity.FormatWater(b.Low), quantity.FormatWater(b.High))
		return false
	}
	lot.WaterBand = &b
	r.note(n, "settings are chosen for %s; the draws take the whole band", quantity.FormatWater(lot.Water))
	return true
}

// failedBatch reads what a batch costs that misses its target.
func (r *reader) failedBatch(n *document.Node) *FailedBatch {
	money, converted, ok := r.money(n)
	if !ok {
		return nil
	}
	if money.Per != "" {
		n.Fail("%s is a price per %s; a failed batch costs an amount, such as 300 %s", quantity.Quote(n.Text()), money.Per, money.Currency)
		return nil
	}
	return &FailedBatch{Amount: money.Amount, Converted: converted}
}
