package report_test

import (
	"bytes"
	"encoding/csv"
	"strconv"
	"strings"
	"testing"

	"github.com/shopspring/decimal"

	"parch/internal/costs"
	"parch/internal/report"
	"parch/internal/steps"
	"parch/internal/study"
)

func tables(t *testing.T, r *study.Report) map[string][][]string {
	t.Helper()
	all, err := report.Tables(r)
	if err != nil {
		t.Fatal(err)
	}
	out := map[string][][]string{}
	for i, table := range all {
		if table.Name != report.TableNames[i] {
			t.Errorf("table %s, want %s", table.Name, report.TableNames[i])
		}
		rows, err := csv.NewReader(bytes.NewReader(table.Data)).ReadAll() // refuses rows of different length
		if err != nil {
			t.Fatalf("%s: %v", table.Name, err)
		}
		out[table.Name] = rows
	}
	return out
}

func column(t *testing.T, rows [][]string, heading string) int {
	t.Helper()
	for i, h := range rows[0] {
		if h == heading {
			return i
		}
	}
	t.Fatalf("no column %s in %v", heading, rows[0])
	return -1
}

// Headings that others rely on: what they are called, and that none goes missing.
func TestTableHeadings(t *testing.T) {
	for name, want := range map[string]string{
		"bills.csv": "route_id rank step head item quantity_per_batch unit unit_price amount_per_batch currency quantity_per_year_shared price_date price_check lot label basis",
		"buying.csv": "item label specification un_number hazard_class packing_group transport_basis unit process_per_year losses_per_year safety_stock on_hand to_buy kg_per_unit " +
			"pack_size packs amount price_of_pack cost currency supplier tax price_date valid_until price_check lead_time_days order_day needed_on_day first_batch_day " +
			"packs_per_delivery days_between_deliveries order_date needed_on_date left_at_end too_old_before_use most_in_store storage_flags why",
		"routes.csv": "lot solvent route_id label rank meets_target water_out_mg_per_kg hours_total hours_attended energy_kwh cooling_water_l solvent_lost_l litres_delivered currency " +
			"cost_per_batch cost_per_litre cost_per_year cost_labour cost_energy cost_cooling_water cost_agent cost_solvent_lost cost_waste cost_equipment cost_testing cost_purchase " +
			"no_price_for price_check co2e_kg co2e_energy_kg co2e_making_kg co2e_burning_kg co2e_agent_kg co2e_sources waste_kg waste_aqueous_kg waste_flammable_liquid_kg " +
			"waste_halogenated_liquid_kg waste_wet_solid_kg waste_other_kg batches_per_year regenerations_per_year make_up_l_per_year packs_first_year equipment_to_buy " +
			"paid_out_first_year paid_out_later_years compared_with saving_per_year payback_years interest_share present_value_years net_present_value",
	} {
		if got := strings.Join(tables(t, synthetic())[name][0], " "); got != want {
			t.Errorf("%s:\n got %s\nwant %s", name, got, want)
		}
	}
}

// No cell starts a formula: = + - @, a tab and a return do in the spreadsheets that
// people use (OWASP, "CSV Injection", from memory). A negative number is one.
func TestNoCellBeginsAFormula(t *testing.T) {
	r := synthetic()
	for i, text := range []string{"=1+1", "+1", "-cmd", "@a", "\ta", "\ra"} {
		l := &r.Lots[0]
		l.Routes[0].Bill.Lines = append(l.Routes[0].Bill.Lines, costs.Line{Head: steps.Labour, Item: "technician", Label: text, Basis: text, Step: i})
		r.Buying.Purchases[0].Why = text
		l.Routes[1].Label = text
		for name, rows := range tables(t, r) {
			for _, row := range rows {
				for _, cell := range row {
					_, err := strconv.ParseFloat(cell, 64)
					if number := err == nil && !strings.HasPrefix(cell, "+"); cell != "" && strings.ContainsAny(cell[:1], "=+-@\t\r") && !number {
						t.Errorf("%s: %q", name, cell)
					}
				}
			}
		}
	}
	rows := tables(t, r)["buying.csv"]
	if got := rows[2][column(t, rows, "supplier")]; got != "'+49 Nord, Ost" {
		t.Errorf("supplier %q", got)
	}
}

// A route without a price has no cost anywhere, and says what is missing.
func TestNoPriceIsNoCost(t *testing.T) {
	r := synthetic()
	route := &r.Lots[0].Routes[1]
	route.Bill.NoPrice = []string{"toluene-dry"}
	var out bytes.Buffer
	if err := report.JSON(&out, r); err != nil {
		t.Fatal(err)
	}
	if n := strings.Count(out.String(), `"cost_per_batch": null`); n != 1 || !strings.Contains(out.String(), `"labour": null`) {
		t.Errorf("%d costs are null", n)
	}
	rows := tables(t, r)["routes.csv"]
	if cost, missing := rows[2][column(t, rows, "cost_per_batch")], rows[2][column(t, rows, "no_price_for")]; cost != "" || missing != "toluene-dry" {
		t.Errorf("cost %q, missing %q", cost, missing)
	}
	var text bytes.Buffer
	if err := report.Text(&text, r, report.Options{}); err != nil {
		t.Fatal(err)
	}
	if !strings.Contains(text.String(), "no price  no price") {
		t.Error("the ranking shows a price")
	}
}

// What the tables say is bought adds up to what the JSON and the text say.
func TestBuyingAddsUp(t *testing.T) {
	rows := tables(t, synthetic())["buying.csv"]
	sum := decimal.Zero
	for _, row := range rows[1:] {
		if cost := row[column(t, rows, "cost")]; cost != "" {
			sum = sum.Add(decimal.RequireFromString(cost))
		}
		if row[column(t, rows, "currency")] != "EUR" {
			t.Errorf("currency %q", row[column(t, rows, "currency")])
		}
	}
	if want := decimal.NewFromInt(96 + 336); !sum.Equal(want) || len(rows) != 5 {
		t.Errorf("%s in %d rows, want %s", sum, len(rows)-1, want)
	}
}
