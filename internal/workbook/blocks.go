package workbook

import (
	"fmt"
	"strconv"
	"strings"

	"parch/internal/steps"
)

// The formulas of the steps mirror package steps, in its symbols. Amounts are kg
// and mol, times seconds where the unit says so; S and W are the solvent and the
// water that go in.

const (
	toHours  = "/60/60"
	toKWh    = "/60/60/1000"
	toLitres = "/{lot.ds}*1000"
	ceilLess = "-INT(job_tie-%s)" // rounds up what is not already whole but for the noise of the arithmetic
)

// common fills in what all steps have.
func common(formulas map[string]string) map[string]string {
	all := map[string]string{
		"W": "", "S": "", "win": "{W}/({S}+{W})*1000*1000", "wout": "{Wout}/({Sout}+{Wout})*1000*1000",
		"goal": "IF({atlimit}=1,{lot.goal},{handover}/1000/1000)",
		"open": "{S}-{Sout}-({loss1}+{loss2}+{loss3})/1000*{lot.ds}",
	}
	for k, f := range formulas {
		all[k] = f
	}
	return all
}

// chain are the constants of a step that say how it is asked for.
var chain = []liveColumn{{"last", "Last step", "1", ""}, {"atlimit", "Sized for the limit", "1", ""}, {"setrow", "Row of its setting", "1", ""},
	{"handover", "Hand-over, or aim", "mg/kg", "INDEX(input_values,{setrow})"}, {"w", "Water in", "kg/kg", "{W}/({S}+{W})"}}

func columnsOf(lists ...[]liveColumn) (out []liveColumn) {
	for _, l := range lists {
		out = append(out, l...)
	}
	return out
}

// constant is a column that holds a figure of the program.
func constant(key, name, unit string) liveColumn { return liveColumn{key, name, unit, ""} }

func lotsBlock() *liveBlock {
	return newLiveBlock("lots", "Lots as they are fed", map[string]string{
		"S": "{Sout}", "W": "{Wout}", "win": "{own.start_water}", "wout": "{Wout}/({Sout}+{Wout})*1000*1000", "goal": "{goalwater}",
		"Sout": "{mass}*(1-{w})", "Wout": "{mass}*{w}+{free}/1000/1000*{dw}",
		"follows": "({batch}>0)*({Wout}/({Sout}+{Wout})>{goalwater})",
	}, []liveColumn{
		constant("dw", "Density of water", "kg/m3"), constant("ds", "Density of the solvent", "kg/m3"),
		constant("mw", "Molar mass of water", "kg/mol"), constant("ms", "Molar mass of the solvent", "kg/mol"), constant("sat", "Saturated", "kg/kg"),
		constant("vesselm3", "Vessel takes", "m3"), constant("vesselfrom", "The same vessel from", "m3"), constant("vesselto", "The same vessel to", "m3"),
		constant("stillm3", "Still takes", "m3"), constant("stillfrom", "The same still from", "m3"), constant("stillto", "The same still to", "m3"),
		constant("stillw", "Heater of the still", "W"), constant("fourpi", "4/π", "1"), constant("third", "One third", "1"),
		{"batch", "Batch", "m3", "{own.batch_litres}/1000"}, {"w", "Water", "kg/kg", "{own.start_water}/1000/1000"}, {"free", "Free water", "mL", "{own.free_water}"},
		{"mass", "Solution", "kg", "{batch}/({w}/{dw}+(1-{w})/{ds})"}, {"volume", "Batch and free water", "m3", "{batch}+{free}/1000/1000"},
		{"vessels", "Vessels", "1", fmt.Sprintf(ceilLess, "{volume}/{vesselm3}")}, {"charges", "Charges of the still", "1", fmt.Sprintf(ceilLess, "{volume}/{stillm3}")},
		{"vesselok", "The same vessel", "1", "({volume}>{vesselfrom})*({volume}<={vesselto}*(1+job_tie))"},
		{"stillok", "The same still", "1", "({volume}>{stillfrom})*({volume}<={stillto}*(1+job_tie))"},
		{"depth", "Liquid height", "m", "IF({own.vessel_height}>0,{own.vessel_height},({batch}/{vessels}*{fourpi})^{third})"},
		{"heater", "Heater", "W", "IF({own.heater}>0,{own.heater},{stillw})"}, {"net", "Heat that reaches the liquid", "W", "{heater}*site_heat_share"},
		{"goalwater", "Acceptance limit, or the target", "kg/kg", `IF({own.can_show}="yes",{own.accept_limit},{own.target_water})/1000/1000`},
		{"q0", "Water on the sieve", "kg/kg", "{own.residual_loading}/100"},
		{"target", "Target", "mg/kg", "{own.target_water}"},
	})
}

