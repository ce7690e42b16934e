package steps

// withCarrier runs a step that does not tell solvent from what is left of a
// carrier in it: the two go through as one liquid with the solvent's properties,
// and what is kept and lost is shared between them as they were fed.
func withCarrier(feed Lot, run func(Lot) (Outcome, error)) (Outcome, error) {
	if feed.CarrierKg == 0 {
		return run(feed)
	}
	whole := feed
	whole.SolventKg, whole.CarrierKg = feed.SolventKg+feed.CarrierKg, 0
	o, err := run(whole)
	if err != nil {
		return o, err
	}
	solvent := feed.SolventKg / whole.SolventKg
	b := &o.Balance
	kept := o.Out.SolventKg - b.SolventAddedKg
	o.In = feed
	o.Out.SolventKg, o.Out.CarrierKg = b.SolventAddedKg+solvent*kept, (1-solvent)*kept
	for i := range o.Losses {
		o.Losses[i].SolventKg *= solvent
	}
	o.SolventLostL *= solvent
	o.CarrierLostKg = (1 - solvent) * b.SolventRemovedKg
	b.SolventInKg, b.SolventOutKg = feed.SolventKg, o.Out.SolventKg
	b.SolventRemovedKg *= solvent
	b.CarrierOutKg, b.CarrierRemovedKg = o.Out.CarrierKg, o.CarrierLostKg
	return o, nil
}
