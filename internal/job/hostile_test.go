package job

import (
	"math/rand/v2"
	"strings"
	"testing"
)

// spoiled changes a sound text in one to four places: cuts, doubles, swaps and
// shuffles lines, puts in signs, numbers, quantities and structures that do harm
// where they are not wanted.
func spoiled(r *rand.Rand, text string) string {
	harm := []string{
		"\x00", "\t", "\xff", "\u202e", "\ufeff", "\r", "%s%n", "=1+1", "'", `"`, "{", "}", "[", "]", ":", ",", "&a ", "*a", "!!binary ", "<<: *a", "---\n", "...\n", "# ", "|", ">", "- ",
		"NaN", ".inf", "-0", "1e400", "1e-400", "0x10", "9999999999999999999999", "1,5", "1.234,5", "−5", "٣",
		"18 L", "-18 L", "480 mg/kg", "101 %", "1e9 kg", "0 K", "-300 °C", "148 EUR", "148 XXX", "0000-00-00", "2026-13-45", "null", "~", "yes", "no",
		strings.Repeat("[", 40), strings.Repeat("a", 5000), strings.Repeat("{a: ", 40), strings.Repeat("- ", 60), "../../etc/passwd", "https://example.org/a.yaml", "\n", "\n\n  ", " ",
	}
	for range 1 + r.IntN(4) {
		lines := strings.SplitAfter(text, "\n")
		i, j := r.IntN(len(lines)), r.IntN(len(lines))
		at := r.IntN(len(text) + 1)
		switch r.IntN(7) {
		case 0:
			text = text[:at] + harm[r.IntN(len(harm))] + text[at:]
		case 1:
			end := min(len(text), at+r.IntN(12))
			text = text[:at] + text[end:]
		case 2:
			lines[i] = lines[j]
			text = strings.Join(lines, "")
		case 3:
			lines[i], lines[j] = lines[j], lines[i]
			text = strings.Join(lines, "")
		case 4:
			if key, _, ok := strings.Cut(lines[i], ":"); ok {
				lines[i] = key + ": " + harm[r.IntN(len(harm))] + "\n"
			}
			text = strings.Join(lines, "")
		case 5:
			text = text[:at]
		case 6:
			b := []byte(text)
			if len(b) > 0 {
				b[r.IntN(len(b))] = byte(r.IntN(256))
			}
			text = string(b)
		}
		if text == "" {
			return text
		}
	}
	return text
}

// Ten thousand spoiled jobs and price lists: each is answered soon, by messages with
// their place or by a job whose numbers are in range, never by both.
func TestTenThousandBadInputs(t *testing.T) {
	const wanted = 10_000
	cat := shelf()
	_, demo := Demo()
	jobs := []string{string(demo), full, small, string(Template(cat.Solvents["toluene"]))}
	lists := []string{
		"item;pack;price;date\nsieve-3a;5 kg;148 EUR;2026-10-01\ntoluene;20 L;118,50 EUR;2026-10-01\n",
		"item,pack,price,currency,minimum order,lead time\nsieve-3a,5 kg,148,EUR,2,14 d\ntoluene,20 L,118.5,EUR,1,3 d\n",
	}
	r := rand.New(rand.NewPCG(20, 26))
	refused, sound := 0, 0
	for refused < wanted {
		file, text := "job.yaml:", ""
		read := func() (*Job, error) { return Read("job.yaml", []byte(text), cat) }
		if r.IntN(4) == 0 {
			file, text = "prices.csv:", spoiled(r, lists[r.IntN(len(lists))])
			read = func() (*Job, error) {
				return ReadWith("job.yaml", []byte("prices: prices.csv\n"+small), cat, func(string) ([]byte, error) { return []byte(text), nil })
			}
		} else {
			text = spoiled(r, jobs[r.IntN(len(jobs))])
		}
		invalid := answered(t, []byte(text), read)
		if invalid == nil {
			sound++
			continue
		}
		refused++
		checkMessages(t, file, invalid, strings.Contains(text, "%"))
		if t.Failed() {
			t.Fatalf("by %q", text)
		}
	}
	t.Logf("%d refused, %d taken", refused, sound)
}
