package service

import (
	"cmp"
	"context"
	"errors"
	"fmt"
	"maps"
	"slices"
	"strconv"
	"strings"

	"github.com/google/uuid"

	"spanwright/api/auth"
	"spanwright/estimate/document"
	"spanwright/estimate/engine"
	"spanwright/estimate/job"
	"spanwright/estimate/money"
	"spanwright/estimate/pricing"
	"spanwright/estimate/ranges"
	"spanwright/estimate/ratebook"
	"spanwright/estimate/schedule"
	"spanwright/estimate/spread"
)

// NewPreview asks what multipliers would do to an estimate.
type NewPreview struct {
	Multipliers []PreviewMultiplier `json:"multipliers" minItems:"1" maxItems:"100" nullable:"false" doc:"changed and new ones; a multiplier of the estimate with this name, scope and subject is replaced"`
}

// PreviewMultiplier is a multiplier that is tried and not stored.
type PreviewMultiplier struct {
	Name       string         `json:"name" minLength:"1" maxLength:"80" doc:"multipliers of one name override each other by scope; those of different names multiply"`
	Scope      ratebook.Scope `json:"scope" enum:"member,group,family,scheme,project,rate book"`
	Subject    string         `json:"subject,omitempty" doc:"the mark, group or family that the scope names"`
	Categories []string       `json:"categories" minItems:"1" nullable:"false"`
	Spread     spread.Spread  `json:"spread"`
	Group      string         `json:"group,omitempty" doc:"correlation group"`
	Reason     string         `json:"reason,omitempty" doc:"needed only once it is stored"`
}

// Preview is an estimate under changed multipliers, beside itself. Nothing of it is
// stored.
type Preview struct {
	Caution     string              `json:"caution"`
	Estimate    uuid.UUID           `json:"estimate_id"`
	Currency    string              `json:"currency"`
	Confidence  document.Number     `json:"confidence" doc:"percentile that the contingency reaches"`
	Before      PreviewTotals       `json:"before" doc:"the estimate as it stands, its range from the same draws"`
	After       PreviewTotals       `json:"after"`
	Change      PreviewChange       `json:"change" doc:"after less before"`
	Categories  []PreviewCategory   `json:"categories" nullable:"false"`
	Multipliers []PreviewMultiplied `json:"multipliers" nullable:"false"`
	Replicates  int                 `json:"replicates"`
	Trials      int                 `json:"trials" doc:"per replicate"`
	StoredDraws bool                `json:"stored_draws" doc:"whether the draws were kept from an earlier preview"`
	Method      string              `json:"method"`
}

// PreviewTotals are the figures of one side. The base is exact, the range sampled.
type PreviewTotals struct {
	Base         money.Decimal         `json:"base"`
	AtConfidence money.Decimal         `json:"at_confidence"`
	Contingency  money.Decimal         `json:"contingency" doc:"at_confidence minus base; may be negative"`
	Mean         document.Number       `json:"mean"`
	MeanSE       document.Number       `json:"mean_standard_error"`
	SD           document.Number       `json:"standard_deviation"`
	BaseAt       document.Number       `json:"base_percentile" doc:"the probability that the base is not exceeded"`
	Percentiles  []document.Percentile `json:"percentiles" nullable:"false"`
}

// PreviewChange is what the multipliers do. It is surer than the standard errors of
// the two sides, because they share their draws.
type PreviewChange struct {
	Base         money.Decimal `json:"base"`
	AtConfidence money.Decimal `json:"at_confidence"`
	Contingency  money.Decimal `json:"contingency"`
}

// PreviewCategory is one category before and after.
type PreviewCategory struct {
	Category string        `json:"category"`
	Before   money.Decimal `json:"before"`
	After    money.Decimal `json:"after"`
	Change   money.Decimal `json:"change"`
}

// PreviewMultiplied says what became of a multiplier that was asked for.
type PreviewMultiplied struct {
	Assumption string `json:"assumption" doc:"id of its entry in a register"`
	Replaces   bool   `json:"replaces" doc:"whether the estimate has one of this name, scope and subject"`
	Acts       bool   `json:"acts" doc:"whether the cost depends on it"`
	Note       string `json:"note,omitempty"`
}

