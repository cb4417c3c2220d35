package schedule

import (
	"slices"
	"strings"
)

// The execution and inspection classes, as they stand in ExecutionClass.
const (
	EXC1       = "EXC1" // EN 1090-2:2018, annex A; EN 1993-1-1, annex C
	EXC2       = "EXC2"
	EXC3       = "EXC3"
	EXC4       = "EXC4"
	AISCStatic = "AISC static" // AISC 360 chapter N; AWS D1.1, statically loaded
	AISCCyclic = "AISC cyclic" // AISC 360 chapter N; AWS D1.1, cyclically loaded
)

// ExecutionClasses returns the execution classes that a job or a row may name: EXC1
// to EXC4 of EN 1090-2, and AISC static and AISC cyclic (AISC 360 chapter N, AWS D1.1
// statically and cyclically loaded).
func ExecutionClasses() []string {
	return []string{EXC1, EXC2, EXC3, EXC4, AISCStatic, AISCCyclic}
}

// executionClass finds a class whatever its letter case and spaces.
func executionClass(found string) (string, *complaint) {
	classes := ExecutionClasses()
	i := slices.IndexFunc(classes, func(c string) bool { return fold(c) == fold(found) })
	if i < 0 {
		return "", &complaint{shorten(found), "is no execution class", didYouMean(near(found, classes), "one of "+strings.Join(classes, ", "))}
	}
	return classes[i], nil
}

func (r *reader) jobExecution() string {
	found := r.jobText(jobExecution)
	if found == "" {
		return ""
	}
	class, wrong := executionClass(found)
	if wrong != nil {
		r.jobFault(jobExecution, wrong)
	}
	return class
}
