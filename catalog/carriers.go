package catalog

import (
	"io/fs"
	"math"

	"parch/internal/document"
	"parch/internal/quantity"
	"parch/internal/thermo"
)

// readCarriers reads which solvents may carry water out of another.
func (s *shelf) readCarriers() {
	s.cat.Carriers = map[string]*Carrier{}
	s.each(carriersFile, func(n *document.Node) {
		for _, e := range n.Entries() {
			if s.cat.Solvents[e.Key] == nil {
				e.Node.Fail("%q is not a solvent known here%s", e.Key, e.Node.Offer(e.Key, keysOf(s.cat.Solvents)))
			}
			f := e.Node.Map(with("accept", "reason", "not with")...)
			c := &Carrier{Key: e.Key, Reason: f.Need("reason").Text(), Origin: s.origin(f)}
			c.ByName = f.Need("accept").OneOf("always", "by name") == "by name"
			if n := f.Get("not with"); n != nil {
				g := n.Map(with("classes", "reason")...)
				for _, class := range g.Need("classes").Items() {
					c.NotWith = append(c.NotWith, class.Text())
				}
				c.NotWithReason = g.Need("reason").Text()
				c.NotWithOrigin = s.originOr(g, &c.Origin)
			}
			s.cat.Carriers[e.Key] = c
		}
	})
}

// readDiameters reads the sizes of molecules, by solvent.
func (s *shelf) readDiameters() {
	s.each(diameterFile, func(n *document.Node) {
		f := n.Map("common", "molecules")
		common := s.common(f.Need("common"))
		s.cat.Diameters = map[string]Value{}
		for _, e := range f.Need("molecules").Entries() {
			if s.cat.Solvents[e.Key] == nil {
				e.Node.Fail("%q is not a solvent known here%s", e.Key, e.Node.Offer(e.Key, keysOf(s.cat.Solvents)))
			}
			v := s.valueOr(e.Node, quantity.Length, common)
			const least, most = 0.2e-9, 1.2e-9
			if v.SI < least || v.SI > most {
				e.Node.Fail("%q is outside 0.2 to 1.2 nm", v.Text)
			}
			s.cat.Diameters[e.Key] = v
			if solvent := s.cat.Solvents[e.Key]; solvent != nil {
				checkDiameter(e.Node, v, solvent)
			}
		}
	})
}

// checkDiameter compares a kinetic diameter with the cube root of the volume of a
// molecule in its liquid. Long molecules pass narrow windows, so it may be smaller.
func checkDiameter(n *document.Node, v Value, solvent *Solvent) {
	const avogadro, least, most, ambientK = 6.02214076e23, 0.65, 1.4, 298.15
	if solvent.Density.Check() != nil {
		return
	}
	side := math.Cbrt(solvent.MolarMass.SI / solvent.Density.At(ambientK) / avogadro)
	if ratio := v.SI / side; !(ratio >= least && ratio <= most) {
		n.Fail("%q is %.2f times the cube root of the volume of a molecule, %.3g nm; %g to %g is expected", v.Text, ratio, side*1e9, least, most)
	}
}

// readTables reads the long tables of phase equilibrium.
func (s *shelf) readTables(fsys fs.FS) {
	s.readCarrierPairs(fsys)
	s.readTernaries(fsys)
	s.readLayers(fsys)
}

const (
	mostTau    = 15.0 // of a, either way
	mostTauK   = 1e4  // of b
	leastAlpha = 0.05
	mostAlpha  = 0.61
)

var pairHeadings = []string{"a12", "b12_k", "a21", "b21_k", "alpha"}

// nrtlPair reads the five numbers of a pair; prefix tells several pairs apart.
func nrtlPair(r row, prefix string) (a12, b12, a21, b21, alpha float64) {
	return r.number(prefix+"a12", -mostTau, mostTau), r.number(prefix+"b12_k", -mostTauK, mostTauK),
		r.number(prefix+"a21", -mostTau, mostTau), r.number(prefix+"b21_k", -mostTauK, mostTauK),
		r.number(prefix+"alpha", leastAlpha, mostAlpha)
}

func (r row) kelvins(low, high string) (tMinK, tMaxK float64) {
	tMinK, tMaxK = r.number(low, -50, 200)+zeroCelsiusK, r.number(high, -50, 200)+zeroCelsiusK
	if tMinK > tMaxK {
		r.fail(high, "%q is below %s, %q", r.text(high), low, r.text(low))
	}
	return tMinK, tMaxK
}

