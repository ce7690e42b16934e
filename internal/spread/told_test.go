package spread_test

import (
	"fmt"
	"math"
	"testing"

	"pgregory.net/rapid"

	"parch/internal/spread"
)

// The first half of the draws are the draws of half as many, and each part of the
// range is hit once all the same.
func TestDoublingAddsDraws(t *testing.T) {
	inputs := []spread.Input{spread.Uniform("u", 0, 1, "test"), spread.Normal("v", 5, 2, "test")}
	few, err := spread.Draw(inputs, 1000, 3)
	if err != nil {
		t.Fatal(err)
	}
	many, err := spread.Draw(inputs, 2000, 3)
	if err != nil {
		t.Fatal(err)
	}
	for k := range inputs {
		for i, v := range few.Column(k) {
			if w := many.Column(k)[i]; math.Abs(w-v) > 1e-9*math.Abs(v) {
				t.Fatalf("input %d, draw %d: %g of 1000, %g of 2000", k, i, v, w)
			}
		}
	}
	hit := make([]int, 2000)
	for _, v := range many.Column(0) {
		hit[int(v*2000)]++
	}
	for part, n := range hit {
		if n != 1 {
			t.Fatalf("part %d is hit %d times", part, n)
		}
	}
}

// The stated error of a quantile holds: of the uniform distribution the 95 % quantile
// of n draws has the standard error sqrt(0.95 x 0.05/n) (order statistics).
func TestStatedErrorOfAQuantile(t *testing.T) {
	const n = 2000
	d, err := spread.Draw([]spread.Input{spread.Uniform("u", 0, 1, "test")}, n, 1)
	if err != nil {
		t.Fatal(err)
	}
	want := math.Sqrt(0.95 * 0.05 / n)
	if got := spread.BandOf(d.Column(0)).HighError; math.Abs(got/want-1) > 0.05 {
		t.Errorf("error %g, want %g", got, want)
	}
}

// Of the uniform distribution from 0 to 1 the 95 % quantile of 2000 draws has a standard
// error of 0.0049, and so have the 5 % quantile and, of 0.0112, the median: eight of
// them are 0.039 and 0.089, so the steps are 0.05 and 0.1, with twice the draws too.
func TestFiguresAreToldAsTheDrawsBearThem(t *testing.T) {
	for _, n := range []int{spread.UsualDraws, 2 * spread.UsualDraws, 8 * spread.UsualDraws} {
		d, err := spread.Draw([]spread.Input{spread.Uniform("u", 0, 1, "test")}, n, 1)
		if err != nil {
			t.Fatal(err)
		}
		b := spread.Told(d.Column(0))
		if b.Low != 0.05 || b.Median != 0.5 || b.High != 0.95 {
			t.Errorf("%d draws: %g %g %g, want 0.05, 0.5 and 0.95", n, b.Low, b.Median, b.High)
		}
	}
	few := make([]float64, 40)
	for i := range few {
		few[i] = 1000 + float64(i)/1000 // hardly a spread: two digits
	}
	if b := spread.Told(few); b.Low != 1000 || b.High != 1000 {
		t.Errorf("%g to %g, want two digits", b.Low, b.High)
	}
}

// A chance is told as reached at least: sqrt(0.915 x 0.085/2000) = 0.0062, seven of
// them 0.044.
func TestChancesAreToldAsReachedAtLeast(t *testing.T) {
	for _, c := range []struct{ chance, level, want float64 }{
		{0.915, 0.9, 0.9}, {0.949, 0.9, 0.9}, {0.899, 0.9, 0.85}, {0.935, 0.93, 0.93}, {1, 0.9, 0.99}, {0.997, 0.995, 0.995}, {0, 0.9, 0}, {0.58, 0.9, 0.5},
	} {
		if got := spread.ToldChance(c.chance, c.level, spread.UsualDraws); got != c.want {
			t.Errorf("chance %g of %g asked for: told %g, want %g", c.chance, c.level, got, c.want)
		}
	}
	if got := spread.ToldShare(0.58, spread.UsualDraws); got != 0.6 {
		t.Errorf("a share of 0.58 is told as %g", got)
	}
}

// What is positive in every draw is never told as nothing, however few draws there are
// and however far they spread: not a water content, not a cost.
func TestWhatIsPositiveIsNotToldAsNothing(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		n := rapid.IntRange(1, 600).Draw(t, "draws")
		band := rapid.Float64Range(1.01, 1e4).Draw(t, "band")
		scale := math.Pow(10, rapid.Float64Range(-9, 6).Draw(t, "scale"))
		d, err := spread.Draw([]spread.Input{spread.Factor("f", band, "test")}, n, rapid.Uint64().Draw(t, "seed"))
		if err != nil {
			t.Fatal(err)
		}
		values := make([]float64, n)
		for i, v := range d.Column(0) {
			values[i] = scale * v
		}
		exact, told := spread.BandOf(values), spread.Told(values)
		if !(told.Low > 0 && told.Low <= told.Median && told.Median <= told.High) {
			t.Fatalf("%d draws of %g to %g: told as %g, %g and %g", n, exact.Low, exact.High, told.Low, told.Median, told.High)
		}
		if told.High > 2*exact.High || told.High < exact.High/2 {
			t.Fatalf("%g is told as %g", exact.High, told.High)
		}
	})
}

// Inputs that have nothing to do with a result are not named beside those that have:
// without a correlation the ranks show one of 1/sqrt(n-1) (Spearman 1904; Kendall,
// Rank Correlation Methods, 1948; from memory), 0.1 at a hundred draws.
func TestWhatMovesNothingIsNotNamed(t *testing.T) {
	const inputs = 120 // more than a lot has
	for _, n := range []int{100, 200, spread.UsualDraws} {
		for seed := range uint64(20) {
			var all []spread.Input
			for k := range inputs {
				all = append(all, spread.Uniform(fmt.Sprintf("u%d", k), 0, 1, "test"))
			}
			d, err := spread.Draw(all, n, seed)
			if err != nil {
				t.Fatal(err)
			}
			result := make([]float64, n)
			for i := range result {
				result[i] = d.Column(0)[i] + 0.3*d.Column(1)[i]
			}
			for k := range inputs {
				c := spread.ToldCorrelation(spread.RankCorrelation(d.Column(k), result), n)
				switch {
				case k == 0 && c < 0.9:
					t.Errorf("%d draws, seed %d: what rules the result is told with %g", n, seed, c)
				case k > 1 && c != 0:
					t.Errorf("%d draws, seed %d: u%d is told with %g, though it moves nothing", n, seed, k, c)
				}
			}
		}
	}
}
