package report

import (
	"bytes"
	"encoding/csv"
	"math"
	"slices"
	"strconv"
	"strings"

	"github.com/shopspring/decimal"

	"parch/internal/costs"
	"parch/internal/steps"
	"parch/internal/study"
)

// Table is a file of comma separated values (RFC 4180, UTF-8, a decimal point).
type Table struct {
	Name string
	Data []byte
}

// TableNames are the files that Tables gives, in their order.
var TableNames = []string{"buying.csv", "bills.csv", "routes.csv"}

// Tables gives the report as tables with fixed headings. Units stand in the
// headings, money is exact, and no cell begins a formula of a spreadsheet.
func Tables(r *study.Report) ([]Table, error) {
	var all []Table
	for i, rows := range [][][]string{buyingRows(r), billRows(r), routeRows(r)} {
		data, err := csvBytes(rows)
		if err != nil {
			return nil, err
		}
		all = append(all, Table{TableNames[i], data})
	}
	return all, nil
}

func csvBytes(rows [][]string) ([]byte, error) {
	var out bytes.Buffer
	w := csv.NewWriter(&out)
	w.UseCRLF = true
	for _, row := range rows {
		safe := make([]string, len(row))
		for i, cell := range row {
			safe[i] = inert(cell)
		}
		if err := w.Write(safe); err != nil {
			return nil, err
		}
	}
	w.Flush()
	return out.Bytes(), w.Error()
}

// inert puts an apostrophe before a text that a spreadsheet would take for a
// formula. A negative number stays as it is.
func inert(cell string) string {
	if cell == "" || !strings.ContainsRune("=+-@\t\r", rune(cell[0])) {
		return cell
	}
	if _, err := strconv.ParseFloat(cell, 64); err == nil && cell[0] == '-' {
		return cell
	}
	return "'" + cell
}

// figure prints a number with 12 significant digits; none is an empty cell.
func figure(x float64) string {
	if math.IsNaN(x) || math.IsInf(x, 0) {
		return ""
	}
	return strconv.FormatFloat(tidied(x), 'f', -1, 64)
}

func tidied(x float64) float64 {
	rounded, err := strconv.ParseFloat(strconv.FormatFloat(x, 'e', 11, 64), 64)
	if err != nil {
		return x
	}
	return rounded
}

func yesNo(b bool) string {
	if b {
		return "yes"
	}
	return "no"
}

// The texts that may hold a comma come last, for tools that split at commas.
var billHeadings = []string{"route_id", "rank", "step", "head", "item", "quantity_per_batch", "unit", "unit_price", "amount_per_batch", "currency",
	"quantity_per_year_shared", "price_date", "price_check", "lot", "label", "basis"}

// billRows has one row a line of a bill, so that a sum by route is its cost.
func billRows(r *study.Report) [][]string {
	rows := [][]string{billHeadings}
	for i := range r.Lots {
		l := &r.Lots[i]
		for j := range l.Routes {
			route := &l.Routes[j]
			for _, line := range route.Bill.Lines {
				price := r.Book[line.Item]
				shared := ""
				if !line.YearShare.IsZero() {
					shared = line.YearShare.String()
				}
				rows = append(rows, []string{route.ID, rank(route), strconv.Itoa(line.Step), string(line.Head), line.Item, line.Quantity.String(), line.Unit,
					line.UnitPrice.String(), line.Amount.String(), route.Bill.Currency, shared, price.Date, string(price.Flag), l.Job.Name, line.Label, line.Basis})
			}
			for _, item := range route.Bill.NoPrice {
				rows = append(rows, []string{route.ID, rank(route), "", "", item, "", "", "", "", route.Bill.Currency, "", "", "no price", l.Job.Name, "", ""})
			}
		}
	}
	return rows
}

func rank(r *study.Route) string {
	if r.Rank == 0 {
		return ""
	}
	return strconv.Itoa(r.Rank)
}

// wasteItems are the classes of waste of the heading, in order.
var wasteItems = []string{"waste-aqueous", "waste-flammable-liquid", "waste-halogenated-liquid", "waste-wet-solid"}

func routeHeadings() []string {
	heads := []string{"lot", "solvent", "route_id", "label", "rank", "meets_target", "water_out_mg_per_kg", "hours_total", "hours_attended", "energy_kwh",
		"cooling_water_l", "solvent_lost_l", "litres_delivered", "currency", "cost_per_batch", "cost_per_litre", "cost_per_year"}
	for _, h := range steps.Heads {
		heads = append(heads, "cost_"+string(h))
	}
	heads = append(heads, "no_price_for", "price_check", "co2e_kg", "co2e_energy_kg", "co2e_making_kg", "co2e_burning_kg", "co2e_agent_kg", "co2e_sources", "waste_kg")
	for _, item := range wasteItems {
		heads = append(heads, strings.ReplaceAll(item, "-", "_")+"_kg")
	}
	return append(heads, "waste_other_kg", "batches_per_year", "regenerations_per_year", "make_up_l_per_year", "packs_first_year", "equipment_to_buy", "paid_out_first_year",
		"paid_out_later_years", "compared_with", "saving_per_year", "payback_years", "interest_share", "present_value_years", "net_present_value")
}

