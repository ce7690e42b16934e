package job

import (
	"fmt"

	"parch/internal/document"
	"parch/internal/quantity"
)

const mostLots = 100

func (r *reader) lots(n *document.Node) {
	items := n.Items()
	switch {
	case n.IsList() && len(items) == 0:
		n.Fail("the list is empty; name at least one lot")
	case len(items) > mostLots:
		n.Fail("%d lots are too many for one file; at most %d", len(items), mostLots)
		return
	}
	lines := map[string]int{}
	for _, item := range items {
		r.job.Lots = append(r.job.Lots, r.lot(item, lines))
	}
	r.nameLots(lines)
}

// lot reads one lot; lines remembers the names that are taken.
func (r *reader) lot(n *document.Node, lines map[string]int) Lot {
	n.Known("solvent", r.solventKey)
	f := n.Map("name", "solvent", "batch", "batches", "water", "free water", "target", "not below", "needed within", "litres per week",
		"peroxide", "heater", "sieve history", "vessel height", "reclaimed", "failed batch")
	lot := Lot{Line: n.Line(), Reclaimed: f.Get("reclaimed").Bool()}
	if name := f.Get("name"); name != nil {
		lot.Name = r.label(name)
		r.twice(name, lot.Name, lines)
	}
	if s := r.solvent(f.Need("solvent")); s != nil {
		lot.Solvent = s.Key
	}
	lot.FailedBatch = r.job.Site.FailedBatch
	if n := f.Get("failed batch"); n != nil {
		lot.FailedBatch = r.failedBatch(n)
	}
	r.amounts(n, f, &lot)
	r.limitsOf(f, &lot)
	r.means(n, f, &lot)
	return lot
}

// amounts reads how much there is and how often.
func (r *reader) amounts(n *document.Node, f document.Fields, lot *Lot) {
	var ok bool
	lot.BatchM3, ok = r.measure(f.Need("batch"), quantity.Volume, between(5e-5, 10, "0.05 L to 10000 L"))
	lot.BatchesPerYear = 1
	if b := f.Get("batches"); b != nil {
		lot.BatchesPerYear, _ = r.measure(b, quantity.PerYear, between(0.1, 10000, "0.1 /yr to 10000 /yr"))
	} else {
		r.assume(n.Path()+".batches", "1 /yr")
	}
	free := f.Get("free water")
	if free == nil {
		r.assume(n.Path()+".free water", "0 mL")
		return
	}
	lot.FreeWaterM3, _ = r.measure(free, quantity.Volume, between(0, 10, "0 mL to less than the batch"))
	if ok && lot.FreeWaterM3 >= lot.BatchM3 {
		free.Fail("%s is as much as the batch (%s) or more", quantity.Quote(free.Text()), quantity.FormatVolume(lot.BatchM3))
	}
}

// limitsOf reads the water now and the water wanted, and checks that they agree.
func (r *reader) limitsOf(f document.Fields, lot *Lot) {
	var okWater, okTarget bool
	target := f.Need("target")
	okWater = r.water(f.Need("water"), lot)
	lot.Target, okTarget = r.content(target, lot, between(1e-8, 0.5, "0.01 mg/kg to 500000 mg/kg"))
	if okWater && okTarget && lot.Target >= lot.Water && lot.FreeWaterM3 > 0 {
		target.Fail("%s is not below the water now (%s), yet there is free water: a lot with free water is not dry. Check both, or remove the free water",
			quantity.Quote(target.Text()), quantity.FormatWater(lot.Water))
	}
	if n := f.Get("not below"); n != nil {
		lot.NotBelow, _ = r.content(n, lot, between(0, 0.5, "0 mg/kg to 500000 mg/kg"))
		if okTarget && lot.NotBelow >= lot.Target {
			n.Fail("%s is not below the target (%s)", quantity.Quote(n.Text()), quantity.FormatWater(lot.Target))
		}
	}
	if n := f.Get("needed within"); n != nil {
		lot.NeededWithinS, _ = r.measure(n, quantity.Time, between(60, 366*86400, "1 min to 366 d"))
	}
	if n := f.Get("litres per week"); n != nil {
		lot.WeeklyM3, _ = r.measure(n, quantity.Volume, between(5e-5, 1000, "0.05 L to 1000 m3"))
	}
}

// means reads what the lot is dried with.
func (r *reader) means(n *document.Node, f document.Fields, lot *Lot) {
	r.peroxide(f.Get("peroxide"), lot)
	if h := f.Get("heater"); h != nil {
		lot.HeaterW, _ = r.measure(h, quantity.Power, between(10, 1e5, "10 W to 100 kW"))
	} else {
		r.assume(n.Path()+".heater", "the still's own")
	}
	if h := f.Get("vessel height"); h != nil {
		lot.VesselHeightM, _ = r.measure(h, quantity.Length, between(0.01, 5, "0.01 m to 5 m"))
	} else {
		r.assume(n.Path()+".vessel height", "from the charge of the vessel")
	}
	r.history(n, f.Get("sieve history"), lot)
}

// peroxide reads a test result: the reading counts only with its date, which is not after
// that of the job.
func (r *reader) peroxide(n *document.Node, lot *Lot) {
	if n == nil {
		return
	}
	f := n.Map("reading", "date")
	reading, ok := r.measure(f.Need("reading"), quantity.MassConcentration, between(0, 10, "0 mg/L to 10000 mg/L"))
	date := r.dated(f.Need("date"))
	if ok && date != "" {
		lot.Peroxide = &Peroxide{ReadingKgPerM3: reading, Date: date}
	}
}

// nameLots names the lots without a name after their solvent, each differently.
func (r *reader) nameLots(lines map[string]int) {
	for i := range r.job.Lots {
		lot := &r.job.Lots[i]
		s := r.cat.Solvents[lot.Solvent]
		if lot.Name != "" || s == nil {
			continue
		}
		lot.Name = s.Name
		for n := 2; lines[lot.Name] != 0; n++ {
			lot.Name = fmt.Sprintf("%s %d", s.Name, n)
		}
		lines[lot.Name] = lot.Line
	}
}
