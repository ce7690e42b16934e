package routes

import (
	"maps"
	"math"
	"slices"

	"parch/catalog"
	"parch/internal/steps"
)

// Constants are the figures that closed forms of a step or a lot need beside what
// can be edited, by name; SI units.
type Constants map[string]float64

// Curve is a table that closed forms look up. The first column is the water,
// kg/kg, rising.
type Curve struct {
	Kind      steps.Kind // Soak (loading of a sorbent), Trap or Forerun
	Agent     string     // of a loading
	Stages    int        // of the column of a forerun
	ReceiverC float64    // of a trap
	Rows      [][]float64
}

// Rows of a curve. A place among those of a loading is found by halving, so they are
// a power of two.
const (
	LoadingNodes = 128
	potNodes     = 40 // of a trap or a forerun
)

// Follow is what a reader needs to follow the routes of a lot by closed forms.
type Follow struct {
	Lot    Constants
	Steps  map[string][]Constants // by route id, for each stage; nil where only the program can follow it
	Curves []Curve
}

// Follow gathers it for some runs of the case.
func (c *Case) Follow(runs []*Run) (Follow, error) {
	f := follower{Case: c, loading: map[string][]float64{}, forerun: map[int][]float64{}, trap: map[float64][]float64{}}
	f.out.Lot, f.out.Steps = c.lotConstants(), map[string][]Constants{}
	for _, run := range runs {
		f.note(run)
	}
	if err := f.curves(); err != nil {
		return Follow{}, err
	}
	for _, run := range runs {
		stages := make([]Constants, len(run.Route))
		for i, stage := range run.Route {
			stages[i] = f.constants(run, i, stage)
		}
		f.out.Steps[run.Route.ID()] = stages
	}
	return f.out, nil
}

// follower collects the water contents at which the curves shall be exact.
type follower struct {
	*Case
	out     Follow
	loading map[string][]float64
	trap    map[float64][]float64 // by temperature of the receiver, °C
	forerun map[int][]float64
}

func (c *Case) lotConstants() Constants {
	room := c.Job.Site.RoomK
	vessel, _ := c.vessel()
	still, _ := c.Still()
	saturated, partly, err := c.Mixture.Solubility(room)
	if err != nil || !partly {
		saturated = 1
	}
	k := Constants{
		"water kg/m3": c.Mixture.Water.DensityKgPerM3.At(room), "solvent kg/m3": c.Mixture.Solvent.DensityKgPerM3.At(room),
		"water kg/mol": c.Mixture.Water.MolarMassKgPerMol, "solvent kg/mol": c.Mixture.Solvent.MolarMassKgPerMol,
		"saturated kg/kg": saturated, "vessel m3": usable(vessel), "still m3": usable(still), "still W": still.Power.SI,
		"heat share": c.practice("heat-share"), "least dose kg/m3": c.practice("dose-minimum"),
	}
	for _, name := range []string{"making/" + c.Solvent.Key, "burning/" + c.Solvent.Key, "electricity"} {
		k["kg CO2e "+name] = c.emission(name)
	}
	for key := range c.Catalog.Agents {
		k["kg CO2e making/"+key] = c.emission("making/" + key)
	}
	k["vessel from m3"], k["vessel to m3"] = sameChoice(c.ownedOrAll("vessel"), c.volume())
	k["still from m3"], k["still to m3"] = sameChoice(c.ownedOrAll("still"), c.volume())
	return k
}

// emission is a factor of the catalog, NaN where it has none.
func (c *Case) emission(key string) float64 {
	if v, ok := c.Catalog.Emissions[key]; ok {
		return v.SI
	}
	return math.NaN()
}

func usable(a *catalog.Apparatus) float64 {
	if a == nil {
		return math.NaN()
	}
	if a.Fill == nil {
		return a.Volume.SI
	}
	return a.Volume.SI * a.Fill.SI
}

// sameChoice is the range of volumes in which the same piece is chosen as for one. It
// ends at fifty pieces or a thousand such volumes, where nothing larger is looked at.
func sameChoice(pieces []*catalog.Apparatus, volumeM3 float64) (from, to float64) {
	chosen, _ := smallestThatFits(pieces, volumeM3)
	edges := []float64{0, volumeM3 * 1e-3, volumeM3 * 1e3}
	for _, a := range pieces {
		for n := 1.0; n <= 50; n++ {
			edges = append(edges, usable(a)*n)
		}
	}
	slices.Sort(edges)
	from, to = 0, edges[len(edges)-1]
	for i := range edges[1:] {
		if a, _ := smallestThatFits(pieces, (edges[i]+edges[i+1])/2); a == chosen {
			continue
		}
		if edges[i+1] <= volumeM3 {
			from = edges[i+1]
		} else if edges[i] >= volumeM3 {
			return from, edges[i]
		}
	}
	return from, to
}

