package study

import (
	"context"
	"fmt"
	"maps"
	"slices"
	"strings"

	"parch/catalog"
	"parch/internal/costs"
)

// mostRounds bounds the rounds in which packs and routes settle.
const mostRounds = 4

// compareLots compares all lots, and again with the prices of the packs that their
// needs justify, until these stay the same. Packs of an earlier run's settings
// stay as they are.
func (r *Report) compareLots(ctx context.Context, c *catalog.Catalog, o Options) error {
	pinned := r.pin(o)
	free := func(need map[string]float64) map[string]float64 {
		maps.DeleteFunc(need, func(item string, _ float64) bool { return pinned[item] != "" })
		return need
	}
	book, _, err := r.Book.Justified(free(costs.LikelyNeed(c, r.Job)))
	if err != nil {
		return err
	}
	r.Book = book
	all := make([]*work, len(r.Job.Lots))
	for round := 1; ; round++ {
		err := r.compareOnce(ctx, c, o, all)
		if err != nil {
			return err
		}
		book, changed, err := r.Book.Justified(free(costs.MostOfEach(r.plans())))
		if err != nil {
			return err
		}
		if changed && round < mostRounds {
			r.Book = book
			continue
		}
		if changed {
			r.Warnings = append(slices.Clone(r.Warnings), "the choice between packs did not settle: prices are those of the last but one round")
		}
		r.namePacks()
		return r.drawLots(ctx, all)
	}
}

// compareOnce compares all lots at the prices of the book. What does not go with
// prices is kept from round to round.
func (r *Report) compareOnce(ctx context.Context, c *catalog.Catalog, o Options, all []*work) error {
	r.Lots = make([]Lot, len(r.Job.Lots))
	return atOnce(ctx, len(r.Lots), func(i int) (err error) {
		lot := r.Job.Lots[i]
		if all[i] == nil {
			all[i], err = newWork(ctx, r.Job, lot, c, r.Book, o)
		}
		if err == nil {
			r.Lots[i], err = all[i].compare(ctx, r.Book, o)
		}
		if err != nil {
			return fmt.Errorf("lot %q: %w", lot.Name, err)
		}
		o.meter.step()
		return nil
	})
}

// drawLots fills in the ranges of all lots, and lets go of their draws.
func (r *Report) drawLots(ctx context.Context, all []*work) error {
	for i, w := range all {
		w.k.Forget()
		if err := w.drawn.spread(ctx, &r.Lots[i]); err != nil {
			return fmt.Errorf("lot %q: %w", r.Lots[i].Job.Name, err)
		}
		all[i] = nil
	}
	return nil
}

// pin sets the prices to the packs that an earlier run's settings name.
func (r *Report) pin(o Options) map[string]string {
	packs := map[string]string{}
	for _, lot := range slices.Sorted(maps.Keys(o.Settings)) {
		for _, id := range slices.Sorted(maps.Keys(o.Settings[lot])) {
			maps.Copy(packs, o.Settings[lot][id].Packs)
		}
	}
	book, gone := r.Book.Pinned(packs)
	r.Book = book
	for _, item := range gone {
		delete(packs, item)
	}
	if len(gone) > 0 {
		r.Warnings = append(slices.Clone(r.Warnings), "no such pack is on offer any more, another one sets the price: "+strings.Join(gone, ", "))
	}
	return packs
}

// namePacks notes with each route the packs that its prices come from.
func (r *Report) namePacks() {
	for i := range r.Lots {
		for j := range r.Lots[i].Routes {
			run := &r.Lots[i].Routes[j].Run
			items := make([]string, len(run.Uses))
			for k, use := range run.Uses {
				items[k] = use.Item
			}
			run.Settings.Packs = r.Book.PacksOf(items)
		}
	}
}
