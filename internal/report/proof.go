package report

import (
	"fmt"
	"io"
	"math"
	"slices"
	"strings"

	"parch/catalog"
	"parch/internal/proof"
	"parch/internal/quantity"
)

// ProofText prints published against computed figures, by quantity and kind of
// row, each with its source.
func ProofText(w io.Writer, r *proof.Result, catalogDate string) error {
	p := &page{w: w}
	p.say(0, 2, "Published against computed: %d figures, catalog of %s", len(r.Rows), catalogDate)
	p.line("")
	p.say(3, 0, "independent: not used to make the numbers that it tests. fitted: was a target of the fit that it tests. memory: recalled, not seen in print; it is shown and decides nothing. contradicted: marked as wrong by its own compilation or by all other entries; shown, and decides nothing. excused: misses its limit, for a reason that is given with the deviation it is held to. Ratio and × are computed over published.")
	p.tallies("Kind", r.Kinds, func(t proof.Tally) string { return string(t.Kind) })
	p.tallies("Quantity, kind", r.Quantities, func(t proof.Tally) string { return t.Quantity + ", " + string(t.Kind) })
	sources := sourcesOf(r)
	for _, t := range r.Quantities {
		p.block(t, r, sources)
	}
	p.heading("Sources:")
	for i, source := range sources {
		p.say(5, 5, "%d. %s", i+1, source)
	}
	p.line("")
	p.say(0, 2, "%s", proofVerdict(r))
	return p.close()
}

func proofVerdict(r *proof.Result) string {
	failures := r.Failures()
	all, published := r.ExcusedShare()
	excused := fmt.Sprintf("%s %% of all rows, %s %% of the published ones, are excused, each with its reason and the deviation it is held to.",
		quantity.Significant(100*all, 2), quantity.Significant(100*published, 2))
	if aim := quantity.Significant(100*proof.ExcusedAim, 2); published > proof.ExcusedAim {
		excused += fmt.Sprintf(" Of the published ones that is more than the %s %% aimed at.", aim)
	}
	if len(failures) == 0 {
		return "Every published figure meets its limit, or says why not and stays within what is said. " + excused
	}
	return count(float64(len(failures)), "published figure misses", "published figures miss") + " the limit without a recorded reason, or more than the reason allows. " + excused
}

func (p *page) tallies(heading string, all []proof.Tally, name func(proof.Tally) string) {
	rows := make([][]string, len(all))
	for i, t := range all {
		rows[i] = []string{
			name(t), fmt.Sprint(t.Rows), fmt.Sprint(t.Within), quantity.Significant(100*float64(t.Within)/float64(t.Rows), 3) + " %",
			fmt.Sprint(t.Excused), fmt.Sprint(t.Missed), ratios(t),
		}
	}
	p.line("")
	p.table([]column{{heading, false, 0}, {"Rows", true, 0}, {"Within", true, 0}, {"", true, 0}, {"Excused", true, 0}, {"Missed", true, 0}, {"Ratio", false, 0}}, rows)
}

func ratios(t proof.Tally) string {
	if math.IsNaN(t.LeastRatio) {
		return ""
	}
	return quantity.Significant(t.LeastRatio, 3) + " to " + quantity.Significant(t.MostRatio, 3)
}

// sourcesOf are the sources of all rows, each once, sorted.
func sourcesOf(r *proof.Result) (list []string) {
	for _, row := range r.Rows {
		list = append(list, row.Source)
	}
	slices.Sort(list)
	return slices.Compact(list)
}

// block prints the rows of a quantity and a kind, and the reasons that are
// recorded for some of them.
func (p *page) block(t proof.Tally, r *proof.Result, sources []string) {
	var rows [][]string
	var remarks []string
	unit := ""
	for i := range r.Rows {
		row := &r.Rows[i]
		if row.Quantity != t.Quantity || row.Kind != t.Kind {
			continue
		}
		unit = row.Unit
		source, _ := slices.BinarySearch(sources, row.Source)
		rows = append(rows, []string{
			proofSubject(row), proofPlace(row), quantity.Significant(row.Published, 5), quantity.Significant(row.Computed, 5),
			proofOff(row), proofLimit(row), string(row.Verdict), fmt.Sprint(source + 1),
		})
		if remark := proofRemark(row); remark != "" && !slices.Contains(remarks, remark) {
			remarks = append(remarks, remark)
		}
	}
	heading := t.Quantity
	if unit != "" {
		heading += " in " + unit
	}
	p.heading(heading + ", " + string(t.Kind) + ":")
	p.table([]column{
		{"", false, 22}, {"At", false, 14}, {"Published", true, 0}, {"Computed", true, 0}, {"Off", true, 0}, {"Limit", true, 0}, {"Verdict", false, 0}, {"Source", true, 0},
	}, rows)
	for _, remark := range remarks {
		p.say(5, 4, "%s", remark)
	}
}

func proofSubject(row *proof.Row) string {
	if row.Partner == "" {
		return row.Subject
	}
	return row.Subject + ", " + row.Partner
}

// proofPlace is the state in which the figure holds.
func proofPlace(row *proof.Row) string {
	var parts []string
	if row.TempK > 0 {
		parts = append(parts, quantity.FormatTemperature(row.TempK))
	}
	if row.PressurePa > 0 {
		parts = append(parts, quantity.FormatPressure(row.PressurePa))
	}
	if row.Condition != "" && row.Quantity != "azeotrope-absent" {
		parts = append(parts, row.Condition)
	}
	return strings.Join(parts, ", ")
}

// proofOff is the deviation in the unit of the limit; for a row from memory the
// ratio, where it has a meaning.
func proofOff(row *proof.Row) string {
	switch {
	case math.IsNaN(row.Deviation):
		return quantity.Unknown
	case row.Kind == catalog.Recalled && !math.IsNaN(row.Ratio), row.LimitUnit == "factor":
		return "× " + quantity.Significant(row.Ratio, 3)
	case row.Deviation > 0:
		return "+" + quantity.Significant(row.Deviation, 2)
	}
	return strings.Replace(quantity.Significant(row.Deviation, 2), "-", "−", 1)
}

func proofLimit(row *proof.Row) string { return inLimitUnit(row, row.Limit) }

func inLimitUnit(row *proof.Row, deviation float64) string {
	figure := quantity.Significant(deviation, 3)
	switch row.LimitUnit {
	case "factor":
		return "× " + figure
	case "":
		return figure
	case "% abs", "% m/m":
		return figure + " % abs"
	}
	return figure + " " + row.LimitUnit
}

// proofRemark says why a row may miss, or why nothing was computed.
func proofRemark(row *proof.Row) string {
	said := row.Reason
	if row.Verdict == proof.Holds {
		said = ""
	}
	if row.Trouble != "" && said == "" {
		said = "not computed: " + row.Trouble
	}
	if said == "" {
		return ""
	}
	if row.ExcusedTo > 0 && said == row.Reason {
		said += " (held to " + inLimitUnit(row, row.ExcusedTo) + ")"
	}
	figure := strings.TrimSpace(quantity.Significant(row.Published, 5) + " " + row.Unit)
	return fmt.Sprintf("%s, %s: %s", proofSubject(row), figure, said)
}
