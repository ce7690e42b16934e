package workbook

import (
	"cmp"
	"errors"
	"fmt"
	"slices"
	"strings"

	"github.com/shopspring/decimal"

	"parch/internal/costs"
	"parch/internal/steps"
	"parch/internal/study"
)

// objectives in the order of the columns that they choose from.
var objectives = []string{"cost", "time", "waste", "energy"}

const mgPerKg = 1e6

// model holds every number that the sheets compute, in the sheets' own
// arithmetic: inputs of 15 digits, binary floating point, the same order of sums.
type model struct {
	report *study.Report
	lots   []*lotModel
	routes []*routeModel // all lots, in the order shown
	prices []costs.Price // by item
}

type lotModel struct {
	study.Lot
	no                     int
	batchLitres, batches   float64
	start, target          float64 // mg/kg
	uncertainty, detection float64 // mg/kg
	acceptAt               float64 // mg/kg
	shown                  bool
	routes                 []*routeModel
	row, place             int // among the lots on Steps; 0 where the lot is not followed
}

type lineModel struct {
	costs.Line
	perYear          bool
	quantity, shared float64
	perBatch         float64
	price, amount    float64
}

type routeModel struct {
	study.Route
	lot       *lotModel
	no        int
	stages    []*stageModel
	lines     []lineModel
	heads     []float64 // as steps.Heads
	headSum   float64
	written   []float64 // heads to the cent, as steps.Heads
	wholeBill float64   // their sum
	total     float64
	litres    float64
	perLitre  float64
	perYear   float64
	waterOut  float64 // mg/kg
	reaches   bool
	values    []float64 // as objectives
	objective float64
	order     int    // place of the id among the ids of the lot
	ahead     [3]int // routes ahead by objective, by cost per litre, by id
	rank      int
	sharing   int // routes of the workbook with the same lot and rank
}

func newModel(r *study.Report) (*model, error) {
	if !slices.Contains(objectives, r.Job.Objective) {
		return nil, fmt.Errorf("objective %q is not one of %s", r.Job.Objective, strings.Join(objectives, ", "))
	}
	m := &model{report: r}
	for _, item := range sortedKeys(r.Book) {
		m.prices = append(m.prices, r.Book[item])
	}
	var problems []error
	for i, lot := range r.Lots {
		l := newLot(i+1, lot)
		m.lots = append(m.lots, l)
		for _, route := range lot.Routes {
			rm, err := newRoute(len(m.routes)+1, l, route, r.Book)
			problems = append(problems, err)
			l.routes, m.routes = append(l.routes, rm), append(m.routes, rm)
		}
	}
	if err := errors.Join(problems...); err != nil {
		return nil, err
	}
	for _, l := range m.lots {
		rankRoutes(l.routes, slices.Index(objectives, r.Job.Objective))
	}
	for _, a := range m.routes {
		for _, b := range m.routes {
			if a.contest() == b.contest() && a.rank == b.rank {
				a.sharing++
			}
		}
	}
	return m, nil
}

func newLot(no int, lot study.Lot) *lotModel {
	l := &lotModel{
		Lot:         lot,
		no:          no,
		batchLitres: tidy(lot.Job.BatchM3 * 1000),
		batches:     tidy(lot.Job.BatchesPerYear),
		start:       tidy(lot.Job.Water * mgPerKg),
		target:      tidy(lot.Job.Target * mgPerKg),
		uncertainty: tidy(lot.Uncertainty * mgPerKg),
		detection:   tidy(lot.Detection * mgPerKg),
	}
	l.acceptAt = l.target - l.uncertainty
	l.shown = l.acceptAt >= l.detection
	return l
}

func newRoute(no int, lot *lotModel, route study.Route, book costs.Book) (*routeModel, error) {
	r := &routeModel{Route: route, lot: lot, no: no, heads: make([]float64, len(steps.Heads))}
	if route.Run.LitresDelivered <= 0 {
		return r, fmt.Errorf("lot %q, route %s delivers no solvent", lot.Job.Name, route.ID)
	}
	r.stages = stagesOf(r, lot.Follow.Steps[route.ID])
	if !route.Bill.Priced() {
		return r, fmt.Errorf("lot %q, route %s: no price for %s", lot.Job.Name, route.ID, strings.Join(route.Bill.NoPrice, ", "))
	}
	for _, line := range route.Bill.Lines {
		l, err := newLine(line, lot.batches, book)
		if err != nil {
			return r, fmt.Errorf("lot %q, route %s: %w", lot.Job.Name, route.ID, err)
		}
		r.lines = append(r.lines, l)
		r.heads[slices.Index(steps.Heads, line.Head)] += l.amount
		r.total += l.amount
	}
	if err := r.addUnused(lot.batches, book); err != nil {
		return r, err
	}
	for _, h := range r.heads {
		r.headSum += h
	}
	heads, total := route.Bill.Written()
	for _, h := range steps.Heads {
		r.written = append(r.written, float(heads[h]))
	}
	r.wholeBill = float(total)
	run := route.Run
	r.litres = tidy(run.LitresDelivered)
	r.perLitre = r.total / r.litres
	r.perYear = r.total * lot.batches
	r.waterOut = tidy(run.WaterOut * mgPerKg)
	r.reaches = lot.shown && r.waterOut <= lot.acceptAt*(1+tie)
	r.values = []float64{r.perLitre, tidy(run.HoursTotal), tidy(run.WasteKg), tidy(run.EnergyKWh)}
	return r, nil
}

