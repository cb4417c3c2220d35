package service

import (
	"time"

	"github.com/google/uuid"

	"spanwright/api/auth"
	"spanwright/estimate/money"
	"spanwright/estimate/ratebook"
)

// Project is one structure to be built.
type Project struct {
	ID           uuid.UUID `json:"id"`
	Name         string    `json:"name"`
	Currency     string    `json:"currency"`
	BaseDate     string    `json:"base_date,omitempty"`
	DisplayUnits string    `json:"display_units"`
	Version      int64     `json:"version"`
	CreatedAt    time.Time `json:"created_at"`
	UpdatedAt    time.Time `json:"updated_at"`
}

// Scheme is one alternative design of a project.
type Scheme struct {
	ID        uuid.UUID `json:"id"`
	Project   uuid.UUID `json:"project_id"`
	Name      string    `json:"name"`
	Version   int64     `json:"version"`
	CreatedAt time.Time `json:"created_at"`
	UpdatedAt time.Time `json:"updated_at"`
}

// Revision is one accepted posting of a scheme's schedule. It is never edited.
type Revision struct {
	ID           uuid.UUID `json:"id"`
	Scheme       uuid.UUID `json:"scheme_id"`
	Number       int       `json:"number"`
	SourceName   string    `json:"source_name"`
	SourceSHA256 string    `json:"source_sha256"`
	Members      int       `json:"members"`
	CreatedAt    time.Time `json:"created_at"`
	CreatedBy    string    `json:"created_by" doc:"name of the token"`

	Author   uuid.UUID `json:"-"` // the token; CreatedBy is its name
	Source   []byte    `json:"-"` // as posted
	JobTable []byte    `json:"-"` // the job defaults posted beside it

	DefinitionTable []byte `json:"-"` // what of the structure is defined, posted beside it
	RiskTable       []byte `json:"-"` // the discrete risks posted beside it
}

// Estimate is the head of an immutable estimate; its document is read apart.
type Estimate struct {
	ID             uuid.UUID     `json:"id"`
	Scheme         uuid.UUID     `json:"scheme_id"`
	Revision       uuid.UUID     `json:"schedule_revision_id"`
	RateBook       uuid.UUID     `json:"rate_book_id"`
	RateBookNumber int           `json:"rate_book_version"`
	JobSHA256      string        `json:"job_sha256"`
	DocumentSHA256 string        `json:"document_sha256"`
	EngineVersion  int           `json:"engine_version"`
	Currency       string        `json:"currency"`
	Base           money.Decimal `json:"base"`
	P10            money.Decimal `json:"p10"`
	P50            money.Decimal `json:"p50"`
	P80            money.Decimal `json:"p80"`
	P90            money.Decimal `json:"p90"`
	Mean           money.Decimal `json:"mean"`
	Confidence     float64       `json:"confidence"`
	Contingency    money.Decimal `json:"contingency"`
	Net            money.Decimal `json:"net_t"`
	Delivered      money.Decimal `json:"delivered_t"`
	Purchased      money.Decimal `json:"purchased_t"`
	Members        int           `json:"members"`
	Unsafe         int           `json:"unsafe_findings"`
	CreatedAt      time.Time     `json:"created_at"`
	CreatedBy      string        `json:"created_by" doc:"name of the token"`

	Author uuid.UUID `json:"-"` // the token; CreatedBy is its name
}

// RateBook is a versioned rate book.
type RateBook struct {
	ID        uuid.UUID     `json:"id"`
	Name      string        `json:"name"`
	Version   int64         `json:"version" doc:"of the resource, for If-Match"`
	Number    int           `json:"number" doc:"of the content"`
	SHA256    string        `json:"sha256"`
	Content   ratebook.Book `json:"content"`
	CreatedAt time.Time     `json:"created_at"`
	UpdatedAt time.Time     `json:"updated_at"`
}

// Multiplier is an edited multiplier. Its reach is a project or a scheme of it;
// within that, its scope says which members it is for.
type Multiplier struct {
	ID        uuid.UUID           `json:"id"`
	Project   uuid.UUID           `json:"project_id"`
	Scheme    *uuid.UUID          `json:"scheme_id,omitempty" doc:"only this scheme; empty for the whole project"`
	Value     ratebook.Multiplier `json:"multiplier"`
	Version   int64               `json:"version"`
	CreatedAt time.Time           `json:"created_at"`
	UpdatedAt time.Time           `json:"updated_at"`
}

// Token is an access token without its secret.
type Token struct {
	ID        uuid.UUID  `json:"id"`
	PublicID  string     `json:"public_id"`
	Name      string     `json:"name"`
	Role      auth.Role  `json:"role" enum:"viewer,estimator,manager,administrator"`
	CreatedAt time.Time  `json:"created_at"`
	CreatedBy *uuid.UUID `json:"created_by_token_id,omitempty" doc:"absent for one that the command line made"`
	ExpiresAt *time.Time `json:"expires_at,omitempty"`
	RevokedAt *time.Time `json:"revoked_at,omitempty"`
	Version   int64      `json:"version"`
}

// AuditEvent is one change: what, before, after, who, when.
type AuditEvent struct {
	ID          uuid.UUID `json:"id"`
	At          time.Time `json:"at"`
	ActorToken  uuid.UUID `json:"actor_token_id,omitzero" doc:"absent where the command line acted"`
	ActorName   string    `json:"actor_name"`
	ActorRole   string    `json:"actor_role"`
	RequestID   string    `json:"request_id"`
	Action      string    `json:"action"`
	SubjectKind string    `json:"subject_kind"`
	SubjectID   uuid.UUID `json:"subject_id"`
	Before      any       `json:"before,omitempty"`
	After       any       `json:"after,omitempty"`
}

// Page asks for part of a list: after a cursor, newest first.
type Page struct {
	Limit  int    // 1 to 200; 0 means 50
	Cursor string // of the page before; opaque
}

// List is one page of a list.
type List[T any] struct {
	Items []T    `json:"items"`
	Next  string `json:"next,omitempty" doc:"cursor of the next page; absent on the last"`
}
