package workbook

import (
	"context"
	"fmt"
	"maps"
	"math"
	"math/rand/v2"
	"os"
	"path/filepath"
	"slices"
	"strconv"
	"strings"
	"testing"

	"github.com/shopspring/decimal"

	"parch/catalog"
	"parch/internal/costs"
	"parch/internal/job"
	"parch/internal/routes"
	"parch/internal/study"
)

// Three jobs, each edited at random in several places at once. What the sheet then
// computes must be what a new run with the same inputs and settings gives, or the
// sheet must say that the program has to be run again.

var aliveJobs = []string{"saturated-toluene", "reclaimed-ethyl-acetate", "acetonitrile"}

const (
	editsOfAJob = 20
	followsTo   = 0.01 // share by which money, grams and hours may differ
)

// change is an edit of the workbook and the same edit of the program's inputs.
type change struct {
	name, value string
	text        bool
	apply       func(j *job.Job, c *catalog.Catalog, s map[string]map[string]routes.Settings)
}

func aliveReport(t *testing.T, name string, changes []change, given map[string]map[string]routes.Settings) *study.Report {
	t.Helper()
	shared, err := catalog.Load()
	if err != nil {
		t.Fatal(err)
	}
	own := *shared // what is edited in it is edited for this run only
	c := &own
	c.Practice, c.Agents = maps.Clone(c.Practice), maps.Clone(c.Agents)
	file := filepath.Join("..", "..", "testdata", "jobs", name+".yaml")
	data, err := os.ReadFile(file)
	if err != nil {
		t.Fatal(err)
	}
	j, err := job.Read(name+".yaml", data, c)
	if err != nil {
		t.Fatal(err)
	}
	for _, x := range changes {
		x.apply(j, c, given)
	}
	r, err := study.Compare(context.Background(), j, c, study.Options{Settings: given})
	if err != nil {
		t.Fatal(err)
	}
	return r
}

// randomChanges are one to four edits of different inputs.
func randomChanges(rng *rand.Rand, l *layout) []change {
	all := changesOf(rng, l)
	rng.Shuffle(len(all), func(i, k int) { all[i], all[k] = all[k], all[i] })
	return all[:1+rng.IntN(4)]
}

func changesOf(rng *rand.Rand, l *layout) (all []change) {
	times := func(v, low, high float64) float64 {
		return cutTo(v*math.Exp(math.Log(low)+rng.Float64()*math.Log(high/low)), 4)
	}
	num := func(name string, v float64, apply func(j *job.Job, c *catalog.Catalog, s map[string]map[string]routes.Settings)) {
		all = append(all, change{name: name, value: strconv.FormatFloat(v, 'g', -1, 64), apply: apply})
	}
	lot := l.lots[0]
	own := func(what string, v float64, set func(lot *job.Lot)) {
		num("lot1_"+what, v, func(j *job.Job, _ *catalog.Catalog, _ map[string]map[string]routes.Settings) { set(&j.Lots[0]) })
	}
	v := times(lot.batchLitres, 0.5, 1.6)
	own("batch_litres", v, func(x *job.Lot) { x.BatchM3 = v / 1000 })
	b := times(lot.batches, 0.4, 2.5)
	own("batches_per_year", b, func(x *job.Lot) { x.BatchesPerYear = b })
	w := times(lot.start, 0.5, 1.6)
	own("start_water", w, func(x *job.Lot) { x.Water = w / 1e6 })
	target := times(lot.target, 0.7, 1.6)
	own("target_water", target, func(x *job.Lot) { x.Target = target / 1e6 })
	q := times(lot.Job.ResidualLoading*100, 0.6, 1.6)
	own("residual_loading", q, func(x *job.Lot) { x.ResidualLoading = q / 100 })
	if h := times(lot.Job.VesselHeightM, 0.6, 1.5); h > 0 {
		own("vessel_height", h, func(x *job.Lot) { x.VesselHeightM = h })
	}
	if p := times(lot.Job.HeaterW, 0.6, 1.6); p > 0 {
		own("heater", p, func(x *job.Lot) { x.HeaterW = p })
	}
	if f := times(lot.Job.FreeWaterM3*1e6, 0.5, 1.6); f > 0 {
		own("free_water", f, func(x *job.Lot) { x.FreeWaterM3 = f / 1e6 })
	}
	practice := func(name, key string, v float64) {
		num(name, v, func(_ *job.Job, c *catalog.Catalog, _ map[string]map[string]routes.Settings) {
			x := c.Practice[key]
			x.SI = v
			c.Practice[key] = x
		})
	}
	practice("site_heat_share", "heat-share", times(0.5, 0.75, 1.3))
	practice("site_least_dose", "dose-minimum", times(50, 0.5, 2))
	for _, agent := range l.followedSieves() {
		n := float64(3 + rng.IntN(15))
		num("uses_"+strings.ReplaceAll(agent, "-", "_"), n, func(_ *job.Job, c *catalog.Catalog, _ map[string]map[string]routes.Settings) {
			a := *c.Agents[agent]
			lives := *a.Lives
			lives.SI, a.Lives = n, &lives
			c.Agents[agent] = &a
		})
	}
	for _, item := range []string{"technician", "sieve-3a", l.lots[0].Job.Solvent} {
		i := slices.IndexFunc(l.prices, func(p costs.Price) bool { return p.Item == item })
		if i < 0 {
			continue
		}
		p := times(float(l.prices[i].PerUnit), 0.5, 3)
		num(priceName(item, l.prices[i].Unit), p, func(j *job.Job, _ *catalog.Catalog, _ map[string]map[string]routes.Settings) {
			for k := range j.Prices {
				if j.Prices[k].Item == item {
					j.Prices[k].PerUnit, j.Prices[k].PackSize = decimal.NewFromFloat(p), decimal.Zero
				}
			}
		})
	}
	return append(all, settingChanges(rng, l, times)...)
}

