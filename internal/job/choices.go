package job

import (
	"maps"
	"slices"
	"strings"

	"parch/catalog"
	"parch/internal/document"
	"parch/internal/quantity"
)

// ownCatalogs checks the names of own data files and that they were laid over the
// catalog (see Catalog).
func (r *reader) ownCatalogs(n *document.Node) {
	if n == nil {
		return
	}
	if !n.IsList() {
		r.ownCatalog(n)
		return
	}
	for _, item := range n.Items() {
		r.ownCatalog(item)
	}
}

func (r *reader) ownCatalog(n *document.Node) {
	name := r.label(n)
	if name == "" {
		return
	}
	path := besideJob(r.job.File, name)
	if !slices.ContainsFunc(r.cat.Own, func(own string) bool { return sameFile(own, path) }) {
		r.note(n, "not read here: the built-in catalog is used")
	}
}

func (r *reader) equipment(n *document.Node) {
	known := slices.Sorted(maps.Keys(r.cat.Apparatus))
	lines := map[string]int{}
	for _, entry := range listOf(n) {
		f := entry.Map("item", "owned")
		item := r.known(f.Need("item"), known, "an apparatus of the catalog")
		owned := f.Need("owned").Bool()
		if item == "" || r.twice(entry, item, lines) {
			continue
		}
		r.job.Equipment = append(r.job.Equipment, Equipment{Item: item, Owned: owned})
	}
}

func (r *reader) stock(n *document.Node) {
	lines := map[string]int{}
	for _, entry := range listOf(n) {
		f := entry.Map("item", "on hand", "safety stock")
		item := r.known(f.Need("item"), r.storedItems(), "an agent or a solvent of the catalog")
		stock := Stock{Item: item}
		var ok bool
		stock.OnHandKg, ok = r.stored(f.Need("on hand"), item)
		if safety := f.Get("safety stock"); safety != nil {
			stock.SafetyKg, _ = r.stored(safety, item)
		}
		if item == "" || !ok || r.twice(entry, item, lines) {
			continue
		}
		r.job.Stock = append(r.job.Stock, stock)
	}
}

// stored reads kg on the shelf. A solvent may be given by volume too, it weighs
// what it weighs at room temperature.
func (r *reader) stored(n *document.Node, item string) (kg float64, ok bool) {
	solvent := r.cat.Solvents[strings.TrimSuffix(item, "-dry")]
	if solvent != nil && n.Is(quantity.Volume) {
		m3, ok := r.measure(n, quantity.Volume, between(0, 1e3, "0 L to 1000 m3"))
		return m3 * solvent.Pure.DensityKgPerM3.At(r.job.Site.RoomK), ok
	}
	return r.measure(n, quantity.Mass, between(0, 1e6, "0 kg to 1000000 kg"))
}

// storedItems lists what may lie on the shelf: agents, solvents and their dry grades.
func (r *reader) storedItems() []string {
	items := r.agentKeys()
	for _, key := range r.solventKeys() {
		items = append(items, key, key+"-dry")
	}
	return items
}

func (r *reader) accept(n *document.Node) {
	f := n.Map("carriers", "agents", "unsuitable")
	r.job.Accept = Accept{
		Carriers:   r.words(f.Get("carriers"), slices.Sorted(maps.Keys(r.cat.Carriers)), "a carrier"),
		Agents:     r.words(f.Get("agents"), r.agentKeys(), "a drying agent"),
		Unsuitable: r.words(f.Get("unsuitable"), r.agentKeys(), "a drying agent"),
	}
}

func (r *reader) exclude(n *document.Node) {
	f := n.Map("steps", "agents", "hazards")
	r.job.Exclude = Exclude{
		Steps:   r.words(f.Get("steps"), stepKinds, "a step"),
		Agents:  r.words(f.Get("agents"), r.agentKeys(), "a drying agent"),
		Hazards: r.words(f.Get("hazards"), Hazards, "a hazard known here"),
	}
}

