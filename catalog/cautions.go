package catalog

import "parch/internal/document"

// stepKinds are the kinds of step that a caution may speak of, those to come included.
var stepKinds = []string{"settle", "trap", "forerun", "carrier", "salt", "soak", "column", "reactive", "buy"}

func (s *shelf) readCautions() {
	classes := map[string]bool{}
	for pair := range s.cat.Matrix {
		classes[pair[0]] = true
	}
	seen := map[string]bool{}
	s.each(cautionsFile, func(list *document.Node) {
		for _, n := range list.Items() {
			s.readCaution(n, classes, seen)
		}
	})
}

func (s *shelf) readCaution(n *document.Node, classes, seen map[string]bool) {
	f := n.Map(with("code", "level", "text", "steps", "agents", "classes", "solvents", "peroxide", "flammable", "reclaimed", "reduced pressure")...)
	c := Caution{
		Code: f.Need("code").Text(), Level: f.Need("level").OneOf("info", "caution", "danger"), Text: f.Need("text").Text(),
		Steps: known(f.Get("steps"), stepKinds), Agents: keysIn(f.Get("agents"), s.cat.Agents),
		Classes: keysIn(f.Get("classes"), classes), Solvents: keysIn(f.Get("solvents"), s.cat.Solvents),
		Peroxide: f.Get("peroxide").Bool(), Flammable: f.Get("flammable").Bool(), Reclaimed: f.Get("reclaimed").Bool(),
		ReducedPressure: f.Get("reduced pressure").Bool(),
		Origin:          s.origin(f),
	}
	if seen[c.Code] {
		f.Get("code").Fail("%q stands twice", c.Code)
	}
	seen[c.Code] = true
	s.cat.Cautions = append(s.cat.Cautions, c)
}