// note keeps the water contents of a run, at which the curves are to be exact.
func (f *follower) note(run *Run) {
	goal := f.Goal()
	for i, o := range run.Outcomes {
		in, out := o.In.Water(), o.Out.Water()
		switch o.Kind {
		case steps.Soak, steps.Column:
			f.loading[o.Agent] = append(f.loading[o.Agent], in, out, goal, o.Floor, o.Figure("equilibrium at this dose")/1e6)
		case steps.Trap:
			c := run.Settings.at(run.Route, i).receiverC
			f.trap[c] = append(f.trap[c], in, out)
			for _, p := range o.Course {
				f.trap[c] = append(f.trap[c], p.Water)
			}
		case steps.Forerun:
			choice := run.Settings.at(run.Route, i)
			if choice.kPa > 0 {
				continue // stands as values
			}
			n := choice.stages
			f.forerun[n] = append(f.forerun[n], in, out, math.Max(goal, f.practice("trap-outlet-minimum")))
			if len(o.Course) > 0 {
				f.forerun[n] = append(f.forerun[n], o.Course[len(o.Course)-1].Water)
			}
		}
	}
}

func (f *follower) curves() error {
	for _, agent := range f.agents("sieve", "oxide") {
		if waters := finiteOnly(f.loading[agent]); len(waters) > 0 {
			f.out.Curves = append(f.out.Curves, f.loadingCurve(agent, waters))
		}
	}
	for _, receiverC := range slices.Sorted(maps.Keys(f.trap)) {
		curve, err := f.trapCurve(receiverC, finiteOnly(f.trap[receiverC]))
		if err != nil {
			return err
		}
		f.out.Curves = append(f.out.Curves, curve)
	}
	for _, n := range f.ColumnStages() {
		waters := finiteOnly(f.forerun[n])
		if len(waters) == 0 {
			continue
		}
		if curve, ok := f.forerunCurve(n, waters); ok {
			f.out.Curves = append(f.out.Curves, curve)
		}
	}
	return nil
}

func finiteOnly(all []float64) []float64 {
	return slices.DeleteFunc(slices.Clone(all), func(w float64) bool { return !(w > 0 && w < 1) })
}

// filled puts waters among evenly spaced ones so that a curve gets its number of
// nodes.
func filled(nodes int, waters []float64, spaced func(count int) []float64) []float64 {
	if len(spaced(nodes)) == 0 {
		return nil
	}
	for count := nodes; count > 8; count-- {
		all := steps.WithNodes(spaced(count), waters...)
		if len(all) <= nodes {
			return all
		}
	}
	return spaced(nodes) // more water contents than nodes
}

const (
	drierThanSeen  = 0.2 // a curve goes on so far beyond the water contents of the run
	wetterThanSeen = 2.0
)

func (f *follower) loadingCurve(agent string, waters []float64) Curve {
	a := f.Catalog.Agents[agent]
	s := f.sorbent(agent, Discard)
	pores := s.PoreShare
	if pores == 0 {
		pores = 1
	}
	room := f.Job.Site.RoomK
	low, high := slices.Min(waters)*drierThanSeen, math.Min(0.9, slices.Max(waters)*wetterThanSeen)
	curve := Curve{Kind: steps.Soak, Agent: agent}
	for _, w := range filled(LoadingNodes, waters, func(n int) []float64 { return steps.SpacedWaters(low, high, n) }) {
		activity := math.Min(1, f.Mixture.Activity(w, room))
		pressurePa := activity * f.Mixture.Water.VapourPressurePa.At(room)
		curve.Rows = append(curve.Rows, []float64{w, activity, pores * a.Isotherm.LoadingKgPerKg(pressurePa, room)})
	}
	return curve
}

func (f *follower) trapCurve(receiverC float64, waters []float64) (Curve, error) {
	curve := Curve{Kind: steps.Trap, ReceiverC: receiverC}
	trap, err := f.trapAt(receiverC)
	if err != nil || len(waters) == 0 {
		return curve, err
	}
	wettest := slices.Max(waters) * wetterThanSeen
	if x := trap.Azeotrope.Layers.XAqueous; x > 0 {
		wettest = math.Min(wettest, 0.9*f.Mixture.MassFraction(x))
	}
	all := filled(potNodes, waters, func(n int) []float64 { return steps.TrapWaters(trap, f.trapRules(), wettest, n) })
	nodes, err := steps.TrapTable(trap, f.trapRules(), f.Job.Site.RoomK, all)
	for _, n := range nodes {
		curve.Rows = append(curve.Rows, []float64{n.Water, n.BoiledMol, n.HeatJ, n.LnLeftM3, n.YWater, n.LatentJ, n.WarmWaterJ, n.WarmSolventJ})
	}
	return curve, err
}
