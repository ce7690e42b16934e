package bench

import (
	"errors"
	"fmt"
	"math"
	"strings"

	"parch/catalog"
	"parch/internal/job"
	"parch/internal/quantity"
	"parch/internal/routes"
	"parch/internal/steps"
	"parch/internal/study"
)

// Answer is what a step does, with what it rests on.
type Answer struct {
	routes.Single
	Question *Question
	Case     *routes.Case

	Advice   []Advice
	Warnings []string
	Basis    []Basis
	Cautions []catalog.Caution
	Sources  []catalog.Source
}

// Advice is a line for the bench under a short heading.
type Advice struct{ Topic, Text string }

// Refusal is a step that is not run on the lot.
type Refusal struct {
	Reason, Hint string
	Source       string // id of a source, or ""
	Confidence   catalog.Confidence
}

func (r *Refusal) Error() string { return r.Reason }

// Ask carries the step out. The error is a Refusal where matrix, peroxides or
// physics forbid it, and a Mistake where what was asked has no physical sense.
func Ask(c *catalog.Catalog, q *Question) (*Answer, error) {
	k, err := newCase(c, q)
	if err != nil {
		return nil, err
	}
	stage := q.stage()
	if refusal := refuse(k, q, stage); refusal != nil {
		return nil, refusal
	}
	a := &Answer{Question: q, Case: k, Single: routes.Single{Outcome: steps.Outcome{Kind: stage.Kind, Agent: stage.Agent}}}
	if a.Single, err = k.Single(a.asked()); err != nil {
		return nil, explained(k, q, err)
	}
	if wetter := a.wetter(); wetter != nil {
		return nil, wetter
	}
	var ofLot []string
	a.Cautions, ofLot = study.Remarks(k, routes.Route{stage}, a.Outcome)
	a.advise()
	a.warn(ofLot)
	a.cite()
	return a, nil
}

// undated stands for the date of a peroxide reading, which a command line does
// not give.
const undated = "unstated date"

// newCase makes a job of one lot.
func newCase(c *catalog.Catalog, q *Question) (*routes.Case, error) {
	j := &job.Job{Site: job.Site{
		RoomK: q.TempK, PressurePa: q.PressurePa, ReceiverK: q.ReceiverK, Humidity: c.Practice["site-humidity"].SI,
		AttendedSecondsPerDay: c.Practice["site-attended-per-day"].SI, PeroxideLimitKgPerM3: c.Practice["site-peroxide-limit"].SI,
		KarlFischer: "coulometric", Cooling: job.Tap,
	}}
	lot := job.Lot{
		Reclaimed: q.Kind.Heated(), // it may be: nothing is known of the lot
		Name:      q.Solvent.Name, Solvent: q.Solvent.Key, BatchM3: q.VolumeM3, BatchesPerYear: 1, Water: q.Water, FreeWaterM3: q.FreeWaterM3,
		Target: q.Goal, HeaterW: q.HeaterW, VesselHeightM: q.HeightM,
		SieveHistory: q.Activation.Key, SieveHistoryK: q.Activation.OvenK, ResidualLoading: q.Activation.KgPerKg, ResidualStated: q.Activation.Stated,
	}
	if !given(q.Goal) {
		lot.Target = 1 // none: nothing has to be shown
	}
	if given(q.PeroxideKgPerM3) {
		lot.Peroxide = &job.Peroxide{ReadingKgPerM3: q.PeroxideKgPerM3, Date: undated}
	}
	if q.Carrier != nil {
		j.Accept.Carriers = []string{q.Carrier.Key}
	}
	if q.Agent != nil {
		if v, ok := c.Verdict(q.Solvent, q.Agent.Key); ok && v.Allowed() {
			j.Accept.Agents = []string{q.Agent.Key} // it was asked for by name
		}
	}
	return routes.NewCase(j, lot, c)
}

func refuse(k *routes.Case, q *Question, stage routes.Stage) error {
	if q.Agent != nil {
		if v, ok := k.Catalog.Verdict(q.Solvent, q.Agent.Key); !ok || !v.Allowed() {
			return forbidden(q, v, ok)
		}
	}
	if refusal := peroxidesOfCarrier(k, q); refusal != nil {
		return refusal
	}
	reason, source := k.Refused(stage)
	switch {
	case reason == "":
		return nil
	case strings.HasPrefix(reason, "test first") && !given(q.PeroxideKgPerM3):
		h := q.Solvent.Hazards
		return &Refusal{
			Reason: fmt.Sprintf("test first: %s forms peroxides (class %s) and no reading is given", q.Solvent.Name, h.PeroxideClass),
			Hint:   fmt.Sprintf(`give a fresh reading under the limit of %s with --peroxide "0 mg/L"`, quantity.FormatConcentration(k.Job.Site.PeroxideLimitKgPerM3)),
			Source: source, Confidence: h.Confidence,
		}
	}
	refusal := &Refusal{Reason: reason, Source: source}
	if q.Kind == steps.Trap && strings.Contains(reason, "no second layer") {
		refusal.Hint = "water that does not settle is drawn off (parch step forerun) or boiled out with a carrier (--carrier)"
	}
	return refusal
}

