// Package job reads a job file: what shall be dried, to what target, where and
// with what equipment. Everything it returns is validated and in SI units.
package job

import (
	"github.com/shopspring/decimal"
)

// Job is a validated job in SI units.
type Job struct {
	File, Title string
	Currency    string  // ISO 4217 code
	Objective   string  // cost, time, waste or energy
	Assurance   float64 // chance of target that a recommended route needs, 0..1
	Prices      []Price // own prices, in the order given
	Site        Site
	Equipment   []Equipment
	Stock       []Stock
	Accept      Accept
	Exclude     Exclude
	Lots        []Lot
	Defaults    []Default // what the catalog filled in
	Warnings    []string  // "not used yet" and readings that were interpreted
	Invented    bool      // the demonstration job: every price in it is invented
}

// Site is the place and its rates.
type Site struct {
	RoomK, PressurePa, Humidity, ReceiverK float64
	AttendedSecondsPerDay                  float64
	PeroxideLimitKgPerM3                   float64
	KarlFischer                            string // coulometric or volumetric
}

// Price is a price of the user's own. Rates of the site (technician, electricity,
// cooling water) are prices too.
type Price struct {
	Item     string
	Unit     string          // as in catalog.Price.Unit
	PerUnit  decimal.Decimal // job currency per unit
	PackSize float64         // in Unit; 0 where the price is a rate
	Date     string          // ISO date, "" where not given
	WaterMax float64         // kg/kg, dry grades; 0 where not given
	Line     int
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
}

// Accept names what is allowed although the catalog advises against it.
type Accept struct{ Carriers, Agents, Unsuitable []string }

// Exclude names what the site does not want.
type Exclude struct{ Steps, Agents []string }

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
	FreeWaterM3     float64
	Target          float64 // kg/kg
	NotBelow        float64 // kg/kg
	NeededWithinS   float64 // 0 where there is no limit
	Peroxide        *Peroxide
	HeaterW         float64 // 0: the still's own
	SieveHistory    string  // key of catalog.History, or ""
	SieveHistoryK   float64 // temperature where given as one, else 0
	ResidualLoading float64 // kg/kg, from the history
	VesselHeightM   float64 // 0: from the vessel's charge
	Reclaimed       bool
	Line            int
}

// Default is a value that the job left to the catalog.
type Default struct {
	Key, Text, Source, Confidence, Date string
}
