package service

import (
	"fmt"

	"spanwright/estimate/sheet"
)

// Kind classifies an Error; the web layer turns it into a status.
type Kind uint8

// The kinds of errors.
const (
	Internal             Kind = iota // unknown: logged, answered without detail
	Unauthenticated                  // no token, or one that is unknown, expired or revoked
	Forbidden                        // the role may not
	NotFound                         // no such thing in this organisation
	Conflict                         // a name taken, a key used for something else
	Stale                            // If-Match names another version
	PreconditionRequired             // If-Match is missing
	Invalid                          // the request's content is wrong; see Faults
	Malformed                        // the body cannot be read
	Unsupported                      // the content type is not one that can be read
	TooLarge                         // over a limit at the door
	Busy                             // too many heavy requests; try again
)

// Fault is one thing wrong with a request: by cell for spreadsheets, by JSON
// pointer for JSON.
type Fault struct {
	Pointer string `json:"pointer,omitempty" doc:"JSON pointer, for a fault of a JSON body"`
	Sheet   string `json:"sheet,omitempty"`
	Row     int    `json:"row,omitempty"`
	Column  string `json:"column,omitempty" doc:"letters, as in a spreadsheet"`
	Cell    string `json:"cell,omitempty" doc:"the address, such as Schedule!C7"`
	Header  string `json:"header,omitempty"`
	Mark    string `json:"mark,omitempty" doc:"the member, where a sizing failed"`
	Found   string `json:"found"`
	Problem string `json:"problem"`
	Remedy  string `json:"remedy" doc:"what would be accepted"`
}

// Error is an error of a use case.
type Error struct {
	Kind    Kind
	Message string // for the caller; no secret, no SQL
	Faults  []Fault
	Err     error // cause, for the log
}

// Error is the message with its cause, for the log.
func (e *Error) Error() string {
	if e.Err != nil {
		return fmt.Sprintf("%s: %v", e.Message, e.Err)
	}
	return e.Message
}

// Unwrap returns the cause.
func (e *Error) Unwrap() error { return e.Err }

// fromSheet turns faults of a spreadsheet into those of a request.
func fromSheet(in sheet.Faults) []Fault {
	out := make([]Fault, len(in))
	for i, f := range in {
		out[i] = Fault{Sheet: f.Address.Sheet, Row: f.Address.Row, Column: sheet.Letters(f.Address.Column), Cell: f.Address.String(),
			Header: f.Header, Found: f.Found, Problem: f.Problem, Remedy: f.Remedy}
	}
	return out
}
