package bench

import (
	"fmt"
	"strings"

	"parch/internal/quantity"
	"parch/internal/steps"
)

// adviseBoiling says what is seen at a still, and when to stop.
func (a *Answer) adviseBoiling() {
	if a.Kind == steps.Trap {
		a.adviseReceiver()
	} else {
		a.adviseDrawing()
	}
	first, last := a.Course[0], a.Course[len(a.Course)-1]
	a.tell("boiling", "%s h to heat up; the pot goes from %s to %s, the head from %s to %s", quantity.Significant(a.Figure("heat-up, each charge"), 3),
		quantity.FormatTemperature(first.PotK), quantity.FormatTemperature(last.PotK), quantity.FormatTemperature(first.HeadK), quantity.FormatTemperature(last.HeadK))
	c := a.Condenser
	a.tell("cooling", "the condenser takes up %s; %s L/min of water are run and warm by %s K (%s L/min would do at a rise of %s K)", quantity.FormatPower(c.DutyW),
		quantity.Significant(c.RunM3PerS*litresPerMinute, 3), quantity.Significant(c.RunRiseK, 2), quantity.Significant(c.NeededM3PerS*litresPerMinute, 2), quantity.Significant(c.RiseK, 2))
}

// litresPerMinute in one m3/s.
const litresPerMinute = 6e4

// adviseReceiver tells what a trap's receiver shows and what that can prove.
func (a *Answer) adviseReceiver() {
	charges := a.Figure("still charges")
	if a.Carrier != "" {
		a.adviseCarrier()
	}
	if shown := a.Figure("aqueous layer, each charge"); shown < leastSeenML {
		a.tell("receiver", "shows no aqueous layer that can be read (under %g mL%s)", leastSeenML, ofEach(charges))
	} else {
		a.tell("receiver", "should show about %s mL of aqueous layer%s: stop there; drained %s", quantity.Significant(shown, 3), ofEach(charges), a.drained())
	}
	proved := steps.ProvedByReading(a.In.MassKg() / charges)
	a.tell("reading", "repeatable to 0.1 mL, which is %s in this charge: a smaller content cannot be told from the receiver, only by a test", quantity.FormatWater(proved))
	a.tell("reflux", "%s h%s%s", quantity.Significant(a.Figure("reflux, each charge"), 3), ofEach(charges), a.heldOn())
	if a.Returns != "" {
		a.tell("returns", "the %s layer goes back to the pot, the aqueous one is kept%s", a.Returns, a.receiver())
	}
}

// receiver names what a trap is run with, and what it holds before anything goes back.
func (a *Answer) receiver() string {
	piece := a.Case.Catalog.Apparatus[a.Apparatus]
	if piece == nil {
		return ""
	}
	return fmt.Sprintf("; the %s holds %s before that", piece.Name, quantity.FormatVolume(piece.FillVolume.SI))
}

// leastSeenML is less aqueous layer than a receiver shows: half of the 0.1 mL to
// which its reading is repeatable.
const leastSeenML = 0.05

// heldOn says that a trap is run for longer than the water takes.
func (a *Answer) heldOn() string {
	heatUpH, refluxH := a.Figure("heat-up, each charge"), a.Figure("reflux, each charge")
	if last := a.Course[len(a.Course)-1]; a.Carrier == "" && last.Hours < (heatUpH+refluxH)*(1-1e-6) {
		return fmt.Sprintf(", the least that a trap is run for: the water is over after %s h of it", quantity.Significant(last.Hours-heatUpH, 2))
	}
	return ""
}

// drained says how often, and when the receiver is full before the end.
func (a *Answer) drained() string {
	text := times(a.Figure("drainings, each charge"))
	var when []string
	for i, p := range a.DrainAt() {
		if i == 3 {
			when = append(when, "and so on")
			break
		}
		when = append(when, quantity.Significant(p.Hours, 2)+" h")
	}
	if len(when) == 0 {
		return text
	}
	return fmt.Sprintf("%s, the first time%s after %s", text, map[bool]string{true: "s"}[len(when) > 1], strings.Join(when, ", "))
}

