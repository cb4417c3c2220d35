package sizing

import (
	"fmt"

	"spanwright/structural/material"
	"spanwright/structural/resistance"
	"spanwright/structural/section"
)

// steel returns the material of a section, or the reason why it cannot be taken:
// the grade does not come in its family or thickness, or it is too deep or wide.
func (p *Prepared) steel(s *section.Section) (resistance.Material, error) {
	if err := p.fits(s); err != nil {
		return resistance.Material{}, err
	}
	v := p.suits(s.Family)
	if v.Level == material.Refused {
		return resistance.Material{}, fmt.Errorf("%s: %s; take %s", s.Designation, v.Reason, v.Remedy)
	}
	fy, fu, err := v.grade.Strength(s.Thickness)
	if err != nil {
		return resistance.Material{}, fmt.Errorf("%s: %w", s.Designation, err)
	}
	return resistance.Material{Yield: fy, Ultimate: fu, E: v.grade.E, G: v.grade.G}, nil
}

// fits refuses a section over the member's limits of depth and width, or too heavy
// to be followed.
func (p *Prepared) fits(s *section.Section) error {
	if m := p.massOf(s); m > heaviest {
		return fmt.Errorf("%s: %.4g kg/m; sizing looks at sections up to %v kg/m", s.Designation, m, heaviest)
	}
	if m := p.member.MaxDepth; m > 0 && !(s.H <= m) {
		return fmt.Errorf("%s: %.4g mm deep; the member has room for %.4g mm", s.Designation, s.H*1e3, m*1e3)
	}
	if m := p.member.MaxWidth; m > 0 && !(s.B <= m) {
		return fmt.Errorf("%s: %.4g mm wide; the member has room for %.4g mm", s.Designation, s.B*1e3, m*1e3)
	}
	return nil
}

// available is steel without the reason: what is surely refused is sorted out
// before it is put into words that the search does not read.
func (p *Prepared) available(s *section.Section) (resistance.Material, bool) {
	if p.tooLarge(s) {
		return resistance.Material{}, false
	}
	bands := p.suits(s.Family).grade.Bands
	if s.Thickness > bands[len(bands)-1].UpTo*1.001 {
		return resistance.Material{}, false
	}
	m, err := p.steel(s)
	return m, err == nil
}

// tooLarge is fits without the reason.
func (p *Prepared) tooLarge(s *section.Section) bool {
	return p.massOf(s) > heaviest || p.member.MaxDepth > 0 && !(s.H <= p.member.MaxDepth) || p.member.MaxWidth > 0 && !(s.B <= p.member.MaxWidth)
}

// verdict is what material.Suits says of a family in the setup's grade, and the
// grade as it is in the family.
type verdict struct {
	family string
	material.Verdict
	grade material.Grade
}

// suits asks material.Suits once for each family: it reads spellings, which takes
// longer than all checks of a section.
func (p *Prepared) suits(family string) *verdict {
	for i := range p.verdicts {
		if p.verdicts[i].family == family {
			return &p.verdicts[i]
		}
	}
	p.verdicts = append(p.verdicts, verdict{family, material.Suits(family, p.setup.Grade.Name), p.setup.Grade.For(family)})
	return &p.verdicts[len(p.verdicts)-1]
}

// checked returns the section that the design basis reckons with: under AISC 360 a
// tube has its design wall (B4.2), for stiffness too.
func (p *Prepared) checked(s *section.Section) *section.Section {
	if !p.designWall || s.Shape != section.RoundTube && s.Shape != section.RectangularTube {
		return s
	}
	p.design = s.Design()
	return &p.design
}
