package job

import (
	"errors"
	"strings"
	"testing"
	"time"

	"parch/internal/document"
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
		started := time.Now()
		j, err := ReadWith("job.yaml", []byte(jobText), cat, func(string) ([]byte, error) { return data, nil })
		if took := time.Since(started); took > time.Second {
			t.Errorf("took %v for %d bytes", took, len(data))
		}
		var invalid *document.Invalid
		switch {
		case err == nil && j != nil:
			checkJob(t, j)
		case j != nil || !errors.As(err, &invalid):
			t.Errorf("job %v with error %v", j, err)
		default:
			for _, line := range invalid.Lines() {
				if !strings.HasPrefix(line, "prices.csv:") || strings.ContainsAny(line, "\n\r\x1b\x00") || len(line) > 3000 {
					t.Errorf("message %q", line)
				}
			}
		}
	})
}
