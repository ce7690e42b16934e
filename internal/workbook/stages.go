package workbook

import (
	"math"
	"slices"

	"parch/internal/routes"
	"parch/internal/steps"
)

// stageModel is a step of a route as the sheets follow it.
type stageModel struct {
	steps.Outcome
	route     *routeModel
	no        int              // from 1
	constants routes.Constants // nil where only the program can follow the step
	last      bool

	handOver, hours float64 // settings; 0 where the step has none
	aim             float64 // mg/kg, of a last step that is not sized for the limit
	stirred         bool
	sieve           string
	stages          int     // of the column of a forerun
	receiverC       float64 // of a trap

	setRow, hoursRow, stirRow, sieveRow int // rows of its settings on Inputs
	row                                 int // on Steps
	ovenBilled, flushBilled             bool
}

// stagesOf prepares the steps of a route, and gives up following those that the
// sheet has no closed form for.
func stagesOf(r *routeModel, constants []routes.Constants) []*stageModel {
	var out []*stageModel
	run := r.Run
	soaks, sieves, foreruns, traps := 0, 0, 0, 0
	for i, o := range run.Outcomes {
		s := &stageModel{Outcome: o, route: r, no: i + 1, last: i == len(run.Outcomes)-1}
		if i < len(constants) && run.Route.CarrierOf() == "" { // a carrier goes along to the end
			s.constants = constants[i]
		}
		if !s.last && s.needsCurve() && i < len(run.Settings.HandOverMgPerKg) {
			s.handOver = tidy(run.Settings.HandOverMgPerKg[i])
		}
		if s.last {
			s.aim = tidy(run.Settings.AimMgPerKg)
		}
		if o.Kind == steps.Soak && soaks < len(run.Settings.SoakHours) {
			s.hours = tidy(run.Settings.SoakHours[soaks])
			s.stirred = soaks < len(run.Settings.Stirred) && run.Settings.Stirred[soaks]
			soaks++
		}
		if (o.Kind == steps.Soak || o.Kind == steps.Column) && sieves < len(run.Settings.Sieve) {
			s.sieve = run.Settings.Sieve[sieves]
			sieves++
		}
		if o.Kind == steps.Forerun && foreruns < len(run.Settings.Stages) {
			s.stages = run.Settings.Stages[foreruns]
			foreruns++
		}
		if o.Kind == steps.Trap && traps < len(run.Settings.ReceiverC) {
			s.receiverC = run.Settings.ReceiverC[traps]
			traps++
		}
		out = append(out, s)
	}
	return out
}

// place is the block of a step among those of Steps, -1 for the values.
func (s *stageModel) place() int {
	if s.constants == nil {
		return -1
	}
	return slices.IndexFunc(liveBlocks, func(b liveKind) bool { return b.kind == s.Kind })
}

// inOrder gives up steps that stand out of the order of the blocks, so that what
// feeds a step always stands above it, and those whose curve is missing.
func (l *layout) inOrder() {
	for _, r := range l.routes {
		before := -1
		for _, s := range r.stages {
			if p := s.place(); p < before || s.needsCurve() && !s.hasCurve() {
				s.constants = nil
			} else if p >= 0 {
				before = p
			}
		}
	}
}

func (s *stageModel) hasCurve() bool {
	key := s.curve()
	return slices.ContainsFunc(s.route.lot.Follow.Curves, func(c routes.Curve) bool {
		return c.Kind == key.kind && c.Agent == key.agent && c.Stages == key.stages && c.ReceiverC == key.receiverC && len(c.Rows) > 1
	})
}

func (s *stageModel) needsCurve() bool {
	return slices.Contains([]steps.Kind{steps.Soak, steps.Column, steps.Trap, steps.Forerun}, s.Kind)
}

// curveKey tells the curves of the workbook apart.
type curveKey struct {
	lot       int
	kind      steps.Kind
	agent     string
	stages    int
	receiverC float64
}

