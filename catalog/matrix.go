package catalog

import "parch/internal/document"

var verdicts = []string{"ok", "caution", "unsuitable", "dangerous"}

// readMatrix reads who may meet whom. The file may speak of classes and solvents
// that the catalog does not hold.
func (s *shelf) readMatrix() {
	s.cat.Matrix = map[[2]string]Verdict{}
	s.each(matrixFile, func(n *document.Node) {
		f := n.Map("common", "classes", "solvents")
		common := s.common(f.Get("common"))
		for _, group := range []*document.Node{f.Get("classes"), f.Get("solvents")} {
			for _, class := range group.Entries() {
				for _, row := range class.Node.Entries() {
					if s.cat.Agents[row.Key] == nil {
						row.Node.Fail("%q is not an agent known here%s", row.Key, row.Node.Offer(row.Key, keysOf(s.cat.Agents)))
					}
					s.enter(class.Key, row, s.verdict(row.Node, common))
				}
			}
		}
	})
	s.checkLikeness()
}

// enter sets a verdict. Own data may make a built-in one stricter; a dangerous
// pair stays dangerous whatever they say.
func (s *shelf) enter(who string, row document.Entry, v Verdict) {
	before, known := s.cat.Matrix[[2]string{who, row.Key}]
	if solvent := s.cat.Solvents[who]; !known && solvent != nil {
		before, known = s.cat.Matrix[[2]string{solvent.Class, row.Key}]
	}
	if s.owning && known && before.Word == "dangerous" && v.Word != "dangerous" {
		row.Node.Fail("%s with %s is dangerous (%s) and cannot be accepted; own data may make a verdict stricter, not this one milder", who, row.Key, before.Reason)
		return
	}
	s.cat.Matrix[[2]string{who, row.Key}] = v
}

// verdict reads {word: reason}, with an origin of its own where the common one does not hold.
func (s *shelf) verdict(n *document.Node, common *Origin) Verdict {
	f := n.Map(with(verdicts...)...)
	v := Verdict{Origin: s.originOr(f, common)}
	for _, word := range verdicts {
		if !f.Has(word) {
			continue
		}
		if v.Word != "" {
			n.Fail("says both %s and %s", v.Word, word)
		}
		v.Word, v.Reason = word, f.Get(word).Text()
	}
	if v.Word == "" && n.IsMap() {
		n.Fail("gives no verdict; write one of ok, caution, unsuitable, dangerous with the reason")
	}
	return v
}