func routeRows(r *study.Report) [][]string {
	rows := [][]string{routeHeadings()}
	for i := range r.Lots {
		l := &r.Lots[i]
		for j := range l.Routes {
			rows = append(rows, routeRow(l, &l.Routes[j]))
		}
	}
	return rows
}

func routeRow(l *study.Lot, r *study.Route) []string {
	run, bill, f := &r.Run, &r.Bill, r.Footprint
	row := []string{l.Job.Name, l.Job.Solvent, r.ID, r.Label, rank(r), yesNo(r.Meets()), figure(run.WaterOut * mgPerKg), figure(run.HoursTotal), figure(run.HoursAttended),
		figure(run.EnergyKWh), figure(run.CoolingWaterL), figure(run.SolventLostL), bill.LitresDelivered.String(), bill.Currency}
	priced := func(d decimal.Decimal) string {
		if !bill.Priced() {
			return ""
		}
		return d.String()
	}
	row = append(row, priced(bill.PerBatch), priced(bill.PerLitre), priced(bill.PerYear))
	for _, h := range steps.Heads {
		row = append(row, priced(bill.ByHead[h]))
	}
	row = append(row, strings.Join(bill.NoPrice, " "), strings.Join(bill.Doubts, "; "), figure(run.CO2eKg), figure(f.EnergyKg), figure(f.MakingKg), figure(f.BurningKg),
		figure(f.AgentKg), strings.Join(f.Sources, " "), figure(run.WasteKg))
	other := run.WasteKg
	for _, item := range wasteItems {
		row = append(row, figure(f.WasteKg[item]))
		other -= f.WasteKg[item]
	}
	if other < 1e-9*run.WasteKg {
		other = 0
	}
	return append(append(row, figure(other)), yearCells(l, r.Year)...)
}

func yearCells(l *study.Lot, y *costs.Year) []string {
	cells := []string{figure(l.Job.BatchesPerYear)}
	if y == nil {
		return append(cells, make([]string, 12)...)
	}
	cells = append(cells, figure(y.Regenerations), figure(y.MakeUpLitres), y.PackCost.String(), y.Equipment.String(), y.FirstYear.String(), y.LaterYears.String())
	v := y.Investment
	if v == nil {
		return append(cells, make([]string, 6)...)
	}
	interest, years, worth := "", "", ""
	if v.Interest > 0 {
		interest, years, worth = figure(v.Interest), figure(v.Years), v.PresentValue.String()
	}
	return append(cells, v.Against, v.YearlySaving.String(), figure(v.PaybackYears), interest, years, worth)
}

var buyingHeadings = []string{"item", "label", "specification", "un_number", "hazard_class", "packing_group", "transport_basis", "unit", "process_per_year", "losses_per_year",
	"safety_stock", "on_hand", "to_buy", "kg_per_unit", "pack_size", "packs", "amount", "price_of_pack", "cost", "currency", "supplier", "tax", "price_date", "valid_until",
	"price_check", "lead_time_days", "order_day", "needed_on_day", "first_batch_day", "packs_per_delivery", "days_between_deliveries", "order_date", "needed_on_date", "left_at_end", "too_old_before_use",
	"most_in_store", "storage_flags", "why"}

// buyingRows has one row a pack, or one for an item of which nothing is bought.
func buyingRows(r *study.Report) [][]string {
	rows := [][]string{buyingHeadings}
	for i := range r.Buying.Purchases {
		p := &r.Buying.Purchases[i]
		orders := p.Orders
		if len(orders) == 0 {
			rows = append(rows, slices.Concat(purchaseCells(p), make([]string, 19), endCells(r, p)))
		}
		for _, o := range orders {
			rows = append(rows, slices.Concat(purchaseCells(p), orderCells(r, o), endCells(r, p)))
		}
	}
	for i := range rows[1:] {
		rows[i+1][19] = r.Job.Currency
	}
	return rows
}

func purchaseCells(p *costs.Purchase) []string {
	t := p.Transport
	return []string{p.Item, p.Label, p.Specification, t.UN, t.Class, t.Group, t.Basis, p.Unit, figure(p.Process), figure(p.Losses), figure(p.Safety), figure(p.Have), figure(p.ToBuy), figure(p.KgPerUnit)}
}

func orderCells(r *study.Report, o costs.Order) []string {
	size, lead, every := "any", "", ""
	if !o.Pack.AnyAmount() {
		size = o.Pack.Size.String()
	}
	if o.Pack.LeadDays >= 0 {
		lead = strconv.Itoa(o.Pack.LeadDays)
	}
	if o.Every > 0 {
		every = strconv.Itoa(o.Every)
	}
	return []string{size, strconv.Itoa(o.Count), o.Amount.String(), o.Pack.Price.String(), o.Cost.String(), r.Job.Currency, o.Pack.Supplier, o.Pack.Tax, o.Pack.Date, o.Pack.ValidUntil,
		string(o.Pack.Flag), lead, strconv.Itoa(o.OrderDay), strconv.Itoa(o.NeedDay), strconv.Itoa(r.Buying.FirstBatchDay), strconv.Itoa(o.Each), every,
		r.Buying.DateOf(o.OrderDay), r.Buying.DateOf(o.NeedDay)}
}

func endCells(r *study.Report, p *costs.Purchase) []string {
	return []string{figure(p.Leftover), figure(p.Expires), figure(p.Peak), strings.Join(r.Buying.Flags, "; "), p.Why}
}
