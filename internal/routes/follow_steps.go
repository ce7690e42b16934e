package routes

import (
	"math"

	"parch/internal/steps"
	"parch/internal/thermo"
)

// constants of one stage of a run; nil where only the program can follow it.
func (f *follower) constants(run *Run, i int, stage Stage) Constants {
	o := run.Outcomes[i]
	if o.In.CarrierKg > 0 {
		return nil
	}
	switch stage.Kind {
	case steps.Settle:
		return f.settleConstants()
	case steps.Trap:
		return f.trapConstants(run.Settings.at(run.Route, i))
	case steps.Forerun:
		return f.forerunConstants(o, run.Settings.at(run.Route, i))
	case steps.Salt:
		return atLeast(leastShare(run.Route), f.saltConstants(stage.Agent, o))
	case steps.Soak:
		choice := run.Settings.at(run.Route, i)
		if choice.charges > 1 {
			return nil // the dose of a series has no closed form
		}
		k := f.soakConstants(stage.Agent)
		if k != nil {
			k["lots"] = float64(max(1, choice.lots))
		}
		return k
	case steps.Column:
		return f.columnConstants(stage.Agent, o)
	case steps.Reactive:
		return atLeast(leastShare(run.Route), f.reactiveConstants(stage.Agent, o))
	case steps.Buy:
		return Constants{"grade kg/kg": f.dryGrade(), "attended s": f.practice("buy-attended"), "lot given up": truth(f.Lot.Reclaimed)}
	}
	return nil
}

// atLeast enters the share of the water that a step has to take.
func atLeast(share float64, k Constants) Constants {
	if k != nil {
		k["takes share"] = share
	}
	return k
}

func truth(b bool) float64 {
	if b {
		return 1
	}
	return 0
}

func (f *follower) settleConstants() Constants {
	layers, err := f.Mixture.LayersAt(f.Job.Site.RoomK)
	if err != nil {
		return nil
	}
	r := f.settleRules()
	return Constants{"x organic": layers.XOrganic, "x aqueous": layers.XAqueous, "saturated kg/kg": f.Mixture.MassFraction(layers.XOrganic),
		"interface share": r.InterfaceShare, "time s": r.TimeS, "attended s": r.AttendedS}
}

func (f *follower) trapConstants(choice choice) Constants {
	trap, err := f.trapAt(choice.receiverC)
	if err != nil {
		return nil
	}
	receiver, err := f.receiver(trap, choice.receiver)
	if err != nil {
		return nil
	}
	r, l := f.trapRules(), trap.Floor.Layers
	k := Constants{"x organic": l.XOrganic, "x aqueous": l.XAqueous, "floor kg/kg": trap.Floor.Water,
		"aqueous m3/mol": f.Mixture.MolarVolume(l.XAqueous, trap.ReceiverK), "water m3/mol": f.Mixture.MolarVolume(1, trap.ReceiverK),
		"solvent m3/mol": f.Mixture.MolarVolume(0, trap.ReceiverK), "fill m3": receiver.FillVolume.SI, "usable m3": receiver.Volume.SI,
		"driest kg/kg": math.Max(r.LowestOutlet, steps.FloorMargin*trap.Floor.Water), "shortest s": r.ShortestRefluxS, "set-up s": r.SetUpS,
		"shut-down s": r.ShutDownS, "draining s": r.DrainingS}
	if receiver.SetUp != nil {
		k["set-up s"] += receiver.SetUp.SI
	}
	k["x two layers"] = 1 // no pot boils as two layers
	if az := trap.Azeotrope; az.Kind == thermo.Heterogeneous {
		k["x two layers"] = az.Layers.XOrganic
	}
	if choice.goesOn {
		k["shut-down s"] = 0
	}
	return f.stillConstants(k)
}

// stillConstants adds what all heated steps share.
func (f *follower) stillConstants(k Constants) Constants {
	k["attended share"], k["vapour loss 1/s"] = f.practice("trap-attended-share"), f.practice("vapour-loss-per-day")/86400
	k["cooling m3/s"], k["cooling J/m3"] = f.practice("cooling-flow"), steps.CoolantJPerM3(f.practice("cooling-rise"))
	return k
}

func (f *follower) saltConstants(agent string, o steps.Outcome) Constants {
	a := f.Catalog.Agents[agent]
	salt, rules, rig := f.salt(a), f.saltRules(a), f.saltRig(math.NaN())
	if len(salt.Pairs) > saltPairs || rig.RinseM3 > 0 || o.Carrier != "" {
		return nil
	}
	k := Constants{"usual kg/m3": rules.ClaimDoseKgPerM3, "largest kg/m3": salt.MaxDoseKgPerM3, "left share": 1 - salt.ShareRemoved,
		"least kg/kg": rules.LowestOutlet, "hold-up m3/kg": salt.HoldUpM3PerKg, "time s": rig.TimeS, "attended s": rig.AttendedS, "claimable kg/kg": rules.LowestTarget}
	for i := range saltPairs {
		name := string(rune('1' + i))
		k["pair "+name+" leaves"], k["pair "+name+" holds"] = 1, 0
		if i < len(salt.Pairs) {
			p := salt.Pairs[i]
			w, err := steps.WaterAtActivity(f.Mixture, p.At(rig.TempK), rig.TempK)
			if err != nil {
				return nil
			}
			k["pair "+name+" leaves"] = w / (1 - w)
			k["pair "+name+" holds"] = p.WaterMolPerMol * f.Mixture.Water.MolarMassKgPerMol / salt.MolarMassKgPerMol
		}
	}
	return k
}

