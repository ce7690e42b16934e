package routes

import (
	"fmt"
	"time"

	"parch/internal/quantity"
)

// refuseHeating holds back every heated route of a peroxide former that has no
// reading under the site's limit, or none that is young enough to count.
func (c *Case) refuseHeating() (reason, source string) {
	h, limit, p := c.Solvent.Hazards, c.Job.Site.PeroxideLimitKgPerM3, c.Lot.Peroxide
	switch {
	case !h.FormsPeroxides():
		return "", ""
	case p == nil:
		return fmt.Sprintf("test first: %s forms peroxides (class %s) and the job gives no peroxide reading", c.Solvent.Name, h.PeroxideClass), h.Source
	case p.ReadingKgPerM3 > 0 && p.ReadingKgPerM3 >= limit:
		return fmt.Sprintf("not heated: the peroxide reading of %.3g mg/L (%s) is not under the site's limit of %.3g mg/L", p.ReadingKgPerM3*1e3, p.Date, limit*1e3), h.Source
	case c.ReadingTooOld():
		plan := c.Job.PlanDate(c.Catalog.Date)
		return fmt.Sprintf("test first: the peroxide reading of %s is of %s, %.0f days before the plan of %s; %s", c.Solvent.Name, p.Date, daysBetween(p.Date, plan), plan, c.ReadingCounts()),
			c.Catalog.PeroxideReading(h.PeroxideClass).Source
	}
	return "", ""
}

// ReadingTooOld reports whether the lot has a peroxide reading that counts no more on the
// day of the plan.
func (c *Case) ReadingTooOld() bool {
	if c.Lot.Peroxide == nil || !c.Solvent.Hazards.FormsPeroxides() {
		return false
	}
	return daysBetween(c.Lot.Peroxide.Date, c.Job.PlanDate(c.Catalog.Date)) > c.readingDays()
}

// ReadingCounts says how long a peroxide reading of the solvent counts.
func (c *Case) ReadingCounts() string {
	class := c.Solvent.Hazards.PeroxideClass
	return fmt.Sprintf("of class %s it counts for %s days (%s)", class, quantity.Significant(c.readingDays(), 3), c.Catalog.PeroxideReading(class).Confidence)
}

func (c *Case) readingDays() float64 {
	return c.Catalog.PeroxideReading(c.Solvent.Hazards.PeroxideClass).SI / daySeconds
}

const daySeconds = 24 * 3600

// daysBetween two ISO dates; 0 where one is none, as of a reading just taken.
func daysBetween(from, to string) float64 {
	a, errA := time.Parse(time.DateOnly, from)
	b, errB := time.Parse(time.DateOnly, to)
	if errA != nil || errB != nil {
		return 0
	}
	return b.Sub(a).Seconds() / daySeconds
}
