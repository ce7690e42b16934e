package study_test

import (
	"testing"

	"parch/catalog"
	"parch/internal/costs"
	"parch/internal/doubt"
	"parch/internal/job"
	"parch/internal/routes"
	"parch/internal/search"
	"parch/internal/steps"
)

// firstLot of the demonstration, ready to be tuned.
func firstLot(b *testing.B) *search.Tuner {
	b.Helper()
	c, err := catalog.Load()
	if err != nil {
		b.Fatal(err)
	}
	name, data := job.Demo()
	j, err := job.Read(name, data, c)
	if err != nil {
		b.Fatal(err)
	}
	k, err := routes.NewCase(j, j.Lots[0], c)
	if err != nil {
		b.Fatal(err)
	}
	book, err := costs.NewBook(c, j)
	if err != nil {
		b.Fatal(err)
	}
	return &search.Tuner{Case: k, Book: book, Objective: search.Cost, Site: costs.NewArrangement(c, j)}
}

var trapAndSoak = routes.Route{{Kind: steps.Trap}, {Kind: steps.Soak, Agent: "sieve-3a"}}

// BenchmarkOneRoute runs a trap and a soak with given settings, each time on a case
// that remembers nothing.
func BenchmarkOneRoute(b *testing.B) {
	t := firstLot(b)
	run, err := t.Tune(trapAndSoak)
	if err != nil {
		b.Fatal(err)
	}
	for b.Loop() {
		k, err := routes.NewCase(t.Case.Job, t.Case.Lot, t.Case.Catalog)
		if err != nil {
			b.Fatal(err)
		}
		if _, err := k.Run(trapAndSoak, run.Settings); err != nil {
			b.Fatal(err)
		}
	}
}

// BenchmarkSearchOfALot tunes every route that is offered for a lot.
func BenchmarkSearchOfALot(b *testing.B) {
	t := firstLot(b)
	for b.Loop() {
		k, err := routes.NewCase(t.Case.Job, t.Case.Lot, t.Case.Catalog)
		if err != nil {
			b.Fatal(err)
		}
		fresh := *t
		fresh.Case = k
		offered, _ := k.Candidates()
		offered, _ = fresh.Prune(offered)
		for _, r := range offered {
			_, _ = fresh.Tune(r) // a refusal is an answer too
		}
	}
}

// BenchmarkSoakDraws takes a soak alone through the 2 000 draws of a comparison, the
// draws included.
func BenchmarkSoakDraws(b *testing.B) {
	t := firstLot(b)
	run, err := t.Tune(routes.Route{{Kind: steps.Soak, Agent: "sieve-3a"}})
	if err != nil {
		b.Fatal(err)
	}
	for b.Loop() {
		l, err := doubt.New(t.Case, t.Book, t.Site, 2000, 1)
		if err != nil {
			b.Fatal(err)
		}
		if _, err := l.Through(&run); err != nil {
			b.Fatal(err)
		}
	}
}

// BenchmarkTenThousandDraws takes a trap and a soak through 10 000 draws, the draws
// included.
func BenchmarkTenThousandDraws(b *testing.B) {
	t := firstLot(b)
	run, err := t.Tune(trapAndSoak)
	if err != nil {
		b.Fatal(err)
	}
	for b.Loop() {
		l, err := doubt.New(t.Case, t.Book, t.Site, 10_000, 1)
		if err != nil {
			b.Fatal(err)
		}
		if _, err := l.Through(&run); err != nil {
			b.Fatal(err)
		}
	}
}