func (s *stageModel) curve() curveKey {
	k := curveKey{lot: s.route.lot.no, kind: s.Kind, stages: s.stages, receiverC: s.receiverC}
	if s.Kind == steps.Soak || s.Kind == steps.Column {
		k.kind, k.agent = steps.Soak, s.Agent
	}
	return k
}

// sharedFollow are the constants of the first lot that is followed.
func (l *layout) sharedFollow() routes.Constants {
	for _, lot := range l.lots {
		if lot.Follow.Lot != nil {
			return lot.Follow.Lot
		}
	}
	return nil
}

// followedSieves are the agents of soaks and columns that are followed, sorted.
func (l *layout) followedSieves() []string {
	seen := map[string]bool{}
	for _, r := range l.routes {
		for _, s := range r.stages {
			if s.constants != nil && (s.Kind == steps.Soak || s.Kind == steps.Column) {
				seen[s.Agent] = true
			}
		}
	}
	return sortedKeys(seen)
}

func (l *layout) sieveUses(agent string) float64 {
	for _, r := range l.routes {
		for _, s := range r.stages {
			if s.constants != nil && s.Agent == agent && s.constants["uses"] > 0 {
				return s.constants["uses"]
			}
		}
	}
	return 1
}

// constantsOf are the values of the columns of a step that hold no formula, by key.
func (l *layout) constantsOf(s *stageModel) map[string]float64 {
	k := s.constants
	m := map[string]float64{"last": truth(s.last), "atlimit": truth(s.last && s.aim == 0), "setrow": float64(max(s.setRow, 1))}
	if s.needsCurve() {
		r := l.curveRows[s.curve()]
		m["from"], m["to"] = float64(r.first), float64(r.last)
	}
	for key, name := range constantNames[s.Kind] {
		m[key] = k[name]
	}
	if s.Kind == steps.Soak || s.Kind == steps.Column {
		for key, name := range sieveNames {
			m[key] = k[name]
		}
		m["sieverow"], m["hoursrow"], m["stirrow"], m["usesrow"] = float64(s.sieveRow), float64(s.hoursRow), float64(s.stirRow), float64(l.usesRow[s.Agent])
		m["excess"] = routes.LeastExcess
		m["billed"], m["flushbilled"] = truth(s.ovenBilled), truth(s.flushBilled)
	}
	if s.Kind == steps.Forerun {
		m["works"] = truth(s.SolventLostL > 0)
	}
	switch s.Kind {
	case steps.Settle:
		m["excess"] = routes.LeastExcess
	case steps.Salt:
		m["claimable"] = k["claimable kg/kg"] * mgPerKg
	case steps.Trap, steps.Forerun, steps.Reactive:
		for key, name := range stillNames {
			m[key] = k[name]
		}
	}
	return m
}

func truth(b bool) float64 {
	if b {
		return 1
	}
	return 0
}

var stillNames = map[string]string{"share": "attended share", "vl": "vapour loss 1/s", "flow": "cooling m3/s", "cool": "cooling J/m3"}

var sieveNames = map[string]string{"hold": "hold-up m3/kg", "fade": "fade", "ovenkg": "oven kg", "runkwh": "oven kWh", "runh": "oven h", "activated": "activated", "lots": "lots", "gaskg": "flush gas m3/kg", "condensed": "flush caught", "flushwork": "flush work", "held0": "history share"}