func settleBlock() *liveBlock {
	return newLiveBlock("settle", "Settling", common(map[string]string{
		"Sout": "{kept}*(1-{sat})", "Wout": "{kept}*{sat}", "hours": "({time}+{att})" + toHours, "attended": "{att}" + toHours,
		"loss1": "{ds2}" + toLitres, "loss2": "{left}*(1-{sat})" + toLitres, "waste1": "{drawn}+{ds2}", "waste2": "{left}",
		"follows": "({x}>{xo})*({x}<{xa})*({lot.free}+MAX(0,{w}-{excess}*{sat})>0)",
	}), columnsOf(chain, []liveColumn{
		constant("xo", "Water in the upper layer", "mol/mol"), constant("xa", "Water in the lower layer", "mol/mol"), constant("sat", "Saturated", "kg/kg"),
		constant("share", "Left with the interface", "1"), constant("time", "Standing", "s"), constant("att", "Attended", "s"), constant("excess", "Settled from, times saturation", "1"),
		{"mol", "All", "mol", "{W}/{lot.mw}+{S}/{lot.ms}"}, {"x", "Water", "mol/mol", "{W}/{lot.mw}/{mol}"},
		{"aq", "Drawn layer", "mol", "{mol}*({x}-{xo})/({xa}-{xo})"}, {"drawn", "Water drawn", "kg", "{aq}*{xa}*{lot.mw}"},
		{"ds2", "Solvent drawn", "kg", "{aq}*(1-{xa})*{lot.ms}"}, {"upper", "Upper layer", "kg", "{S}+{W}-{drawn}-{ds2}"},
		{"left", "Interface", "kg", "{share}*{upper}"}, {"kept", "Kept", "kg", "{upper}-{left}"},
	}))
}

func saltBlock() *liveBlock {
	return newLiveBlock("salt", "Salts", common(map[string]string{
		"Sout": "{S}-{held}", "Wout": "{Sout}*{ratio}", "hours": "({time}+{att})*{lot.vessels}" + toHours, "attended": "{att}*{lot.vessels}" + toHours,
		"agent": "{m}", "used": "{m}", "loss1": "{held}" + toLitres, "waste1": "{m}+{taken}+{held}*(1+{ratio})", "pieces": "{lot.vessels}",
		"follows": "{lot.vesselok}*(({last}=0)+({lot.target}>={claimable})>0)*({out}<={w}*(1-{takes})*(1+job_tie))",
	}), columnsOf(chain, []liveColumn{
		constant("usual", "Usual dose", "kg/m3"), constant("most", "Largest dose", "kg/m3"), constant("leaves", "Share left of the dissolved water", "1"),
		constant("least", "Least outlet claimed", "kg/kg"), constant("hold", "Held by the cake", "m3/kg"), constant("time", "Stirred", "s"), constant("att", "Attended", "s"),
		constant("claimable", "Last step from a target of", "mg/kg"), constant("takes", "Takes at least", "1"),
		constant("v1", "First pair leaves", "kg/kg"), constant("h1", "First pair holds", "kg/kg"), constant("v2", "Second pair leaves", "kg/kg"), constant("h2", "Second pair holds", "kg/kg"),
		constant("v3", "Third pair leaves", "kg/kg"), constant("h3", "Third pair holds", "kg/kg"),
		{"vol", "Volume", "m3", "{S}/{lot.ds}+{W}/{lot.dw}"}, {"diss", "Dissolved", "kg/kg", "MIN({w},{lot.sat})"},
		{"exp", "Exposure asked for", "1", "IFERROR(MAX(0,LN({goal}/{diss})/LN({leaves})),1+1)"}, {"goalr", "Asked for", "kg/kg", "{goal}/(1-{goal})"},
		{"cap", "Holds at that", "kg/kg", "{h1}*({v1}<={goalr})+{h2}*({v2}<={goalr})+{h3}*({v3}<={goalr})"},
		{"need", "Dose that holds it", "kg/m3", "IFERROR(MAX(0,{W}-{S}*{goalr})/{cap}/{vol},{most})"},
		{"dosed", "Dose that reaches it", "kg/m3", "IF(MAX({exp}-1,{least}-{goal})>job_tie,{most},MIN({most},MAX({exp}*{usual},{need})))"},
		{"dose", "Dose", "kg/m3", "IF({last}=1,{dosed},{usual})"}, {"m", "Salt", "kg", "{dose}*{vol}"},
		{"t1", "First pair takes", "kg", "MAX(0,MIN({W}-{S}*{v1},{m}*{h1}))"},
		{"t2", "Second pair takes", "kg", "({t1}>={m}*{h1}*(1-job_tie))*MAX(0,MIN({W}-{t1}-{S}*{v2},{m}*{h2}))"},
		{"t3", "Third pair takes", "kg", "({t2}>={m}*{h2}*(1-job_tie))*({t2}>0)*MAX(0,MIN({W}-{t1}-{t2}-{S}*{v3},{m}*{h3}))"},
		{"rest", "Water left", "kg", "{W}-{t1}-{t2}-{t3}"}, {"eq", "Equilibrium", "kg/kg", "{rest}/({rest}+{S})"},
		{"claimed", "Left by the claim", "kg/kg", "{leaves}^MIN(1,{dose}/{usual})*{diss}"},
		{"out", "Water out", "kg/kg", "MIN({w},MAX({eq},{claimed},{least}))"}, {"ratio", "Water out", "kg/kg", "{out}/(1-{out})"},
		{"taken", "Taken up", "kg", "{W}-{S}*{ratio}"}, {"held", "Held by the cake", "kg", "MIN(({m}+{taken})*{hold}*{lot.ds},{S})"},
	}))
}

var stillColumns = []liveColumn{
	constant("share", "Attended share", "1"), constant("vl", "Vapour lost", "1/s"), constant("flow", "Cooling water", "m3/s"), constant("cool", "Heat taken by cooling water", "J/m3"),
	{"run", "Cooling water run", "m3/s", "MAX({flow},{lot.net}/{cool})"},
}

