// Package job reads a job file: what shall be dried, to what target, where and
// with what equipment. Everything it returns is validated and in SI units.
package job

import (
	"github.com/shopspring/decimal"
)

// Job is a validated job in SI units.
type Job struct {
	File, Title string
	Date        string             // ISO date of the plan, "" where not given
	Currency    string             // ISO 4217 code
	Rates       []Rate             // of exchange, into Currency
	Objective   string             // cost, time, waste, energy, or Weighted
	Weights     map[string]float64 // by objective, adding up to one; nil unless Weighted
	Assurance   float64            // chance of target that a recommended route needs, 0..1
	Prices      []Price            // own prices, in the order given; an item may have several packs
	PriceFile   string             // the price list that Prices were read from, "" for none
	Site        Site
	Equipment   []Equipment
	WriteOff    string  // StraightLine or Annuity
	Interest    float64 // share per year; 0 where not given
	Stock       []Stock
	Storage     []StorageLimit
	Accept      Accept
	Exclude     Exclude
	Lots        []Lot
	Defaults    []Default // what the catalog filled in
	Warnings    []string  // readings that were interpreted, and what the reader should know
	Invented    bool      // the demonstration job: every price in it is invented
}

// Site is the place and its rates.
type Site struct {
	RoomK, PressurePa, Humidity, ReceiverK float64
	AttendedSecondsPerDay                  float64
	PeroxideLimitKgPerM3                   float64
	KarlFischer                            string       // coulometric or volumetric
	Cooling                                string       // Tap, Chiller or Loop
	SieveFlush                             string       // FlushNitrogen, FlushVacuum or FlushNone, before used sieve sees an oven
	LotsOverACharge                        int          // most lots that go over the same sieve as it is
	WasteContainerKg                       float64      // what a waste container takes
	WasteCollectionsPerYear                float64      // 0 where not given
	FailedBatch                            *FailedBatch // of every lot that does not say its own
}

// Ways to cool a condenser.
const (
	Tap     = "tap"
	Chiller = "chiller"
	Loop    = "loop"
)

// Ways to free used sieve of solvent before it sees an oven.
const (
	FlushNitrogen = "nitrogen"
	FlushVacuum   = "vacuum"
	FlushNone     = "none"
)

// Ways to write equipment off.
const (
	StraightLine = "straight line"
	Annuity      = "annuity"
)

// Rate of exchange: one unit of From is PerUnit of the job's currency.
type Rate struct {
	From    string
	PerUnit decimal.Decimal
	Date    string
}

// Price is a price of the user's own: of a pack, or of a unit. Rates of the site
// (technician, electricity, cooling water) are prices too.
type Price struct {
	Item      string
	Unit      string          // as in catalog.Price.Unit
	PerUnit   decimal.Decimal // job currency per unit
	PackSize  decimal.Decimal // in Unit; 0 where the price is a rate
	PackPrice decimal.Decimal // job currency; 0 where the price is a rate
	Date      string          // ISO date, "" where not given
	WaterMax  float64         // kg/kg, dry grades; 0 where not given
	Terms
	Line int
}

// Terms are what an offer says besides size and price.
type Terms struct {
	ValidUntil   string // ISO date, "" where not given
	MinimumOrder int    // packs; 0 where there is none
	LeadDays     int    // from order to delivery; -1 where not given
	ShelfDays    int    // after opening; 0 where it keeps or is not given
	Supplier     string // the user's own text
	Tax          string // tax basis in the user's words
	Converted    string // how it was brought into the job's currency, "" where it was given in it
}

// Equipment says whether an item of the catalog is at hand.
type Equipment struct {
	Item  string
	Owned bool
}

// Stock is what is on the shelf.
type Stock struct {
	Item     string
	OnHandKg float64
	SafetyKg float64 // never to fall below
}

// StorageLimit is how much the site may keep of an item or of a class.
type StorageLimit struct {
	Item, Class string  // one of them
	Kg, M3      float64 // one of them
}

// Accept names what is allowed although the catalog advises against it.
type Accept struct{ Carriers, Agents, Unsuitable []string }

// Exclude names what the site does not want.
type Exclude struct{ Steps, Agents, Hazards []string }

// Peroxide is a test result.
type Peroxide struct {
	ReadingKgPerM3 float64
	Date           string
}

// Lot is a solvent to dry.
type Lot struct {
	Name, Solvent   string // Solvent is a catalog key
	BatchM3         float64
	BatchesPerYear  float64
	Water           float64 // kg/kg, dissolved water as read
	Saturated       bool    // Water is what the solvent holds at room temperature
	FreeWaterM3     float64
	Target          float64 // kg/kg
	NotBelow        float64 // kg/kg
	NeededWithinS   float64 // 0 where there is no limit
	WeeklyM3        float64 // what the apparatus must be able to dry in a week; 0 where not given
	Peroxide        *Peroxide
	HeaterW         float64            // 0: the still's own
	SieveHistory    string             // key of catalog.History, or ""
	SieveHistoryK   float64            // temperature where given as one, else 0
	ResidualLoading float64            // kg/kg, from the history
	ResidualStated  bool               // by the owner of the sorbent
	SieveTreatment  string             // as typed, where handling and standing were added up; "" else
	ResidualBand    *ResidualBand      // of such a history; nil else
	OtherResiduals  map[string]float64 // of such a history: what other sorbents hold by their own isotherms, as shares of ResidualLoading
	FailedBatch     *FailedBatch       // nil where neither the lot nor the site says it
	WaterBand       *WaterBand         // of Water; nil where one reading is given
	VesselHeightM   float64            // 0: from the vessel's charge
	Reclaimed       bool
	Line            int
}

// FailedBatch is what a batch costs that misses its target.
type FailedBatch struct {
	Amount    decimal.Decimal // job currency
	Converted string          // how it was brought into that currency, "" where it was given in it
}

// WaterBand is what the dissolved water of a lot may be, kg/kg: nine lots in ten
// lie in it, lognormal on either side of Lot.Water, or anything in it alike.
type WaterBand struct {
	Low, High float64
	Uniform   bool
}

// ResidualBand is how far a residual loading that was added up from handling and
// standing may be off: its ends as shares of Lot.ResidualLoading.
type ResidualBand struct{ Low, High float64 }

// HistoryShare is what a sorbent holds after the lot's history, as a share of
// ResidualLoading.
func (l Lot) HistoryShare(agent string) float64 {
	if share, ok := l.OtherResiduals[agent]; ok {
		return share
	}
	return 1
}

// Default is a value that the job left to the catalog.
type Default struct {
	Key, Text, Source, Confidence, Date string
}
