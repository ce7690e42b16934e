package job

import (
	"strings"
	"testing"
)

// FuzzPriceList holds the reader of a price list to the promises of FuzzRead: no
// panic, an answer within a second, and messages with their row or prices in range.
func FuzzPriceList(f *testing.F) {
	cat := shelf()
	const jobText = "prices: prices.csv\n" + small
	f.Add([]byte("item;pack;price;date\nsieve-3a;5 kg;148 EUR;2026-10-01\ntoluene;20 L;118,50 EUR;2026-10-01\n"))
	f.Add([]byte("item,pack,price,currency\nsieve-3a,5 kg,148,EUR\n"))
	f.Add([]byte("item;pack;price\nsieve-3a;5 kg;1.234 EUR\n=1+1;;\n\"a\"\"b;1;2\n"))
	f.Fuzz(func(t *testing.T, data []byte) {
		invalid := answered(t, data, func() (*Job, error) {
			return ReadWith("job.yaml", []byte(jobText), cat, func(string) ([]byte, error) { return data, nil })
		})
		if invalid != nil {
			checkMessages(t, "prices.csv:", invalid, strings.Contains(string(data), "%!"))
		}
	})
}
