package beam

import (
	"fmt"
	"math"
	"strconv"
)

// The effects that Compare looks at.
const (
	EffectSpanMoment    = "span moment"    // inside a span, sagging and hogging by themselves
	EffectSupportMoment = "support moment" // at a support, of the two senses the larger in the exact envelope
	EffectPeakMoment    = "peak moment"    // the largest magnitude in the member: what sizes a constant section
	EffectShear         = "shear"          // the larger magnitude in a span
	EffectDeflection    = "deflection"     // the larger magnitude in a span
	EffectReaction      = "reaction"       // the largest pressure on a support
	EffectUplift        = "uplift"         // the largest pull on a support
)

// Ratio sets one effect of the split method against the exact envelope.
type Ratio struct {
	Effect       string  // one of the Effect constants
	Where        string  // "member", "span 1", "left overhang", "support at 33.333 m"
	X            float64 // m, where the exact effect stands
	Split, Exact float64 // N.m, N or m, signed
	Ratio        float64 // Split / Exact, signed, never clamped
	Unsafe       bool    // Ratio below 1 - 1e-9, another sign included
}

// Compare returns the ratio split / exact of each effect. Effects that are zero
// in the exact envelope (below 1e-9 of the largest of their kind in either
// result) have no ratio and are left out. A support moment that the split
// method does not know, between two simple spans, has ratio 0 and is unsafe.
// s and exact must come from the same member and terms: nil if their spans or
// supports differ, or if exact is not a number (see Response.Envelope).
func Compare(s SplitResult, exact Envelope) []Ratio {
	if len(s.Pieces) != len(exact.Spans) || len(s.Reactions) != len(exact.Reactions) || len(s.Pieces) == 0 ||
		math.IsNaN(exact.MomentMax.Value) {
		return nil
	}
	c := comparison{split: s, exact: exact}
	c.moments()
	c.shears()
	c.deflections()
	c.reactions()
	return c.out
}

type comparison struct {
	split SplitResult
	exact Envelope
	least float64 // exact effects below it are zero
	out   []Ratio
}

func (c *comparison) moments() {
	peak, exact := Extreme{}, larger(c.exact.MomentMax, c.exact.MomentMin)
	for _, p := range c.split.Pieces {
		peak = larger(peak, larger(p.MomentMax, p.MomentMin))
	}
	c.scale(peak.Value, exact.Value)
	c.add(EffectPeakMoment, "member", exact.X, math.Abs(peak.Value), math.Abs(exact.Value))
	for i, e := range c.exact.Spans {
		p := c.split.Pieces[i]
		if e.MomentMax.Value > 0 && inside(e, e.MomentMax) {
			c.add(EffectSpanMoment, c.name(i), e.MomentMax.X, counterpart(1, p.MomentMax.Value, p.MomentMin.Value), e.MomentMax.Value)
		}
		if e.MomentMin.Value < 0 && inside(e, e.MomentMin) {
			c.add(EffectSpanMoment, c.name(i), e.MomentMin.X, counterpart(-1, p.MomentMax.Value, p.MomentMin.Value), e.MomentMin.Value)
		}
	}
	for _, r := range c.exact.Reactions {
		var split, exact Bounds
		for i, e := range c.exact.Spans {
			exact.widen(e, r.X)
			split.widen(c.split.Pieces[i].SpanEnvelope, r.X)
		}
		m := exact.Max
		if -exact.Min > m {
			m = exact.Min
		}
		c.add(EffectSupportMoment, place(r.X), r.X, counterpart(m, split.Max, split.Min), m)
	}
}

// widen takes in the moment of a span's end at x.
func (b *Bounds) widen(e SpanEnvelope, x float64) {
	tol := near * math.Max(e.To, x)
	for _, end := range [2]struct {
		x float64
		m Bounds
	}{{e.From, e.MomentAtFrom}, {e.To, e.MomentAtTo}} {
		if math.Abs(end.x-x) <= tol {
			b.Max, b.Min = math.Max(b.Max, end.m.Max), math.Min(b.Min, end.m.Min)
		}
	}
}

