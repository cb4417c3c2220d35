package sizing

import (
	"fmt"
	"math"
	"slices"
	"strconv"

	"spanwright/structural/section"
)

// Steps are the values from From to To, both included, Step apart; with From = To
// there is one and Step is not read. All in m.
type Steps struct{ From, To, Step float64 }

// Girder states the bounds inside which a girder is proportioned: a welded I with
// equal flanges.
type Girder struct {
	Depth    Steps     // m, over the flanges
	Width    Steps     // m, of the flanges
	Webs     []float64 // m, plate thicknesses that the web may have
	Flanges  []float64 // m, plate thicknesses that the flanges may have
	MaxRatio float64   // greatest depth over width; 0 = any
}

// Plates returns the usual plate thicknesses from stock, m (common practice, no
// source).
func Plates() []float64 {
	return []float64{0.006, 0.008, 0.010, 0.012, 0.015, 0.020, 0.025, 0.030, 0.035, 0.040, 0.050, 0.060}
}

// largestGirders bounds the candidates of one girder: enough for 40 depths by 10
// widths by 8 by 6 plates.
const largestGirders = 20_000

// Candidates returns every welded I inside the bounds, lightest first, equal masses
// by designation; plates that do not fit together, such as a flange narrower than
// the web is thick, are left out. Errors are bounds that are out of order, not above
// zero, too many (over 20,000), or that leave nothing.
func (g Girder) Candidates() ([]section.Section, error) {
	depths, err := g.Depth.values("depth")
	if err != nil {
		return nil, err
	}
	widths, err := g.Width.values("width")
	if err != nil {
		return nil, err
	}
	if err := g.check(len(depths) * len(widths)); err != nil {
		return nil, err
	}
	var all []section.Section
	for _, h := range depths {
		for _, b := range widths {
			if g.MaxRatio > 0 && h > g.MaxRatio*b*(1+near) {
				continue
			}
			for _, tw := range g.Webs {
				for _, tf := range g.Flanges {
					if s, err := section.Find("WELDED-I " + mm(h) + "x" + mm(b) + "x" + mm(tw) + "x" + mm(tf)); err == nil {
						all = append(all, s)
					}
				}
			}
		}
	}
	if len(all) == 0 {
		return nil, fmt.Errorf("girder: no plates inside the bounds fit together; accepted are webs thinner than the flanges are wide, flanges within the depth")
	}
	slices.SortFunc(all, func(a, b section.Section) int { return order(&a, &b, massOf) })
	return all, nil
}

func (g Girder) check(sizes int) error {
	for _, q := range []struct {
		name   string
		plates []float64
	}{{"web", g.Webs}, {"flange", g.Flanges}} {
		if len(q.plates) == 0 {
			return fmt.Errorf("girder: no %s plates; accepted is at least one thickness, such as those of Plates", q.name)
		}
		for _, t := range q.plates {
			if !(t > 0 && t <= 1) {
				return fmt.Errorf("girder: %s plate of %v m; accepted is above 0 and up to 1 m", q.name, t)
			}
		}
	}
	if !(g.MaxRatio >= 0) {
		return fmt.Errorf("girder: depth over width of %v; accepted is a number above 0, or 0 for any", g.MaxRatio)
	}
	if n := sizes * len(g.Webs) * len(g.Flanges); n > largestGirders {
		return fmt.Errorf("girder: %d candidates; accepted are up to %d: wider steps or fewer plates", n, largestGirders)
	}
	return nil
}

// values lists the steps.
func (s Steps) values(name string) ([]float64, error) {
	if !(s.From > 0 && s.From <= s.To && s.To <= 10) {
		return nil, fmt.Errorf("girder: %s from %v m to %v m; accepted is above 0, in order, up to 10 m", name, s.From, s.To)
	}
	if s.From == s.To {
		return []float64{s.From}, nil
	}
	n := (s.To-s.From)/s.Step + near
	if !(s.Step > 0 && n < largestGirders) {
		return nil, fmt.Errorf("girder: %s in steps of %v m; accepted is a step above 0 that gives fewer than %d", name, s.Step, largestGirders)
	}
	var all []float64
	for i := range int(n) + 1 {
		all = append(all, s.From+float64(i)*s.Step)
	}
	return all, nil
}

// mm writes a length in mm, free of the rounding of its steps.
func mm(m float64) string { return strconv.FormatFloat(math.Round(m*1e7)/1e4, 'f', -1, 64) }

// Proportion returns the lightest girder inside the bounds that passes every check in
// the member, with the next lighter ones that fail. Errors as Girder.Candidates and
// Lightest.
func Proportion(p *Prepared, g Girder) (Result, error) {
	candidates, err := g.Candidates()
	if err != nil {
		return Result{}, fmt.Errorf("sizing: %w", err)
	}
	return Lightest(p, candidates)
}
