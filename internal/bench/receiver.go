package bench

import (
	"fmt"
	"maps"
	"slices"
	"strings"

	"parch/catalog"
	"parch/internal/quantity"
	"parch/internal/routes"
)

// returns finds the receiver of a trap by its key, or by the layer that it gives back.
func (r *reader) returns() {
	typed, ok := r.flags["returns"]
	if !ok {
		return
	}
	word := strings.ToLower(strings.TrimSpace(typed))
	var keys []string
	for _, a := range receivers(r.cat) {
		keys = append(keys, a.Key)
		if a.Key == word {
			r.q.Receiver = a
			return
		}
	}
	if r.q.Receiver = receiverFor(r.cat, word); r.q.Receiver == nil {
		r.mistake(fmt.Sprintf("--returns: %s is no return of a receiver", quantity.Quote(typed)), "light, heavy, either, or a receiver of the catalog: "+strings.Join(keys, ", "))
	}
}

// receivers of the catalog, by key.
func receivers(c *catalog.Catalog) (all []*catalog.Apparatus) {
	for _, key := range slices.Sorted(maps.Keys(c.Apparatus)) {
		if a := c.Apparatus[key]; a.Kind == "receiver" {
			all = append(all, a)
		}
	}
	return all
}

// receiverFor a return (light, heavy or either): one that is made before one that is
// put together; nil where there is none.
func receiverFor(c *catalog.Catalog, returns string) (first *catalog.Apparatus) {
	for _, a := range receivers(c) {
		if a.Returns == returns && (first == nil || first.SetUp != nil && a.SetUp == nil) {
			first = a
		}
	}
	return first
}

func (q *Question) receiverKey() string {
	if q.Receiver == nil {
		return ""
	}
	return q.Receiver.Key
}

// otherReceivers says how to ask for a receiver that gives back the layer that is needed.
func otherReceivers(k *routes.Case, wrong *routes.WrongReturn) string {
	other := "light"
	if wrong.Returns == other {
		other = "heavy"
	}
	return fmt.Sprintf("a receiver that does: --returns %s, or --returns either", other)
}