func (c *comparison) shears() {
	c.least = 0
	for i, e := range c.exact.Spans {
		p := c.split.Pieces[i]
		c.scale(larger(e.ShearMax, e.ShearMin).Value, larger(p.ShearMax, p.ShearMin).Value)
	}
	for i, e := range c.exact.Spans {
		x, p := larger(e.ShearMax, e.ShearMin), c.split.Pieces[i]
		c.add(EffectShear, c.name(i), x.X, counterpart(x.Value, p.ShearMax.Value, p.ShearMin.Value), x.Value)
	}
}

func (c *comparison) deflections() {
	c.least = 0
	for i, e := range c.exact.Spans {
		p := c.split.Pieces[i]
		c.scale(larger(e.DeflectionMax, e.DeflectionMin).Value, larger(p.DeflectionMax, p.DeflectionMin).Value)
	}
	for i, e := range c.exact.Spans {
		x, p := larger(e.DeflectionMax, e.DeflectionMin), c.split.Pieces[i]
		c.add(EffectDeflection, c.name(i), x.X, counterpart(x.Value, p.DeflectionMax.Value, p.DeflectionMin.Value), x.Value)
	}
}

func (c *comparison) reactions() {
	c.least = 0
	for i, e := range c.exact.Reactions {
		c.scale(c.split.Reactions[i].F, e.FMax)
		c.scale(e.FMin, 0)
	}
	for i, e := range c.exact.Reactions {
		if e.FMax > 0 {
			c.add(EffectReaction, place(e.X), e.X, c.split.Reactions[i].F, e.FMax)
		}
		if e.FMin < 0 {
			c.add(EffectUplift, place(e.X), e.X, c.split.Reactions[i].F, e.FMin)
		}
	}
}

// scale raises the limit of what counts as zero.
func (c *comparison) scale(values ...float64) {
	for _, v := range values {
		c.least = math.Max(c.least, 1e-9*math.Abs(v))
	}
}

// add appends a ratio unless the exact effect is zero or not a number.
func (c *comparison) add(effect, where string, x, split, exact float64) {
	if !(math.Abs(exact) > c.least) {
		return
	}
	ratio := split / exact
	c.out = append(c.out, Ratio{Effect: effect, Where: where, X: x, Split: split, Exact: exact,
		Ratio: ratio, Unsafe: !(ratio >= 1-1e-9)})
}

// name returns "span 2", "left overhang" or "right overhang".
func (c *comparison) name(i int) string {
	spans := c.exact.Spans
	if !spans[i].Overhang {
		if spans[0].Overhang {
			i--
		}
		return fmt.Sprintf("span %d", i+1)
	}
	if spans[i].From < c.exact.Reactions[0].X {
		return "left overhang"
	}
	return "right overhang"
}

// larger returns the one of larger magnitude, the first of equals.
func larger(a, b Extreme) Extreme {
	if math.Abs(b.Value) > math.Abs(a.Value) {
		return b
	}
	return a
}

// inside tells whether an extreme stands within the span and not at its ends.
func inside(e SpanEnvelope, x Extreme) bool {
	tol := 1e-9 * (e.To - e.From)
	return x.X > e.From+tol && x.X < e.To-tol
}

// counterpart returns the split value to set against an exact one: that of the
// same sense if there is one, else the other, whose ratio is negative.
func counterpart(exact, most, least float64) float64 {
	if exact < 0 {
		most, least = least, most
	}
	if most*exact > 0 {
		return most
	}
	if least*exact < 0 {
		return least
	}
	return 0
}

func place(x float64) string {
	return "support at " + strconv.FormatFloat(math.Round(x*1000)/1000, 'f', -1, 64) + " m"
}