// saltPairs is the most pairs of hydrates that a salt of the catalog has.
const saltPairs = 3

// sieveConstants are those of soaks and columns alike.
func (f *follower) sieveConstants(agent string) Constants {
	a := f.Catalog.Agents[agent]
	k := Constants{"uses": a.Lives.SI, "fade": a.Fade.SI, "hold-up m3/kg": a.HoldUp.SI, "largest kg/m3": a.MaxDose.SI, "oven kg": 1, "lots": 1, "history share": f.HistoryShare(agent)}
	if ovens := f.pieces("oven"); len(ovens) > 0 {
		k["oven kg"], k["oven kWh"], k["oven h"], k["oven"] = ovens[0].Load.SI, ovens[0].Energy.SI/3.6e6, f.practice("oven-attended")/3600, 1
	}
	k["activated"] = truth(f.Lot.SieveHistoryK != 0)
	r := f.Regeneration()
	k["flush gas m3/kg"], k["flush caught"], k["flush work"] = r.GasM3PerKg, r.CondensedShare, r.WorkOfFlush
	return k
}

func (f *follower) soakConstants(agent string) Constants {
	k := f.sieveConstants(agent)
	still, stirred := f.soakRig(false), f.soakRig(true)
	if still.CondensationPerS > 0 {
		return nil // ketones: where the lot is driest is found by search
	}
	sorbent := f.sorbent(agent, Discard)
	var err1, err2 error
	k["beads still m3/kg/s"], err1 = steps.BeadRate(f.Mixture, f.Feed, sorbent, still)
	k["beads stirred m3/kg/s"], err2 = steps.BeadRate(f.Mixture, f.Feed, sorbent, stirred)
	if err1 != nil || err2 != nil {
		return nil
	}
	k["mixing 1/s"], k["mixing depth m"], k["attended s"], k["stirrer W"] = still.StillRatePerS, still.RateDepthM, still.AttendedS, f.practice("stirrer-power")
	return k
}

func (f *follower) columnConstants(agent string, o steps.Outcome) Constants {
	k := f.sieveConstants(agent)
	columns := f.columns()
	for i, a := range columns {
		if a.Key != o.Apparatus {
			continue
		}
		if i > 1 {
			return nil // more than one narrower column would have to be tried
		}
		f.bedConstants(k, "", agent, o.In, i)
		f.bedConstants(k, "narrower ", agent, o.In, max(i-1, 0))
		k["narrower"], k["wider"] = truth(i > 0), truth(i < len(columns)-1)
		return k
	}
	return nil
}

func (f *follower) bedConstants(k Constants, name, agent string, feed steps.Lot, i int) {
	rig := f.columnRig(f.columns()[i])
	b := steps.BedOf(f.Mixture, f.sorbent(agent, Discard), rig)
	k[name+"area m2"], k[name+"bed kg/m3"], k[name+"transfer m"] = b.AreaM2, b.KgPerM3, b.TransferUnitM
	k[name+"longest m"], k[name+"flow m3/s"] = rig.LongestM, rig.FlowM3S
	k["recycle"], k["pump W"], k["set-up s"], k["attended share"] = rig.RecycleBedVolumes, rig.PumpW, rig.SetUpS, rig.AttendedShare
}

func (f *follower) reactiveConstants(agent string, o steps.Outcome) Constants {
	re, rig := f.reactiveAgent(agent), f.reactiveRig(agent)
	boilK, err := thermo.Boil(f.Mixture.Solvent, rig.PressurePa)
	if err != nil {
		return nil
	}
	mid, rise := (boilK+rig.RoomK)/2, math.Max(0, boilK-rig.RoomK)
	k := Constants{"need kg/kg": re.MolarMassKgPerMol / re.WaterMolPerMol / f.Mixture.Water.MolarMassKgPerMol, "surplus": rig.Surplus,
		"least kg/m3": rig.LeastKgPerM3, "bound kg/kg": re.SolventMolPerMol * f.Mixture.Solvent.MolarMassKgPerMol / re.MolarMassKgPerMol,
		"residual kg/kg": f.residualLeft(agent, o), "handles kg/kg": re.HandlesBelow, "heel share": math.Max(steps.LeastHeel, rig.HeelShare),
		"reflux s": rig.RefluxS, "set-up s": rig.SetUpS, "spent h": f.practice("reactive-spent") / 3600,
		"warm water J/mol": f.Mixture.Water.HeatCapacityJPerMolK.At(mid) * rise, "warm solvent J/mol": f.Mixture.Solvent.HeatCapacityJPerMolK.At(mid) * rise,
		"latent J/mol": f.Mixture.Solvent.HeatOfVaporizationJ.At(boilK)}
	return f.stillConstants(k)
}

// residualLeft is what the agent leaves in a lot that is wet enough.
func (f *follower) residualLeft(agent string, o steps.Outcome) float64 {
	wet := o.In
	wet.WaterKg = wet.SolventKg * f.reactiveAgent(agent).HandlesBelow * 0.9
	dried, err := steps.RunReactive(f.Mixture, wet, f.reactiveAgent(agent), f.measured(f.Catalog.Agents[agent]), f.reactiveRig(agent))
	if err != nil {
		return o.Out.Water()
	}
	return dried.Out.Water()
}

// LeastExcess is how far above saturation a lot counts as wet with free water.
const LeastExcess = leastExcess