// addUnused adds the lines that an edit of the settings can bring about: the
// stirrer of a soak that stands still in the run. It marks sieves that pay for an
// oven.
func (r *routeModel) addUnused(batches float64, book costs.Book) error {
	price, priced := book["electricity"]
	for _, s := range r.stages {
		if s.constants == nil || s.sieve == "" {
			continue
		}
		stirrer := false
		for _, line := range r.lines {
			key := ""
			if line.Step == s.no {
				key = keyOfUse(s, line)
			}
			s.ovenBilled = s.ovenBilled || key == "ovenkwh"
			s.flushBilled = s.flushBilled || key == "gas" || key == "waste2"
			stirrer = stirrer || key == "energy"
		}
		if s.Kind != steps.Soak || stirrer || !priced {
			continue
		}
		line, err := newLine(costs.Line{Head: steps.Energy, Step: s.no, Item: price.Item, Unit: price.Unit, UnitPrice: price.PerUnit, Basis: stirrerBasis}, batches, book)
		if err != nil {
			return err
		}
		r.lines = append(r.lines, line)
	}
	return nil
}

// stirrerBasis is how the bill names the energy of a stirrer.
const stirrerBasis = "stirrer power x hours"

func newLine(line costs.Line, batches float64, book costs.Book) (lineModel, error) {
	price, ok := book[line.Item]
	if !ok {
		return lineModel{}, fmt.Errorf("no price for %s in the book", line.Item)
	}
	if !slices.Contains(steps.Heads, line.Head) {
		return lineModel{}, fmt.Errorf("%q is not a head of cost", line.Head)
	}
	if !price.PerUnit.Equal(line.UnitPrice) {
		return lineModel{}, fmt.Errorf("%s is billed at %s but the book says %s", line.Item, line.UnitPrice, price.PerUnit)
	}
	l := lineModel{Line: line, perYear: !line.YearShare.IsZero(), shared: 1, price: float(price.PerUnit)}
	l.quantity = float(line.Quantity)
	if l.perYear {
		l.quantity, l.shared = float(line.YearShare), batches
	}
	l.perBatch = l.quantity / l.shared
	l.amount = l.perBatch * l.price
	return l, nil
}

// tie is the share of a value within which two routes count as level: below it
// there is only the noise of the arithmetic.
const tie = 1e-9

// rankRoutes ranks those that reach the target: by the objective, then by cost per
// litre, then by id.
func rankRoutes(list []*routeModel, objective int) {
	for _, a := range list {
		a.objective = a.values[objective]
		for _, b := range list {
			if b.ID <= a.ID {
				a.order++
			}
		}
	}
	for _, a := range list {
		a.ahead[0] = before(list, func(b *routeModel) bool { return b.objective < a.objective*(1-tie) })
	}
	for _, a := range list {
		a.ahead[1] = before(list, func(b *routeModel) bool {
			return b.ahead[0] == a.ahead[0] && b.perLitre < a.perLitre*(1-tie)
		})
	}
	for _, a := range list {
		a.ahead[2] = before(list, func(b *routeModel) bool {
			return b.ahead[0] == a.ahead[0] && b.ahead[1] == a.ahead[1] && b.order < a.order
		})
		if a.reaches {
			a.rank = 1 + a.ahead[0] + a.ahead[1] + a.ahead[2]
		}
	}
}

// before counts the routes that reach the target and come before another.
func before(list []*routeModel, comes func(*routeModel) bool) (n int) {
	for _, b := range list {
		if b.reaches && comes(b) {
			n++
		}
	}
	return n
}

func abs(x float64) float64 { return max(x, -x) }

func float(d decimal.Decimal) float64 { return tidy(d.InexactFloat64()) }

// sortBy sorts by a key, equal ones in the order they have.
func sortBy[T any](list []T, key func(T) float64) {
	slices.SortStableFunc(list, func(a, b T) int { return cmp.Compare(key(a), key(b)) })
}
