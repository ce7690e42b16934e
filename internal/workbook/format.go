package workbook

import (
	"math"
	"strings"
)

const (
	moneyFormat  = "#,##0.00"
	exactMoney   = "#,##0.0000"
	mostDecimals = 4
)

// formatFor is the number format of a column: as many decimals as the smallest
// value needs to show three significant figures, the same all the way down.
func formatFor(values ...float64) string {
	decimals := 0
	for _, v := range values {
		if v == 0 || math.IsNaN(v) {
			continue
		}
		figures := 2 - int(math.Floor(math.Log10(abs(v))))
		decimals = max(decimals, figures)
	}
	if allWhole(values) {
		decimals = 0
	}
	if decimals = min(decimals, mostDecimals); decimals <= 0 {
		return "#,##0"
	}
	return "#,##0." + strings.Repeat("0", decimals)
}

// twoFigures shows what is rounded to two significant figures without noughts that
// promise more.
const twoFigures = "[>=9.95]#,##0;[>=0.995]0.0;0.00#"

// numberOrWords is a number format for cells that hold words where there is no number.
func numberOrWords(format string) string { return format + ";-" + format + ";" + format + ";@" }

func allWhole(values []float64) bool {
	for _, v := range values {
		if v != math.Trunc(v) {
			return false
		}
	}
	return true
}

// each collects one number of every item.
func each[T any](items []T, value func(T) float64) []float64 {
	out := make([]float64, len(items))
	for i, x := range items {
		out[i] = value(x)
	}
	return out
}

// exactFormat is the number format of prices: cents, and more decimals only where
// some price needs them.
func exactFormat(prices []float64) string {
	decimals := 2
	for _, p := range prices {
		for scale := math.Pow10(decimals); decimals < mostDecimals+2 && abs(p*scale-math.Round(p*scale)) > 1e-6; scale *= 10 {
			decimals++
		}
	}
	return "#,##0." + strings.Repeat("0", decimals)
}
