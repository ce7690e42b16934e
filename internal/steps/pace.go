package steps

import "math"

// pace chooses the steps of a march from the errors of the last ones, and closes
// in on the end once a step has gone past it.
type pace struct {
	step, least float64
	done        float64 // progress so far; 1 at the end

	shortened    bool    // since the last step that was taken
	past         float64 // from here, a step that is known to go past the end; 0: none
	progressPast float64 // progress there
}

// Factors of a step on the next one. The error grows with the fifth power of a step.
const (
	mostStretch = 2.5
	mostShrink  = 0.2
	safety      = 0.7
	power       = 0.2
)

// shorten after a step whose error is off times what is allowed.
func (p *pace) shorten(off float64) {
	p.step *= math.Max(mostShrink, safety*math.Pow(off, -power))
	p.shortened = true
}

// overshot after a step past the end.
func (p *pace) overshot(progress float64) {
	p.past, p.progressPast = p.step, progress
	p.aim()
}

// aim at the end between here and what is known to lie past it: in proportion to
// the progress, or half-way where that jumps.
func (p *pace) aim() {
	share := (1 - p.done) / (p.progressPast - p.done)
	if math.IsInf(p.progressPast, 1) {
		share = 0.5
	}
	p.step = p.past * math.Max(0.02, math.Min(0.98, share))
}

// accepted after a step that was taken, in which the pot became so many times quicker:
// where a component is used up at a steady rate, the same error needs ever shorter steps.
func (p *pace) accepted(off, progress, quicker, longest float64) {
	taken := p.step
	most := mostStretch
	if p.shortened {
		most = 1
	}
	stretch := safety * math.Pow(math.Max(off, 1e-9), -power)
	p.step = math.Min(taken*math.Min(most, stretch)/math.Max(1, quicker), longest)
	p.done, p.shortened = progress, false
	if p.past -= taken; p.past > p.least { // else the end is not where it was taken to be
		free := p.step
		p.aim()
		p.step = math.Min(p.step, free)
	}
}