// adviseCarrier tells dose and whereabouts of the carrier.
func (a *Answer) adviseCarrier() {
	q := a.Question
	chosen := "chosen: the least lost of the doses tried"
	if given(q.DoseKgPerM3) {
		chosen = "as given"
		if q.FreeWaterM3 > 0 {
			chosen += fmt.Sprintf(": %s of %s, the free water with it", quantity.FormatConcentration(q.DoseKgPerM3), quantity.FormatVolume(a.CarrierKg/q.DoseKgPerM3))
		}
	}
	a.tell("carrier", "%s of %s, %s", weighed(a.CarrierKg), q.Carrier.Name, chosen)
	pot, lowest := a.Figure("water in the pot when the trap stops")/mgPerKg, a.Case.Catalog.Practice["trap-outlet-minimum"].SI
	trapped := quantity.FormatWater(pot)
	if pot < lowest { // as computed; no trap is known to do so
		trapped = "less than " + quantity.FormatWater(lowest)
	}
	stripped := "with hardly any carrier left in the pot to strip"
	if a.Figure("volume drawn off, each charge") > 0 {
		stripped = fmt.Sprintf("then stripped over %d stages in %s h%s: %s", q.Stages, quantity.Significant(a.Figure("stripping, each charge"), 3),
			ofEach(a.Figure("still charges")), drawnVolume(a.Figure("volume drawn off, each charge")))
	}
	a.tell("carrier", "trapped down to %s in the pot, carrier included, %s", trapped, stripped)
	a.tell("carrier", "%s of it stay in the product, %s are in the aqueous layer, %s are lost in all: state what is left, and ask whether the use allows it",
		quantity.FormatWater(a.Out.Carrier()), weighed(a.Figure("carrier in the aqueous layer")), weighed(a.CarrierLostKg))
}

const mgPerKg = 1e6

func drawnVolume(litres float64) string {
	return quantity.FormatVolume(litres/1e3) + " are drawn off"
}

// adviseDrawing tells which of the two is the product, and when to stop.
func (a *Answer) adviseDrawing() {
	charges, drawnL := a.Figure("still charges"), a.Figure("volume drawn off, each charge")
	if a.Overhead {
		a.tell("product", "what distils over: the solvent boils off first, the wet heel stays behind")
	} else {
		a.tell("product", "what stays in the pot: the water leaves first, and the forerun is lost")
	}
	switch {
	case drawnL == 0:
		a.tell("stop", "at once: nothing is drawn off a lot that is as dry as this can make it")
		return
	case a.Overhead:
		a.tell("stop", "when %s%s%s", drawnVolume(drawnL), ofEach(charges), a.lastOver())
	case drawnL < wetsGlassL:
		a.tell("stop", "%s%s: less than wets column and condenser, and too little to steer by; draw some mL and test the pot", drawnVolume(drawnL), ofEach(charges))
	default:
		a.tell("stop", "when %s%s, with %s %% of water in it", drawnVolume(drawnL), ofEach(charges), quantity.Significant(a.Figure("water in what is drawn off"), 3))
	}
	a.tell("reading", "%s", a.readingOfHead())
	a.tell("drawing", "%s h over %d stages%s", quantity.Significant(a.Figure("drawing off, each charge"), 3), a.Question.Stages, ofEach(charges))
}

// wetsGlassL is less than a still holds back on its glass (assumption).
const wetsGlassL = 1e-3

// plainRiseK is a rise of the head that a thermometer shows beyond doubt.
const plainRiseK = 1.0

// lastOver warns of a distillate whose last part is the wettest.
func (a *Answer) lastOver() string {
	first, last := a.Course[0], a.Course[len(a.Course)-1]
	if last.HeadK-first.HeadK < plainRiseK {
		return ""
	}
	return fmt.Sprintf("; the head rises to %s by then, and what comes over last is the wettest: stopping sooner leaves a drier product and more solvent behind", quantity.FormatTemperature(last.HeadK))
}

// readingOfHead says what volume and temperature prove.
func (a *Answer) readingOfHead() string {
	first, last := a.Course[0], a.Course[len(a.Course)-1]
	if a.Overhead && last.HeadK-first.HeadK >= plainRiseK {
		return "a head that rises says that water comes over; neither volume nor temperature proves a water content: test the product"
	}
	return "neither volume nor temperature proves a water content: the last of it moves the head by less than can be read; test the product"
}
