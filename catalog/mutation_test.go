package catalog_test

import (
	"bytes"
	"flag"
	"fmt"
	"io/fs"
	"math"
	"os"
	"regexp"
	"runtime"
	"slices"
	"strconv"
	"strings"
	"sync"
	"testing"
	"testing/fstest"

	"parch/catalog"
	"parch/internal/proof"
	"parch/internal/thermo"
)

var mutate = flag.Bool("mutate", false, "change every number of the catalog that enters an equation by a factor of 2 and see whether a check notices (some minutes)")

var mutateOnly = flag.String("groups", "", "with -mutate: only these groups of numbers, joined by commas")

// TestMutations changes, one at a time, the numbers of the catalog that enter an
// equation, to twice and to half of what they are. A change is found if the catalog
// is no longer read (units, ranges, bands, stoichiometry, boiling points, slopes,
// shapes), if numbers no longer fit each other (strayRelations), or if a published
// figure, a recalled one that held before, a drying or the tie-lines no longer agree. Zeros have no double and are left out. Changes of curves and
// activity models that move no result by 1 % in the range of use are counted apart:
// they are no slip that matters. So are the numbers of practice, apparatus, assays,
// emissions and prices: they are choices and quotations, and beyond their bands no
// figure from outside says that one is wrong. Nine in ten of the others must be
// found. Run it with
//
//	go test ./catalog -run Mutations -mutate -timeout 60m -v
func TestMutations(t *testing.T) {
	if !*mutate {
		t.Skip("run with -mutate")
	}
	all := mutations(t)
	bench := newBench(t)
	found, idle := make([]bool, len(all)), make([]bool, len(all))
	queue := make(chan int)
	var group sync.WaitGroup
	for range runtime.GOMAXPROCS(0) {
		group.Go(func() {
			for i := range queue {
				found[i], idle[i] = bench.notices(all[i])
			}
		})
	}
	for i := range all {
		queue <- i
	}
	close(queue)
	group.Wait()
	report(t, all, found, idle)
}

// mutation is a number in a file and what stands there instead.
type mutation struct {
	file, group string
	at, length  int // bytes
	line        int
	was, now    string
	context     string
}

// inEquation lists where the numbers of equations stand: files, the key or heading
// that must stand before the number on its line, and a name for the group.
var inEquation = []struct {
	files, group string
	line         *regexp.Regexp // the line must match
	number       *regexp.Regexp // with one submatch, the number
}{
	{"solvents/*.yaml", "curves", regexp.MustCompile(`coefficients: \[`), regexp.MustCompile(`[\[ ](-?[0-9.]+(?:e-?[0-9]+)?)[,\]]`)},
	{"solvents/*.yaml", "constants", regexp.MustCompile(`^(molar mass|boiling point|critical temperature):`), regexp.MustCompile(`value: (-?[0-9.]+) `)},
	{"solvents/*.yaml", "water pairs", regexp.MustCompile(`^  parameters:`), regexp.MustCompile(`(?:a12|b12|a21|b21|alpha): (-?[0-9.]+)`)},
	{"agents.yaml", "isotherms", regexp.MustCompile(`^ +(- \{capacity|toth:|terms:|capacity factor|affinity factor)`), regexp.MustCompile(`(?:capacity|b0|heat|n0|c|first|affinity|second|exponent|reference|value): (-?[0-9.]+(?:e-?[0-9]+)?)`)},
	{"agents.yaml", "beads", regexp.MustCompile(`^  (bead|bulk|hold-up|lives|fade|heat of uptake|heat capacity|window|loading band)`), regexp.MustCompile(`value: ([0-9.]+)`)},
	{"agents.yaml", "pore space", regexp.MustCompile(`^    (methanol|ethanol|1-propanol):`), regexp.MustCompile(`value: ([0-9.]+)`)},
	{"agents.yaml", "hydrates", regexp.MustCompile(`^    - \{pair`), regexp.MustCompile(`(?:water|value): ([0-9.]+(?:e-?[0-9]+)?)`)},
	{"agents.yaml", "claims", regexp.MustCompile(`^    (removed|least|dose|target):`), regexp.MustCompile(`value: ([0-9.]+)`)},
	{"agents.yaml", "reactions", regexp.MustCompile(`^    (water|hydrogen|solvent|need|gas|surplus|activity|feed):`), regexp.MustCompile(`^    [a-z]+: +(?:\{value: )?([0-9.]+(?:e-?[0-9]+)?)`)},
	{"agents.yaml", "residuals", regexp.MustCompile(`^    - \{solvent`), regexp.MustCompile(`water: ([0-9.]+)`)},
	{"histories.yaml", "histories", regexp.MustCompile(`^- \{key`), regexp.MustCompile(`(?:temperature|residual): ([0-9.]+)`)},
	{"practice.yaml", "practice", regexp.MustCompile(`^[a-z-]+: +\{value`), regexp.MustCompile(`value: ([0-9.]+)`)},
	{"apparatus.yaml", "apparatus", regexp.MustCompile(`value:`), regexp.MustCompile(`value: ([0-9.]+)`)},
	{"assays.yaml", "assays", regexp.MustCompile(`value:`), regexp.MustCompile(`value: ([0-9.]+)`)},
	{"emissions.yaml", "emissions", regexp.MustCompile(`value:`), regexp.MustCompile(`value: ([0-9.]+)`)},
	{"prices.yaml", "prices", regexp.MustCompile(`price:`), regexp.MustCompile(`price: ([0-9.]+)`)},
	{"diameters.yaml", "diameters", regexp.MustCompile(`value:`), regexp.MustCompile(`value: ([0-9.]+)`)},
	{"carrier-pairs.csv", "carrier pairs", regexp.MustCompile(`^[a-z0-9-]+,`), nil},
	{"ternary.csv", "ternary sets", regexp.MustCompile(`^[a-z0-9-]+,`), nil},
	{"organic-layers.csv", "organic layers", regexp.MustCompile(`^[a-z0-9-]+,`), nil},
}

