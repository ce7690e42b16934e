package quantity

import (
	"regexp"
	"testing"
)

// The scan is the expression that it stands for.
func FuzzLeadingNumber(f *testing.F) {
	pattern := regexp.MustCompile(`^[+-]?(?:[0-9]+(?:\.[0-9]*)?|\.[0-9]+)(?:[eE][+-]?[0-9]+)?`)
	for _, seed := range []string{"", "1", "-1.5e-3 L", "+.5", ".", "-", "1.", "1.e5", "1e", "1e+", "e5", "..5", "1.2.3", ".e5", "5 °C", "1E5x"} {
		f.Add(seed)
	}
	f.Fuzz(func(t *testing.T, text string) {
		if got, want := leadingNumber(text), pattern.FindString(text); got != want {
			t.Errorf("%q: %q, want %q", text, got, want)
		}
	})
}
