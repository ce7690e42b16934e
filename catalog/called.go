package catalog

import (
	"slices"
	"strings"
)

// Words are the key, the name and the aliases of a solvent.
func (v *Solvent) Words() []string {
	return slices.Compact(append([]string{v.Key, v.Name}, v.Aliases...))
}

// calledAll are the words for a solvent and its CAS number.
func (v *Solvent) calledAll() []string {
	if v.CAS == "" {
		return v.Words()
	}
	return append(v.Words(), v.CAS)
}

// IsCalled reports whether a solvent goes by a name: its key, name, an alias or its CAS
// number. Case and blanks around it do not count.
func (v *Solvent) IsCalled(name string) bool {
	name = strings.TrimSpace(name)
	return slices.ContainsFunc(v.calledAll(), func(word string) bool { return strings.EqualFold(word, name) })
}