// choices are the groups that nothing outside decides.
var choices = []string{"practice", "apparatus", "assays", "emissions", "prices"}

// cells of a table that enter an equation, by heading.
var cells = regexp.MustCompile(`^((wa_|ac_|wc_)?(a12|b12_k|a21|b21_k|alpha)|l[0-3]|w0|p[0-2]|q[0-2])$`)

func mutations(t *testing.T) (list []mutation) {
	t.Helper()
	fsys := catalog.BuiltIn()
	for _, rule := range inEquation {
		if *mutateOnly != "" && !slices.Contains(strings.Split(*mutateOnly, ","), rule.group) {
			continue
		}
		names, err := fs.Glob(fsys, rule.files)
		if err != nil || len(names) == 0 {
			t.Fatalf("%s: no such file (%v)", rule.files, err)
		}
		before := len(list)
		for _, name := range names {
			data, err := fs.ReadFile(fsys, name)
			if err != nil {
				t.Fatal(err)
			}
			at := 0
			var headings []string
			for i, line := range strings.Split(string(data), "\n") {
				spots := [][2]int{}
				switch {
				case rule.number == nil && i == 0:
					headings = strings.Split(line, ",")
				case rule.number == nil && rule.line.MatchString(line):
					spots = cellSpots(line, headings)
				case rule.number != nil && rule.line.MatchString(line):
					spots = numberSpots(line, rule.number)
				}
				for _, s := range spots {
					list = append(list, mutation{name, rule.group, at + s[0], s[1] - s[0], i + 1, line[s[0]:s[1]], "", strings.TrimSpace(line)})
				}
				at += len(line) + 1
			}
		}
		if len(list) == before {
			t.Fatalf("%s, %s: no number was found", rule.files, rule.group)
		}
	}
	return bothWays(list)
}

func numberSpots(line string, number *regexp.Regexp) (spots [][2]int) {
	for at := 0; ; {
		m := number.FindStringSubmatchIndex(line[at:])
		if m == nil {
			return spots
		}
		spots = append(spots, [2]int{at + m[2], at + m[3]})
		at += m[3]
	}
}

func cellSpots(line string, headings []string) (spots [][2]int) {
	at := 0
	for i, cell := range strings.Split(line, ",") {
		if i < len(headings) && cells.MatchString(headings[i]) && cell != "" {
			spots = append(spots, [2]int{at, at + len(cell)})
		}
		at += len(cell) + 1
	}
	return spots
}

