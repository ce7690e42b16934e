package costs

import (
	"maps"
	"slices"
	"strings"

	"parch/internal/routes"
	"parch/internal/steps"
)

// Plan is a route that a lot takes over a year.
type Plan struct {
	Lot            string
	Run            *routes.Run
	BatchesPerYear float64
}

// Need is what the routes of a plan take of one item in its first year, in the
// unit of the price.
type Need struct {
	Item, Unit string
	Process    float64 // goes into the batches
	Losses     float64 // solvent made up for what is lost
	AtOnce     float64 // of it for the first batch
	LaterYears float64 // a year after the first
	Takings    []Taking
}

// Year is process and losses together.
func (n Need) Year() float64 { return n.Process + n.Losses }

// Needs adds up what the plans take, by item. Energy, labour, water and waste are
// not bought in packs and stand aside, as does equipment.
func Needs(plans []Plan) []Need {
	all := map[string]Need{}
	for _, p := range plans {
		for item, own := range p.needs() {
			n := all[item]
			n.Item, n.Unit = item, own.Unit
			n.Process, n.Losses = n.Process+own.Process, n.Losses+own.Losses
			n.AtOnce, n.LaterYears = n.AtOnce+own.AtOnce, n.LaterYears+own.LaterYears
			n.Takings = append(n.Takings, own.Takings...)
			all[item] = n
		}
	}
	out := make([]Need, 0, len(all))
	for _, item := range slices.Sorted(maps.Keys(all)) {
		out = append(out, all[item])
	}
	return out
}

func (p Plan) needs() map[string]Need {
	all := map[string]Need{}
	for _, use := range p.Run.Uses {
		n := all[use.Item]
		n.Item, n.Unit = use.Item, use.Unit
		year := use.Quantity * p.BatchesPerYear
		if use.PerYear {
			year = use.Quantity
		}
		switch {
		case use.Head == steps.SolventLost:
			n.Losses += year
			n.Takings = append(n.Takings, Taking{PerYear: year})
		case use.Head == steps.Agent:
			charge := max(p.charge(use), use.Quantity)
			n.AtOnce += charge
			n.Process += max(year, charge) // the first charge is bought whole, however long it serves
			n.Takings = append(n.Takings, Taking{charge, year})
		case use.Head == steps.Purchase, use.Head == steps.Testing && use.Item != "technician":
			n.Process += max(year, use.Quantity) // no part of a batch is made
			n.AtOnce += use.Quantity
			n.Takings = append(n.Takings, Taking{use.Quantity, year})
		default:
			continue
		}
		n.LaterYears += year
		all[use.Item] = n
	}
	return all
}

// charge is the agent that a batch is given, which may serve several times.
func (p Plan) charge(use routes.StageUse) float64 {
	if at := use.Stage - 1; at >= 0 && at < len(p.Run.Outcomes) && p.Run.Outcomes[at].Agent == use.Item {
		return p.Run.Outcomes[at].AgentKg
	}
	return use.Quantity
}

// lotsOver is how many lots share the charge that a use of agent stands for.
func (p Plan) lotsOver(use routes.StageUse) float64 {
	if at := use.Stage - 1; at >= 0 && at < len(p.Run.Outcomes) && p.Run.Outcomes[at].Agent == use.Item {
		if n := p.Run.Outcomes[at].Figure(steps.LotsServed); n > 1 {
			return n
		}
	}
	return 1
}

// MostOfEach is a year's need of each item by the plan that uses most of it among
// those of a lot, added up over the lots: the need that PackRule speaks of.
func MostOfEach(lots [][]Plan) map[string]float64 {
	total := map[string]float64{}
	for _, plans := range lots {
		most := map[string]float64{}
		for _, p := range plans {
			for item, n := range p.needs() {
				most[item] = max(most[item], n.Year())
			}
		}
		for item, year := range most {
			total[item] += year
		}
	}
	return total
}

// solventOf is the key of the solvent of an item, dry grade or not.
func solventOf(item string) string { return strings.TrimSuffix(item, "-dry") }
