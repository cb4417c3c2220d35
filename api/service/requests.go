package service

import (
	"time"

	"github.com/google/uuid"

	"spanwright/api/auth"
	"spanwright/estimate/ratebook"
)

// Posting is a schedule as it came: bytes with their name and declared type.
type Posting struct {
	Name        string
	ContentType string
	Data        []byte
	JobTable    []byte // optional CSV of key and value, for postings without a Job sheet

	DefinitionTable []byte // optional CSV for postings without a sheet Definition
	RiskTable       []byte // optional CSV for postings without a sheet Risks
}

// Idempotency names one attempt; the zero value is none.
type Idempotency struct {
	Key         string
	Fingerprint []byte // SHA-256 over what was asked, not over its encoding
}

// NewProject asks for a project.
type NewProject struct {
	Name         string `json:"name" minLength:"1" maxLength:"200"`
	Currency     string `json:"currency,omitempty" default:"EUR" doc:"ISO 4217"`
	BaseDate     string `json:"base_date,omitempty" format:"date"`
	DisplayUnits string `json:"display_units,omitempty" enum:"SI,US" default:"SI"`
}

// NewEstimate asks for an estimate of a scheme.
type NewEstimate struct {
	Revision   *uuid.UUID `json:"schedule_revision_id,omitempty" doc:"the newest when absent"`
	RateBook   *uuid.UUID `json:"rate_book_id,omitempty" doc:"when absent, the book of the scheme's newest estimate, else the one named ratio"`
	BookName   string     `json:"rate_book,omitempty" maxLength:"200" doc:"name of the rate book, such as unit-rate, in place of its id" example:"unit-rate"`
	Seed       *uint64    `json:"seed,omitempty" default:"1"`
	Replicates int        `json:"replicates,omitempty" default:"32"`
	Trials     int        `json:"trials,omitempty" default:"4096"`
}

// Intake asks for project, scheme, schedule and estimate in one call. A project
// or scheme of that name is used again when it exists.
type Intake struct {
	Project  string
	Scheme   string
	RateBook *uuid.UUID
	BookName string // in place of the id
	Posting  Posting
}

// Taken is the answer to an intake.
type Taken struct {
	Project  Project  `json:"project"`
	Scheme   Scheme   `json:"scheme"`
	Schedule Revision `json:"schedule"`
	Estimate Estimate `json:"estimate"`
	Again    bool     `json:"-"` // an earlier attempt with the same key answered
}

// NewMultiplier asks for a multiplier on a project, or on one scheme of it.
type NewMultiplier struct {
	Project uuid.UUID           `json:"project_id"`
	Scheme  *uuid.UUID          `json:"scheme_id,omitempty"`
	Value   ratebook.Multiplier `json:"multiplier"`
}

// NewToken asks for a token.
type NewToken struct {
	Name      string     `json:"name" minLength:"1" maxLength:"100"`
	Role      auth.Role  `json:"role" enum:"viewer,estimator,manager,administrator"`
	ExpiresAt *time.Time `json:"expires_at,omitempty"`
}
