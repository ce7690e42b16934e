package search

import "parch/internal/routes"

// aimStep is the factor from aim to aim where it is looked for how far under the limit a
// miss makes it pay to go.
const aimStep = 0.85

// insured lowers the aim of a sure run as far as that costs less than the misses it
// saves. Its score holds what missing is expected to cost.
func (l *lifting) insured(start, sure trial) (trial, error) {
	best, err := l.withMiss(sure)
	if err != nil {
		return best, err
	}
	left := sure.run.WaterOut
	for aim := left * 1e6 * aimStep; aim > routes.LeastAimMgPerKg; aim *= aimStep {
		found, err := l.aimed(start, significant(aim, 2))
		if err != nil {
			return best, err
		}
		if found.run.Route == nil || found.score >= best.score || found.run.WaterOut >= left {
			break // the lower the aim, the more it costs
		}
		left = found.run.WaterOut
		if ok, err := l.Sure(&found.run); err != nil {
			return best, err
		} else if !ok { // too dry
			continue
		}
		if found, err = l.withMiss(found); err != nil {
			return best, err
		}
		if found.score < best.score {
			best = found
		}
	}
	return best, nil
}

func (l *lifting) withMiss(t trial) (trial, error) {
	miss, err := l.Miss(&t.run)
	t.score += miss
	return t, err
}