// forbidden says why a pair of solvent and agent is refused.
func forbidden(q *Question, v catalog.Verdict, known bool) error {
	pair := q.Agent.Name + " with " + q.Solvent.Name
	if !known {
		return &Refusal{Reason: "no data on " + pair + ": a pair that is not known is not tried"}
	}
	r := &Refusal{Reason: fmt.Sprintf("%s is %s: %s", pair, v.Word, v.Reason), Hint: "there is no way to override this", Source: v.Source, Confidence: v.Confidence}
	if v.Word == "unsuitable" {
		r.Hint = fmt.Sprintf(`where it is wanted all the same, a job file names it: accept: {unsuitable: [%s]}`, q.Agent.Key)
	}
	return r
}

// wetter refuses a soak of a solvent that makes more water on the sorbent than that
// takes up.
func (a *Answer) wetter() error {
	in, out := a.In.Water(), a.Out.Water()
	if out <= in || a.Balance.WaterMadeKg == 0 {
		return nil
	}
	r := &Refusal{
		Reason: fmt.Sprintf("%s condenses on %s and makes more water than that takes up: %s go in, %s would come out after %s h", a.Question.Solvent.Name, a.Question.Sorbent(),
			quantity.FormatWater(in), quantity.FormatWater(out), quantity.Significant(a.Course[len(a.Course)-1].Hours, 3)),
		Hint: "over this dose no time leaves less than went in; a trap, a salt or a dry grade may",
	}
	if best := a.Figure("driest after"); best > 0 {
		r.Hint = fmt.Sprintf("it is driest after %s h: ask for that time, and decant then", quantity.Significant(best, 2))
	}
	return r
}

// explained tells what has no physical sense from what physics refuses.
func explained(k *routes.Case, q *Question, err error) error {
	var wrong *routes.WrongReturn
	switch {
	case errors.Is(err, steps.ErrWetSieve) && q.Activation.Borrowed:
		return &Refusal{Reason: err.Error(), Hint: fmt.Sprintf(`what %s holds after activation is not known and is taken from zeolites; where it is known, state it with --activated "residual ..."`, q.Agent.Plain())}
	case errors.Is(err, routes.ErrWasteful):
		return &Refusal{Reason: err.Error(), Hint: lessWasteful(k, q)}
	case errors.As(err, &wrong):
		return &Refusal{Reason: wrong.Error(), Hint: otherReceivers(k, wrong)}
	case errors.Is(err, steps.ErrNoSense), errors.Is(err, routes.ErrAsked), errors.Is(err, steps.ErrNoColumn):
		return &Mistake{Message: err.Error()}
	case errors.Is(err, steps.ErrPreDry):
		return &Refusal{Reason: err.Error(), Source: q.Agent.Reaction.Feed.Source, Hint: "a salt, a trap or a sieve takes the bulk of the water first"}
	case errors.Is(err, routes.ErrRefused):
		return &Refusal{Reason: err.Error()}
	}
	return err
}

// Missed says that a step ends above what was asked of it, and why, or nothing.
func (a *Answer) Missed() string {
	if limit := a.Case.Catalog.Practice["carrier-limit"].SI; a.Out.Carrier() > limit*(1+1e-3) {
		return fmt.Sprintf("%s of %s is left in the product, the limit is %s", quantity.FormatWater(a.Out.Carrier()), a.Carrier, quantity.FormatWater(limit))
	}
	if !given(a.Question.Goal) || a.Out.Water() <= a.Question.Goal*(1+1e-6) {
		return ""
	}
	return fmt.Sprintf("%s is not reached: %s", quantity.FormatWater(a.Question.Goal), a.WhyText)
}

// Instead says what would reach what a step misses, or nothing.
func (a *Answer) Instead() string {
	if a.Kind != steps.Forerun {
		return ""
	}
	if better := sparing(a.Case, a.Question); better != "" {
		return better
	}
	return noColumn
}

// Spans reports whether a band of the outlet is known.
func (a *Answer) Spans() bool {
	return !math.IsNaN(a.Low) && !math.IsNaN(a.High) && a.High > a.Low*(1+1e-6)
}
