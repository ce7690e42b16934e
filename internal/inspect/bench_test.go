package inspect_test

import (
	"testing"

	"parch/catalog"
	"parch/internal/inspect"
)

func BenchmarkSheet(b *testing.B) {
	cat, err := catalog.Load()
	if err != nil {
		b.Fatal(err)
	}
	for b.Loop() {
		if _, err := inspect.Solvent(cat, cat.Solvents["tetrahydrofuran"], 5e3, 298.15); err != nil {
			b.Fatal(err)
		}
	}
}
