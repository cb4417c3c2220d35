package bridge

import (
	"maps"
	"slices"

	"spanwright/estimate/ratebook"
)

// rates puts the prices of two books together.
func rates(out *ratebook.Book, a, b ratebook.Book, from func(Cause) bool) {
	base := a
	if from(Rate) {
		base = b
	}
	out.MaterialPrice = base.MaterialPrice
	if a.MaterialPrice != nil && b.MaterialPrice != nil {
		f := figure(*a.MaterialPrice, *b.MaterialPrice, Rate, from)
		out.MaterialPrice = &f
	}
	if out.Ratios = base.Ratios; a.Kind == b.Kind {
		out.Ratios = figures(a.Ratios, b.Ratios, Rate, from)
	}
	out.Carbon, out.Bands = base.Carbon, base.Bands
	out.Rates = slices.Clone(base.Rates)
	for i, r := range out.Rates {
		x, inA := find(a.Rates, r)
		y, inB := find(b.Rates, r)
		if inA && inB {
			out.Rates[i].Figure = figure(x.Figure, y.Figure, Rate, from)
		}
	}
}

// find is the rate of the same id, scope and subject.
func find(rates []ratebook.Rate, r ratebook.Rate) (ratebook.Rate, bool) {
	for _, x := range rates {
		if x.ID == r.ID && x.Scope == r.Scope && x.Subject == r.Subject {
			return x, true
		}
	}
	return ratebook.Rate{}, false
}

// allowances puts what turns drawn mass into quantities together.
func allowances(out *ratebook.Book, base, a, b ratebook.Book, from func(Cause) bool) {
	out.Limits = base.Limits
	out.Connections = figures(a.Connections, b.Connections, Allowance, from)
	out.Waste = figures(a.Waste, b.Waste, Allowance, from)
	out.Growth = figures(a.Growth, b.Growth, Allowance, from)
	out.Bolts = figure(a.Bolts, b.Bolts, Allowance, from)
	out.SizingBias = figure(a.SizingBias, b.SizingBias, Allowance, from)
	out.Norms = base.Norms
	if a.Norms == nil || b.Norms == nil {
		return
	}
	n := *base.Norms
	x, y := a.Norms, b.Norms
	n.ShopHours = figures(x.ShopHours, y.ShopHours, Allowance, from)
	n.SiteHours = figures(x.SiteHours, y.SiteHours, Allowance, from)
	n.Surface, n.LoadUse = figure(x.Surface, y.Surface, Allowance, from), figure(x.LoadUse, y.LoadUse, Allowance, from)
	n.LiftDays, n.Crew = figure(x.LiftDays, y.LiftDays, Allowance, from), figure(x.Crew, y.Crew, Allowance, from)
	n.WeekHours, n.HaulDistance = figure(x.WeekHours, y.WeekHours, Allowance, from), figure(x.HaulDistance, y.HaulDistance, Allowance, from)
	if x.SurfaceByMass != nil && y.SurfaceByMass != nil {
		f := figure(*x.SurfaceByMass, *y.SurfaceByMass, Allowance, from)
		n.SurfaceByMass = &f
	}
	n.Joints = maps.Clone(y.Joints)
	if n.Joints == nil {
		n.Joints = map[string]ratebook.JointNorm{}
	}
	for kind, p := range x.Joints {
		q, both := y.Joints[kind]
		if !both {
			n.Joints[kind] = p
			continue
		}
		n.Joints[kind] = ratebook.JointNorm{
			Mass: figure(p.Mass, q.Mass, Allowance, from), Bolts: figure(p.Bolts, q.Bolts, Allowance, from),
			ShopHours: figure(p.ShopHours, q.ShopHours, Allowance, from), SiteHours: figure(p.SiteHours, q.SiteHours, Allowance, from),
		}
	}
	out.Norms = &n
}

// multipliers puts those in force together; one of the same name, scope and subject
// in both is one multiplier.
func multipliers(a, b []ratebook.Multiplier, from func(Cause) bool) []ratebook.Multiplier {
	base, other := a, b
	if from(Multiplier) {
		base, other = b, a
	}
	out := slices.Clone(base)
	for i, m := range out {
		k := slices.IndexFunc(other, func(o ratebook.Multiplier) bool {
			return o.Name == m.Name && o.Scope == m.Scope && o.Subject == m.Subject && slices.Equal(o.Categories, m.Categories)
		})
		if k < 0 {
			continue
		}
		x, y := m, other[k]
		if from(Multiplier) {
			x, y = y, x
		}
		out[i].Spread = believed(x.Spread, y.Spread, Multiplier, from)
		out[i].Group = x.Group
		if from(RiskPolicy) {
			out[i].Group = y.Group
		}
	}
	return out
}

// correlations are those of the risk policy, with every group that figures of
// either book may name: one that the policy lacks has that of the other book.
func correlations(policy, a, b map[string]float64) map[string]float64 {
	out := map[string]float64{}
	for _, m := range []map[string]float64{a, b, policy} {
		maps.Copy(out, m)
	}
	return out
}
