package thermo

import (
	"math"
	"testing"
)

func closeTo(t *testing.T, what string, got, want Fractions) {
	t.Helper()
	for i := range got {
		if !(math.Abs(got[i]-want[i]) < 1e-12) {
			t.Errorf("%s: %v, want %v", what, got, want)
			return
		}
	}
}

// Systems whose solution is (1, -2, 3), worked on paper.
func TestLinearSystems(t *testing.T) {
	want := Fractions{1, -2, 3}
	x, ok := solve(square{{0, 2, 1}, {1, -2, -3}, {-1, 1, 2}}, Fractions{-1, -4, 3})
	if !ok {
		t.Error("a regular system is called singular")
	}
	closeTo(t, "with a zero to pivot away", x, want)
	x, _ = solve(square{{4, -2, 1}, {3, 6, -4}, {2, 1, 8}}, Fractions{11, -21, 24})
	closeTo(t, "full", x, want)
	if _, ok := solve(square{{1, 2, 3}, {2, 4, 6}, {1, 1, 1}}, Fractions{1, 2, 3}); ok {
		t.Error("a singular system is solved")
	}
	// 4 2 1; 2 5 3; 1 3 6 is positive definite.
	x, definite := solveDefinite(square{{4, 2, 1}, {2, 5, 3}, {1, 3, 6}}, 0, Fractions{3, 1, 13})
	if !definite {
		t.Error("a definite matrix is refused")
	}
	closeTo(t, "definite", x, want)
	x, _ = solveDefinite(square{{3, 2, 1}, {2, 4, 3}, {1, 3, 5}}, 1, Fractions{3, 1, 13})
	closeTo(t, "damped by one", x, want)
	if _, definite := solveDefinite(square{{1, 2, 0}, {2, 1, 0}, {0, 0, 1}}, 0, Fractions{}); definite {
		t.Error("an indefinite matrix is taken")
	}
}

// An approach of which each step is a share of the one before goes 1/(1 - share)
// steps; at most four, at least a quarter.
func TestStretch(t *testing.T) {
	last := Fractions{0.2, -0.1, 0.4}
	for share, want := range map[float64]float64{0: 1, 0.5: 2, 0.75: 4, 0.9: 4, -1: 0.5, -3: 0.25, -8: 0.25} {
		step := last
		for i := range step {
			step[i] *= share
		}
		if got := stretch(&step, &last); math.Abs(got-want) > 1e-12 {
			t.Errorf("share %g: %g steps, want %g", share, got, want)
		}
	}
}

// The secant method takes few evaluations on a function that rises by some per cent
// a kelvin, and gives up on one that falls.
func TestRisingRoot(t *testing.T) {
	for _, rootK := range []float64{260, 350, 430} {
		calls := 0
		got, ok := risingRoot(func(tK float64) float64 { calls++; return 5000/rootK - 5000/tK }, 0)
		if !ok || math.Abs(got-rootK) > 1e-6 || calls > 12 {
			t.Errorf("%.9g K after %d evaluations, %v; want %g", got, calls, ok, rootK)
		}
		calls = 0
		if got, ok := risingRoot(func(tK float64) float64 { calls++; return 5000/rootK - 5000/tK }, rootK+1); !ok || math.Abs(got-rootK) > 1e-6 || calls > 7 {
			t.Errorf("from nearby: %.9g K after %d evaluations, %v", got, calls, ok)
		}
	}
	for _, rootK := range []float64{260, 350, 430} { // a guess as close as the last boiling point of a pot: its slope is another one
		for _, offK := range []float64{1e-3, 3e-6, 9e-7, -9e-7, 2e-8, 0} {
			got, ok := risingRoot(func(tK float64) float64 { return 5000/rootK - 5000/tK }, rootK+offK)
			if !ok || math.Abs(got-rootK) > 1e-8 {
				t.Errorf("from %g K beside it: %.12g K, %v; want %g", offK, got, ok, rootK)
			}
		}
	}
	if _, ok := risingRoot(func(tK float64) float64 { return 300 - tK + math.Sin(tK) }, 350); ok {
		t.Error("a root of a falling function")
	}
}

// Trials are kept by their distance, the lowest first, and the extremes are told
// where they are far apart.
func TestTrialsAreKeptInOrder(t *testing.T) {
	var u unstableTrials
	u.add(Fractions{0.5, 0.3, 0.2}, -0.1)
	if _, _, ok := u.extremes(); ok {
		t.Error("one trial has extremes")
	}
	u.add(Fractions{0.9, 0.05, 0.05}, -0.3)
	u.add(Fractions{0.1, 0.5, 0.4}, -0.2)
	if u.n != 3 || u.distance[0] != -0.3 || u.distance[1] != -0.2 || u.distance[2] != -0.1 {
		t.Errorf("%v", u.distance)
	}
	wet, dry, ok := u.extremes()
	if !ok || wet[InWater] != 0.9 || dry[InWater] != 0.1 {
		t.Errorf("%v, %v, %v", wet, dry, ok)
	}
	z := Fractions{0.2, 0.3, 0.5}
	closeTo(t, "nearly pure water", trialFrom(&z, InWater), Fractions{0.992, 0.003, 0.005})
	closeTo(t, "half water", trialFrom(&z, 3), Fractions{0.6, 0.15, 0.25})
}

// One mole of feed (0.5, 0.3, 0.2) with ratios 4, 1, 1/4: on paper the share s solves
// 1.5/(1 + 3 s) = 0.15/(1 - 0.75 s), so s = 1.35/1.575.
func TestShareOfTheSecondLayer(t *testing.T) {
	z, k := Fractions{0.5, 0.3, 0.2}, Fractions{4, 1, 0.25}
	s, ok := rachfordRice(&z, &k)
	if left := 0.5*3/(1+3*s) + 0.2*-0.75/(1-0.75*s); !ok || math.Abs(left) > 1e-9 {
		t.Errorf("share %.12g leaves %g, %v", s, left, ok)
	}
	if math.Abs(s-1.35/1.575) > 1e-9 {
		t.Errorf("share %.12g, want %.12g", s, 1.35/1.575)
	}
	if got := lifted(Fractions{2, 2, 0}); math.Abs(got[0]-0.5) > 1e-15 || !(got[2] > 0) {
		t.Errorf("%v", got)
	}
}
