package job

import (
	"fmt"
	"slices"
	"strconv"

	"parch/internal/document"
	"parch/internal/quantity"
)

const zeroCelsius = 273.15

// site reads the place and its rates. What is missing comes from the catalog's practice.
func (r *reader) site(n *document.Node) {
	f := n.Map("room", "pressure", "humidity", "receiver", "technician", "electricity", "cooling water",
		"attended hours per day", "peroxide limit", "karl fischer", "cooling", "waste container", "waste collections", "failed batch",
		"sieve flush", "lots over a charge")
	r.job.Site = Site{
		RoomK: r.orPractice(f.Get("room"), "site.room", "site-room", quantity.Temperature,
			between(zeroCelsius+5, zeroCelsius+40, "5 °C to 40 °C")),
		PressurePa: r.orPractice(f.Get("pressure"), "site.pressure", "site-pressure", quantity.Pressure,
			between(1e3, 110e3, "10 hPa to 1100 hPa, absolute")),
		Humidity: r.orPractice(f.Get("humidity"), "site.humidity", "site-humidity", quantity.Share,
			between(0, 1, "0 % to 100 %")),
		ReceiverK: r.orPractice(f.Get("receiver"), "site.receiver", "site-receiver", quantity.Temperature,
			between(zeroCelsius+1, zeroCelsius+40, "1 °C to 40 °C; water would freeze in a colder one")),
		AttendedSecondsPerDay: r.orPractice(f.Get("attended hours per day"), "site.attended hours per day", "site-attended-per-day", quantity.Time,
			between(1800, 86400, "0.5 h to 24 h; with less nothing is done, however long a lot may take")),
		PeroxideLimitKgPerM3: r.orPractice(f.Get("peroxide limit"), "site.peroxide limit", "site-peroxide-limit", quantity.MassConcentration,
			between(0, 0.1, "0 mg/L to 100 mg/L")),
	}
	r.job.Site.KarlFischer = r.orWord(f.Get("karl fischer"), "site.karl fischer", "coulometric",
		func(n *document.Node) string { return n.OneOf("coulometric", "volumetric") })
	r.job.Site.Cooling = r.orWord(f.Get("cooling"), "site.cooling", Tap,
		func(n *document.Node) string { return n.OneOf(Tap, Chiller, Loop) })
	r.coolant(f.Get("receiver"))
	r.job.Site.SieveFlush = r.orWord(f.Get("sieve flush"), "site.sieve flush", FlushNitrogen,
		func(n *document.Node) string { return n.OneOf(FlushNitrogen, FlushVacuum, FlushNone) })
	r.lotsOverACharge(f.Get("lots over a charge"))
	r.waste(f)
	if n := f.Get("failed batch"); n != nil {
		r.job.Site.FailedBatch = r.failedBatch(n)
	}
	r.rate(f.Get("technician"), "technician", "hour")
	r.rate(f.Get("electricity"), "electricity", "kwh")
	r.rate(f.Get("cooling water"), "cooling-water", "m3")
}

// coolant refuses a receiver that is colder than the tap water that cools it.
func (r *reader) coolant(receiver *document.Node) {
	tap, site := r.cat.Practice["coolant-tap"], r.job.Site
	if receiver != nil && site.Cooling == Tap && site.ReceiverK > 0 && site.ReceiverK < tap.SI-1e-9 {
		receiver.Fail("%s is colder than the cooling water from the tap (%s); write cooling: chiller, or a receiver that is not", quantity.Quote(receiver.Text()), quantity.FormatTemperature(tap.SI))
	}
}

// mostLotsOverACharge go over the same sieve as it is: beads that are poured over so
// often turn to dust (assumption).
const mostLotsOverACharge = 12

func (r *reader) lotsOverACharge(n *document.Node) {
	r.job.Site.LotsOverACharge = mostLotsOverACharge
	if n == nil {
		r.assume("site.lots over a charge", fmt.Sprintf("up to %d", mostLotsOverACharge))
		return
	}
	_, err := strconv.Atoi(n.Text())
	if r.job.Site.LotsOverACharge = n.Int(); err == nil && (r.job.Site.LotsOverACharge < 1 || r.job.Site.LotsOverACharge > mostLotsOverACharge) {
		n.Fail("%s is not possible here; allowed: 1 to %d", quantity.Quote(n.Text()), mostLotsOverACharge)
	}
}

// usualContainerKg is a waste can of 20 L of solvent (common practice, no source).
const usualContainerKg = 20

// waste reads how waste is collected.
func (r *reader) waste(f document.Fields) {
	site := &r.job.Site
	site.WasteContainerKg = usualContainerKg
	if n := f.Get("waste container"); n != nil {
		site.WasteContainerKg, _ = r.measure(n, quantity.Mass, between(0.1, 10000, "0.1 kg to 10000 kg"))
	}
	if n := f.Get("waste collections"); n != nil {
		site.WasteCollectionsPerYear, _ = r.measure(n, quantity.PerYear, between(0.1, 366, "0.1 /yr to 366 /yr"))
	}
}

// rate reads a price per unit such as "48 EUR/h" and adds it to the job's prices.
func (r *reader) rate(n *document.Node, item, unit string) {
	money, converted, ok := r.money(n)
	if !ok {
		return
	}
	if !slices.Contains(perUnit[unit], money.Per) {
		n.Fail("%s is not a price per %s; write it like \"48 %s/%s\"", quantity.Quote(n.Text()), unit, money.Currency, perUnit[unit][0])
		return
	}
	r.job.Prices = append(r.job.Prices, Price{Item: item, Unit: unit, PerUnit: money.Amount, Line: n.Line(), Terms: Terms{LeadDays: unknownDays, Converted: converted}})
}

// perUnit lists how a price per catalog unit may be written, the usual way first.
var perUnit = map[string][]string{
	"hour": {"h", "hour"}, "kwh": {"kWh", "kwh"}, "m3": {"m3", "m³"}, "kg": {"kg"}, "litre": {"L", "l", "litre"},
	"each": {"each", "piece"}, "test": {"test"},
}