// warnDangerous says that naming an agent does not allow a dangerous pair.
func (r *reader) warnDangerous(n *document.Node) {
	told := map[[2]string]bool{}
	for _, agent := range slices.Concat(r.job.Accept.Agents, r.job.Accept.Unsuitable) {
		for _, lot := range r.job.Lots {
			s, pair := r.cat.Solvents[lot.Solvent], [2]string{lot.Solvent, agent}
			if s == nil || told[pair] {
				continue
			}
			told[pair] = true
			if v, ok := r.cat.Verdict(s, agent); ok && v.Word == "dangerous" {
				r.note(n, "%s with %s is dangerous and stays excluded: %s", agent, lot.Solvent, v.Reason)
			}
		}
	}
}

// listOf reads a list whose key may be left out.
func listOf(n *document.Node) []*document.Node {
	if n == nil {
		return nil
	}
	return n.Items()
}

// words reads a list of known words, each once.
func (r *reader) words(n *document.Node, known []string, what string) []string {
	var words []string
	lines := map[string]int{}
	for _, item := range listOf(n) {
		if word := r.known(item, known, what); word != "" && !r.twice(item, word, lines) {
			words = append(words, word)
		}
	}
	return words
}

// known reads one of the known words and offers the nearest otherwise.
func (r *reader) known(n *document.Node, known []string, what string) string {
	word := n.Text()
	if word == "" || slices.Contains(known, word) {
		return word
	}
	offer := n.Offer(word, known)
	if offer == "" && len(known) <= 20 {
		offer = "; allowed: " + strings.Join(known, ", ")
	}
	n.Fail("%s is not %s%s", quantity.Quote(word), what, offer)
	return ""
}

func (r *reader) twice(n *document.Node, item string, lines map[string]int) bool {
	if item == "" {
		return false
	}
	if line, twice := lines[item]; twice {
		n.Fail("%q is already given on line %d", item, line)
		return true
	}
	lines[item] = n.Line()
	return false
}

// agentKeys lists the agents of the catalog and those of its matrix, sorted.
func (r *reader) agentKeys() []string {
	keys := map[string]bool{}
	for key := range r.cat.Agents {
		keys[key] = true
	}
	for pair := range r.cat.Matrix {
		keys[pair[1]] = true
	}
	return slices.Sorted(maps.Keys(keys))
}

// water is the key of water in the catalog.
const water = "water"

// solvent finds a solvent by key, name, alias or CAS number; case does not count.
func (r *reader) solvent(n *document.Node) *catalog.Solvent {
	typed := n.Text()
	if typed == "" {
		return nil
	}
	var known []string
	for _, key := range slices.Sorted(maps.Keys(r.cat.Solvents)) {
		s := r.cat.Solvents[key]
		switch {
		case !s.IsCalled(typed):
		case key == water:
			n.Fail("water is what is taken out; name the solvent it is in")
			return nil
		default:
			return s
		}
		if key != water {
			known = append(known, s.Words()...)
		}
	}
	if wrong := r.cat.MistypedCAS(typed); wrong != "" {
		n.Fail("%s", wrong)
		return nil
	}
	offer := n.Offer(typed, known)
	if offer == "" {
		offer = "; solvents: " + strings.Join(r.solventKeys(), ", ")
	}
	n.Fail("%s is not a solvent of the catalog%s", quantity.Quote(typed), offer)
	return nil
}

// solventKey is the key of the solvent that goes by a name, or "".
func (r *reader) solventKey(name string) string {
	for _, key := range r.solventKeys() {
		if r.cat.Solvents[key].IsCalled(name) {
			return key
		}
	}
	return ""
}

func (r *reader) solventKeys() []string {
	var keys []string
	for _, key := range slices.Sorted(maps.Keys(r.cat.Solvents)) {
		if key != water {
			keys = append(keys, key)
		}
	}
	return keys
}
