// Package steps simulates one drying step at a time: what goes in, what comes
// out, why it stops, and what it uses. Nothing here knows of money.
package steps

import "math"

// Kind is the name of a step.
type Kind string

// The kinds of step.
const (
	Settle     Kind = "settle"
	Trap       Kind = "trap"
	Forerun    Kind = "forerun"
	Soak       Kind = "soak"
	Column     Kind = "column"
	Salt       Kind = "salt"
	Reactive   Kind = "reactive"
	Regenerate Kind = "regenerate"
	Buy        Kind = "buy"
)

// Heated tells the steps that boil the lot.
func (k Kind) Heated() bool { return k == Trap || k == Forerun || k == Reactive }

// Stop says why a step stops.
type Stop string

// The reasons to stop.
const (
	AtTarget   Stop = "target reached"
	AtFloor    Stop = "floor"
	AtPractice Stop = "practical limit"
	AtTime     Stop = "time"
	AtCapacity Stop = "capacity"
	AtGrade    Stop = "grade as sold"
	AtMeasured Stop = "measured residual"
	AtHeel     Stop = "heel"                 // as much drawn off as may be
	AtWater    Stop = "only water left"      // nothing else is in the pot
	AtOneLayer Stop = "no second layer"      // the condensate no longer splits
	AtExchange Stop = "layers change places" // the return no longer fits
	AtCarrier  Stop = "carrier used up"      // none is left in the pot
)

// Lot is an amount of solvent, its water and what is left of a carrier.
type Lot struct {
	SolventKg, WaterKg float64
	CarrierKg          float64
	TempK              float64
}

// MassKg is the mass of the whole lot.
func (l Lot) MassKg() float64 { return l.SolventKg + l.WaterKg + l.CarrierKg }

// Carrier is the mass fraction of carrier, kg/kg.
func (l Lot) Carrier() float64 { return l.CarrierKg / l.MassKg() }

// Water is the mass fraction of water, kg/kg of solution.
func (l Lot) Water() float64 { return l.WaterKg / l.MassKg() }

// Head is a head of cost.
type Head string

// The heads of cost, in the order in which they are shown.
const (
	Labour       Head = "labour"
	Energy       Head = "energy"
	CoolingWater Head = "cooling_water"
	Agent        Head = "agent"
	SolventLost  Head = "solvent_lost"
	Waste        Head = "waste"
	Equipment    Head = "equipment"
	Testing      Head = "testing"
	Purchase     Head = "purchase"
)

// Heads lists all heads in order.
var Heads = []Head{Labour, Energy, CoolingWater, Agent, SolventLost, Waste, Equipment, Testing, Purchase}

// Use is an amount of something that is paid for.
type Use struct {
	Head     Head
	Item     string  // price item, such as "technician", "electricity", "sieve-3a", "toluene", "still-20l"
	Unit     string  // hour, kwh, m3, kg, litre, each, test: the unit of the price
	Quantity float64 // per batch, or per year where PerYear is set
	PerYear  bool    // shared by the batches of a year
	Basis    string  // how the quantity came about, for the reader
}

// Loss is solvent that does not reach the product.
type Loss struct {
	Cause     string
	SolventKg float64
}

// Discard is what has to be disposed of.
type Discard struct {
	Class WasteClass
	What  string
	Kg    float64
}

// WasteClass sorts what is discarded.
type WasteClass string

// The classes of waste.
const (
	AqueousWaste  WasteClass = "aqueous"
	SolventWaste  WasteClass = "solvent"
	WetSolidWaste WasteClass = "wet solid"
	ReactiveWaste WasteClass = "reactive"
)

// Balance closes what went in against what came out, kg.
type Balance struct {
	WaterInKg, WaterOutKg, WaterRemovedKg       float64
	SolventInKg, SolventOutKg, SolventRemovedKg float64
	WaterMadeKg                                 float64 // made by the solvent itself, with what went in
	SolventAddedKg                              float64 // fresh solvent of a rinse, with what went in
	WaterAddedKg                                float64 // and its water
	CarrierAddedKg, CarrierOutKg                float64
	CarrierRemovedKg                            float64
	HeatInJ, HeatUsedJ                          float64
}

// Point is a point of a step's course.
type Point struct {
	Hours     float64
	Water     float64 // kg/kg in the solvent
	BoiledKg  float64 // trap: vapour boiled up so far
	AqueousM3 float64 // trap: aqueous layer collected so far
	DrawnM3   float64 // forerun: distillate drawn off so far
	LostShare float64 // of the solvent, out of the pot so far, or of a forerun not in the distillate that is the product
	Carrier   float64 // kg/kg in the pot
	PotK      float64 // boiling temperature; 0 where the step does not boil
	HeadK     float64 // of the vapour that reaches the condenser
}

// Condenser is what the condenser of a boiling step takes up.
type Condenser struct {
	DutyW        float64 // while it boils
	HeatLossW    float64 // of the heater's power, what never reaches the liquid
	RiseK        float64 // of the cooling water, at which NeededM3PerS suffices
	NeededM3PerS float64
	RunM3PerS    float64 // the flow really used
	RunRiseK     float64 // at RunM3PerS
}

// Outcome is what a step did.
type Outcome struct {
	Kind          Kind
	Agent         string
	Apparatus     string // key of the piece that was chosen for it, or ""
	In, Out       Lot
	Floor         float64 // kg/kg; NaN where the step has none
	FloorOf       string  // what holds that, and when; "" where it is the lot at the end of the step
	Why           Stop
	WhyText       string // the reason in a sentence
	RuledBy       string // the assumption on which the result turns; "" where none stands out
	HoursTotal    float64
	HoursAttended float64
	EnergyKWh     float64
	CoolingWaterL float64
	AgentKg       float64 // agent charged
	Carrier       string  // carrier distillation: key of the carrier
	CarrierKg     float64 // carrier charged
	CarrierLostKg float64 // of it, not recovered as a layer that can be used again
	Returns       string  // trap: the layer that goes back to the pot, light or heavy
	Overhead      bool    // forerun: the distillate is the product, a wet heel stays behind
	Condenser     Condenser
	SolventLostL  float64
	WasteKg       float64
	Losses        []Loss
	Discards      []Discard
	Balance       Balance
	Course        []Point
	Figures       []Figure
	Warnings      []string
}

// Figure is a number of a step worth showing, in the unit it is shown in.
type Figure struct {
	Name, Unit string
	Value      float64
}

// Figure returns a figure by name, NaN where the step has none of that name.
func (o *Outcome) Figure(name string) float64 {
	for _, f := range o.Figures {
		if f.Name == name {
			return f.Value
		}
	}
	return math.NaN()
}
