package material

import (
	"fmt"
	"maps"
	"slices"
	"strings"
)

// Level says how far a grade fits a family; a greater level is worse.
type Level uint8

const (
	Suitable Level = iota // made so; Reason may hold a note
	Doubtful              // possible, with a warning
	Refused               // not made so
)

// String returns "suitable", "doubtful" or "refused".
func (l Level) String() string {
	switch l {
	case Suitable:
		return "suitable"
	case Doubtful:
		return "doubtful"
	case Refused:
		return "refused"
	}
	return fmt.Sprintf("level %d", uint8(l))
}

// Verdict is whether a section family is made in a grade.
type Verdict struct {
	Level  Level
	Reason string // why, or the note that goes with a suitable pair
	Remedy string // what to take instead; empty where suitable
}

// Suits returns the verdict on a section family (its name in any letter case)
// in a grade (any spelling that Find takes), from the family × grade table; exact
// names are answered without reading spellings, because sizing asks often. A
// family or grade that is not in the table is refused, and the remedy lists what
// is.
func Suits(family, grade string) Verdict {
	d, err := load()
	if err != nil {
		return Verdict{Level: Refused, Reason: err.Error(), Remedy: "mend the embedded data"}
	}
	if v, ok := d.verdicts[pair{family, grade}]; ok {
		return v
	}
	f := strings.ToUpper(strings.TrimSpace(family))
	if !d.families[f] {
		known := slices.Sorted(maps.Keys(d.families))
		return Verdict{Level: Refused, Reason: fmt.Sprintf("section family %q has no grades on record", family),
			Remedy: "one of the families " + strings.Join(known, ", ")}
	}
	g, err := Find(grade)
	if err != nil {
		return Verdict{Level: Refused, Reason: err.Error(), Remedy: "one of the grades " + strings.Join(d.names, ", ")}
	}
	v, ok := d.verdicts[pair{f, g.Name}]
	if !ok {
		return Verdict{Level: Refused, Reason: fmt.Sprintf("family %s in %s is not on record", f, g.Name),
			Remedy: "another grade for this family"}
	}
	return v
}
