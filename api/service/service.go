// Package service holds the use cases. Every one authorises, opens the tenant's
// transaction, writes its audit event and its idempotency record in it, and asks
// the engine outside of it.
//
//	HTTP or page → Actor + request type → Service method
//	  → auth.Allow → Store.InTenant(Tx …) → record, audit, idempotency
//	  → engine.Run between two transactions, never inside one
//	  → record or *Error (a kind; status codes belong to the web layer)
//
// The interfaces that it needs of a store are declared here.
package service

import (
	"context"
	"log/slog"
	"time"

	"github.com/google/uuid"

	"spanwright/api/auth"
	"spanwright/estimate/document"
	"spanwright/estimate/engine"
	"spanwright/estimate/job"
	"spanwright/estimate/sheet"
)

// Actor is who asks, found from a token or a session.
type Actor struct {
	Organisation uuid.UUID
	Token        uuid.UUID
	Name         string
	Role         auth.Role
	RequestID    string
}

// RunFunc computes an estimate; engine.Run in the program, a stub in tests.
type RunFunc func(ctx context.Context, j job.Job, progress engine.Progress) (document.Document, error)

// Limits are those at the door.
type Limits struct {
	Sheet   sheet.Limits
	Members int // rows of one schedule
	Groups  int // groups of members of one schedule
	Trials  int // replicates × trials of one estimate
	Heavy   int // estimates computed at the same time; more are answered Busy
}

// DefaultLimits are 20 MB, 20,000 members in 500 groups, 1,000,000 trials, two heavy
// requests.
func DefaultLimits() Limits {
	l := Limits{Sheet: sheet.DefaultLimits(), Members: 20_000, Groups: 500, Trials: 1_000_000, Heavy: 2}
	l.Sheet.Rows = l.Members + 100 // heads and notes beside the members
	return l
}

// Config wires a Service.
type Config struct {
	Store  Store
	Run    RunFunc
	Limits Limits
	Build  string // of the program, frozen into jobs
	Now    func() time.Time
	NewID  func() (uuid.UUID, error) // UUIDv7
	Logger *slog.Logger
}

// Service is every use case.
type Service struct {
	store  Store
	run    RunFunc
	limits Limits
	build  string
	now    func() time.Time
	newID  func() (uuid.UUID, error)
	log    *slog.Logger
	heavy  chan struct{} // estimates being computed
	files  chan struct{} // large files being read or written

	previews *previews
}

// New returns a Service.
func New(c Config) *Service {
	return &Service{store: c.Store, run: c.Run, limits: c.Limits, build: c.Build, now: c.Now, newID: c.NewID, log: c.Logger,
		heavy: make(chan struct{}, max(1, c.Limits.Heavy)), files: make(chan struct{}, max(1, c.Limits.Heavy)),
		previews: newPreviews()}
}

// allow refuses what the actor's role may not do.
func (s *Service) allow(a Actor, o auth.Operation) error {
	if auth.Allow(a.Role, o) {
		return nil
	}
	return &Error{Kind: Forbidden, Message: "the role " + string(a.Role) + " may not " + string(o) + "; the least role that may is " + string(auth.LeastRole(o))}
}
