package spread_test

import (
	"math"
	"testing"

	"parch/internal/spread"
)

// A product of lognormals is lognormal: ln a + ln b has the variance of both, so
// the 95 % quantile of the product is exp(sqrt(ln^2 band_a + ln^2 band_b)).
func TestQuantilesAgainstTheClosedForm(t *testing.T) {
	inputs := []spread.Input{spread.Factor("a", 1.5, "test"), spread.Factor("b", 2, "test")}
	const n = 20000
	d, err := spread.Draw(inputs, n, 7)
	if err != nil {
		t.Fatal(err)
	}
	product := make([]float64, d.Len())
	for i := range product {
		product[i] = d.Row(i)[0] * d.Row(i)[1]
	}
	want := math.Exp(math.Hypot(math.Log(1.5), math.Log(2)))
	got := spread.BandOf(product)
	below := spread.Share(product, func(v float64) bool { return v <= want })
	if e := spread.QuantileError(0.95, n); math.Abs(below-0.95) > 3*e {
		t.Errorf("%g of the draws lie below the 95 %% quantile, want 0.95 within %g", below, 3*e)
	}
	if math.Abs(got.High/want-1) > 0.03 || math.Abs(got.Low*want-1) > 0.03 || math.Abs(got.Median-1) > 0.02 {
		t.Errorf("band %+v, want %g to %g around 1", got, 1/want, want)
	}
}

// Every part of an input's range is hit once.
func TestDrawsAreEven(t *testing.T) {
	const n = 500
	d, err := spread.Draw([]spread.Input{spread.Uniform("u", 0, 1, "test"), spread.Uniform("v", 0, 1, "test")}, n, 1)
	if err != nil {
		t.Fatal(err)
	}
	for k := range 2 {
		hit := make([]int, n)
		for _, v := range d.Column(k) {
			hit[min(n-1, int(v*n))]++
		}
		for i, h := range hit {
			if h != 1 {
				t.Fatalf("input %d: part %d is hit %d times", k, i, h)
			}
		}
	}
}

func TestSameSeedSameDraws(t *testing.T) {
	draw := func(seed uint64) float64 {
		d, err := spread.Draw([]spread.Input{spread.Normal("n", 5, 2, "test")}, 100, seed)
		if err != nil {
			t.Fatal(err)
		}
		return d.Row(42)[0]
	}
	if draw(3) != draw(3) || draw(3) == draw(4) {
		t.Error("the seed does not rule the draws")
	}
}

func TestAroundKeepsItsQuantiles(t *testing.T) {
	in := spread.Around("q0", 0.01, 0.02, 0.025, "test")
	for p, want := range map[float64]float64{0.05: 0.01, 0.5: 0.02, 0.95: 0.025} {
		if got := in.Quantile(p); math.Abs(got/want-1) > 1e-9 {
			t.Errorf("quantile %g = %g, want %g", p, got, want)
		}
	}
}

// Worked example of Spearman's coefficient: ranks 1..5 against 2 1 4 3 5 differ
// by 1 1 1 1 0, so r = 1 - 6 x 4/(5 x 24) = 0.8.
func TestRankCorrelation(t *testing.T) {
	if r := spread.RankCorrelation([]float64{10, 20, 30, 40, 50}, []float64{0.2, 0.1, 0.4, 0.3, 0.5}); math.Abs(r-0.8) > 1e-12 {
		t.Errorf("r = %g, want 0.8", r)
	}
	if r := spread.RankCorrelation([]float64{1, 2, 3}, []float64{4, 4, 4}); r != 0 {
		t.Errorf("constant y: r = %g, want 0", r)
	}
}

func TestDistributionsWithoutSpreadAreRefused(t *testing.T) {
	for _, in := range []spread.Input{spread.Factor("f", 1, "test"), spread.Uniform("u", 3, 3, "test"), spread.Normal("n", 1, 0, "test"), spread.Around("a", 2, 2, 2, "test")} {
		if _, err := spread.Draw([]spread.Input{in}, 10, 1); err == nil {
			t.Errorf("%s has no spread, yet no error", in.Name)
		}
	}
}