const zeroCelsiusK = 273.15

func (s *shelf) tableOrigin(r row) Origin {
	id := keyIn(r, "source", s.cat.Sources)
	s.cited[id] = true
	return Origin{Source: id, Confidence: Fitted, Note: r.text("note")}
}

func (s *shelf) readCarrierPairs(fsys fs.FS) {
	s.cat.Pairs = map[[2]string]*CarrierPair{}
	t := readTable(fsys, pairsFile, append(append([]string{"solvent", "carrier"}, pairHeadings...), "t_min_c", "t_max_c", "spurious_gap_below_c", "source", "note")...)
	s.tables = append(s.tables, t)
	for _, r := range t.rows {
		p := &CarrierPair{Solvent: keyIn(r, "solvent", s.cat.Solvents), Carrier: keyIn(r, "carrier", s.cat.Carriers), Origin: s.tableOrigin(r)}
		p.NRTL = thermo.BinaryNRTL(nrtlPair(r, ""))
		p.TMinK, p.TMaxK = r.kelvins("t_min_c", "t_max_c")
		if c, ok := r.maybe("spurious_gap_below_c", -50, 60); ok {
			p.SpuriousGapBelowK = c + zeroCelsiusK
		}
		key := [2]string{p.Solvent, p.Carrier}
		if s.cat.Pairs[key] != nil {
			r.fail("carrier", "the pair %s + %s stands twice", p.Solvent, p.Carrier)
		}
		s.cat.Pairs[key] = p
	}
}

func (s *shelf) readTernaries(fsys fs.FS) {
	s.cat.Ternaries = map[[2]string]*TernarySet{}
	headings := []string{"alcohol", "carrier"}
	for _, pair := range []string{"wa_", "ac_", "wc_"} {
		for _, h := range pairHeadings {
			headings = append(headings, pair+h)
		}
	}
	headings = append(headings, "l0", "l1", "l2", "l3", "quality", "t_min_c", "t_max_c", "band", "miss_water", "miss_alcohol", "source", "note")
	t := readTable(fsys, ternaryFile, headings...)
	s.tables = append(s.tables, t)
	for _, r := range t.rows {
		n := &TernarySet{
			Alcohol: keyIn(r, "alcohol", s.cat.Solvents), Carrier: keyIn(r, "carrier", s.cat.Carriers),
			Quality: r.oneOf("quality", "A", "B"), Band: r.number("band", 1, 10), Origin: s.tableOrigin(r),
		}
		n.NRTL = thermo.JoinPairs(thermo.BinaryNRTL(nrtlPair(r, "wa_")), thermo.BinaryNRTL(nrtlPair(r, "wc_")), thermo.BinaryNRTL(nrtlPair(r, "ac_")))
		const most = 50
		n.Extra = thermo.TernaryTerm{
			L0: r.number("l0", -most, most), L1: r.number("l1", -most, most), L2: r.number("l2", -most, most), L3: r.number("l3", -most, most),
		}
		n.TMinK, n.TMaxK = r.kelvins("t_min_c", "t_max_c")
		n.MissWater, n.MissAlcohol = r.number("miss_water", 0, 1), r.number("miss_alcohol", 0, 1)
		s.checkTernary(r, n)
		s.cat.Ternaries[[2]string{n.Alcohol, n.Carrier}] = n
	}
}

// checkTernary compares the pairs of a ternary set with the water pairs of the two
// solvents, by the activity coefficients at infinite dilution: that of the alcohol
// is the same, that of the carrier was fitted again and may differ a little in the
// water of the carrier.
func (s *shelf) checkTernary(r row, n *TernarySet) {
	const same, near, coldK, warmK = 0.01, 0.13, 298.15, 343.15
	alcohol, carrier := s.cat.Solvents[n.Alcohol], s.cat.Solvents[n.Carrier]
	if alcohol == nil || carrier == nil || alcohol.Water == nil || carrier.Water == nil {
		return // said already
	}
	wa, wc := pairOf(&n.NRTL, thermo.InWater, thermo.InSolvent), pairOf(&n.NRTL, thermo.InWater, thermo.InCarrier)
	for _, tK := range []float64{coldK, warmK} {
		for _, x := range []float64{0, 1} {
			w, a := wa.Pair(x, tK)
			w2, a2 := alcohol.Water.NRTL.Pair(x, tK)
			if !(math.Abs(w-w2) < same && math.Abs(a-a2) < same) {
				s.failPair(r, "wa_a12", alcohol, "the pair of water and %s is not that of the catalog at %.0f °C", n.Alcohol, tK-zeroCelsiusK)
				return
			}
		}
		w, _ := wc.Pair(0, tK)
		w2, _ := carrier.Water.NRTL.Pair(0, tK)
		if !(math.Abs(w-w2) < near+n.MissWater) {
			s.failPair(r, "wc_a12", carrier, "ln gamma of a little water in %s is %.2f at %.0f °C, %.2f in the catalog's pair", n.Carrier, w, tK-zeroCelsiusK, w2)
			return
		}
	}
}