func trapBlock() *liveBlock {
	return newLiveBlock("trap", "Trap", common(map[string]string{
		"Sout": "{lot.charges}*{outS}", "Wout": "{lot.charges}*{outW}",
		"hours":    "({setup}+{lot.charges}*({hot}+{shut}+{drains}*{draining}))" + toHours,
		"attended": "({setup}+{lot.charges}*({hot}*{share}+{shut}+{drains}*{draining}))" + toHours,
		"energy":   "{lot.charges}*{lot.heater}*{hot}" + toKWh, "cooling": "{lot.charges}*{run}*{reflux}",
		"loss1": "{lot.charges}*{aq}*(1-{xa})*{lot.ms}" + toLitres, "loss2": "{lot.charges}*{heldS}*{lot.ms}" + toLitres, "loss3": "{lot.charges}*{vapS}" + toLitres,
		"waste1": "{lot.charges}*{aq}*((1-{xa})*{lot.ms}+{xa}*{lot.mw})", "waste2": "{lot.charges}*({heldS}*{lot.ms}+{heldW}*{lot.mw})",
		"follows": "{lot.stillok}*({w}>=INDEX(trap_water,{from})*(1-job_tie))*({w}<=INDEX(trap_water,{to})*(1+job_tie))",
	}), columnsOf(chain, stillColumns, []liveColumn{
		constant("from", "Curve from row", "1"), constant("to", "Curve to row", "1"), constant("xo", "Water in the organic layer", "mol/mol"), constant("xa", "Water in the aqueous layer", "mol/mol"),
		constant("vaq", "Aqueous layer", "m3/mol"), constant("vw", "Water", "m3/mol"), constant("vs", "Solvent", "m3/mol"), constant("fill", "Receiver filled with", "m3"), constant("usable", "Receiver takes", "m3"), constant("xtwo", "Two layers from", "mol/mol"),
		constant("driest", "Driest outlet", "kg/kg"), constant("shortest", "Shortest reflux", "s"), constant("setup", "Set-up", "s"), constant("shut", "Shut-down", "s"), constant("draining", "A draining", "s"),
		{"nw", "Water of a charge", "mol", "{W}/{lot.mw}/{lot.charges}"}, {"ns", "Solvent of a charge", "mol", "{S}/{lot.ms}/{lot.charges}"},
		{"i0", "Place of the feed", "1", placeIn("trap_water", "w")}, {"f0", "Share of the feed", "1", shareIn("trap_water", "i0", "w")},
		{"y0", "Water in its vapour", "mol/mol", lookup("trap_vapour", "i0", "f0")}, {"fillone", "Fill, at one vapour", "mol", "{fill}/({y0}*{vw}+(1-{y0})*{vs})"},
		{"pot0", "Pot, as cold as the receiver", "m3", "{nw}*{vw}+{ns}*{vs}"}, {"xstraight", "Water when filled, at one vapour", "mol/mol", "({nw}-{fillone}*{y0})/({nw}+{ns}-{fillone})"},
		{"ln0", "ln left, feed", "1", lookup("trap_left", "i0", "f0")}, {"lnfull", "ln left, filled", "1", "{ln0}+LN(1-{fill}/{pot0})"}, {"ifull", "Place when filled", "1", placeIn("trap_left", "lnfull")},
		{"ffull", "Share when filled", "1", "({lnfull}-INDEX(trap_left,{ifull}))/(INDEX(trap_left,{ifull}+1)-INDEX(trap_left,{ifull}))"},
		{"wfull", "Water when filled, of the curve", "kg/kg", "INDEX(trap_water,{ifull})*(INDEX(trap_water,{ifull}+1)/INDEX(trap_water,{ifull}))^{ffull}"},
		{"xfull", "Water when filled, of the curve", "mol/mol", "{wfull}/{lot.mw}/({wfull}/{lot.mw}+(1-{wfull})/{lot.ms})"},
		{"x1", "Water when filled", "mol/mol", "IF({xstraight}>={xtwo},{xstraight},{xfull})"}, {"w1", "Water when filled", "kg/kg", "{x1}*{lot.mw}/({x1}*{lot.mw}+(1-{x1})*{lot.ms})"},
		{"i1", "Place when filled", "1", placeIn("trap_water", "w1")}, {"f1", "Share when filled", "1", shareIn("trap_water", "i1", "w1")},
		{"n1", "Pot when filled", "mol", "({pot0}-{fill})/({x1}*{vw}+(1-{x1})*{vs})"}, {"fillmol", "Fill", "mol", "{nw}+{ns}-{n1}"},
		{"nw1", "Water when filled", "mol", "{x1}*{n1}"}, {"aqfill", "Aqueous layer of the fill", "mol", "MAX(0,MIN({fillmol},({nw}-{nw1}-{xo}*{fillmol})/({xa}-{xo})))"},
		{"rest", "Rest", "mol", "{n1}-{nw1}-{nw1}*(1-{xa})/{xa}"},
		{"end", "Run to", "kg/kg", "MIN({w},MAX({goal},{driest}))"}, {"w2", "Water at the end", "kg/kg", "MIN({w1},{end})"},
		{"i2", "Place at the end", "1", placeIn("trap_water", "w2")}, {"f2", "Share at the end", "1", shareIn("trap_water", "i2", "w2")},
		{"x2", "Water at the end", "mol/mol", "{w2}/{lot.mw}/({w2}/{lot.mw}+(1-{w2})/{lot.ms})"}, {"nw2", "Water at the end", "mol", "IF({w2}<{w1},{rest}*{x2}/(1-{x2}/{xa}),{nw1})"},
		{"q1", "Heat to the filled pot", "J/mol", lookup("trap_heat", "i1", "f1")}, {"q2", "Heat to the end", "J/mol", lookup("trap_heat", "i2", "f2")},
		{"l0", "Latent heat, feed", "J/mol", lookup("trap_latent", "i0", "f0")}, {"l1", "Latent heat, filled", "J/mol", lookup("trap_latent", "i1", "f1")},
		{"ww0", "To warm water, feed", "J/mol", lookup("trap_warm_w", "i0", "f0")}, {"ws0", "To warm solvent, feed", "J/mol", lookup("trap_warm_s", "i0", "f0")},
		{"ws1", "To warm solvent, filled", "J/mol", lookup("trap_warm_s", "i1", "f1")},
		{"boil", "Boiling", "s", "({fillmol}*({l0}+{l1})/(1+1)+{n1}*({ws1}-{ws0})+{rest}*({q2}-{q1}))/{lot.net}"},
		{"reflux", "Reflux", "s", "MAX({boil},{shortest})"}, {"hot", "Hot", "s", "({nw}*{ww0}+{ns}*{ws0})/{lot.net}+{reflux}"},
		{"aq", "Aqueous layer", "mol", "{aqfill}+({nw1}-{nw2})/{xa}"}, {"drains", "Drainings", "1", "MAX(1," + fmt.Sprintf(ceilLess, "{aq}*{vaq}/{usable}") + ")"},
		{"heldW", "Water left in the receiver", "mol", "{nw}-{nw1}-{aqfill}*{xa}"}, {"heldS", "Solvent left in the receiver", "mol", "{fillmol}-({nw}-{nw1})-{aqfill}*(1-{xa})"},
		{"potS", "Solvent in the pot", "kg", "({rest}+{nw2}*(1-{xa})/{xa})*{lot.ms}"}, {"vapS", "Solvent vapour lost", "kg", "{potS}*{vl}*{reflux}"},
		{"outS", "Solvent kept", "kg", "{potS}-{vapS}"}, {"low", "Least water claimed", "kg/kg", "MIN({w},{driest})"},
		{"outW", "Water kept", "kg", "MAX({nw2}*{lot.mw}*(1-{vl}*{reflux}),{outS}*{low}/(1-{low}))"},
	}))
}

