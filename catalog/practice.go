package catalog

import (
	"strings"

	"parch/internal/document"
	"parch/internal/quantity"
)

// perMole marks a volume per mole, which no other number needs.
const perMole quantity.Dimension = "a molar volume" // m3/mol

// practiceKeys are the operating facts that the steps ask for.
var practiceKeys = map[string]quantity.Dimension{
	"heat-share":            quantity.Share,
	"trap-outlet-minimum":   quantity.WaterContent,
	"trap-efficiency":       quantity.Share,
	"trap-efficiency-below": quantity.WaterContent,
	"trap-reflux-minimum":   quantity.Time,
	"trap-setup":            quantity.Time,
	"trap-attended-share":   quantity.Share,
	"trap-shutdown":         quantity.Time,
	"draining-time":         quantity.Time,
	"cooling-flow":          quantity.Flow,
	"cooling-flow-minimum":  quantity.Flow,
	"cooling-rise":          quantity.TemperatureDifference,
	"condenser-difference":  quantity.TemperatureDifference,
	"vapour-loss-per-day":   quantity.Share,
	"coolant-tap":           quantity.Temperature,
	"heat-up-maximum":       quantity.Time,
	"still-fill":            quantity.Share,
	"settle-time":           quantity.Time,
	"settle-attended":       quantity.Time,
	"settle-interface":      quantity.Share,
	"soak-attended":         quantity.Time,
	"oven-attended":         quantity.Time,
	"flush-temperature":     quantity.Temperature,
	"flush-saturation":      quantity.Share,
	"flush-left":            quantity.Share,
	"flush-condensed":       quantity.Share,
	"flush-attended":        quantity.Share,
	"dose-minimum":          quantity.MassConcentration,
	"dose-maximum":          quantity.MassConcentration,
	"oxide-history":         quantity.Number,
	"soak-dust":             quantity.Share,
	"powder-diameter":       quantity.Length,
	"powder-hold-up":        quantity.HoldUp,
	"stir-velocity":         quantity.Velocity,
	"stirrer-power":         quantity.Power,
	"column-velocity":       quantity.Velocity,
	"column-setup":          quantity.Time,
	"column-attended-share": quantity.Share,
	"column-recycle":        quantity.Number,
	"pump-power":            quantity.Power,
	"reactive-least":        quantity.MassConcentration,
	"still-rate-weak":       quantity.Rate,
	"still-rate-strong":     quantity.Rate,
	"still-rate-depth":      quantity.Length,
	"water-molar-volume":    perMole,
	"karl-fischer-time":     quantity.Time,
	"buy-attended":          quantity.Time,
	"forerun-attended":      quantity.Time,
	"forerun-reflux":        quantity.Number,
	"forerun-column":        quantity.Time,
	"forerun-heel":          quantity.Share,
	"carrier-limit":         quantity.WaterContent,
	"forerun-discard":       quantity.Share,
	"salt-attended":         quantity.Time,
	"salt-contact":          quantity.Time,
	"reactive-attended":     quantity.Time,
	"reactive-reflux":       quantity.Time,
	"reactive-spent":        quantity.Time,
	"drum-attended":         quantity.Time,
	"sieve-ketone-water":    quantity.WaterContent,
	"stirred-slurry-rate":   quantity.Rate,
	"bed-void":              quantity.Share,
	"trap-reading":          quantity.Volume,
	"storage-rise-septum":   quantity.WaterContent,
	"storage-rise-drum":     quantity.WaterContent,
	"site-room":             quantity.Temperature,
	"site-pressure":         quantity.Pressure,
	"site-receiver":         quantity.Temperature,
	"site-humidity":         quantity.Share,
	"site-attended-per-day": quantity.Time,
	"site-peroxide-limit":   quantity.MassConcentration,
	"peroxide-reading-a":    quantity.Time,
	"peroxide-reading-b":    quantity.Time,
	"peroxide-reading-d":    quantity.Time,
}

func (s *shelf) readPractice() {
	s.cat.Practice = Practice{}
	s.each(practiceFile, func(n *document.Node) {
		f := n.Map(keysOf(practiceKeys)...)
		for _, key := range keysOf(practiceKeys) {
			entry := f.Get(key)
			if !s.owning {
				entry = f.Need(key)
			}
			switch {
			case entry == nil:
			case practiceKeys[key] == perMole:
				s.cat.Practice[key] = s.molarVolume(entry)
			default:
				s.cat.Practice[key] = s.value(entry, practiceKeys[key])
			}
		}
	})
}

// molarVolume reads "18.9 cm3/mol".
func (s *shelf) molarVolume(n *document.Node) Value {
	if n == nil {
		return Value{}
	}
	f := n.Map(with("value")...)
	v := Value{Text: f.Need("value").Text(), Origin: s.origin(f)}
	volume, ok := strings.CutSuffix(v.Text, "/mol")
	reading, err := quantity.Parse(volume, quantity.Volume)
	if v.Text != "" && (!ok || err != nil || reading.SI <= 0 || reading.SI > 1e-3) {
		f.Get("value").Fail(`%q is not a molar volume up to 1000 cm3/mol; write it like "18.9 cm3/mol"`, v.Text)
	}
	v.SI = reading.SI
	const liquidM3, within = 18.07e-6, 0.1 // of liquid water at 25 °C, 997 kg/m3
	if v.SI > 0 && (v.SI > liquidM3*(1+within) || v.SI < liquidM3*(1-within)) {
		f.Get("value").Fail("%q is more than 10 %% from the molar volume of liquid water, 18.07 cm3/mol", v.Text)
	}
	return v
}

// PeroxideReading is how long (s) a reading counts of a solvent of a class of peroxide
// formers; of a class without a figure of its own as long as of the worst.
func (c *Catalog) PeroxideReading(class string) Value {
	if v, ok := c.Practice["peroxide-reading-"+strings.ToLower(class)]; ok {
		return v
	}
	return c.Practice["peroxide-reading-a"]
}
