package service

import (
	"context"
	"time"

	"github.com/google/uuid"

	"spanwright/api/auth"
)

// Store keeps records. Methods of Tx see one organisation only; what another
// organisation has is not found. Errors are *Error with the kinds named, or
// wrapped errors of the database.
type Store interface {
	// InTenant runs fn in one transaction as the organisation; an error rolls back.
	InTenant(ctx context.Context, organisation uuid.UUID, fn func(Tx) error) error
	// TokenByPublicID finds a token across organisations: NotFound.
	TokenByPublicID(ctx context.Context, publicID string) (Credential, error)
	// SessionBySecret finds a session by the hash of its secret: NotFound.
	SessionBySecret(ctx context.Context, sha256 []byte) (Credential, error)
	// Ready reports why requests cannot be served: no connection, a dirty schema,
	// or one that is newer or older than the program.
	Ready(ctx context.Context) error
}

// Credential is what a token or a session stands for.
type Credential struct {
	Organisation uuid.UUID
	Token        uuid.UUID
	Session      uuid.UUID // of a session
	SecretSHA256 []byte
	Role         auth.Role
	Name         string
	ExpiresAt    *time.Time
	RevokedAt    *time.Time
}

// Tx is one transaction of one organisation.
type Tx interface {
	InsertProject(ctx context.Context, p Project) error // Conflict: the name is taken
	Project(ctx context.Context, id uuid.UUID) (Project, error)
	ProjectByName(ctx context.Context, name string) (Project, error)
	Projects(ctx context.Context, p Page) (List[Project], error)
	// UpdateProject writes p where its stored version is p.Version−1: Stale otherwise.
	UpdateProject(ctx context.Context, p Project) error

	InsertScheme(ctx context.Context, s Scheme) error // Conflict
	Scheme(ctx context.Context, id uuid.UUID) (Scheme, error)
	SchemeByName(ctx context.Context, project uuid.UUID, name string) (Scheme, error)
	Schemes(ctx context.Context, project uuid.UUID, p Page) (List[Scheme], error)

	// InsertRevision gives the next number of the scheme and returns the record.
	InsertRevision(ctx context.Context, r Revision) (Revision, error)
	Revision(ctx context.Context, id uuid.UUID) (Revision, error) // with Source and JobTable
	NewestRevision(ctx context.Context, scheme uuid.UUID) (Revision, error)
	Revisions(ctx context.Context, scheme uuid.UUID, p Page) (List[Revision], error) // without Source

	InsertEstimate(ctx context.Context, e Estimate, job, document []byte) error
	Estimate(ctx context.Context, id uuid.UUID) (Estimate, error)
	EstimateDocument(ctx context.Context, id uuid.UUID) ([]byte, error)
	EstimateJob(ctx context.Context, id uuid.UUID) ([]byte, error)
	Estimates(ctx context.Context, scheme uuid.UUID, p Page) (List[Estimate], error)
	NewestEstimate(ctx context.Context, scheme uuid.UUID) (Estimate, error)

	InsertRateBook(ctx context.Context, b RateBook, content []byte, by uuid.UUID) error // Conflict
	RateBook(ctx context.Context, id uuid.UUID) (RateBook, error)
	RateBookByName(ctx context.Context, name string) (RateBook, error)
	RateBookVersion(ctx context.Context, id uuid.UUID, number int) (RateBook, error)
	RateBooks(ctx context.Context, p Page) (List[RateBook], error)
	UpdateRateBook(ctx context.Context, b RateBook, content []byte, by uuid.UUID) error // Stale

	InsertMultiplier(ctx context.Context, m Multiplier) error // Conflict: name, scope and subject exist
	Multiplier(ctx context.Context, id uuid.UUID) (Multiplier, error)
	Multipliers(ctx context.Context, project uuid.UUID, p Page) (List[Multiplier], error)
	// MultipliersInForce returns those of the project and of the scheme.
	MultipliersInForce(ctx context.Context, project, scheme uuid.UUID) ([]Multiplier, error)
	UpdateMultiplier(ctx context.Context, m Multiplier) error                              // Stale
	DeleteMultiplier(ctx context.Context, id uuid.UUID, version int64, at time.Time) error // Stale; kept as a row, out of force

	// InsertOutturns stores all or none: Conflict when a job has one in force.
	InsertOutturns(ctx context.Context, list []Outturn) error
	Outturn(ctx context.Context, id uuid.UUID) (Outturn, error)
	Outturns(ctx context.Context, p Page) (List[Outturn], error)
	OutturnsInForce(ctx context.Context) ([]Outturn, error)                               // by job
	OutturnsOfPosting(ctx context.Context, posting uuid.UUID) ([]Outturn, error)          // by job; withdrawn ones too
	WithdrawOutturn(ctx context.Context, id uuid.UUID, version int64, at time.Time) error // Stale; kept as a row, out of force

	InsertCalibration(ctx context.Context, c Calibration) error
	Calibration(ctx context.Context, id uuid.UUID) (Calibration, error)
	Calibrations(ctx context.Context, p Page) (List[Calibration], error) // without Proposal and Evidence
	// DecideCalibration writes the decision of one that is proposed: Stale otherwise.
	DecideCalibration(ctx context.Context, c Calibration) error

	InsertToken(ctx context.Context, t Token, secretSHA256 []byte) error
	Token(ctx context.Context, id uuid.UUID) (Token, error)
	Tokens(ctx context.Context, p Page) (List[Token], error)
	RevokeToken(ctx context.Context, id uuid.UUID, at time.Time) error
	InsertSession(ctx context.Context, id, token uuid.UUID, secretSHA256 []byte, created, expires time.Time) error
	DeleteSession(ctx context.Context, id uuid.UUID) error

	InsertAudit(ctx context.Context, e AuditEvent) error
	Audit(ctx context.Context, p Page) (List[AuditEvent], error)

	// Remembered finds the record of an idempotency key: NotFound.
	Remembered(ctx context.Context, token uuid.UUID, operation, key string) (Memory, error)
	// Remember writes it; Conflict when a simultaneous request wrote it first.
	Remember(ctx context.Context, token uuid.UUID, operation, key string, m Memory) error
}

// Memory is what an idempotency key stands for.
type Memory struct {
	Fingerprint []byte
	Resource    uuid.UUID
	Body        []byte // small JSON beside the resource, where the answer needs more ids
	CreatedAt   time.Time
}