func forerunBlock() *liveBlock {
	return newLiveBlock("forerun", "Forerun", common(map[string]string{
		"Sout": "{potS}*(1-{lost})", "Wout": "MAX({potW}*(1-{lost}),MIN({W},{Sout}*{driest}/(1-{driest})))",
		"hours": "({setup}+{hot}+{lot.charges}*{shut})" + toHours, "attended": "({setup}+{hot}*{share}+{lot.charges}*{shut})" + toHours,
		"energy": "{lot.heater}*{hot}" + toKWh, "cooling": "{run}*{boil}", "loss1": "({S}-{potS})" + toLitres, "loss2": "{potS}*{lost}" + toLitres,
		"waste1":  "{W}-{potW}+{S}-{potS}",
		"follows": "{lot.stillok}*{inside}*({left}>={heel}*(1-job_tie))*{worth}*(({w}>{end}*(1+job_tie))*1={works})",
	}), columnsOf(chain, stillColumns, []liveColumn{
		constant("from", "Curve from row", "1"), constant("to", "Curve to row", "1"), constant("heel", "Heel", "1"), constant("driest", "Driest outlet", "kg/kg"), constant("setup", "Set-up", "s"),
		constant("works", "Draws some off in the run", "1"), constant("settle", "At total reflux", "s"), constant("shut", "Shut-down", "s"), constant("cold", "Fed cold", "1"),
		{"nw", "Water", "mol", "{W}/{lot.mw}"}, {"ns", "Solvent", "mol", "{S}/{lot.ms}"}, {"end", "Run to", "kg/kg", "MIN({w},MAX({goal},{driest}))"},
		{"i0", "Place of the feed", "1", placeIn("draw_water", "w")}, {"f0", "Share of the feed", "1", shareIn("draw_water", "i0", "w")},
		{"i1", "Place at the end", "1", placeIn("draw_water", "end")}, {"f1", "Share at the end", "1", shareIn("draw_water", "i1", "end")},
		{"ln0", "ln left, feed", "1", lookup("draw_left", "i0", "f0")}, {"ln1", "ln left, end", "1", lookup("draw_left", "i1", "f1")}, {"left", "Left of the charge", "1", "EXP({ln1}-{ln0})"},
		{"q0", "Heat to the feed", "J/mol", lookup("draw_heat", "i0", "f0")}, {"q1", "Heat to the end", "J/mol", lookup("draw_heat", "i1", "f1")},
		{"ww", "To warm water", "J/mol", lookup("draw_warm_w", "i0", "f0")}, {"ws", "To warm solvent", "J/mol", lookup("draw_warm_s", "i0", "f0")},
		{"x1", "Water at the end", "mol/mol", "{end}/{lot.mw}/({end}/{lot.mw}+(1-{end})/{lot.ms})"},
		{"potW", "Water in the pot", "kg", "({nw}+{ns})*{left}*{x1}*{lot.mw}"}, {"potS", "Solvent in the pot", "kg", "({nw}+{ns})*{left}*(1-{x1})*{lot.ms}"},
		{"boil", "Drawing off, all charges", "s", "({nw}+{ns})/EXP({ln0})*({q1}-{q0})/{lot.net}+{lot.charges}*{settle}"},
		{"hot", "Hot, all charges", "s", "{cold}*({nw}*{ww}+{ns}*{ws})/{lot.net}+{boil}"}, {"lost", "Vapour lost", "1", "{vl}*{boil}/{lot.charges}"},
		{"worth", "Less than half drawn off, little water", "1", "({S}-{potS}<{potS})*({W}-{potW}<={S}-{potS}+{S}*job_tie)"},
		{"inside", "On the curve", "1", "({w}<=INDEX(draw_water,{to})*(1+job_tie))*({end}>=INDEX(draw_water,{from})*(1-job_tie))"},
	}))
}

