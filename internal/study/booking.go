package study

import (
	"fmt"
	"slices"
	"strings"

	"parch/catalog"
	"parch/internal/quantity"
	"parch/internal/routes"
)

// Booking is how far a piece of apparatus is taken up by the best routes of all
// lots together.
type Booking struct {
	Item    string
	Share   float64 // 1 is full
	PerWeek float64 // hours it has in a week
	Lots    []string
	Hours   []float64 // a week, by lot
}

const weeksPerYear = 52

// book adds up who needs what apparatus, and warns of what is booked more than
// there are hours.
func (r *Report) book(c *catalog.Catalog) error {
	r.Bookings = nil
	for i := range r.Lots {
		l := &r.Lots[i]
		best := l.Best()
		if best == nil {
			continue
		}
		k, err := routes.NewCase(r.Job, l.Job, c)
		if err != nil {
			return err
		}
		for _, b := range k.Bookings(&best.Run) {
			r.enter(b, l.Job.Name, b.Hours*l.Job.BatchesPerYear/weeksPerYear)
		}
	}
	r.share()
	for _, b := range r.Bookings {
		if b.Share > 1+1e-9 {
			r.Warnings = append(slices.Clone(r.Warnings), fmt.Sprintf("%s is booked %.0f %%: %s of %s hours a week; by %s",
				b.Item, 100*b.Share, quantity.Significant(b.Share*b.PerWeek, 3), quantity.Significant(b.PerWeek, 3), strings.Join(b.parts(), ", ")))
		}
	}
	return nil
}

func (r *Report) enter(b routes.Booked, lot string, hours float64) {
	at := slices.IndexFunc(r.Bookings, func(x Booking) bool { return x.Item == b.Item })
	if at < 0 {
		r.Bookings = append(r.Bookings, Booking{Item: b.Item, PerWeek: b.PerWeek})
		at = len(r.Bookings) - 1
	}
	x := &r.Bookings[at]
	x.Lots, x.Hours = append(x.Lots, lot), append(x.Hours, hours)
	x.Share += hours / x.PerWeek
}

func (b *Booking) parts() (all []string) {
	for i, lot := range b.Lots {
		all = append(all, fmt.Sprintf("%s %.0f %%", lot, 100*b.Hours[i]/b.PerWeek))
	}
	return all
}
