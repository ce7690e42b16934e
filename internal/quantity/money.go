package quantity

import (
	"fmt"
	"regexp"
	"strings"
	"unicode/utf8"

	"github.com/shopspring/decimal"
)

// Money is an amount in a currency, per something where Per is not empty.
type Money struct {
	Amount   decimal.Decimal
	Currency string // ISO 4217 code
	Per      string // "h", "kWh", "m3", ... as typed
}

var (
	amount   = regexp.MustCompile(`^[+-]?[0-9]+(?:\.[0-9]+)?`)
	currency = regexp.MustCompile(`^([A-Z]{3})(?: ?/ ?([^/\s][^\s]*))?$`)
	inFront  = regexp.MustCompile(`^(?i:[a-z]{3}|[€$£¥]) ?[+-]?[0-9]`)
)

// ParseMoney reads "148 EUR" or "48 EUR/h": at most 12 digits before the point
// and 6 after it, no exponent, and a currency as its ISO 4217 code.
func ParseMoney(text string) (Money, error) {
	clean := strings.TrimSpace(text)
	bad := func(format string, args ...any) (Money, error) {
		return Money{}, fmt.Errorf("%s %s", Quote(text), fmt.Sprintf(format, args...))
	}
	switch {
	case clean == "":
		return Money{}, fmt.Errorf(`is empty; write it like "148 EUR"`)
	case utf8.RuneCountInString(clean) > longest:
		return bad(`is longer than any price; write it like "148 EUR"`)
	case strings.ContainsAny(clean, "€$£¥"):
		return bad(`has a currency sign; write the ISO 4217 code after the number, such as "148 %s"`, signs(clean))
	case inFront.MatchString(clean):
		return bad(`begins with the currency; write the number first, such as "148 EUR"`)
	}
	if _, _, err := splitNumber(clean); err != nil {
		return Money{}, err
	}
	digits := amount.FindString(clean)
	rest := strings.TrimSpace(clean[len(digits):])
	switch {
	case digits == "":
		return bad(`does not begin with an amount; write it like "148 EUR"`)
	case rest == "":
		return bad(`has no currency; write it like "148 EUR"`)
	}
	parts := currency.FindStringSubmatch(rest)
	if parts == nil {
		return bad(`is not an amount and a currency; write it like "148 EUR" or "48 EUR/h", the currency as its ISO 4217 code in capitals`)
	}
	whole, fraction, _ := strings.Cut(strings.TrimLeft(digits, "+-"), ".")
	if len(strings.TrimLeft(whole, "0")) > 12 || len(fraction) > 6 {
		return bad("has too many digits; at most 12 before the point and 6 after it")
	}
	value, err := decimal.NewFromString(digits)
	if err != nil {
		return bad("is not an amount")
	}
	return Money{Amount: value, Currency: parts[1], Per: parts[2]}, nil
}

// signs suggests the code for a currency sign. The dollar, the pound and the yen
// sign serve several currencies; the commonest is shown as an example.
func signs(text string) string {
	switch {
	case strings.Contains(text, "€"):
		return "EUR"
	case strings.Contains(text, "£"):
		return "GBP"
	case strings.Contains(text, "¥"):
		return "JPY"
	}
	return "USD"
}