// sieveColumns are those of soaks and columns alike.
var sieveColumns = []liveColumn{
	constant("from", "Curve from row", "1"), constant("to", "Curve to row", "1"), constant("hold", "Held by the beads", "m3/kg"), constant("fade", "Capacity lost a use", "1"),
	constant("ovenkg", "Oven takes", "kg"), constant("runkwh", "A run of the oven", "kWh"), constant("runh", "Work of a run", "h"), constant("activated", "Activated before use", "1"), constant("usesrow", "Row of its uses", "1"),
	constant("sieverow", "Row of its setting", "1"), {"again", "Used again", "1", `(INDEX(input_values,{sieverow})="regenerate")*1`}, {"uses", "Uses of a charge", "1", "IF({again}=1,INDEX(input_values,{usesrow}),1)"},
	constant("held0", "Holds after the same history, times the sieve", "1"), {"q0", "Water on the sieve", "kg/kg", "{lot.q0}*{held0}"}, {"cs", "Capacity at the last use", "1", "(1-{fade})^({uses}-1)"}, {"first", "Wet enough for the sieve", "1", "({w}>{goal})*({w}<=INDEX(load_water,{to}))*({cs}*INDEX(load_held,{from})<={q0})"},
	{"dry", "No free water", "1", "({w}<=MAX({excess}*{lot.sat},{lot.w}*(1+job_tie*1000)))*1"}, constant("excess", "Free water from, times saturation", "1"),
	constant("billed", "The bill has an oven", "1"), constant("gaskg", "Gas that flushes a kg of solvent off", "m3/kg"), constant("condensed", "Share that is caught", "1"), constant("flushwork", "Work of the flush, of that of the oven", "1"), constant("flushbilled", "The bill has a flush", "1"),
	{"flushed", "Flushed", "1", "{again}*({gaskg}+{condensed}>0)"}, constant("lots", "Lots over a charge", "1"), {"runs", "Oven runs", "1", "IF({again}+{activated}>0,{agent}/{lots}/{ovenkg},0)"},
	{"inbill", "The bill has what is done with it", "1", "(({runs}>0)*1={billed})*({flushed}={flushbilled})"},
}

var sieveUses = map[string]string{"used": "{agent}/{uses}/{lots}", "waste1": "({agent}/{lots}+{held})/{uses}", "ovenkwh": "{runs}*{runkwh}", "besides": "{runs}*{runh}*(1+{again}*{flushwork})", "gas": "{flushed}*{gaskg}*{held}", "waste2": "{flushed}*{condensed}*{held}", "loss1": "{held}" + toLitres}

func with(a, b map[string]string) map[string]string {
	for k, v := range b {
		a[k] = v
	}
	return a
}

