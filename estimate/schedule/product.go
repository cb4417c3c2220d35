package schedule

import (
	"errors"
	"strings"

	"spanwright/structural/material"
	"spanwright/structural/section"
)

// product is what Section or family names.
type product struct {
	known       bool
	treatment   Treatment
	family      string
	designation string
	wrong       *complaint
}

// product finds the family or section of a row, or reports that there is none.
func (r *row) product(f *fields) product {
	if f.product.state != given {
		return product{}
	}
	p := r.products.find(f.product.value, findProduct)
	if p.wrong != nil {
		r.judge(colProduct, p.wrong)
	}
	return p
}

func findProduct(name string) product {
	if family, ok := section.IsFamily(name); ok {
		if _, err := section.Series(family); err != nil {
			return product{wrong: unknownSection(name, err)}
		}
		return product{known: true, treatment: SizeFromFamily, family: family}
	}
	s, err := section.Find(name)
	if err != nil {
		return product{wrong: unknownSection(name, err)}
	}
	return product{known: true, treatment: CheckSection, family: s.Family, designation: s.Designation}
}

// steel settles the steel of a row and holds it against the family.
func (r *row) steel(m *Member, f *fields, d *taken) {
	switch {
	case f.grade.state == bad:
		return
	case f.grade.state == given:
		if m.Grade = r.givenGrade(f); m.Grade == "" {
			return
		}
		if v := r.suits(m.Family, m.Grade); v.Level == material.Refused {
			r.fault(colGrade, f.grade.value, "does not suit "+m.Family+": "+v.Reason, v.Remedy)
			return
		}
	case r.job.given[jobGrade]:
		if m.Grade = r.job.Grade; m.Grade == "" {
			return
		}
		if r.suits(m.Family, m.Grade).Level == material.Refused {
			r.unsuited[m.Family] = append(r.unsuited[m.Family], r.number)
			return
		}
	default:
		m.Grade = gradeOf(m.Family)
		d.take("grade", r.defaults.grade(m.Grade))
	}
	if v := r.suits(m.Family, m.Grade); v.Level == material.Doubtful {
		r.defaults.noteGrade(m.Family, m.Grade, v)
	}
}

// suits holds a family against a grade.
func (r *reader) suits(family, grade string) material.Verdict {
	return r.verdicts.find([2]string{family, grade}, func(p [2]string) material.Verdict { return material.Suits(p[0], p[1]) })
}

// grade is what a text names as steel.
type grade struct {
	name  string
	wrong *complaint
}

func findGrade(text string) grade {
	g, err := material.Find(text)
	if err != nil {
		return grade{wrong: unknownGrade(text, err)}
	}
	return grade{name: g.Name}
}

// givenGrade is the grade that the row names, empty where it names none; an
// unknown one is reported.
func (r *row) givenGrade(f *fields) string {
	if f.grade.state != given {
		return ""
	}
	g := r.grades.find(f.grade.value, findGrade)
	if g.wrong != nil {
		r.judge(colGrade, g.wrong)
	}
	return g.name
}

// memory keeps what was looked up, up to a bound.
type memory[K comparable, V any] map[K]V

// remembered is how many things are kept.
const remembered = 10_000

func (m memory[K, V]) find(key K, look func(K) V) V {
	if v, ok := m[key]; ok {
		return v
	}
	v := look(key)
	if len(m) < remembered {
		m[key] = v
	}
	return v
}

// unknownSection turns the refusal of a section name into a complaint.
func unknownSection(found string, err error) *complaint {
	p := &complaint{found: shorten(found), problem: err.Error(), remedy: "a family such as IPE or a section such as IPE 300; for grating, rails and the like write not sized in Support"}
	var e *section.UnknownError
	if errors.As(err, &e) {
		p.problem = "names no section: " + e.Why
		p.remedy = didYouMean(e.Near, p.remedy)
	}
	return p
}

func unknownGrade(found string, err error) *complaint {
	p := &complaint{found: shorten(found), problem: err.Error(), remedy: "one of " + strings.Join(material.Names(), ", ")}
	var e *material.UnknownError
	if errors.As(err, &e) {
		p.problem = "is no steel grade held here"
		p.remedy = didYouMean(e.Near, p.remedy)
	}
	return p
}