func bothWays(list []mutation) (all []mutation) {
	for _, m := range list {
		x, err := strconv.ParseFloat(m.was, 64)
		if err != nil || x == 0 {
			continue
		}
		for _, factor := range []float64{2, 0.5} {
			n := m
			n.now = strconv.FormatFloat(x*factor, 'g', -1, 64)
			all = append(all, n)
		}
	}
	return all
}

// bench is what a mutated catalog is held against.
type bench struct {
	cat    *catalog.Catalog
	fsys   fstest.MapFS
	checks *catalog.Checks
	by     map[string][]int // rows by subject and partner
	holds  []bool           // as the catalog stands
	dried  []bool           // whether the drying holds as the catalog stands
}

func newBench(t *testing.T) *bench {
	cat := load(t)
	b := &bench{cat: cat, fsys: shelfCopy(t), checks: checks(t), by: map[string][]int{}}
	for i := range b.checks.Rows {
		c := &b.checks.Rows[i]
		computed, err := proof.Compute(cat, c)
		b.holds = append(b.holds, err == nil && allowed(c, computed))
		b.by[c.Subject] = append(b.by[c.Subject], i)
		if c.Partner != "" && c.Partner != c.Subject {
			b.by[c.Partner] = append(b.by[c.Partner], i)
		}
	}
	for _, row := range proof.Dryings(cat, b.checks) {
		b.dried = append(b.dried, row.Within)
	}
	return b
}

// notices reports whether a check finds the change and, if none does, whether it
// moves nothing.
func (b *bench) notices(m mutation) (found, idle bool) {
	fsys := make(fstest.MapFS, len(b.fsys))
	for name, f := range b.fsys {
		fsys[name] = f
	}
	data := b.fsys[m.file].Data
	fsys[m.file] = &fstest.MapFile{Data: slices.Concat(data[:m.at], []byte(m.now), data[m.at+m.length:])}
	cat, err := catalog.Parse(fsys)
	if err != nil || b.fails(cat, m) {
		return true, false
	}
	return false, !moves(b.cat, cat, m)
}

func (b *bench) fails(cat *catalog.Catalog, m mutation) bool {
	if m.file == "ternary.csv" {
		for key, miss := range tieLineMisses(cat, b.checks) {
			if !miss.within(cat.Ternaries[key]) {
				return true
			}
		}
	}
	if m.file == "organic-layers.csv" {
		for key, miss := range layerMisses(cat, b.checks) {
			if !miss.within(cat.Layers[key]) {
				return true
			}
		}
	}
	if m.group == "residuals" && len(strayResiduals(cat, b.checks)) > 0 {
		return true
	}
	if !strings.HasPrefix(m.file, "solvents/") && !strings.HasSuffix(m.file, ".csv") && (len(strayRelations(cat, b.checks)) > 0 || b.dryingFails(cat)) {
		return true
	}
	return b.rowFails(cat, m)
}

// dryingFails reports whether a measured drying that held, printed or recalled, no
// longer does.
func (b *bench) dryingFails(cat *catalog.Catalog) bool {
	for i, row := range proof.Dryings(cat, b.checks) {
		if b.dried[i] && !row.Within {
			return true
		}
	}
	return false
}

// moves reports whether a change of a curve or an activity model moves a result by
// 1 % somewhere between 25 °C and the boiling point, or 100 °C.
func moves(was, now *catalog.Catalog, m mutation) bool {
	const much = 0.01
	differ := func(a, b float64) bool { return !(math.Abs(a/b-1) < much) && a != b }
	pair := func(a, b thermo.NRTL) bool {
		for _, tK := range []float64{298.15, 373.15} {
			for _, x := range [][thermo.MaxComponents]float64{{0.01, 0.01, 0.98}, {0.01, 0.98, 0.01}, {0.98, 0.01, 0.01}, {0.34, 0.33, 0.33}} {
				if a.N == 2 {
					x[1], x[2] = x[1]+x[2], 0
				}
				before, after := a.LnGamma(x, tK), b.LnGamma(x, tK)
				for i := range a.N {
					if !(math.Abs(before[i]-after[i]) < much) {
						return true
					}
				}
			}
		}
		return false
	}
	words := strings.Split(m.context, ",")
	switch m.group {
	case "curves", "water pairs":
		key := strings.TrimSuffix(strings.TrimPrefix(m.file, "solvents/"), ".yaml")
		a, b := was.Solvents[key], now.Solvents[key]
		if m.group == "water pairs" {
			return pair(a.Water.NRTL, b.Water.NRTL)
		}
		for i := range 6 {
			tK := 298.15 + float64(i)/5*(a.BoilingPoint.SI-298.15)
			for _, c := range [][2]catalog.Curve{
				{a.VapourPressure, b.VapourPressure}, {a.HeatOfVaporization, b.HeatOfVaporization}, {a.HeatCapacity, b.HeatCapacity},
				{a.Density, b.Density}, {a.Viscosity, b.Viscosity},
			} {
				if differ(c[0].At(tK), c[1].At(tK)) {
					return true
				}
			}
		}
		return false
	case "carrier pairs":
		key := [2]string{words[0], words[1]}
		return pair(was.Pairs[key].NRTL, now.Pairs[key].NRTL)
	}
	return true
}

