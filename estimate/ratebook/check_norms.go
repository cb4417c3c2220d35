package ratebook

import (
	"fmt"
	"maps"
	"slices"
	"strings"
)

// jointKinds are the kinds of joints that a schedule counts.
func jointKinds() []string { return []string{"moment", "pinned", "flanged tube", "site splice"} }

// shopSplice is the kind of joint that no schedule counts: it follows from stock
// lengths. A book may have no norm for it.
const shopSplice = "shop splice"

// norms checks the norms, and that there is one for each driver that a price or a
// carbon factor is per unit of.
func (c *checker) norms(b Book) {
	if n := b.Norms; n != nil {
		hours := append(b.ConnectionClasses(), countedJoints)
		c.hours("/norms/shop_hours", n.ShopHours, hours)
		c.hours("/norms/site_hours", n.SiteHours, hours)
		for _, k := range slices.Sorted(maps.Keys(n.Joints)) {
			p := at("/norms/joints", k)
			c.oneOf(p, k, append(jointKinds(), shopSplice))
			j := n.Joints[k]
			c.figure(p+"/mass_kg", j.Mass, 0, 1e5)
			c.figure(p+"/bolts_kg", j.Bolts, 0, 1e5)
			c.figure(p+"/shop_hours", j.ShopHours, 0, 1e4)
			c.figure(p+"/site_hours", j.SiteHours, 0, 1e4)
		}
		c.figure("/norms/surface", n.Surface, 0, maxAllowance)
		if n.SurfaceByMass != nil {
			c.figure("/norms/surface_by_mass", *n.SurfaceByMass, 0, 1000)
		}
		c.zinc(n.Zinc)
		c.figure("/norms/load_use", n.LoadUse, 1, 10)
		c.figure("/norms/lift_days", n.LiftDays, 0, 100)
		c.figure("/norms/crew", n.Crew, 0.1, 1000)
		c.figure("/norms/week_hours", n.WeekHours, 1, 168)
		c.figure("/norms/haul_distance_km", n.HaulDistance, 0, 40_000)
	}
	lacking := map[Driver]bool{}
	need := func(field string, d Driver) {
		missing := b.missing(d)
		c.want(len(missing) == 0 || lacking[d], field, string(d), "a driver that the take-off has: it lacks "+strings.Join(missing, ", "))
		lacking[d] = len(missing) > 0
	}
	for i, r := range b.Rates {
		need(fmt.Sprintf("/rates/%d/driver", i), r.Driver)
	}
	for i, f := range b.Carbon {
		need(fmt.Sprintf("/carbon/%d/driver", i), f.Driver)
	}
}

func (c *checker) hours(field string, m map[string]Figure, classes []string) {
	for _, k := range slices.Sorted(maps.Keys(m)) {
		c.want(slices.Contains(classes, k), at(field, k), k, "a class that /connections names")
		c.figure(at(field, k), m[k], 0, 1000)
	}
}

func (c *checker) zinc(norms []ZincNorm) {
	for i, z := range norms {
		p, last := fmt.Sprintf("/norms/zinc/%d", i), i == len(norms)-1
		below := 0.0
		if i > 0 {
			below = norms[i-1].UpTo
		}
		switch {
		case last:
			c.want(z.UpTo == 0, p+"/up_to_mm", number(z.UpTo), "0 in the last: no limit")
		default:
			c.want(z.UpTo > below && z.UpTo < 1e4, p+"/up_to_mm", number(z.UpTo), "a thickness above that before it")
		}
		c.want(z.Mass > 0 && z.Mass <= 5000, p+"/g_m2", number(z.Mass), "above 0 to 5000 g/m²")
		c.text(p+"/source", z.Source)
	}
}

// missing lists the norms that the take-off needs for a driver and that the book
// lacks, as JSON pointers.
func (b Book) missing(d Driver) []string {
	if b.Norms == nil {
		switch d {
		case SquareMetres, ZincKilograms, ShopHours, SiteHours, Truckloads, TonneKilometres, CraneDays, Weeks:
			return []string{"/norms"}
		}
		return nil
	}
	var out []string
	switch d {
	case ShopHours:
		out = b.missingHours("/norms/shop_hours", b.Norms.ShopHours)
	case SiteHours, Weeks:
		out = b.missingHours("/norms/site_hours", b.Norms.SiteHours)
	case ZincKilograms:
		if len(b.Norms.Zinc) == 0 {
			out = []string{"/norms/zinc"}
		}
	}
	return out
}

func (b Book) missingHours(field string, m map[string]Figure) []string {
	var out []string
	for _, class := range b.ConnectionClasses() {
		if _, ok := m[class]; !ok {
			out = append(out, at(field, class))
		}
	}
	for _, kind := range jointKinds() {
		if _, ok := b.Norms.Joints[kind]; !ok {
			out = append(out, at("/norms/joints", kind))
		}
	}
	return out
}

// limits checks the envelopes.
func (c *checker) limits(l *Limits) {
	if l == nil {
		return
	}
	size := func(field string, x float64) {
		c.want(x >= 0 && x <= 1e9, field, number(x), "zero for no limit, or more")
	}
	envelope := func(field string, e Envelope) {
		size(field+"/length_m", e.Length)
		size(field+"/width_m", e.Width)
		size(field+"/height_m", e.Height)
	}
	size("/limits/shop_crane_kg", l.ShopCrane)
	size("/limits/site_crane_kg", l.SiteCrane)
	envelope("/limits/galvanising_bath", l.Bath)
	envelope("/limits/paint_bay", l.PaintBay)
	for _, v := range []struct {
		field   string
		vehicle Vehicle
	}{{"/limits/vehicle", l.Vehicle}, {"/limits/permit", l.Permit}} {
		envelope(v.field, v.vehicle.Envelope)
		size(v.field+"/mass_kg", v.vehicle.Mass)
		c.want(v.vehicle.Source != "" || v.vehicle == Vehicle{}, v.field+"/source", "", "where the limits come from")
	}
}
