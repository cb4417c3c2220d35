package sizing

import (
	"cmp"
	"errors"
	"fmt"
	"math"
	"slices"

	"spanwright/structural/resistance"
	"spanwright/structural/section"
)

// reported is how many of the next better candidates a Result says why they fail.
const reported = 3

// margin is how far above 1 the utilisation under a lower bound of the demand must
// lie before a candidate is given up without its exact demand: far above rounding.
const margin = 1e-6

// Utilisation returns the highest utilisation of a section in the member, own weight
// included, over all combinations, and the governing check. An error means that the
// section cannot be had in the grade or is too deep or wide. It allocates nothing.
func (p *Prepared) Utilisation(s *section.Section) (float64, string, error) {
	m, err := p.steel(s)
	if err != nil {
		return 0, "", fmt.Errorf("sizing: %w", err)
	}
	u, id := p.use(s, p.checked(s), m)
	return u, id, nil
}

// use returns the highest utilisation over the variants and the governing check; of
// equal ones the first variant's. d is the section that the basis reckons with.
func (p *Prepared) use(s, d *section.Section, m resistance.Material) (float64, string) {
	p.sag(d, false)
	top, id := 0.0, ""
	for i := range p.strength {
		v := &p.strength[i]
		u, check := p.setup.Basis.Utilisation(d, m, p.ask(d, v, p.forces(v, p.across(p.weight(s, v))), i == 0))
		if id == "" || u > top {
			top, id = u, check
		}
	}
	return top, id
}

// hopeless tells whether the section fails already under a lower bound of its
// demand in a variant; that of a straight variant is its demand itself. Local
// slenderness is no such proof in compression: a web's limit eases as the moment
// grows.
func (p *Prepared) hopeless(s, d *section.Section, m resistance.Material) bool {
	p.sag(d, true)
	for i := range p.strength {
		v := &p.strength[i]
		weight := p.across(p.weight(s, v))
		var f forces
		if v.line.straight {
			f = p.forces(v, weight)
		} else {
			f = v.line.beyond(weight)
		}
		u, id := p.setup.Basis.Utilisation(d, m, p.ask(d, v, f, i == 0))
		if u > 1+margin && (id != resistance.LocalBuckling || p.demand.Axial <= 0) {
			return true
		}
	}
	return false
}

// bounded tells whether lower bounds save anything: whether an effect is not
// straight, so that its exact value takes an envelope.
func (p *Prepared) bounded() bool {
	for i := range p.strength {
		if !p.strength[i].line.straight {
			return true
		}
	}
	for i := range p.service {
		if len(p.deflections) > 0 && len(p.service[i].slope) == 0 {
			return true
		}
	}
	return false
}

// lightestOf returns the mass of the lightest candidate, kg/m.
func (p *Prepared) lightestOf(candidates []section.Section) float64 {
	lightest := math.Inf(1)
	for i := range candidates {
		lightest = min(lightest, p.massOf(&candidates[i]))
	}
	return lightest
}

// start finds the effects that the lower bounds are drawn from, under the mass of the
// lightest candidate, kg/m.
func (p *Prepared) start(mass float64) {
	lightest := p.across(mass)
	for i := range p.strength {
		if v := &p.strength[i]; !v.line.straight {
			v.line.light = lightest * p.setup.Gravity * v.permanent
			v.line.lighter = p.exactForces(v, v.line.light)
		}
	}
	for i := range p.service {
		if v := &p.service[i]; len(p.deflections) > 0 && len(v.slope) == 0 {
			v.line.light = lightest * p.setup.Gravity * v.permanent
			v.lighter = p.exactSags(v.lighter[:0], v, v.line.light)
		}
	}
}

// Lightest returns the lightest candidate that passes every check; equal masses are
// broken by designation. Candidates must come lightest first, as section.Series
// gives them. Candidates that cannot be had in the grade are skipped.
//
// When nothing passes, the result has Passes false, the nearest miss (the smallest
// utilisation, the lighter of equals) and WaysOut. An error means that there is no
// candidate, that they are out of order or have no mass, or that none can be had in
// the grade.
func Lightest(p *Prepared, candidates []section.Section) (Result, error) {
	if err := checkMasses(candidates); err != nil {
		return Result{}, err
	}
	for i := 1; i < len(candidates); i++ {
		if candidates[i].Mass < candidates[i-1].Mass {
			return Result{}, fmt.Errorf("sizing: candidate %d (%s, %v kg/m) follows %s of %v kg/m; accepted is the order lightest first",
				i+1, candidates[i].Designation, candidates[i].Mass, candidates[i-1].Designation, candidates[i-1].Mass)
		}
	}
	p.start(p.lightestOf(candidates))
	best := -1
	for i := range candidates {
		s := &candidates[i]
		if best >= 0 && s.Mass > candidates[best].Mass {
			candidates = candidates[:i]
			break
		}
		if p.passes(s) && (best < 0 || s.Designation < candidates[best].Designation) {
			best = i
		}
	}
	return p.answer(candidates, best, massOf)
}

