// Package study runs the whole line: job and catalog in, report out.
package study

import (
	"parch/catalog"
	"parch/internal/costs"
	"parch/internal/job"
	"parch/internal/routes"
)

// Report is everything that the terminal, the JSON and the workbook show.
type Report struct {
	Version     string
	CatalogDate string
	PriceDate   string // from which prices are counted old
	Job         *job.Job
	Seed        int64
	Draws       int
	Book        costs.Book   // prices that the bills use
	Buying      costs.Buying // for the best routes of all lots together
	Lots        []Lot
	Sources     []catalog.Source // cited, sorted by id
	Weak        []Weak           // numbers that rest on memory, practice or assumption
	Bookings    []Booking        // of apparatus by the best routes of all lots together
	Shared      []Shared         // equipment that several of them pay for
	Warnings    []string

	prices  costs.Book // all of them
	catalog *catalog.Catalog
}

// Weak is a number that rests on memory, common practice or an assumption, or that
// is the user's own.
type Weak struct {
	What, Value, Confidence, Source, Note string
}

// Lot is the answer for one lot.
type Lot struct {
	Job         job.Lot
	Solvent     *catalog.Solvent
	AcceptAt    float64 // kg/kg; NaN where the target cannot be shown
	CannotShow  string  // why, or ""
	Uncertainty float64 // kg/kg, U of the mean of the injections
	Detection   float64 // kg/kg, detection limit of the test
	Injections  int
	NothingToDo string        // why no drying is needed, or ""
	Routes      []Route       // ranked first, then those that miss, nearest first
	Follow      routes.Follow // for readers that follow the routes by closed forms; empty where they cannot
	Excluded    []routes.Excluded
	NoPrice     []string // items without which Priced leaves out routes that reach the limit, sorted
	BreakEvens  []BreakEven
	Front       []FrontPoint // routes that reach the limit and have their prices
	NearMisses  []string     // where no route reaches the limit: how near each constraint is missed
	WhatIf      *WhatIf      // nil where there is nothing to dry
	Warnings    []string

	Doubts []Mover // of the best route, the largest first; empty without draws

	surely *surely // nil where no route is sure enough, or no draws were made
}

// OfSure reports whether the break-evens, the trade-off and the grid of other lots are
// asked of routes that are sure enough; else of all that reach the limit, whatever
// their chance.
func (l *Lot) OfSure() bool { return l.surely != nil }

// AskedOf says so.
func (l *Lot) AskedOf() string {
	if l.OfSure() {
		return "each route with the aim, stands, charges and lots over a charge that make it sure now"
	}
	return "whatever the chance"
}

// BreakEvensOf says which routes the break-evens are asked of.
func (l *Lot) BreakEvensOf() string {
	if l.OfSure() {
		return l.AskedOf() + ", and for the start water there"
	}
	return l.AskedOf()
}

// Route is one compared route.
type Route struct {
	ID, Label string
	Rank      int     // 1 is best; 0 where the target is missed
	Objective float64 // value of the job's objective: money per litre, h, kg or kWh
	Run       routes.Run
	Bill      costs.Bill
	Year      *costs.Year // nil where part of it has no price
	Footprint costs.Footprint
	Cautions  []catalog.Caution
	Warnings  []string

	Range       *Range // nil without draws
	Recommended bool   // reaches the limit, and its chance reaches the assurance of the job
	WhyNot      string // why a route that reaches the limit is not recommended, or ""
	Miss        *Miss  // nil where the job does not say what a failed batch costs, or no chance is known
}

// Meets reports whether the route reaches the acceptance limit.
func (r Route) Meets() bool { return r.Run.Meets }