// settingChanges are edits of the settings of three routes.
func settingChanges(rng *rand.Rand, l *layout, times func(v, low, high float64) float64) (all []change) {
	for range 3 {
		r := l.routes[rng.IntN(len(l.routes))]
		soaks, sieves := 0, 0
		set := func(name, value string, text bool, with func(s *routes.Settings)) {
			id, lot := r.ID, r.lot.Job.Name
			all = append(all, change{name, value, text, func(_ *job.Job, _ *catalog.Catalog, given map[string]map[string]routes.Settings) {
				s := given[lot][id]
				with(&s)
				given[lot][id] = s
			}})
		}
		for i, s := range r.stages {
			name := func(what string) string { return fmt.Sprintf("lot1_route%d_%s%d", r.no, what, s.no) }
			if s.setRow > 0 {
				w := times(s.handOver, 0.8, 1.3)
				set(name("handover_"), strconv.FormatFloat(w, 'g', -1, 64), false, func(s *routes.Settings) {
					s.HandOverMgPerKg = slices.Clone(s.HandOverMgPerKg)
					s.HandOverMgPerKg[i] = w
				})
			}
			if s.hoursRow > 0 {
				k, h, stirred := soaks, times(s.hours, 0.5, 2), !s.stirred
				set(name("hours_"), strconv.FormatFloat(h, 'g', -1, 64), false, func(s *routes.Settings) {
					s.SoakHours = slices.Clone(s.SoakHours)
					s.SoakHours[k] = h
				})
				set(name("stirred_"), yesNo(stirred), true, func(s *routes.Settings) {
					s.Stirred = slices.Clone(s.Stirred)
					s.Stirred[k] = stirred
				})
				soaks++
			}
			if s.sieveRow > 0 {
				k, after := sieves, map[string]string{"regenerate": "discard", "discard": "regenerate"}[s.sieve]
				set(name("sieve_"), after, true, func(s *routes.Settings) {
					s.Sieve = slices.Clone(s.Sieve)
					s.Sieve[k] = after
				})
				sieves++
			}
		}
	}
	return all
}

// sheetOf reads a cell of a recalculated workbook.
type sheetOf func(sheet string, column, row int) any

// recalculated edits cells of a layout and computes it anew.
func recalculated(t *testing.T, l *layout, changes []change) sheetOf {
	t.Helper()
	grids := make([]*grid, len(l.grids))
	for i, g := range l.grids {
		h := *g
		h.rows = make([][]cell, len(g.rows))
		for r, row := range g.rows {
			h.rows[r] = slices.Clone(row)
		}
		grids[i] = &h
	}
	e, err := newEvaluator(grids, l.names)
	if err != nil {
		t.Fatal(err)
	}
	for _, c := range changes {
		to := e.names[c.name]
		if to.g == nil {
			t.Fatalf("no cell is named %s", c.name)
		}
		x := &to.g.rows[to.r1-1][to.c1-1]
		if x.value = c.value; !c.text {
			x.value, _ = strconv.ParseFloat(c.value, 64)
		}
	}
	for _, g := range grids {
		for _, row := range g.rows {
			for c := range row {
				if row[c].formula != "" {
					row[c].value = nil
				}
			}
		}
	}
	return func(sheet string, column, row int) any { return e.cell(e.grids[sheet], column, row) }
}

// cloned settings can be changed without changing the run they come from.
func cloned(all map[string]map[string]routes.Settings) map[string]map[string]routes.Settings {
	out := map[string]map[string]routes.Settings{}
	for lot, list := range all {
		out[lot] = maps.Clone(list)
	}
	return out
}

