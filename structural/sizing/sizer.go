package sizing

import (
	"errors"
	"fmt"
	"math"
	"runtime"
	"slices"
	"sync"
	"sync/atomic"

	"spanwright/structural/resistance"
	"spanwright/structural/section"
)

// Choice is the section of one member, without its explanation.
type Choice struct {
	Index       int     // of the candidate as handed to NewSizer; -1 where none passes
	Utilisation float64 // highest of the candidate; 0 where none passes
	Check       string  // the governing check
}

// Sizer chooses among the same candidates for many members. What it knows of each
// candidate is found once: its steel, the section that the basis reckons with, and
// the moment and shear that no member may ask of it, however short and well held.
// It is never changed: any number of goroutines may use it.
type Sizer struct {
	setup    Setup
	list     []candidate       // lightest first, equal masses by designation
	moments  []float64         // N·m, by candidate: more than this fails
	shears   []float64         // N
	bends    []float64         // N·m², E·Iy
	lightest float64           // kg/m
	greatest float64           // kg/m
	deflects bool              // the basis checks deflections
	sections []section.Section // every candidate, lightest first
}

type candidate struct {
	section *section.Section // as billed
	checked section.Section  // as the basis reckons with it
	steel   resistance.Material
	index   int // as handed in
	at      int // in sections
}

// certain is how far above 1 the utilisation under one effect alone must lie before
// it is taken to fail under all: over the 1 % by which an axial force may lower it,
// see resistance.Basis.
const certain = 1.02

// NewSizer prepares candidates, in any order, for a setup. Candidates that cannot be
// had in the grade are left out; an error means that none is left, that one has no
// mass, or a bad setup.
func NewSizer(s Setup, candidates []section.Section) (*Sizer, error) {
	if err := s.Validate(); err != nil {
		return nil, fmt.Errorf("sizing: %w", err)
	}
	if err := checkMasses(candidates); err != nil {
		return nil, err
	}
	sorted := make([]int, len(candidates))
	for i := range sorted {
		sorted[i] = i
	}
	slices.SortStableFunc(sorted, func(a, b int) int { return order(&candidates[a], &candidates[b], massOf) })
	z := &Sizer{setup: s, sections: make([]section.Section, len(candidates))}
	var p Prepared
	p.setUp(s)
	var why error
	for at, i := range sorted {
		c := &z.sections[at]
		*c = candidates[i]
		m, err := p.steel(c)
		if err != nil {
			why = err
			continue
		}
		z.list = append(z.list, candidate{section: c, checked: *p.checked(c), steel: m, index: i, at: at})
	}
	if len(z.list) == 0 {
		return nil, fmt.Errorf("sizing: none of the %d candidates can be had in %s, the last because: %w", len(candidates), s.Grade.Name, why)
	}
	z.lightest, z.greatest = math.Inf(1), 0
	for i := range z.list {
		c := &z.list[i]
		z.moments = append(z.moments, z.limit(c, func(d *resistance.Demand, v float64) { d.Moment = v }))
		z.shears = append(z.shears, z.limit(c, func(d *resistance.Demand, v float64) { d.Shear = v }))
		z.bends = append(z.bends, s.Grade.E*c.checked.Iy)
		z.lightest, z.greatest = min(z.lightest, p.massOf(c.section)), max(z.greatest, p.massOf(c.section))
	}
	z.deflects = z.checksDeflection()
	return z, nil
}

// slight is a length between restraints at which nothing buckles, m.
const slight = 1e-3

// limit finds an effect that surely fails a candidate by itself; more of it, or other
// effects beside it, fail too, as resistance.Basis promises. Infinite where none is
// found, or where a limit fails it that other effects may ease.
func (z *Sizer) limit(c *candidate, set func(*resistance.Demand, float64)) float64 {
	try := func(v float64) (float64, string) {
		d := resistance.Demand{LateralSpacing: slight, LengthY: slight, LengthZ: slight}
		set(&d, v)
		return z.setup.Basis.Utilisation(&c.checked, c.steel, &d)
	}
	value := 1e3
	if u, _ := try(value); u > 0 {
		value *= certain * (1 + 1e-6) / u
	}
	for range 30 {
		u, id := try(value)
		if id == resistance.LocalBuckling {
			return math.Inf(1)
		}
		if u > certain {
			return value
		}
		value *= 1.1
	}
	return math.Inf(1)
}

