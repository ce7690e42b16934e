package study

import (
	"fmt"

	"parch/internal/quantity"
)

// answer puts a break-even into a sentence.
func (b *BreakEven) answer() string {
	x := func(v float64) string { return quantity.Significant(v, 3) + " " + b.Unit }
	from, to := quantity.Significant(b.From, 3), x(b.To)
	switch {
	case b.Key == StartWater && b.Never && b.Below == "":
		return ""
	case b.Key == StartWater && b.Never:
		return fmt.Sprintf("pre-drying %s from %s to %s: %s is the cheapest", paysOrNot(b.Below), from, to, b.Below)
	case b.Key == StartWater && b.Step:
		return fmt.Sprintf("at %s one of the two ceases to reach the limit: below it %s, above it %s", x(b.At), b.Below, b.Above)
	case b.Key == StartWater:
		return fmt.Sprintf("at %s pre-drying costs the same as doing without: below it %s is cheaper, above it %s", x(b.At), b.Below, b.Above)
	case b.Key == Volume && b.Never:
		return fmt.Sprintf("from %s to %s %s is cheaper throughout", from, to, b.Below)
	case b.Key == Volume:
		return fmt.Sprintf("at %s (now %s) drying here costs the same as buying dry: below it %s is cheaper, above it %s", x(b.At), quantity.Significant(b.Now, 3), b.Below, b.Above)
	case b.Never:
		return fmt.Sprintf("never from %s to %s (now %s): %s stays the cheapest", from, to, quantity.Significant(b.Now, 3), b.Below)
	}
	return fmt.Sprintf("at %s (now %s): below it %s is cheaper, above it %s", x(b.At), quantity.Significant(b.Now, 3), b.Below, b.Above)
}

func paysOrNot(winner string) string {
	for _, c := range winner {
		if c == '+' {
			return "always pays"
		}
	}
	return "never pays"
}
