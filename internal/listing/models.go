package listing

import (
	"fmt"

	"parch/catalog"
	"parch/internal/thermo"
)

func carrierPair(key string, p *catalog.CarrierPair) Entry {
	one := fact("NRTL, 1 is the solvent", nrtl(&p.NRTL, 0, 1), "", p.Origin)
	one.Range = span(p.TMinK, p.TMaxK)
	f := facts{one}
	if p.SpuriousGapBelowK > 0 {
		f.say("splits liquids that mix below", fmt.Sprintf("%s °C", plain(p.SpuriousGapBelowK-zeroCelsiusK)), p.Origin)
	}
	return Entry{Key: key, Title: span(p.TMinK, p.TMaxK), Facts: f}
}

func nrtl(n *thermo.NRTL, i, j int) string {
	return fmt.Sprintf("a12 %s, b12 %s K, a21 %s, b21 %s K, alpha %s", plain(n.A[i][j]), plain(n.B[i][j]), plain(n.A[j][i]), plain(n.B[j][i]), plain(n.Alpha[i][j]))
}

func ternary(key string, t *catalog.TernarySet) Entry {
	f := facts{
		fact("NRTL of water and alcohol", nrtl(&t.NRTL, thermo.InWater, thermo.InSolvent), "", t.Origin),
		fact("NRTL of alcohol and carrier", nrtl(&t.NRTL, thermo.InSolvent, thermo.InCarrier), "", t.Origin),
		fact("NRTL of water and carrier", nrtl(&t.NRTL, thermo.InWater, thermo.InCarrier), "", t.Origin),
		fact("term of the three", fmt.Sprintf("L0 %s, L1 %s, L2 %s, L3 %s", plain(t.Extra.L0), plain(t.Extra.L1), plain(t.Extra.L2), plain(t.Extra.L3)), "", t.Origin),
	}
	for i := range f {
		f[i].Range = span(t.TMinK, t.TMaxK)
	}
	f.say("quality", t.Quality, t.Origin)
	f.say("band on the water of the organic layer, factor", plain(t.Band), t.Origin)
	return Entry{Key: key, Title: fmt.Sprintf("quality %s, %s", t.Quality, span(t.TMinK, t.TMaxK)), Facts: f}
}

func layer(key string, l *catalog.OrganicLayer) Entry {
	one := fact("water = w0 + exp(p0 + p1 ln r + p2 ln2 r)", fmt.Sprintf("w0 %s, p0 %s, p1 %s, p2 %s", plain(l.W0), plain(l.P0), plain(l.P1), plain(l.P2)), "kg/kg", l.Origin)
	one.Range = fmt.Sprintf("r %s to %s, %s", plain(l.RMin), plain(l.RMax), span(thermo.OrganicLayerLowestK, thermo.OrganicLayerHighestK))
	f := facts{one}
	f.say("band, factor", plain(l.Factor), l.Origin)
	if l.Distribution {
		two := fact("ln r = q0 + q1 ln s + q2 ln2 s", fmt.Sprintf("q0 %s, q1 %s, q2 %s", plain(l.Q[0]), plain(l.Q[1]), plain(l.Q[2])), "", l.Origin)
		two.Range = fmt.Sprintf("s %s to %s", plain(l.SMin), plain(l.SMax))
		f = append(f, two)
	}
	return Entry{Key: key, Title: "factor " + plain(l.Factor), Facts: f}
}