func soakBlock() *liveBlock {
	own := columnsOf(chain, sieveColumns, []liveColumn{
		constant("beads0", "Beads, still", "m3/(kg s)"), constant("beads1", "Beads, stirred", "m3/(kg s)"), constant("mix", "Mixing", "1/s"), constant("mixdepth", "Mixing at a height of", "m"),
		constant("att", "Attended", "s"), constant("stirw", "Stirrer", "W"), constant("most", "Largest dose", "kg/m3"), constant("hoursrow", "Row of its hours", "1"), constant("stirrow", "Row of its stirring", "1"),
		{"h", "Stands", "h", "INDEX(input_values,{hoursrow})"}, {"stir", "Stirred", "1", `(INDEX(input_values,{stirrow})="yes")*1`}, {"t", "Stands", "s", "{h}*60*60"},
		{"vol", "Volume", "m3", "{S}/{lot.ds}+{W}/{lot.dw}"}, {"r0", "Water of the lots over a charge", "kg/kg", "{lots}*{W}/{S}"},
		{"kb", "Beads", "m3/(kg s)", "IF({stir}=1,{beads1},{beads0})"}, {"rm", "Mixing resists", "s", "IF({stir}=1,0,{lot.depth}/{mix}/{mixdepth})"},
		{"nought", "Before the curve", "1", "{from}-1"}, {"vk", "Volume over solvent and beads", "s", "{vol}/{S}/{kb}"}, {"ktmost", "K t of any dose, at most", "1", "IFERROR(MIN(1000,{t}/{rm}),1000)"},
	})
	own = append(own, halvingForDose()...)
	own = append(own, []liveColumn{
		{"ka", "Node below", "1", "MAX({from},{dg})"}, {"wa", "Node below", "kg/kg", "INDEX(load_water,{ka})"}, {"wb", "Node above", "kg/kg", "INDEX(load_water,MIN({ka}+1,{to}))"},
		{"qa", "Held at the node", "kg/kg", "{cs}*INDEX(load_held,{ka})"},
		{"slope", "Slope of the loading", "1", "({cs}*INDEX(load_held,MIN({ka}+1,{to}))-{qa})/({wb}-{wa})"},
		{"ktlow", "K t at the node below", "1", "IFERROR(LN(({w}-{wa})/({goal}-{wa})),0)"}, {"kthigh", "K t at the node above, or at most", "1", "IFERROR(MIN({ktmost},LN(({w}-{wb})/({goal}-{wb}))),{ktmost})"},
	}...)
	own = append(own, rateForDose()...)
	own = append(own, []liveColumn{
		{"feasible", "A dose reaches it", "1", "({dg}>={from})*({h2}>0)*({kthigh}>{ktlow})"},
		{"exact", "Dose that reaches it", "kg/m3", "IFERROR({S}*({r0}-{x6}/(1-{x6}))/{h6}/{vol},{most})"},
		{"dose", "Dose", "kg/m3", "IF({feasible}=1,MIN({most},MAX(site_least_dose,{exact})),{most})"},
		{"solved", "Solved, or far under the least dose", "1", "MAX(1-{feasible},(ABS({h6}-{h5})<={h6}*job_tie*1000*1000)*1,({exact}+{exact}<site_least_dose)*1)"},
		{"meets", "Dosed to reach it", "1", "{feasible}*({exact}>=site_least_dose)*({exact}<={most})"},
		{"m", "Sieve", "kg", "{dose}*{vol}"}, {"all", "Water to share", "kg", "{S}*{r0}+{m}*{q0}"},
	}...)
	own = append(own, halvingForWater()...)
	own = append(own, []liveColumn{
		{"ea", "Node below", "1", "MAX({from},MIN({hg},{to}-1))"}, {"ua", "Node below", "kg/kg", "INDEX(load_water,{ea})"}, {"ub", "Node above", "kg/kg", "INDEX(load_water,{ea}+1)"},
		{"fa", "Water at the node below", "kg", "{S}*{ua}/(1-{ua})+{m}*{cs}*INDEX(load_held,{ea})"}, {"fb", "Water at the node above", "kg", "{S}*{ub}/(1-{ub})+{m}*{cs}*INDEX(load_held,{ea}+1)"},
		{"eq", "Equilibrium", "kg/kg", "{ua}+({ub}-{ua})*({all}-{fa})/({fb}-{fa})"}, {"oncurve", "On the curve", "1", "({fa}<={all}*(1+job_tie))*({all}<={fb}*(1+job_tie))*({t}>0)"}, {"k", "Rate", "1/s", "1/({rm}+1/({kb}*{dose}))"},
		{"out", "Water out", "kg/kg", "IF({meets}=1,{goal},{eq}+({w}-{eq})*EXP(-{k}*{t}))"}, {"held", "Held by the beads", "kg", "MIN({m}*{hold}*{lot.ds},{S})/{lots}"},
	}...)
	return newLiveBlock("soak", "Soaks", common(with(map[string]string{
		"Sout": "{S}-{held}", "Wout": "{Sout}*{out}/(1-{out})", "hours": "{h}+{attended}", "attended": "{lot.vessels}*{att}" + toHours,
		"energy": "{stir}*{lot.vessels}*{stirw}*{h}/1000", "agent": "{m}", "pieces": "{lot.vessels}",
		"follows": "{first}*{dry}*{inbill}*{lot.vesselok}*{oncurve}*{solved}",
	}, sieveUses)), own)
}

// rateForDose finds K t of the dose that reaches the goal in time. The equilibrium
// that K t asks for is
//
//	x = (goal - w exp(-K t)) / (1 - exp(-K t))
//
// A dose in equilibrium with x holds m (q(x) - q0) = S (r0 - x/(1-x)), and with that
// dose the time is K t (rm + vol/(kb m)). Between two nodes it is nearly a straight
// line over K t, whether x comes near the goal or is far below it; it is brought to
// the time there is by secants from both ends.
func rateForDose() (out []liveColumn) {
	const secant = "IFERROR(MAX({ktlow},MIN({kthigh},{kt#}-({time#}-{t})*({kt#}-{kt@})/({time#}-{time@}))),{kt#})"
	for i := 1; i <= 6; i++ {
		next := strings.NewReplacer("#}", fmt.Sprintf("%d}", i-1), "@}", fmt.Sprintf("%d}", i-2)).Replace(secant)
		if i <= 2 {
			next = []string{"{ktlow}", "{kthigh}"}[i-1]
		}
		point := []liveColumn{
			{"kt#", "K t, try #", "1", next},
			{"x#", "Equilibrium, try #", "kg/kg", "({goal}-{w}*EXP(-{kt#}))/(1-EXP(-{kt#}))"},
			{"h#", "Held more, try #", "kg/kg", "{qa}+{slope}*({x#}-{wa})-{q0}"},
			{"time#", "Time it takes, try #", "s", "{kt#}*({rm}+{vk}*{h#}/({r0}-{x#}/(1-{x#})))"},
		}
		if i == 6 {
			point = point[:3]
		}
		for _, c := range point {
			at := strings.NewReplacer("#", strconv.Itoa(i))
			out = append(out, liveColumn{at.Replace(c.key), at.Replace(c.name), c.unit, at.Replace(c.formula)})
		}
	}
	return out
}

// halves of the nodes of a curve, of their half and so on, down to one node: what the
// last finds, {dg} and {hg}, is the node.
var halves = []string{"a", "b", "c", "d", "e", "f", "g"}

