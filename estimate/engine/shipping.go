package engine

import (
	"fmt"

	"spanwright/estimate/cutting"
	"spanwright/estimate/document"
	"spanwright/estimate/money"
	"spanwright/estimate/ratebook"
	"spanwright/estimate/takeoff"
)

// shipping says how the pieces travel, and which ones fit no envelope.
func (r *run) shipping() document.Shipping {
	out := document.Shipping{Breaches: []document.Breach{}, Loads: []document.Load{}, Limits: limitWords(r.settings.Limits)}
	for _, b := range r.breaches {
		out.Breaches = append(out.Breaches, document.Breach{Mark: b.Mark, Envelope: b.Envelope, Measure: b.Measure,
			Value: document.Measured(b.Value), Limit: document.Measured(b.Limit), Unit: b.Unit, Needs: b.Needs})
	}
	for _, l := range takeoff.Loads(r.pieces, r.allowances, r.settings) {
		out.Loads = append(out.Loads, document.Load{Group: l.Group, Pieces: l.Pieces, Splices: l.Splices, ByMass: document.Measured(l.ByMass),
			ByLength: document.Measured(l.ByLength), ByVolume: document.Measured(l.ByVolume), Vehicles: l.Vehicles, Permits: l.Permits, Governing: l.Governing})
	}
	return out
}

func limitWords(l ratebook.Limits) []string {
	space := func(e ratebook.Envelope) string { return fmt.Sprintf("%g × %g × %g m", e.Length, e.Width, e.Height) }
	return []string{
		fmt.Sprintf("Cranes: %g t in the shop, %g t on site.", l.ShopCrane/1000, l.SiteCrane/1000),
		"Galvanising bath: " + space(l.Bath) + "; paint bay: " + space(l.PaintBay) + ".",
		fmt.Sprintf("Vehicle: %s, %.4g t (%s).", space(l.Vehicle.Envelope), l.Vehicle.Mass/1000, l.Vehicle.Source),
		fmt.Sprintf("Loads need a permit beyond %.4g m wide, %.4g m high or %.4g t (%s).", l.Permit.Width, l.Permit.Height, l.Permit.Mass/1000, l.Permit.Source),
	}
}

// tenths is the unit of length of a cutting plan, m.
const tenths = 1e-4

// cutting are the cutting plans of the purchase.
func (r *run) cutting() ([]document.CuttingPlan, error) {
	var out []document.CuttingPlan
	for _, p := range r.settings.Plans {
		t, err := money.FromFloat(p.Purchased/1000, 3)
		if err != nil {
			return nil, fmt.Errorf("cutting plan of %s: %w", p.Designation, err)
		}
		hint := ""
		if p.Plan.Hint != nil {
			hint = p.Plan.Hint.Text
		}
		out = append(out, document.CuttingPlan{
			Section: p.Designation, Grade: p.Grade, Method: p.Plan.Method, Kerf: document.Number(p.Kerf),
			Bars: bars(p.Plan), Patterns: patterns(p.Plan), Stock: metres(p.Plan.StockLength), Used: metres(p.Plan.Used),
			Yield: document.Measured(p.Plan.Yield), Bound: metres(p.Plan.Bound), Proven: p.Plan.Proven, Purchased: t, Hint: hint, Split: p.Split,
		})
	}
	return out, nil
}

func metres(tenth int64) document.Number { return document.Number(float64(tenth) * tenths) }

func bars(p cutting.Plan) []document.Bars {
	out := []document.Bars{}
	for _, b := range p.Bars {
		out = append(out, document.Bars{Length: metres(b.Length), Count: int(b.Bars)})
	}
	return out
}

func patterns(p cutting.Plan) []document.Pattern {
	out := []document.Pattern{}
	for _, x := range p.Patterns {
		pat := document.Pattern{Stock: metres(x.Length), Count: int(x.Bars), Cuts: []document.Cut{}}
		for _, c := range x.Cuts {
			pat.Cuts = append(pat.Cuts, document.Cut{Mark: c.Mark, Length: metres(c.Length), Count: int(c.Count)})
		}
		out = append(out, pat)
	}
	return out
}
