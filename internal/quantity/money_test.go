package quantity

import (
	"strings"
	"testing"
)

func TestMoney(t *testing.T) {
	for _, c := range []struct{ text, amount, currency, per string }{
		{"48 EUR/h", "48", "EUR", "h"},
		{"148 EUR", "148", "EUR", ""},
		{"0.24 EUR/kWh", "0.24", "EUR", "kWh"},
		{"4.20 EUR / m3", "4.2", "EUR", "m3"},
		{"148EUR", "148", "EUR", ""},
		{"999999999999.999999 CHF", "999999999999.999999", "CHF", ""},
		{"-3 USD", "-3", "USD", ""},
	} {
		m, err := ParseMoney(c.text)
		if err != nil {
			t.Errorf("%s: %v", c.text, err)
			continue
		}
		if m.Amount.String() != c.amount || m.Currency != c.currency || m.Per != c.per {
			t.Errorf("%s read as %s %s per %q", c.text, m.Amount, m.Currency, m.Per)
		}
	}
}

func TestMoneyRefused(t *testing.T) {
	for text, part := range map[string]string{
		"":                      `is empty; write it like "148 EUR"`,
		"148":                   `"148" has no currency`,
		"148 €":                 `write the ISO 4217 code after the number, such as "148 EUR"`,
		"£148":                  `such as "148 GBP"`,
		"EUR 148":               `begins with the currency`,
		"148 eur":               `in capitals`,
		"148 EUR per h":         `is not an amount and a currency`,
		"1,48 EUR":              `has a comma`,
		"1 480 EUR":             `has a thousands separator`,
		"1e3 EUR":               `is not an amount and a currency`,
		"NaN EUR":               `is not a finite number`,
		"1000000000000 EUR":     `too many digits`,
		"1.0000001 EUR":         `too many digits`,
		"free":                  `does not begin with an amount`,
		"148 EURO":              `is not an amount and a currency`,
		strings.Repeat("9", 70): `is longer than any price`,
		"100% EUR":              `is not an amount and a currency`,
	} {
		_, err := ParseMoney(text)
		if err == nil || !strings.Contains(err.Error(), part) || strings.Contains(err.Error(), "%!") {
			t.Errorf("%q: got %v, want a message with %s", text, err, part)
		}
	}
}
