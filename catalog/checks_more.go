package catalog

import "io/fs"

func (c *Checks) readDryings(fsys fs.FS, cat *Catalog) error {
	t := readTable(fsys, "dryings.csv", "id", "solvent", "agent", "from_mg_per_kg", "dose_g_per_l", "hours", "how", "form", "left_mg_per_kg", "kind", "confidence", "source")
	for _, r := range t.rows {
		d := Drying{
			ID: r.text("id"), Solvent: keyIn(r, "solvent", cat.Solvents), Agent: keyIn(r, "agent", cat.Agents),
			How: r.text("how"), Form: r.text("form"), Left: 1e-6 * r.number("left_mg_per_kg", 0, 1e6),
			Kind:       CheckKind(r.oneOf("kind", string(Independent), string(FitTarget), string(Recalled))),
			Confidence: Confidence(r.oneOf("confidence", grades...)), Source: r.text("source"),
		}
		if x, ok := r.maybe("from_mg_per_kg", 0, 1e6); ok {
			d.From = 1e-6 * x
		}
		d.DoseKgPerM3, _ = r.maybe("dose_g_per_l", 0, 1000)
		if h, ok := r.maybe("hours", 0, 1e4); ok {
			d.TimeS = 3600 * h
		}
		c.Dryings = append(c.Dryings, d)
	}
	return t.err()
}

func (c *Checks) readTieLines(fsys fs.FS, cat *Catalog) error {
	t := readTable(fsys, "tie-lines.csv", "alcohol", "carrier", "t_c", "org_water", "org_alcohol", "org_carrier", "aq_water", "aq_alcohol", "aq_carrier", "kind", "source")
	for _, r := range t.rows {
		l := TieLine{
			Alcohol: keyIn(r, "alcohol", cat.Solvents), Carrier: keyIn(r, "carrier", cat.Solvents), TempK: r.number("t_c", -20, 120) + zeroCelsiusK,
			Kind: CheckKind(r.oneOf("kind", string(Independent), string(FitTarget))), Source: r.text("source"),
		}
		for i, part := range []string{"water", "alcohol", "carrier"} {
			l.Organic[i], l.Aqueous[i] = r.number("org_"+part, 0, 1), r.number("aq_"+part, 0, 1)
		}
		for _, layer := range [][3]float64{l.Organic, l.Aqueous} {
			if sum := layer[0] + layer[1] + layer[2]; sum < 0.995 || sum > 1.005 {
				r.fail("org_water", "the mass fractions of a layer add up to %.4f", sum)
			}
		}
		c.TieLines = append(c.TieLines, l)
	}
	return t.err()
}
