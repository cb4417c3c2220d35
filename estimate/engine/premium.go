package engine

import (
	"context"
	"errors"

	"spanwright/estimate/money"
	"spanwright/estimate/pricing"
	"spanwright/estimate/takeoff"
	"spanwright/structural/section"
)

// splitMoney is what the sections of the split method would cost beside those of
// the exact envelope, at likely values: split minus exact.
type splitMoney struct {
	priced  bool
	total   money.Decimal
	unsafe  money.Decimal            // of the members whose section would fail alone
	members map[string]money.Decimal // by mark, each alone; empty where there are many
}

// pricedAlone is the number of members up to which each one is priced alone.
const pricedAlone = 60

// priceSplit prices the job again with the sections of the split method: all of
// them, the unsafe ones, and each member alone where there are few.
func (r *run) priceSplit(ctx context.Context) error {
	if err := ctx.Err(); err != nil {
		return err
	}
	var all, unsafe []string
	for _, s := range r.sized.members {
		if s.split == nil || !s.split.passes || s.split.section.Designation == s.result.Section.Designation {
			continue
		}
		all = append(all, s.member.Mark)
		if s.split.unsafe() {
			unsafe = append(unsafe, s.member.Mark)
		}
	}
	out := splitMoney{priced: true, members: map[string]money.Decimal{}}
	var err error
	if out.total, err = r.swapped(ctx, all); err == nil {
		out.unsafe, err = r.swapped(ctx, unsafe)
	}
	if len(all) <= pricedAlone {
		for _, m := range all {
			if err == nil {
				out.members[m], err = r.swapped(ctx, []string{m})
			}
		}
	}
	var rates *RatesError
	if errors.As(err, &rates) {
		return nil // another rounding than the estimate's own; the summary then has no money
	}
	r.split = out
	return err
}

// swapped is by how much the base changes when the members have the sections of
// the split method.
func (r *run) swapped(ctx context.Context, marks []string) (money.Decimal, error) {
	if len(marks) == 0 {
		return money.Zero, nil
	}
	swap := map[string]bool{}
	for _, m := range marks {
		swap[m] = true
	}
	pieces := r.piecesOf(func(s sizedMember) *section.Section {
		if swap[s.member.Mark] {
			return &s.split.section
		}
		return s.chosen()
	})
	settings := r.settings
	var err error
	if settings.Plans, err = takeoff.Purchase(ctx, pieces, settings); err != nil {
		return money.Zero, takeoffError(err)
	}
	items, err := takeoff.Count(pieces, r.allowances, settings)
	if err != nil {
		return money.Zero, takeoffError(err)
	}
	other := *r
	other.items, other.conversions, other.unescalated, other.stale = items, nil, nil, nil
	rates, err := other.rates()
	if err != nil {
		return money.Zero, err
	}
	priced, err := pricing.Price(items, rates)
	if err != nil {
		return money.Zero, &RatesError{err}
	}
	return priced.Base.Sub(r.priced.Base), nil
}