func TestSheetFollowsEdits(t *testing.T) {
	if testing.Short() {
		t.Skip("runs the program many times")
	}
	for k, name := range aliveJobs {
		t.Run(name, func(t *testing.T) {
			first := aliveReport(t, name, nil, nil)
			m, err := newModel(first)
			if err != nil {
				t.Fatal(err)
			}
			l, _, err := layLive(m)
			if err != nil {
				t.Fatal(err)
			}
			data := written(t, first)
			var tally tally
			var office []edit
			for i := range editsOfAJob {
				rng := rand.New(rand.NewPCG(uint64(k), uint64(i)))
				changes := randomChanges(rng, l)
				given := cloned(settingsOf(first))
				again := aliveReport(t, name, changes, given)
				tally.compare(t, l, again, recalculated(t, l, changes), changes)
				if i < officeEdits(t) {
					office = append(office, edit{changes, again})
				}
			}
			t.Log(tally)
			t.Run("office program", func(t *testing.T) { t.Log(len(office), "files:", followsInOffice(t, l, data, office)) })
			offered := 0
			for _, lot := range first.Lots {
				offered += len(lot.Routes)
			}
			if tally.compared < offered*editsOfAJob/2 {
				t.Errorf("only %d of %d routes were compared", tally.compared, offered*editsOfAJob)
			}
		})
	}
}

// tally sums up how well a sheet followed.
type tally struct {
	compared, flagged       int
	money, hours, kg, water float64
}

func (y tally) String() string {
	return fmt.Sprintf("%d routes compared, %d to be run again; largest difference of money %.2g, hours %.2g, kg %.2g, water %.2g",
		y.compared, y.flagged, y.money, y.hours, y.kg, y.water)
}

func (y *tally) compare(t *testing.T, l *layout, again *study.Report, at sheetOf, changes []change) {
	t.Helper()
	what := ""
	for _, c := range changes {
		what += fmt.Sprintf(" %s=%s", c.name, c.value)
	}
	number := func(sheet string, column, row int) float64 {
		v, ok := at(sheet, column, row).(float64)
		if !ok {
			return math.NaN()
		}
		return v
	}
	type placed struct {
		id                string
		cost, sheetRank   float64
		programRank, line int
	}
	var both []placed
	anyFlagged := false
	for i, r := range l.routes {
		k := slices.IndexFunc(again.Lots[0].Routes, func(x study.Route) bool { return x.ID == r.ID })
		if at(sheetSteps, stepState, l.resultRows.at(i)) == runAgain {
			y.flagged++
			anyFlagged = true
			continue
		}
		if k < 0 {
			t.Errorf("%s: the new run does not offer %s, the sheet does not say so", what, r.ID)
			continue
		}
		want := again.Lots[0].Routes[k]
		y.compared++
		agent := 0.0
		for _, kg := range want.Run.AgentKg {
			agent += kg
		}
		litre, result := l.litreRows.at(i), l.resultRows.at(i)
		for _, c := range []struct {
			name           string
			sheet, program float64
			worst          *float64
		}{
			{"cost per batch", number(sheetCosts, litreTotal, litre), want.Bill.PerBatch.InexactFloat64(), &y.money},
			{"cost per litre", number(sheetCosts, litreCost, litre), want.Bill.PerLitre.InexactFloat64(), &y.money},
			{"hours", number(sheetCosts, litreHours, litre), want.Run.HoursTotal, &y.hours},
			{"hours attended", number(sheetCosts, litreAttended, litre), want.Run.HoursAttended, &y.hours},
			{"energy", number(sheetCosts, litreEnergy, litre), want.Run.EnergyKWh, &y.hours},
			{"agent", number(sheetSteps, resultAgent, result), agent, &y.kg},
			{"waste", number(sheetCosts, litreWaste, litre), want.Run.WasteKg, &y.kg},
			{"litres lost", number(sheetCosts, litreLost, litre), want.Run.SolventLostL, &y.kg},
			{"litres", number(sheetSteps, resultDelivered, result), want.Run.LitresDelivered, &y.kg},
			{"water", number(sheetSteps, resultWater, result), want.Run.WaterOut * mgPerKg, &y.water},
		} {
			off := math.Abs(c.sheet-c.program) / max(math.Abs(c.program), 1e-6)
			*c.worst = max(*c.worst, off)
			if !(off <= followsTo) {
				t.Errorf("%s: %s of %s: the sheet has %.6g, a new run %.6g", what, c.name, r.ID, c.sheet, c.program)
			}
		}
		both = append(both, placed{r.ID, want.Objective, number(sheetCosts, rankPlace, l.rankRows.at(i)), want.Rank, i})
	}
	for _, a := range both {
		if limit := again.Lots[0].AcceptAt * mgPerKg; (a.sheetRank > 0) != (a.programRank > 0) && math.Abs(number(sheetSteps, resultWater, l.resultRows.at(a.line))/limit-1) > followsTo {
			t.Errorf("%s: %s has rank %g in the sheet, %d in a new run", what, a.id, a.sheetRank, a.programRank)
		}
		for _, b := range both {
			if a.programRank > 0 && b.programRank > 0 && a.sheetRank > 0 && b.sheetRank > 0 && a.cost < b.cost*(1-followsTo) && a.sheetRank >= b.sheetRank {
				t.Errorf("%s: %s comes before %s in a new run, not in the sheet", what, a.id, b.id)
			}
		}
	}
	message, _ := at(sheetChecks, 3, frameRows+4).(string)
	if anyFlagged != strings.HasSuffix(message, "Run parch again") {
		t.Errorf("%s: flagged %v, the top of the sheets says %q", what, anyFlagged, message)
	}
}