// Preview prices an estimate again under changed multipliers, exactly, and gives its
// range from stored draws: NotFound, Invalid, Busy, and Conflict where it was made by
// another engine. Nothing is stored.
func (s *Service) Preview(ctx context.Context, a Actor, id uuid.UUID, n NewPreview) (Preview, error) {
	head, err := read(ctx, s, a, auth.ReadProjects, func(tx Tx) (Estimate, error) { return tx.Estimate(ctx, id) })
	if err != nil {
		return Preview{}, err
	}
	k := previewKey{a.Organisation, id}
	b, kept, err := s.previews.get(ctx, k, func() (*previewBasis, error) {
		release, err := s.computing()
		if err != nil {
			return nil, err
		}
		defer release()
		data, err := read(ctx, s, a, auth.ReadProjects, func(tx Tx) ([]byte, error) { return tx.EstimateJob(ctx, id) })
		if err != nil {
			return nil, err
		}
		return newPreviewBasis(ctx, data)
	})
	if err != nil {
		return Preview{}, err
	}
	j, replaced, err := b.with(n, a)
	if err != nil {
		return Preview{}, err
	}
	take := func() (func(), error) {
		kept = false
		return s.computing()
	}
	t, err := b.takeoff(ctx, j, take)
	if err != nil {
		return Preview{}, err
	}
	after, err := t.Price(j)
	if err != nil {
		return Preview{}, fromJob(err, j)
	}
	v, err := b.preview(ctx, after.Model, take)
	if err != nil {
		return Preview{}, err
	}
	if !kept {
		s.previews.trim(k)
	}
	out, err := b.answer(after, v)
	if err != nil {
		return Preview{}, err
	}
	out.Estimate, out.StoredDraws, out.Multipliers = head.ID, kept, multiplied(n, replaced, after.Model)
	return out, nil
}

// computing takes one of the places for heavy requests: Busy when none is free.
func (s *Service) computing() (func(), error) {
	select {
	case s.heavy <- struct{}{}:
		return func() { <-s.heavy }, nil
	default:
		return nil, &Error{Kind: Busy, Message: "as many computations as this server allows are running; try again in a moment"}
	}
}

// with is the job under changed multipliers, and which of them replace one.
func (b *previewBasis) with(n NewPreview, a Actor) (job.Job, []bool, error) {
	out := b.job
	out.Multipliers = slices.Clone(b.job.Multipliers)
	var faults []Fault
	replaced := make([]bool, len(n.Multipliers))
	seen := map[string]int{}
	for i, x := range n.Multipliers {
		at := "/multipliers/" + strconv.Itoa(i)
		m, found := x.read(at, b.job.Book, a, "preview")
		faults = append(faults, found...)
		key := pricing.MultiplierID(m)
		if j, twice := seen[key]; twice {
			faults = append(faults, Fault{Pointer: at, Found: key, Problem: fmt.Sprintf("already given at /multipliers/%d", j), Remedy: "each name, scope and subject once"})
		}
		seen[key] = i
		k := slices.IndexFunc(out.Multipliers, func(o ratebook.Multiplier) bool { return pricing.MultiplierID(o) == key })
		if replaced[i] = k >= 0; k >= 0 {
			out.Multipliers[k] = m
		} else {
			out.Multipliers = append(out.Multipliers, m)
		}
	}
	if len(faults) > 0 {
		return out, nil, &Error{Kind: Invalid, Message: "the multipliers have faults; nothing was computed", Faults: faults}
	}
	return out, replaced, nil
}

// read is a multiplier of a request, with its faults under the rate book; reason is
// taken where it gives none.
func (x PreviewMultiplier) read(at string, book ratebook.Book, a Actor, reason string) (ratebook.Multiplier, []Fault) {
	m := ratebook.Multiplier{Name: x.Name, Scope: x.Scope, Subject: x.Subject, Categories: x.Categories, Spread: x.Spread, Group: x.Group,
		Reason: cmp.Or(x.Reason, reason), Author: a.Name}
	var faults []Fault
	var bad *Error
	if errors.As(fromRates(m.Validate(), at), &bad) {
		faults = bad.Faults
	}
	if _, ok := book.Correlation[m.Group]; m.Group != "" && !ok {
		known := strings.Join(slices.Sorted(maps.Keys(book.Correlation)), ", ")
		faults = append(faults, Fault{Pointer: at + "/group", Found: m.Group, Problem: "the rate book has no such correlation group", Remedy: known + " or none"})
	}
	return m, faults
}