// halvingForDose finds the last node of the loading curve at which the dose that
// holds the water is too large for the time: K t times 1/K is less than there is.
func halvingForDose() (out []liveColumn) {
	before := "{nought}"
	for _, s := range halves {
		node := fmt.Sprintf("%s+half_%s", before, s)
		found := "%s*({kt%s}*({rm}+{vk}*({cs}*INDEX(load_held,%s)-{q0})/({r0}-{try%s}/(1-{try%s})))<{t})"
		out = append(out,
			liveColumn{"try" + s, "Node tried", "kg/kg", fmt.Sprintf("INDEX(load_water,%s)", node)},
			liveColumn{"kt" + s, "K t at it", "1", fmt.Sprintf("IFERROR(LN(({w}-{try%[1]s})/({goal}-{try%[1]s})),1000*1000)", s)},
			liveColumn{"d" + s, "Node found", "1", fmt.Sprintf(found, node, s, node, s, s)})
		before = "{d" + s + "}"
	}
	return out
}

// halvingForWater finds the last node at which the sorbent and the solvent hold no
// more than there is.
func halvingForWater() (out []liveColumn) {
	before := "{from}-1"
	for _, s := range halves {
		w := "share" + s
		out = append(out,
			liveColumn{w, "Node tried", "kg/kg", fmt.Sprintf("INDEX(load_water,%s+half_%s)", before, s)},
			liveColumn{"h" + s, "Node found", "1", fmt.Sprintf("%[1]s+half_%[2]s*({S}*{%[3]s}/(1-{%[3]s})+{m}*{cs}*INDEX(load_held,%[1]s+half_%[2]s)<={all}*(1+job_tie))", before, s, w)})
		before = "{h" + s + "}"
	}
	return out
}

func columnBlock() *liveBlock {
	own := columnsOf(chain, sieveColumns, []liveColumn{
		constant("recycle", "First runnings", "1"), constant("pumpw", "Pump", "W"), constant("setup", "Set-up", "s"), constant("share", "Attended share", "1"), constant("hasnarrow", "There is a narrower one", "1"), constant("haswide", "There is a wider one", "1"),
		{"vol", "Volume", "m3", "{S}/{lot.ds}+{W}/{lot.dw}"},
		{"bare", "Held at the floor", "kg/kg", "{q0}/{cs}"}, {"i", "Place of the floor", "1", placeIn("load_held", "bare")},
		{"floor", "Floor", "kg/kg", "INDEX(load_water,{i})+{fi}*{gap}"}, {"fi", "Share of the floor", "1", "({bare}-INDEX(load_held,{i}))/(INDEX(load_held,{i}+1)-INDEX(load_held,{i}))"}, {"gap", "To the next node", "kg/kg", "INDEX(load_water,{i}+1)-INDEX(load_water,{i})"},
		{"j", "Place of the feed", "1", placeIn("load_water", "w")},
		{"fj", "Share of the feed", "1", "({w}-INDEX(load_water,{j}))/(INDEX(load_water,{j}+1)-INDEX(load_water,{j}))"},
		{"heldin", "Held at the feed", "kg/kg", "{cs}*(" + lookup("load_held", "j", "fj") + ")"}, {"removed", "To be taken", "kg", "{S}*({W}/{S}-{floor}/(1-{floor}))"},
	}, bedColumns(""), bedColumns("n"), []liveColumn{
		{"agentkg", "Bed", "kg", "{len}*{area}*{rho}"}, {"held", "Held by the bed", "kg", "MIN({agent}*{hold}*{lot.ds},{S})"}, {"pumps", "Pumped", "s", "{pumped}/{flow}"},
	})
	return newLiveBlock("column", "Columns", common(with(map[string]string{
		"Sout": "{S}-{held}", "Wout": "{Sout}*{out}/(1-{out})", "hours": "({setup}+{pumps})" + toHours, "attended": "({setup}+{share}*{pumps})" + toHours,
		"energy": "{pumpw}*{pumps}" + toKWh, "agent": "{agentkg}", "pieces": "1",
		"follows": "{first}*{dry}*{inbill}*({floor}<{w})*({heldin}>{q0})*({hasnarrow}*{meetsn}=0)*({haswide}*(1-{meets})=0)",
	}, sieveUses)), own)
}

// bedColumns are those of the column that is taken and of the next narrower one,
// which would be taken if it sufficed.
func bedColumns(n string) []liveColumn {
	list := []liveColumn{
		constant("area", "Area", "m2"), constant("rho", "Bed", "kg/m3"), constant("htu", "Transfer unit", "m"), constant("long", "Longest bed", "m"), constant("flow", "Flow", "m3/s"),
		{"front", "Front", "m/m3", "{removed}/{vol}/({area#}*{rho#}*({heldin}-{q0}))"},
		{"unused", "Unused bed", "m", "IFERROR(MAX(0,{htu#}*LN(({w}-{floor})/({goal}-{floor}))),{long#}*1000)"}, {"grow", "Growth", "1", "1-{front#}*{recycle}*{area#}"},
		{"twice", "Bed for the lot twice", "m", "({front#}+{front#})*{vol}+{unused#}"},
		{"need", "Bed needed", "m", "IF({grow#}>0,MIN(({front#}*{vol}+{unused#})/{grow#},{twice#}),{twice#})"}, {"len", "Bed", "m", "MIN({need#},{long#})"},
		{"back", "Returned", "m3", "MIN({vol},{recycle}*{len#}*{area#})"}, {"pumped", "Pumped", "m3", "{vol}+{back#}"},
		{"full", "Front at the end after", "m3", "MIN(MAX({len#}/{front#},{back#}),{pumped#})"},
		{"ahead", "Ahead at the start", "1", "EXP(-MAX(0,{len#}-{front#}*{back#})/{htu#})"}, {"behind", "Ahead at the end", "1", "EXP(-MAX(0,{len#}-{front#}*{full#})/{htu#})"},
		{"mean", "Mean excess", "1", "({htu#}/{front#}*({behind#}-{ahead#})+{pumped#}-{full#})/({pumped#}-{back#})"}, {"out", "Water out", "kg/kg", "{floor}+({w}-{floor})*{mean#}"},
		{"end", "Water as the lot ends", "kg/kg", "{floor}+({w}-{floor})*EXP(-MAX(0,{len#}-{front#}*{pumped#})/{htu#})"},
		{"meets", "Reaches it", "1", "(MIN({end#},{out#})<={goal}*(1+job_tie))*1"},
	}
	for i := range list {
		list[i].key += n
		list[i].formula = strings.ReplaceAll(list[i].formula, "#}", n+"}")
		if n != "" {
			list[i].name += ", narrower"
		}
	}
	return list
}

