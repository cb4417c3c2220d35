package schedule

import (
	"slices"

	"spanwright/estimate/sheet"
)

// tie is one row that takes the size of another.
type tie struct {
	mark, of string
	family   string // of the row; empty where it is not known
	found    string
	address  sheet.Address
	header   string
}

// tied is what a tie has to know of the row that it names.
type tied struct {
	family    string
	treatment Treatment
	built     bool // without a fault of its own that hides what it is
}

// tie notes a row that takes the size of another; all rows must be read before it
// can be judged.
func (r *row) tie(m *Member, f *fields) {
	if m.Treatment == CheckSection {
		r.fault(colSameSize, f.sameSize.value, "asks for a choice, and the section is given", "a family in Section or family, or a blank cell here")
		return
	}
	if f.sameSize.value == m.Mark {
		r.fault(colSameSize, f.sameSize.value, "is the row's own mark", "the mark of another row")
		return
	}
	r.ties = append(r.ties, tie{m.Mark, f.sameSize.value, m.Family, shorten(f.sameSize.value), r.place(colSameSize), r.header(colSameSize)})
}

// reportTies judges the ties when every row is read: the row named must be there,
// be sized, and from the same family.
func (r *reader) reportTies() {
	for _, t := range r.ties {
		of, ok := r.sizes[t.of]
		report := func(problem, remedy string) { r.report(t.address, t.header, t.found, problem, remedy) }
		switch {
		case !ok && r.unmarked:
		case !ok:
			marks := make([]string, 0, len(r.sizes))
			for m := range r.sizes {
				marks = append(marks, m)
			}
			slices.Sort(marks)
			report("is no mark of the schedule", didYouMean(near(t.of, marks), "the mark of another row"))
		case !of.built || t.family == "":
		case of.treatment == CheckSection:
			report("has a given section", "the same section in Section or family, and a blank cell here")
		case of.treatment == ByMass:
			report("is a row that is not sized", "the mark of a row that is sized from the same family")
		case of.family != t.family:
			report("is sized from "+of.family+", this row from "+t.family, "one family for rows of one size")
		}
	}
}
