// Package catalog is the reference shelf: embedded data on solvents, drying
// agents, apparatus, prices and practice, each number with its unit, source and
// confidence. Load reads and validates it; what it returns is read-only.
package catalog

import "parch/internal/thermo"

// Confidence says what a number rests on.
type Confidence string

// The grades of confidence, best first.
const (
	Published      Confidence = "published"       // seen in print
	Fitted         Confidence = "fitted"          // parameters fitted to published or recalled data
	Derived        Confidence = "derived"         // computed from other numbers by a stated method
	Assumption     Confidence = "assumption"      // chosen here, with the reason in the note
	CommonPractice Confidence = "common practice" // a fact of the trade, no source
	Memory         Confidence = "memory"          // recalled, not verified
	Invented       Confidence = "invented"        // demonstration data
)

// Weak reports whether a number of this grade must be marked where it is shown.
func (c Confidence) Weak() bool {
	return c == Assumption || c == CommonPractice || c == Memory || c == Invented
}

// Origin says where a number comes from.
type Origin struct {
	Source     string // id of a Source
	Confidence Confidence
	Note       string
	Own        bool // from the user's own file
}

// Value is one number of the catalog in SI units.
type Value struct {
	SI        float64
	Text      string  // as written in the file, with its unit
	Low, High float64 // SI; both 0 where no band is given
	Origin
}

// Banded reports whether a low and a high value are given.
func (v Value) Banded() bool { return v.Low != 0 || v.High != 0 }

// Source is a reference in full.
type Source struct {
	ID, Reference string
	Own           bool // from the user's own file
}

// Curve is a correlation and its origin.
type Curve struct {
	thermo.Correlation
	Unit string // as printed by the source
	Origin
}

// Solvent is one solvent (or water) with all that is known of it.
type Solvent struct {
	Key, Name, CAS, Formula, Class string
	Aliases                        []string
	Own                            bool     // from the user's own file
	Estimates                      []string // what the entry left out and how it was filled in; nil for most

	MolarMass, BoilingPoint, MeltingPoint, CriticalTemperature Value  // kg/mol, K, K, K
	FlashPoint, Autoignition                                   *Value // K; nil where none is known
	HottestPot                                                 *Value // K; a pot is boiled no hotter; nil: no limit
	VapourPressure, HeatOfVaporization                         Curve
	HeatCapacity, Density, Viscosity                           Curve
	Pure                                                       thermo.Pure // the curves above, ready to evaluate

	KnownMiss string     // where the curves are known to be off and why; "" for most
	Water     *WaterPair // nil for water itself
	Hazards   Hazards
	StillRate Value  // 1/s, mixing rate of a still bottle 0.08 m deep (k_mix)
	HBond     string // "weak" or "strong" acceptor: chooses StillRate
}

// WaterPair is the NRTL set of water (component 0) and the solvent (component 1).
type WaterPair struct {
	A12, B12, A21, B21, Alpha float64
	TMinK, TMaxK              float64
	Quality                   string  // A, B or C; D where it rests on one solubility
	SolubilityBand            float64 // scatter of published solubility at 25 C, as a factor (1.05 = 5 %); 1 where none is stated
	BandOrigin                Origin  // of SolubilityBand
	NRTL                      thermo.NRTL
	Limits                    []thermo.Limit // where the set must not be used
	Origin
	FittedTo  string
	KnownMiss string // where the pair is known to be off and why; "" for most
}

// Hazards lists what must be known before the solvent is heated or dried.
type Hazards struct {
	PeroxideClass  string // A, B, C, D or "none"
	PeroxideNote   string
	Halogenated    bool
	Flammability   string
	ExplosiveRange string // share of the vapour in air
	Toxicity       string
	IARC           string
	ExposureLimit  string
	AlkaliNote     string
	Facts          []Fact // the same, each with its origin
	Origin                // of the peroxide class
}

// FormsPeroxides reports whether the solvent is held to form peroxides.
func (h Hazards) FormsPeroxides() bool { return h.PeroxideClass != "" && h.PeroxideClass != "none" }

// Fact is a statement in words and its origin.
type Fact struct {
	What, Text string
	Origin
}

// History is how a sieve was activated and kept, and what water it still holds.
type History struct {
	Key, Text       string
	TemperatureK    float64 // 0 where the history is not an activation
	ResidualKgPerKg Value   // kg water per kg sieve, with its band
}

