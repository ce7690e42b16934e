package study

import (
	"slices"

	"github.com/shopspring/decimal"

	"parch/internal/steps"
)

// Shared is a piece of equipment that the best routes of several lots pay for. The
// bill of each lot holds its whole year, as if the lot were alone; here the year is
// split by the batches.
type Shared struct {
	Item    string
	Yearly  decimal.Decimal // once
	Charged decimal.Decimal // in the bills of the lots together
	Lots    []string
	Parts   []decimal.Decimal // of Yearly, by lot; rounded to the cent
}

const cents = 2

// share finds what several best routes pay for.
func (r *Report) share() {
	r.Shared = nil
	batches := map[string][]float64{}
	for i := range r.Lots {
		best := r.Lots[i].Best()
		if best == nil {
			continue
		}
		for _, line := range best.Bill.Lines {
			if line.Head != steps.Equipment || line.YearShare.IsZero() {
				continue
			}
			at := slices.IndexFunc(r.Shared, func(s Shared) bool { return s.Item == line.Item })
			if at < 0 {
				r.Shared = append(r.Shared, Shared{Item: line.Item})
				at = len(r.Shared) - 1
			}
			s := &r.Shared[at]
			year := line.YearShare.Mul(line.UnitPrice)
			s.Yearly, s.Charged = decimal.Max(s.Yearly, year), s.Charged.Add(year)
			s.Lots = append(s.Lots, r.Lots[i].Job.Name)
			batches[s.Item] = append(batches[s.Item], r.Lots[i].Job.BatchesPerYear)
		}
	}
	r.Shared = slices.DeleteFunc(r.Shared, func(s Shared) bool { return len(s.Lots) < 2 })
	for i := range r.Shared {
		r.Shared[i].split(batches[r.Shared[i].Item])
	}
}

// split divides the year by batches; the last lot takes what rounding leaves.
func (s *Shared) split(batches []float64) {
	total := 0.0
	for _, b := range batches {
		total += b
	}
	left := s.Yearly.Round(cents)
	for i, b := range batches {
		part := s.Yearly.Mul(decimal.NewFromFloat(b / total)).Round(cents)
		if i == len(batches)-1 {
			part = left
		}
		s.Parts, left = append(s.Parts, part), left.Sub(part)
	}
}