// checksDeflection tells whether the basis fails a member for its deflection alone.
func (z *Sizer) checksDeflection() bool {
	d := resistance.Demand{LateralSpacing: slight, LengthY: slight, LengthZ: slight, Deflections: []resistance.Deflection{{Value: 2, Span: 1, Limit: 1}}}
	u, _ := z.setup.Basis.Utilisation(&z.list[0].checked, z.list[0].steel, &d)
	return u > 1+margin
}

// Choose returns for each member the lightest candidate that passes every check, the
// same that Lightest finds. It works on all cores; members are independent, so that
// the result does not depend on their number. The error joins what Prepare refuses,
// by member; those members have Index -1.
func (z *Sizer) Choose(members []Member) ([]Choice, error) {
	choices, faults := make([]Choice, len(members)), make([]error, len(members))
	var next atomic.Int64
	var wg sync.WaitGroup
	for range min(runtime.GOMAXPROCS(0), 1+len(members)/batch) {
		wg.Go(func() {
			var p Prepared
			p.setUp(z.setup)
			for {
				from := int(next.Add(batch)) - batch
				for i := from; i < min(from+batch, len(members)); i++ {
					choices[i].Index = -1
					if err := p.prepare(members[i]); err != nil {
						faults[i] = fmt.Errorf("sizing: member %d: %w", i+1, err)
						continue
					}
					if k, u, id := z.choose(&p); k >= 0 {
						choices[i] = Choice{Index: z.list[k].index, Utilisation: u, Check: id}
					}
				}
				if from+batch >= len(members) {
					return
				}
			}
		})
	}
	wg.Wait()
	return choices, errors.Join(faults...)
}

// batch is how many members a goroutine takes at a time.
const batch = 64

// Lightest returns for one member what the function Lightest does, sooner.
func (z *Sizer) Lightest(m Member) (Result, error) {
	p, err := Prepare(m, z.setup)
	if err != nil {
		return Result{}, err
	}
	best := -1
	if k, _, _ := z.choose(p); k >= 0 {
		best = z.list[k].at
	}
	return p.answer(z.sections, best, massOf)
}

// choose returns the place in list of the first candidate that passes with its
// utilisation and governing check, or -1.
func (z *Sizer) choose(p *Prepared) (int, float64, string) {
	moment, shear, bend := z.needs(p)
	bounded := p.bounded()
	if bounded {
		p.start(z.lightest)
	}
	for i, m := range z.moments {
		if !(m > moment && z.shears[i] > shear && z.bends[i] >= bend) {
			continue
		}
		c := &z.list[i]
		if p.tooLarge(c.section) || bounded && p.hopeless(c.section, &c.checked, c.steel) {
			continue
		}
		if u, id := p.use(c.section, &c.checked, c.steel); resistance.Passes(u) {
			return i, u, id
		}
	}
	return -1, 0, ""
}

// needs returns what every candidate must have at the least: the moment and shear
// that the worst variant asks for under any of their weights, and the E·Iy that the
// deflection limits ask for. What is not straight asks for nothing here.
func (z *Sizer) needs(p *Prepared) (moment, shear, bend float64) {
	for i := range p.strength {
		v := &p.strength[i]
		if !v.line.straight {
			continue
		}
		a, b := p.forces(v, z.weigh(p, v, z.lightest)), p.forces(v, z.weigh(p, v, z.greatest))
		moment, shear = max(moment, min(a.moment, b.moment)), max(shear, min(a.shear, b.shear))
	}
	if !z.deflects || len(p.deflections) == 0 {
		return moment, shear, 0
	}
	for i := range p.service {
		v := &p.service[i]
		for k, slope := range v.slope {
			least := v.sagging[k] + min(slope*z.weigh(p, v, z.lightest), slope*z.weigh(p, v, z.greatest))
			bend = max(bend, least/p.deflections[k].Limit*(1-margin))
		}
	}
	return moment, shear, bend
}

func (z *Sizer) weigh(p *Prepared, v *variant, mass float64) float64 {
	return p.across(mass * z.setup.Gravity * v.permanent)
}