// Best returns the candidate with the smallest objective that passes every check;
// equal objectives are broken by mass, then designation. The order of candidates is
// free; an objective that is not a finite number is an error. Otherwise as Lightest.
func Best(p *Prepared, candidates []section.Section, objective func(*section.Section) float64) (Result, error) {
	if err := checkMasses(candidates); err != nil {
		return Result{}, err
	}
	p.start(p.lightestOf(candidates))
	best := -1
	for i := range candidates {
		s := &candidates[i]
		if v := objective(s); !(math.Abs(v) <= math.MaxFloat64) {
			return Result{}, fmt.Errorf("sizing: objective of %s is %v; accepted is a finite number", s.Designation, v)
		}
		if (best < 0 || better(s, &candidates[best], objective)) && p.passes(s) {
			best = i
		}
	}
	return p.answer(candidates, best, objective)
}

func checkMasses(candidates []section.Section) error {
	if len(candidates) == 0 {
		return errors.New("sizing: no candidates; accepted is at least one section")
	}
	for i := range candidates {
		if m := candidates[i].Mass; !(m > 0 && m <= math.MaxFloat64) {
			return fmt.Errorf("sizing: candidate %d (%s) has a mass of %v kg/m; accepted is a number above 0", i+1, candidates[i].Designation, m)
		}
	}
	return nil
}

func better(a, b *section.Section, objective func(*section.Section) float64) bool {
	return order(a, b, objective) < 0
}

func order(a, b *section.Section, objective func(*section.Section) float64) int {
	if c := cmp.Compare(objective(a), objective(b)); c != 0 {
		return c
	}
	if c := cmp.Compare(a.Mass, b.Mass); c != 0 {
		return c
	}
	return cmp.Compare(a.Designation, b.Designation)
}

// passes tells whether a section can be had and passes every check.
func (p *Prepared) passes(s *section.Section) bool {
	m, ok := p.available(s)
	if !ok {
		return false
	}
	d := p.checked(s)
	if p.bounded() && p.hopeless(s, d, m) {
		return false
	}
	u, _ := p.use(s, d, m)
	return resistance.Passes(u)
}

// answer explains the candidate at best, or the nearest miss where best is −1, and
// the candidates just better by the objective.
func (p *Prepared) answer(candidates []section.Section, best int, objective func(*section.Section) float64) (Result, error) {
	chosen := best
	if best < 0 {
		var err error
		if chosen, err = p.nearestMiss(candidates, objective); err != nil {
			return Result{}, err
		}
	}
	r, err := p.Explain(&candidates[chosen])
	if err != nil {
		return Result{}, err
	}
	p.reject(&r, candidates, chosen, objective)
	if best < 0 {
		r.WaysOut = p.waysOut(&candidates[chosen], r)
	}
	return r, nil
}

// nearestMiss returns the candidate with the smallest utilisation, the better by
// the objective of equals.
func (p *Prepared) nearestMiss(candidates []section.Section, objective func(*section.Section) float64) (int, error) {
	nearest, least := -1, math.Inf(1)
	var why error
	for i := range candidates {
		u, _, err := p.Utilisation(&candidates[i])
		if err != nil {
			why = err
			continue
		}
		if nearest < 0 || u < least || u == least && better(&candidates[i], &candidates[nearest], objective) {
			nearest, least = i, u
		}
	}
	if nearest < 0 {
		return 0, fmt.Errorf("sizing: none of the %d candidates can be had in %s, the last because: %w", len(candidates), p.setup.Grade.Name, why)
	}
	return nearest, nil
}

// reject fills what stands just below the choice: the next better candidates that
// fail, nearest first, and those that could not be had.
func (p *Prepared) reject(r *Result, candidates []section.Section, chosen int, objective func(*section.Section) float64) {
	var below [reported]*section.Section
	for i := len(candidates) - 1; i >= 0; i-- { // sorted lists have the nearest at the end
		s := &candidates[i]
		if !better(s, &candidates[chosen], objective) {
			continue
		}
		if _, ok := p.available(s); ok {
			insert(&below, s, objective)
		} else if _, err := p.steel(s); err != nil {
			r.Skipped = append(r.Skipped, Skipped{Section: s.Designation, Reason: err.Error()})
		}
	}
	slices.Reverse(r.Skipped)
	for _, s := range below {
		if s == nil {
			break
		}
		u, id, err := p.Utilisation(s)
		if err == nil && !resistance.Passes(u) {
			r.LighterRejected = append(r.LighterRejected, Rejected{Section: s.Designation, Check: id, Utilisation: u})
		}
	}
}

// insert keeps in below, worst by the objective first, the candidates nearest to
// the choice.
func insert(below *[reported]*section.Section, s *section.Section, objective func(*section.Section) float64) {
	if last := below[reported-1]; last != nil && !better(last, s, objective) {
		return
	}
	for i, other := range below {
		if other == nil {
			below[i] = s
			return
		}
		if better(other, s, objective) {
			below[i], s = s, other
		}
	}
}