// Verdict is what the agent matrix says about a solvent and an agent.
type Verdict struct {
	Word   string // ok, caution, unsuitable, dangerous
	Reason string
	Origin
}

// Allowed reports whether a route may use the pair without acceptance by name.
func (v Verdict) Allowed() bool { return v.Word == "ok" || v.Word == "caution" }

// Price is an indicative default price per unit.
type Price struct {
	Item, Label string
	Unit        string     // hour, kwh, m3, kg, litre, each, test
	Amount      string     // decimal text per unit
	Low, High   string     // decimal text, "" where no band is given
	Currency    string     // currency of the source
	Date        string     // ISO date the figure is kept under
	WaterMax    *Value     // dry grades: kg/kg
	Packs       []PackSize // the sizes in which it is commonly sold, the smallest first; nil where not known
	Origin
}

// Caution is a warning that is shown where it applies.
type Caution struct {
	Code, Level, Text string   // Level: "info", "caution", "danger"
	Steps, Agents     []string // empty: any
	Classes, Solvents []string // empty: any
	Peroxide          bool     // only for peroxide formers
	Reclaimed         bool     // only for reclaimed lots
	ReducedPressure   bool     // only where it boils under less than a room has
	Flammable         bool     // only for solvents with a flash point
	Origin
}

// Practice is an operating fact by key, such as "heat-share" or "trap-outlet-minimum".
type Practice map[string]Value

// Catalog is the whole shelf.
type Catalog struct {
	Own       []string // names of the user's own files, in the order given
	Date      string   // ISO date of the data
	Sources   map[string]Source
	Solvents  map[string]*Solvent
	Agents    map[string]*Agent
	Matrix    map[[2]string]Verdict // {class or solvent, agent}; a solvent's own row wins
	Histories []History
	Apparatus map[string]*Apparatus
	Prices    map[string]Price
	Practice  Practice
	Doubts    map[string]Value // factors within which nine cases in ten lie, by key
	Emissions map[string]Value // kg CO2e per kg by "making/KEY" and "burning/KEY"; "electricity" per kWh
	Assays    map[string]Assay // "coulometric", "volumetric"
	Cautions  []Caution
	Carriers  map[string]*Carrier
	Pairs     map[[2]string]*CarrierPair  // {solvent, carrier}
	Ternaries map[[2]string]*TernarySet   // {alcohol, carrier}
	Layers    map[[2]string]*OrganicLayer // {alcohol, carrier}
	Diameters map[string]Value            // m, kinetic diameter by solvent, "water" included
}

// Assay is a Karl Fischer method as it is practised.
type Assay struct {
	Key            string
	Repeatability  Value // kg/kg, r = 2.77 standard deviations
	DetectionLimit Value // kg/kg
	Highest        Value // kg/kg, above it the other method is advised
	Injections     int   // of which the mean is reported
	InjectionsFrom Origin
	Sample         Value // kg per injection
}

// Verdict returns what is known about the solvent and the agent. ok is false
// where there is no data, which must be treated as a refusal.
func (c *Catalog) Verdict(solvent *Solvent, agent string) (v Verdict, ok bool) {
	if v, ok = c.Matrix[[2]string{solvent.Key, agent}]; ok {
		return v, true
	}
	v, ok = c.Matrix[[2]string{solvent.Class, agent}]
	return v, ok
}

// Apparatus is a piece of equipment.
type Apparatus struct {
	Key, Name, Kind string // Kind: one of apparatusKinds
	Own             bool   // from the user's own file
	Returns         string // receivers: "light", "heavy" or "either"
	PreFilled       bool   // receivers: filled with dry carrier before it starts
	SetUp           *Value // s, beyond the usual set-up of a trap
	Volume          *Value // m3: flask, vessel or receiver (usable for water)
	FillVolume      *Value // m3: receiver, liquid held before anything returns
	Fill            *Value // share of the volume that may be filled
	Power           *Value // W
	Load            *Value // kg per oven run
	Energy          *Value // J per oven run
	Diameter        *Value // m: column
	Length          *Value // m: bed or packing of a column
	Stages          *Value // equilibrium stages of a fractionating column at total reflux
	Cooling         *Value // W taken up by a chiller
	Life            *Value // s of service
	Breakage        *Value // share of the price per year
}
