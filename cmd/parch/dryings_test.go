package main

import (
	"fmt"
	"math"
	"os"
	"strings"
	"testing"

	"parch/catalog"
	"parch/internal/proof"
)

// The README states how many of the recalled dryings lie within a factor of two and
// three, and which rows set the parameters.
func TestReadmeStatesTheRecalledDryings(t *testing.T) {
	text, err := os.ReadFile("../../README.md")
	if err != nil {
		t.Fatal(err)
	}
	readme := strings.Join(strings.Fields(string(text)), " ")
	cat, err := catalog.Load()
	if err != nil {
		t.Fatal(err)
	}
	checks, err := catalog.LoadChecks()
	if err != nil {
		t.Fatal(err)
	}
	var recalled, computed, two, three int
	for _, row := range proof.Dryings(cat, checks) {
		if row.Confidence != catalog.Memory {
			continue
		}
		recalled++
		if math.IsNaN(row.Computed) {
			continue
		}
		computed++
		factor := math.Abs(math.Log(row.Computed / row.Published))
		if factor <= math.Log(2) {
			two++
		}
		if factor <= math.Log(3) {
			three++
		}
	}
	want := fmt.Sprintf("Of %d dryings recalled from memory %d can be computed: %d lie within a factor of 2, %d within 3", recalled, computed, two, three)
	if !strings.Contains(readme, want) {
		t.Errorf("the README does not say: %s", want)
	}
	rows, err := os.ReadFile("../../catalog/checks/dryings.csv")
	if err != nil {
		t.Fatal(err)
	}
	for line := range strings.Lines(string(rows)) {
		if id, rest, _ := strings.Cut(line, ","); strings.Contains(rest, ",fitted,") && !strings.Contains(readme, id) {
			t.Errorf("the README does not name %s, to which parameters were fitted", id)
		}
	}
}
