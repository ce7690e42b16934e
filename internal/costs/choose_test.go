package costs

import (
	"math"
	"math/rand/v2"
	"testing"
	"time"
)

// exhaustive tries every number of every pack that can be of use.
func exhaustive(need int64, offers []offer) int64 {
	best := int64(math.MaxInt64)
	var try func(at int, rest, cost int64)
	try = func(at int, rest, cost int64) {
		if rest <= 0 {
			best = min(best, cost)
		}
		if at == len(offers) {
			return
		}
		o := offers[at]
		try(at+1, rest, cost)
		most := max((max(need, 0)+o.content-1)/o.content, o.minimum)
		for n := o.minimum; n <= most; n++ {
			try(at+1, rest-n*o.content, cost+n*o.price)
		}
	}
	try(0, need, 0)
	return best
}

func paid(counts []int64, offers []offer) (content, price int64) {
	for i, n := range counts {
		content += n * offers[i].content
		price += n * offers[i].price
	}
	return content, price
}

// Small random lists against every combination.
func TestCheapestAgainstEveryCombination(t *testing.T) {
	rng := rand.New(rand.NewPCG(1, 2))
	for trial := range 10_000 {
		offers := make([]offer, 1+rng.IntN(4))
		for i := range offers {
			offers[i] = offer{content: 1 + rng.Int64N(30), price: rng.Int64N(60), minimum: 1 + rng.Int64N(3)}
		}
		need := rng.Int64N(60)
		counts, proven := cheapest(need, offers)
		content, price := paid(counts, offers)
		for i, n := range counts {
			if n < 0 || n > 0 && n < offers[i].minimum {
				t.Fatalf("trial %d: %d of %+v", trial, n, offers[i])
			}
		}
		if want := exhaustive(need, offers); !proven || content < need || price != want {
			t.Fatalf("trial %d: need %d, offers %+v: %v costs %d, want %d (proven %v)", trial, need, offers, counts, price, want, proven)
		}
	}
}

// Twelve sizes, needs up to 10 000 kg in millionths of a kilogram, with discounts
// for size, with nearly none and with none at all, awkward sizes included.
func TestCheapestIsQuick(t *testing.T) {
	rng := rand.New(rand.NewPCG(3, 4))
	slowest := time.Duration(0)
	for trial := range 600 {
		offers := make([]offer, 12)
		for i := range offers {
			size := math.Exp(rng.Float64()*math.Log(400)) / 2
			perKg := 40.0
			switch trial % 4 {
			case 0:
				perKg *= math.Pow(size, -0.5)
			case 1:
				perKg *= math.Pow(size, -0.02)
			case 2:
				perKg *= 0.97 + 0.06*rng.Float64()
			}
			decimals := []float64{1e6, 1e5, 1e3, 1}[rng.IntN(4)] // whole to full millionths
			offers[i] = offer{
				content: int64(math.Ceil(size*1e6/decimals) * decimals),
				price:   int64(math.Ceil(size*perKg*100)) * 1e4,
				minimum: 1,
			}
		}
		need := int64(rng.Float64() * 1e10)
		took := time.Duration(math.MaxInt64)
		for range 5 { // the machine may be busy with other things
			started := time.Now()
			if _, proven := cheapest(need, offers); !proven {
				t.Fatalf("trial %d: not proven", trial)
			}
			took = min(took, time.Since(started))
		}
		slowest = max(slowest, took)
	}
	t.Logf("slowest of 600: %v", slowest)
	if limit := 10 * time.Millisecond; slowest > limit {
		t.Errorf("slowest %v, want under %v", slowest, limit)
	}
}
