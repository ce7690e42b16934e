package listing

import (
	"fmt"
	"strings"

	"parch/catalog"
)

// ownShown is how many entries of a kind a sentence names.
const ownShown = 8

// Own says in a sentence what of the catalog is the user's own; "" where nothing is.
func Own(c *catalog.Catalog) string {
	if len(c.Own) == 0 {
		return ""
	}
	var kinds []string
	for _, k := range Of(c) {
		var keys []string
		for _, e := range k.Entries {
			if e.Own {
				keys = append(keys, e.Key)
			}
		}
		if len(keys) == 0 || k.Name == "sources" {
			continue
		}
		more := ""
		if len(keys) > ownShown {
			more, keys = fmt.Sprintf(" and %d more", len(keys)-ownShown), keys[:ownShown]
		}
		kinds = append(kinds, k.Name+" "+strings.Join(keys, ", ")+more)
	}
	return fmt.Sprintf("own data of %s go before the built-in catalog: %s", strings.Join(c.Own, ", "), strings.Join(kinds, "; "))
}