// constantNames leads from the keys of the columns to the program's names.
var constantNames = map[steps.Kind]map[string]string{
	steps.Settle: {"xo": "x organic", "xa": "x aqueous", "sat": "saturated kg/kg", "share": "interface share", "time": "time s", "att": "attended s"},
	steps.Salt: {"takes": "takes share", "usual": "usual kg/m3", "most": "largest kg/m3", "leaves": "left share", "least": "least kg/kg", "hold": "hold-up m3/kg", "time": "time s", "att": "attended s",
		"v1": "pair 1 leaves", "h1": "pair 1 holds", "v2": "pair 2 leaves", "h2": "pair 2 holds", "v3": "pair 3 leaves", "h3": "pair 3 holds"},
	steps.Trap: {"xo": "x organic", "xa": "x aqueous", "vaq": "aqueous m3/mol", "vw": "water m3/mol", "vs": "solvent m3/mol", "fill": "fill m3", "usable": "usable m3", "xtwo": "x two layers",
		"driest": "driest kg/kg", "shortest": "shortest s", "setup": "set-up s", "shut": "shut-down s", "draining": "draining s"},
	steps.Forerun: {"heel": "heel share", "driest": "driest kg/kg", "setup": "set-up s", "settle": "settle s", "shut": "shut-down s", "cold": "cold"},
	steps.Soak:    {"beads0": "beads still m3/kg/s", "beads1": "beads stirred m3/kg/s", "mix": "mixing 1/s", "mixdepth": "mixing depth m", "att": "attended s", "stirw": "stirrer W", "most": "largest kg/m3"},
	steps.Column: {"recycle": "recycle", "pumpw": "pump W", "setup": "set-up s", "share": "attended share", "hasnarrow": "narrower", "haswide": "wider",
		"area": "area m2", "rho": "bed kg/m3", "htu": "transfer m", "long": "longest m", "flow": "flow m3/s",
		"arean": "narrower area m2", "rhon": "narrower bed kg/m3", "htun": "narrower transfer m", "longn": "narrower longest m", "flown": "narrower flow m3/s"},
	steps.Reactive: {"takes": "takes share", "need": "need kg/kg", "surplus": "surplus", "least": "least kg/m3", "binds": "bound kg/kg", "res": "residual kg/kg", "handles": "handles kg/kg", "heels": "heel share",
		"reflux": "reflux s", "setup": "set-up s", "spent": "spent h", "ww": "warm water J/mol", "ws": "warm solvent J/mol", "latent": "latent J/mol"},
	steps.Buy: {"grade": "grade kg/kg", "att": "attended s", "givenup": "lot given up"},
}

// valuesOf are the results of a step that only the program can follow, by key.
func valuesOf(s *stageModel) map[string]float64 {
	o := s.Outcome
	out := o.Out.Water()
	if s.last {
		out = s.route.Run.WaterOut
	}
	return map[string]float64{
		"S": o.In.SolventKg, "W": o.In.WaterKg, "win": o.In.Water() * mgPerKg, "Sout": o.Out.SolventKg, "Wout": o.Out.WaterKg, "wout": out * mgPerKg,
		"hours": o.HoursTotal, "attended": o.HoursAttended, "energy": o.EnergyKWh, "cooling": o.CoolingWaterL / 1000, "agent": o.AgentKg, "loss1": o.SolventLostL,
		"waste1": o.WasteKg, "used": o.AgentKg, "pieces": 1, "follows": 1,
	}
}

// wrong reports whether a step as the sheet computes it differs from the program's.
func (l *layout) wrong(s *stageModel, get func(key string) float64) bool {
	o := s.Outcome
	for _, c := range []struct{ sheet, program float64 }{
		{get("Sout"), o.Out.SolventKg}, {get("Wout"), o.Out.WaterKg}, {get("hours"), o.HoursTotal}, {get("attended") + get("besides"), o.HoursAttended},
		{get("energy") + get("ovenkwh"), o.EnergyKWh}, {get("agent"), o.AgentKg}, {get("loss1") + get("loss2") + get("loss3"), o.SolventLostL},
	} {
		if !(math.Abs(c.sheet-c.program) <= agreement*math.Abs(c.program)+noiseFloor) {
			return true
		}
	}
	return get("follows") < 1
}

const (
	agreement  = 1e-4  // share by which a closed form may differ from the run it mirrors
	noiseFloor = 1e-10 // kg, h, kWh, L
)
