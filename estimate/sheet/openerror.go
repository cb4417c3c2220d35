package sheet

import "fmt"

// OpenKind sorts refusals of whole files.
type OpenKind uint8

// The kinds, with the HTTP status that suits each.
const (
	Malformed   OpenKind = iota // 422: the file is damaged or contradicts itself
	SizeLimit                   // 413: one of Limits is passed
	Unsupported                 // 415: another format, encrypted, or not what it was declared to be
)

// String names the kind.
func (k OpenKind) String() string {
	switch k {
	case Malformed:
		return "malformed"
	case SizeLimit:
		return "size limit"
	case Unsupported:
		return "unsupported"
	}
	return "unknown kind"
}

// OpenError refuses a file as a whole. Open and Rows return it.
type OpenError struct {
	Kind    OpenKind
	File    string  // name under which it was posted; may be empty
	Address Address // where, as far as known; else zero
	Problem string  // what is wrong
	Remedy  string  // what would be accepted
	cause   error
}

// Error writes file, place, problem and remedy on one line.
func (e *OpenError) Error() string {
	text := "the file"
	if e.File != "" {
		text = fmt.Sprintf("the file %q", e.File)
	}
	if where := e.Address.String(); where != "" {
		text += " at " + where
	}
	text += " " + e.Problem
	if e.Remedy != "" {
		text += "; " + e.Remedy
	}
	return text
}

// Unwrap is the error of the library underneath, if any.
func (e *OpenError) Unwrap() error { return e.cause }

const saveAgain = "open it in a spreadsheet program and save it again as .xlsx"

func malformed(problem, remedy string) *OpenError {
	return &OpenError{Kind: Malformed, Problem: problem, Remedy: remedy}
}

func unsupported(problem, remedy string) *OpenError {
	return &OpenError{Kind: Unsupported, Problem: problem, Remedy: remedy}
}

// at returns a copy of e that names its place.
func (e *OpenError) at(sheet string, row, column int) *OpenError {
	c := *e
	c.Address = Address{sheet, row, column}
	return &c
}