// failPair reports a water pair that a ternary set was not fitted with: where the
// pair is the user's own, at its entry, since the set stands in the catalog.
func (s *shelf) failPair(r row, heading string, v *Solvent, format string, args ...any) {
	if top := s.tops[v.Key]; v.Own && top != nil {
		top.Fail("its water pair is not the one that the set of three of %s:%d was fitted with; keep that pair, or give the solvent a key of its own", r.table.name, r.line)
		return
	}
	r.fail(heading, format, args...)
}

// pairOf takes a pair out of a set of three.
func pairOf(m *thermo.NRTL, i, j int) thermo.NRTL {
	return thermo.BinaryNRTL(m.A[i][j], m.B[i][j], m.A[j][i], m.B[j][i], m.Alpha[i][j])
}

func (s *shelf) readLayers(fsys fs.FS) {
	s.cat.Layers = map[[2]string]*OrganicLayer{}
	t := readTable(fsys, layersFile, "alcohol", "carrier", "w0", "p0", "p1", "p2", "r_min", "r_max", "band",
		"q0", "q1", "q2", "s_min", "s_max", "distribution_band", "source", "note")
	s.tables = append(s.tables, t)
	for _, r := range t.rows {
		l := &OrganicLayer{
			Alcohol: keyIn(r, "alcohol", s.cat.Solvents), Carrier: keyIn(r, "carrier", s.cat.Solvents), Origin: s.tableOrigin(r)}
		l.OrganicLayer = thermo.OrganicLayer{
			W0: r.number("w0", 0, 0.1), RMin: r.number("r_min", 0, 1), RMax: r.number("r_max", 0, 1), Factor: r.number("band", 1, 10),
			P0: r.number("p0", -20, 20), P1: r.number("p1", -20, 20), P2: r.number("p2", -20, 20),
		}
		if l.RMin >= l.RMax {
			r.fail("r_max", "%q is not above r_min, %q", r.text("r_max"), r.text("r_min"))
		}
		s.readDistribution(r, l)
		checkLayer(r, l)
		s.cat.Layers[[2]string{l.Alcohol, l.Carrier}] = l
	}
}

// readDistribution reads the distribution where tie-lines held back bear it out;
// elsewhere the table leaves it empty.
func (s *shelf) readDistribution(r row, l *OrganicLayer) {
	const most = 1.3
	if l.DistributionFactor, l.Distribution = r.maybe("distribution_band", 1, most); !l.Distribution {
		return
	}
	for i, h := range []string{"q0", "q1", "q2"} {
		l.Q[i] = r.number(h, -200, 200)
	}
	l.SMin, l.SMax = r.number("s_min", 0, 1), r.number("s_max", 0, 1)
	if l.SMin >= l.SMax {
		r.fail("s_max", "%q is not above s_min, %q", r.text("s_max"), r.text("s_min"))
	}
}

// checkLayer asks that more alcohol brings more water into the organic layer and,
// where the distribution is known, more alcohol in one layer more in the other.
func checkLayer(r row, l *OrganicLayer) {
	const steps = 8
	last, lastShare := l.W0, 0.0
	for i := range steps + 1 {
		w, _ := l.Water(l.RMin+(l.RMax-l.RMin)*float64(i)/steps, zeroCelsiusK+25)
		if !(w >= last && w < 1) {
			r.fail("p0", "the water of the organic layer does not rise from w0 to less than all of it over r_min to r_max")
			return
		}
		last = w
		if !l.Distribution {
			continue
		}
		share := l.Share(l.SMin + (l.SMax-l.SMin)*float64(i)/steps)
		if !(share >= lastShare && share < 1) {
			r.fail("q0", "the alcohol of the organic layer does not rise over s_min to s_max")
			return
		}
		lastShare = share
	}
}