// answer sets the two sides beside each other.
func (b *previewBasis) answer(after pricing.Priced, v ranges.Preview) (Preview, error) {
	currency, err := b.job.Money()
	if err != nil {
		return Preview{}, err
	}
	const all = ranges.PreviewReplicates * ranges.PreviewTrials
	out := Preview{Caution: document.Caution, Currency: currency.Code, Confidence: document.Number(b.job.Settings.Confidence),
		Categories: []PreviewCategory{}, Replicates: ranges.PreviewReplicates, Trials: ranges.PreviewTrials,
		Method: fmt.Sprintf("Base and categories are priced exactly, as a new estimate would be. The range is a preview from %d trials, with standard errors between %d replicates; "+
			"a new estimate takes more. Both sides share their draws, so that the change is surer than either.", all, ranges.PreviewReplicates)}
	if out.Before, err = b.totals(b.before.Base, b.was, currency); err != nil {
		return Preview{}, err
	}
	if out.After, err = b.totals(after.Base, v, currency); err != nil {
		return Preview{}, err
	}
	x, y := out.Before, out.After
	out.Change = PreviewChange{Base: y.Base.Sub(x.Base), AtConfidence: y.AtConfidence.Sub(x.AtConfidence), Contingency: y.Contingency.Sub(x.Contingency)}
	for _, c := range ratebook.Categories() {
		was, now := b.before.Categories[c], after.Categories[c]
		if was.Sign() != 0 || now.Sign() != 0 {
			out.Categories = append(out.Categories, PreviewCategory{Category: c, Before: was, After: now, Change: now.Sub(was)})
		}
	}
	return out, nil
}

func (b *previewBasis) totals(base money.Decimal, v ranges.Preview, c money.Currency) (PreviewTotals, error) {
	out := PreviewTotals{Base: base, Mean: document.Number(v.Mean), MeanSE: document.Number(v.MeanSE), SD: document.Number(v.SD),
		BaseAt: document.Number(v.BasePercentile), Percentiles: []document.Percentile{}}
	for _, q := range v.Percentiles {
		value, err := money.FromFloat(document.Number(q.Value).Rounded(), c.MinorDigits)
		if err != nil {
			return out, fmt.Errorf("percentile %g: %w", q.P, err)
		}
		p := document.Percentile{P: document.Number(q.P), Value: document.Number(q.Value), SE: document.Number(q.SE), Contingency: value.Sub(base)}
		out.Percentiles = append(out.Percentiles, p)
		if q.P == b.job.Settings.Confidence {
			out.AtConfidence, out.Contingency = value, p.Contingency
		}
	}
	return out, nil
}

// multiplied says which multipliers the model has.
func multiplied(n NewPreview, replaced []bool, m pricing.Model) []PreviewMultiplied {
	out := []PreviewMultiplied{}
	for i, x := range n.Multipliers {
		id := pricing.MultiplierID(ratebook.Multiplier{Name: x.Name, Scope: x.Scope, Subject: x.Subject})
		acts := slices.ContainsFunc(m.Inputs, func(in pricing.Input) bool { return in.ID == id })
		p := PreviewMultiplied{Assumption: id, Replaces: replaced[i], Acts: acts}
		if !acts {
			p.Note = "no line of the estimate takes it: another scope of this name wins everywhere, or nothing in these categories is of its scope"
		}
		out = append(out, p)
	}
	return out
}

// fromJob turns what the engine reports of a stored job into faults by mark.
func fromJob(err error, j job.Job) error {
	return fromEngine(err, schedule.Schedule{Members: j.Members})
}

// fromRange turns a faulty model or spread into a fault of the request.
func fromRange(err error) error {
	var model *ranges.Error
	var bad *spread.Error
	if err == nil || !errors.As(err, &model) && !errors.As(err, &bad) {
		return err
	}
	return fromEngine(&engine.RatesError{Err: err}, schedule.Schedule{})
}
