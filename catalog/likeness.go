package catalog

import "maps"

// Whoever calls sodium by another name has sodium in hand. An agent of the user's own
// shares the dangers of a built-in agent with the same formula, and of the one that
// stands for its kind: sodium for alkali metals, magnesium for other metals, calcium
// hydride for hydrides, potassium hydroxide for alkali hydroxides (assumption).

// likes are the keys of the agents whose dangers an own agent shares.
func (s *shelf) likes(own *Agent) (keys []string) {
	count, err := parseFormula(own.Formula)
	if err != nil {
		return nil
	}
	kind := count.kindOfAgent()
	for _, key := range keysOf(s.cat.Agents) {
		agent := s.cat.Agents[key]
		if key == own.Key || agent.Formula == "" {
			continue
		}
		if its, err := parseFormula(agent.Formula); err == nil && (key == kind || maps.Equal(its.lowest(), count.lowest())) {
			keys = append(keys, key)
		}
	}
	return keys
}

// kindOfAgent is the built-in agent that stands for its kind, or "".
func (a atoms) kindOfAgent() string {
	alkali := a["Na"] + a["K"]
	metal := alkali + a["Mg"] + a["Ca"] + a["Al"]
	all := 0
	for _, n := range a {
		all += n
	}
	switch {
	case metal == 0:
		return ""
	case alkali == all:
		return "sodium"
	case metal == all:
		return "magnesium"
	case metal+a["B"]+a["H"] == all:
		return "calcium-hydride"
	case alkali > 0 && a["O"] == alkali && a["H"] == alkali && 3*alkali == all:
		return "potassium-hydroxide"
	}
	return ""
}

// lowest are the atoms in lowest terms: P2O5 is P4O10.
func (a atoms) lowest() atoms {
	divisor := 0
	for _, n := range a {
		for divisor, n = n, divisor; n != 0; {
			divisor, n = n, divisor%n
		}
	}
	out := atoms{}
	for element, n := range a {
		out[element] = n / divisor
	}
	return out
}

// checkLikeness holds own agents to the dangers that they share, in every solvent.
func (s *shelf) checkLikeness() {
	for _, key := range keysOf(s.cat.Agents) {
		agent := s.cat.Agents[key]
		if !agent.Own {
			continue
		}
		for _, like := range s.likes(agent) {
			s.checkLike(agent, like)
		}
	}
}

func (s *shelf) checkLike(own *Agent, like string) {
	for _, key := range keysOf(s.cat.Solvents) {
		solvent := s.cat.Solvents[key]
		its, known := s.cat.Verdict(solvent, like)
		if v, said := s.cat.Verdict(solvent, own.Key); known && said && its.Word == "dangerous" && v.Word != "dangerous" {
			s.agentTops[own.Key].Fail("%s is dangerous with %s, as %s is (%s): its matrix has to say so", own.Formula, solvent.Name, like, its.Reason)
			return
		}
	}
}
