package costs

import (
	"regexp"
	"testing"

	"parch/catalog"
)

// Every solvent and agent of the catalog has an entry or is said to need none;
// every entry is for something that can be bought.
func TestTransportOfEverythingThatIsBought(t *testing.T) {
	cat, err := catalog.Load()
	if err != nil {
		t.Fatal(err)
	}
	number, class := regexp.MustCompile(`^\d{4}$`), regexp.MustCompile(`^(3|4\.1|4\.3|6\.1|8)(\+(3|6\.1|8))?$`)
	known := map[string]bool{}
	for key := range cat.Solvents {
		known[key] = key != "water"
	}
	for key := range cat.Agents {
		known[key] = true
	}
	for item, buy := range known {
		got := transportOf(item)
		switch {
		case !buy:
		case got.Basis == unknown:
			t.Errorf("%s: %s", item, got.Basis)
		case got.UN != "" && (!number.MatchString(got.UN) || !class.MatchString(got.Class) || got.Group == ""):
			t.Errorf("%s: %+v", item, got)
		}
	}
	for item := range dangerousGoods {
		if !known[item] {
			t.Errorf("%s is not in the catalog", item)
		}
	}
}