// rowFails tries the rows that the file bears on.
func (b *bench) rowFails(cat *catalog.Catalog, m mutation) bool {
	var rows []int
	switch {
	case strings.HasPrefix(m.file, "solvents/"):
		rows = b.by[strings.TrimSuffix(strings.TrimPrefix(m.file, "solvents/"), ".yaml")]
	case m.file == "agents.yaml":
		for key := range cat.Agents {
			rows = append(rows, b.by[key]...)
		}
	case m.file == "carrier-pairs.csv", m.file == "ternary.csv":
		rows = b.by[strings.SplitN(m.context, ",", 2)[0]]
	}
	slices.SortFunc(rows, func(i, j int) int { return cost(&b.checks.Rows[i]) - cost(&b.checks.Rows[j]) })
	for _, i := range rows {
		if !b.holds[i] {
			continue
		}
		c := &b.checks.Rows[i]
		if computed, err := proof.Compute(cat, c); err != nil || !allowed(c, computed) {
			return true
		}
	}
	return false
}

// allowed reports whether a row holds, or misses no further than its excuse allows.
func allowed(c *catalog.Check, computed float64) bool {
	return c.Holds(computed) || c.Excuses(computed)
}

// cost puts the quick rows first.
func cost(c *catalog.Check) int {
	switch {
	case strings.HasPrefix(c.Quantity, "ternary"):
		return 2
	case strings.HasPrefix(c.Quantity, "azeotrope"):
		return 1
	}
	return 0
}

func report(t *testing.T, all []mutation, found, idle []bool) {
	type tally struct{ all, found, idle int }
	groups := map[string]*tally{}
	var order []string
	var total, physics tally
	var escaped bytes.Buffer
	for i, m := range all {
		g := groups[m.group]
		if g == nil {
			g = &tally{}
			groups[m.group], order = g, append(order, m.group)
		}
		g.all, total.all = g.all+1, total.all+1
		if found[i] {
			g.found, total.found = g.found+1, total.found+1
			continue
		}
		if idle[i] {
			g.idle, total.idle = g.idle+1, total.idle+1
			continue
		}
		fmt.Fprintf(&escaped, "%s:%d: %s -> %s (%s) %.90s\n", m.file, m.line, m.was, m.now, m.group, m.context)
	}
	for _, name := range order {
		g := groups[name]
		say(t, name, g.all, g.found, g.idle)
		if !slices.Contains(choices, name) {
			physics = tally{physics.all + g.all, physics.found + g.found, physics.idle + g.idle}
		}
	}
	say(t, "all", total.all, total.found, total.idle)
	say(t, "without choices", physics.all, physics.found, physics.idle)
	share := float64(physics.found) / float64(physics.all-physics.idle)
	if name := os.Getenv("PARCH_ESCAPED"); name != "" {
		if err := os.WriteFile(name, escaped.Bytes(), 0o644); err != nil {
			t.Error(err)
		}
	} else {
		t.Logf("not noticed:\n%s", escaped.String())
	}
	if share < 0.9 {
		t.Errorf("%.1f %% of the changes of physics and chemistry that move a result are noticed; 90 %% is wanted", 100*share)
	}
}

func say(t *testing.T, name string, all, found, idle int) {
	t.Helper()
	t.Logf("%-15s %5d changes, %5d found, %5.1f %%; %4d of the rest move nothing by 1 %%: %5.1f %% of the others", name, all, found,
		100*float64(found)/float64(all), idle, 100*float64(found)/float64(max(all-idle, 1)))
}