func reactiveBlock() *liveBlock {
	return newLiveBlock("reactive", "Reactive agents", common(map[string]string{
		"Sout": "{S}-{bound}-{heel}-{vap}", "Wout": "{Sout}*{out}/(1-{out})", "hours": "({hot}+{lot.charges}*{setup})" + toHours + "+{spent}",
		"attended": "({hot}*{share}+{lot.charges}*{setup})" + toHours, "energy": "{lot.heater}*{hot}" + toKWh, "cooling": "{flow}*({reflux}*{lot.charges}+{dist})",
		"agent": "{charged}", "used": "{charged}", "loss1": "{heel}" + toLitres, "loss2": "{vap}" + toLitres, "loss3": "{bound}" + toLitres,
		"waste1": "{heel}+{bound}+{charged}+{W}-{Wout}", "besides": "{spent}", "follows": "{lot.stillok}*({w}<={handles}*(1+job_tie))*({bound}<={S}-{bound})*({out}<={w}*(1-{takes})*(1+job_tie))",
	}), columnsOf(chain, stillColumns, []liveColumn{
		constant("need", "Agent needed", "kg/kg"), constant("surplus", "Surplus", "1"), constant("least", "Charged at least", "kg/m3"), constant("binds", "Surplus binds", "kg/kg"), constant("res", "Leaves", "kg/kg"),
		constant("handles", "Feed at most", "kg/kg"), constant("takes", "Takes at least", "1"), constant("heels", "Heel", "1"), constant("reflux", "Reflux", "s"), constant("setup", "Set-up", "s"), constant("spent", "Spent agent", "h"),
		constant("ww", "To warm water", "J/mol"), constant("ws", "To warm solvent", "J/mol"), constant("latent", "Latent heat", "J/mol"),
		{"vol", "Volume", "m3", "{S}/{lot.ds}+{W}/{lot.dw}"}, {"charged", "Agent charged", "kg", "MAX({surplus}*{W}*{need},{least}*{vol})"}, {"bound", "Solvent bound", "kg", "({charged}-{W}*{need})*{binds}"},
		{"heel", "Heel", "kg", "{heels}*({S}-{bound})"}, {"dist", "Distilling, all charges", "s", "({S}-{bound}-{heel})/{lot.ms}*{latent}/{lot.net}"},
		{"warm", "Heat-up, all charges", "s", "({S}/{lot.ms}*{ws}+{W}/{lot.mw}*{ww})/{lot.net}"}, {"hot", "Hot, all charges", "s", "{warm}+{reflux}*{lot.charges}+{dist}"},
		{"vap", "Vapour lost", "kg", "MIN({S}*{vl}*({reflux}*{lot.charges}+{dist})/{lot.charges},{S}-{bound}-{heel})"}, {"out", "Water out", "kg/kg", "MIN({res},{w})"},
	}))
}

func buyBlock() *liveBlock {
	return newLiveBlock("buy", "Dry grade bought", map[string]string{
		"win": "{W}/({S}+{W})*1000*1000", "goal": "{lot.goal}", "wout": "{Wout}/({Sout}+{Wout})*1000*1000", "Sout": "{mass}*(1-{grade})", "Wout": "{mass}*{grade}", "hours": "{att}" + toHours, "attended": "{att}" + toHours,
		"bought": "{lot.batch}*1000", "waste1": "{givenup}*({S}+{W})", "follows": "1",
	}, columnsOf(chain, []liveColumn{
		constant("grade", "Sold with", "kg/kg"), constant("att", "Attended", "s"), constant("givenup", "The lot is given up", "1"),
		{"mass", "Bought", "kg", "{lot.batch}/({grade}/{lot.dw}+(1-{grade})/{lot.ds})"},
	}))
}

// valuesBlock holds the results of steps that only the program can follow.
func valuesBlock() *liveBlock {
	b := newLiveBlock("values", "Steps that only the program can follow", map[string]string{}, nil)
	for i := range b.columns {
		b.columns[i].formula = ""
	}
	return b
}

// liveKind makes the block of one kind of step.
type liveKind struct {
	kind steps.Kind
	make func() *liveBlock
}

// liveBlocks are the kinds that the sheet follows, in the order in which a route
// takes them.
var liveBlocks = []liveKind{
	{steps.Settle, settleBlock}, {steps.Salt, saltBlock}, {steps.Trap, trapBlock}, {steps.Forerun, forerunBlock},
	{steps.Soak, soakBlock}, {steps.Column, columnBlock}, {steps.Reactive, reactiveBlock}, {steps.Buy, buyBlock},
}
