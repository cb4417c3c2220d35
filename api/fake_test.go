package api

import (
	"cmp"
	"context"
	"errors"
	"fmt"
	"maps"
	"slices"
	"sync"
	"time"

	"github.com/google/uuid"

	"spanwright/api/service"
)

// fakeStore keeps records in memory. A failing transaction leaves nothing behind.
type fakeStore struct {
	service.Store
	mu      sync.Mutex
	tenants map[uuid.UUID]*tenant
	ready   error
	broken  error // of every transaction
}

// tenant is the data of one organisation.
type tenant struct {
	projects    map[uuid.UUID]service.Project
	schemes     map[uuid.UUID]service.Scheme
	revisions   map[uuid.UUID]service.Revision
	estimates   map[uuid.UUID]service.Estimate
	documents   map[uuid.UUID][]byte
	books       map[uuid.UUID][]service.RateBook // by version
	multipliers map[uuid.UUID]service.Multiplier
	tokens      map[uuid.UUID]service.Token
	hashes      map[uuid.UUID][]byte
	memories    map[string]service.Memory
	events      map[uuid.UUID]service.AuditEvent

	outturns     map[uuid.UUID]service.Outturn
	calibrations map[uuid.UUID]service.Calibration
	jobs         map[uuid.UUID][]byte
}

func newTenant() *tenant {
	return &tenant{projects: map[uuid.UUID]service.Project{}, schemes: map[uuid.UUID]service.Scheme{}, revisions: map[uuid.UUID]service.Revision{},
		estimates: map[uuid.UUID]service.Estimate{}, documents: map[uuid.UUID][]byte{}, books: map[uuid.UUID][]service.RateBook{},
		multipliers: map[uuid.UUID]service.Multiplier{}, tokens: map[uuid.UUID]service.Token{}, hashes: map[uuid.UUID][]byte{},
		memories: map[string]service.Memory{}, events: map[uuid.UUID]service.AuditEvent{},
		outturns: map[uuid.UUID]service.Outturn{}, calibrations: map[uuid.UUID]service.Calibration{},
		jobs: map[uuid.UUID][]byte{}}
}

func (t *tenant) clone() *tenant {
	return &tenant{maps.Clone(t.projects), maps.Clone(t.schemes), maps.Clone(t.revisions), maps.Clone(t.estimates), maps.Clone(t.documents),
		maps.Clone(t.books), maps.Clone(t.multipliers), maps.Clone(t.tokens), maps.Clone(t.hashes), maps.Clone(t.memories), maps.Clone(t.events),
		maps.Clone(t.outturns), maps.Clone(t.calibrations), maps.Clone(t.jobs)}
}

func (s *fakeStore) InTenant(_ context.Context, organisation uuid.UUID, fn func(service.Tx) error) error {
	s.mu.Lock()
	defer s.mu.Unlock()
	if s.broken != nil {
		return s.broken
	}
	draft := s.tenants[organisation].clone()
	if err := fn(fakeTx{t: draft}); err != nil {
		return err
	}
	s.tenants[organisation] = draft
	return nil
}

func (s *fakeStore) TokenByPublicID(_ context.Context, publicID string) (service.Credential, error) {
	s.mu.Lock()
	defer s.mu.Unlock()
	for organisation, t := range s.tenants {
		for id, k := range t.tokens {
			if k.PublicID == publicID {
				return service.Credential{Organisation: organisation, Token: id, SecretSHA256: t.hashes[id], Role: k.Role, Name: k.Name,
					ExpiresAt: k.ExpiresAt, RevokedAt: k.RevokedAt}, nil
			}
		}
	}
	return service.Credential{}, missing("token")
}

func (s *fakeStore) Ready(context.Context) error { return s.ready }

func missing(what string) error {
	return &service.Error{Kind: service.NotFound, Message: "no such " + what}
}

var (
	errTaken = &service.Error{Kind: service.Conflict, Message: "the name is taken"}
	errStale = &service.Error{Kind: service.Stale, Message: "the version has changed"}
)

// fakeTx is one transaction. What the API does not reach is not there.
type fakeTx struct {
	service.Tx
	t *tenant
}

func get[T any](m map[uuid.UUID]T, id uuid.UUID, what string) (T, error) {
	v, ok := m[id]
	if !ok {
		return v, missing(what)
	}
	return v, nil
}

// page lists the records that fit, newest first: ids grow with time.
func page[T any](m map[uuid.UUID]T, p service.Page, fits func(T) bool) (service.List[T], error) {
	after := uuid.Max
	if p.Cursor != "" {
		id, err := uuid.Parse(p.Cursor)
		if err != nil {
			return service.List[T]{}, &service.Error{Kind: service.Invalid, Message: "the cursor is not one of this list",
				Faults: []service.Fault{{Found: p.Cursor, Problem: "not a cursor", Remedy: "“next” of the page before"}}}
		}
		after = id
	}
	var l service.List[T]
	ids := slices.SortedFunc(maps.Keys(m), func(a, b uuid.UUID) int { return cmp.Compare(b.String(), a.String()) })
	for _, id := range ids {
		if id.String() >= after.String() || !fits(m[id]) {
			continue
		}
		if len(l.Items) == cmp.Or(p.Limit, 50) {
			l.Next = after.String()
			break
		}
		l.Items, after = append(l.Items, m[id]), id
	}
	return l, nil
}

func all[T any](T) bool { return true }

func (x fakeTx) InsertProject(_ context.Context, p service.Project) error {
	for _, o := range x.t.projects {
		if o.Name == p.Name {
			return errTaken
		}
	}
	x.t.projects[p.ID] = p
	return nil
}

func (x fakeTx) Project(_ context.Context, id uuid.UUID) (service.Project, error) {
	return get(x.t.projects, id, "project")
}

func (x fakeTx) ProjectByName(_ context.Context, name string) (service.Project, error) {
	for _, p := range x.t.projects {
		if p.Name == name {
			return p, nil
		}
	}
	return service.Project{}, missing("project")
}

func (x fakeTx) Projects(_ context.Context, p service.Page) (service.List[service.Project], error) {
	return page(x.t.projects, p, all)
}

func (x fakeTx) UpdateProject(_ context.Context, p service.Project) error {
	if x.t.projects[p.ID].Version != p.Version-1 {
		return errStale
	}
	for id, o := range x.t.projects {
		if o.Name == p.Name && id != p.ID {
			return errTaken
		}
	}
	x.t.projects[p.ID] = p
	return nil
}

func (x fakeTx) InsertScheme(_ context.Context, s service.Scheme) error {
	for _, o := range x.t.schemes {
		if o.Project == s.Project && o.Name == s.Name {
			return errTaken
		}
	}
	x.t.schemes[s.ID] = s
	return nil
}

func (x fakeTx) Scheme(_ context.Context, id uuid.UUID) (service.Scheme, error) {
	return get(x.t.schemes, id, "scheme")
}

func (x fakeTx) SchemeByName(_ context.Context, project uuid.UUID, name string) (service.Scheme, error) {
	for _, s := range x.t.schemes {
		if s.Project == project && s.Name == name {
			return s, nil
		}
	}
	return service.Scheme{}, missing("scheme")
}

func (x fakeTx) Schemes(_ context.Context, project uuid.UUID, p service.Page) (service.List[service.Scheme], error) {
	return page(x.t.schemes, p, func(s service.Scheme) bool { return s.Project == project })
}

func (x fakeTx) InsertRevision(_ context.Context, r service.Revision) (service.Revision, error) {
	r.Number = 1
	for _, o := range x.t.revisions {
		if o.Scheme == r.Scheme {
			r.Number = max(r.Number, o.Number+1)
		}
	}
	x.t.revisions[r.ID] = r
	return r, nil
}

func (x fakeTx) Revision(_ context.Context, id uuid.UUID) (service.Revision, error) {
	return get(x.t.revisions, id, "schedule")
}

func (x fakeTx) NewestRevision(_ context.Context, scheme uuid.UUID) (service.Revision, error) {
	l, err := page(x.t.revisions, service.Page{Limit: 1}, func(r service.Revision) bool { return r.Scheme == scheme })
	if err != nil || len(l.Items) == 0 {
		return service.Revision{}, missing("schedule")
	}
	return l.Items[0], nil
}

func (x fakeTx) Revisions(_ context.Context, scheme uuid.UUID, p service.Page) (service.List[service.Revision], error) {
	return page(x.t.revisions, p, func(r service.Revision) bool { return r.Scheme == scheme })
}

func (x fakeTx) InsertEstimate(_ context.Context, e service.Estimate, job, document []byte) error {
	x.t.estimates[e.ID], x.t.jobs[e.ID], x.t.documents[e.ID] = e, job, document
	return nil
}

func (x fakeTx) Estimate(_ context.Context, id uuid.UUID) (service.Estimate, error) {
	return get(x.t.estimates, id, "estimate")
}

func (x fakeTx) NewestEstimate(_ context.Context, scheme uuid.UUID) (service.Estimate, error) {
	for _, id := range slices.Backward(slices.SortedFunc(maps.Keys(x.t.estimates), func(a, b uuid.UUID) int { return cmp.Compare(a.String(), b.String()) })) {
		if e := x.t.estimates[id]; e.Scheme == scheme {
			return e, nil
		}
	}
	return service.Estimate{}, missing("estimate")
}

func (x fakeTx) EstimateDocument(_ context.Context, id uuid.UUID) ([]byte, error) {
	return get(x.t.documents, id, "estimate")
}

func (x fakeTx) EstimateJob(_ context.Context, id uuid.UUID) ([]byte, error) {
	return get(x.t.jobs, id, "estimate")
}

func (x fakeTx) Estimates(_ context.Context, scheme uuid.UUID, p service.Page) (service.List[service.Estimate], error) {
	return page(x.t.estimates, p, func(e service.Estimate) bool { return e.Scheme == scheme })
}

func (x fakeTx) InsertRateBook(_ context.Context, b service.RateBook, _ []byte, _ uuid.UUID) error {
	for _, versions := range x.t.books {
		if versions[0].Name == b.Name {
			return errTaken
		}
	}
	x.t.books[b.ID] = []service.RateBook{b}
	return nil
}

func (x fakeTx) RateBook(ctx context.Context, id uuid.UUID) (service.RateBook, error) {
	return x.RateBookVersion(ctx, id, len(x.t.books[id]))
}

func (x fakeTx) RateBookByName(_ context.Context, name string) (service.RateBook, error) {
	for _, versions := range x.t.books {
		if b := versions[len(versions)-1]; b.Name == name {
			return b, nil
		}
	}
	return service.RateBook{}, missing("rate book")
}

func (x fakeTx) RateBookVersion(_ context.Context, id uuid.UUID, number int) (service.RateBook, error) {
	versions := x.t.books[id]
	if number < 1 || number > len(versions) {
		return service.RateBook{}, missing("rate book")
	}
	return versions[number-1], nil
}

func (x fakeTx) RateBooks(_ context.Context, p service.Page) (service.List[service.RateBook], error) {
	newest := map[uuid.UUID]service.RateBook{}
	for id, versions := range x.t.books {
		newest[id] = versions[len(versions)-1]
	}
	return page(newest, p, all)
}

func (x fakeTx) UpdateRateBook(_ context.Context, b service.RateBook, _ []byte, _ uuid.UUID) error {
	x.t.books[b.ID] = append(slices.Clone(x.t.books[b.ID]), b)
	return nil
}

func (x fakeTx) InsertMultiplier(_ context.Context, m service.Multiplier) error {
	for _, o := range x.t.multipliers {
		if o.Project == m.Project && o.Value.Name == m.Value.Name && o.Value.Scope == m.Value.Scope && o.Value.Subject == m.Value.Subject {
			return errTaken
		}
	}
	x.t.multipliers[m.ID] = m
	return nil
}

func (x fakeTx) Multiplier(_ context.Context, id uuid.UUID) (service.Multiplier, error) {
	return get(x.t.multipliers, id, "multiplier")
}

func (x fakeTx) Multipliers(_ context.Context, project uuid.UUID, p service.Page) (service.List[service.Multiplier], error) {
	return page(x.t.multipliers, p, func(m service.Multiplier) bool { return m.Project == project })
}

func (x fakeTx) MultipliersInForce(_ context.Context, project, _ uuid.UUID) ([]service.Multiplier, error) {
	l, err := page(x.t.multipliers, service.Page{}, func(m service.Multiplier) bool { return m.Project == project })
	return l.Items, err
}

func (x fakeTx) UpdateMultiplier(_ context.Context, m service.Multiplier) error {
	x.t.multipliers[m.ID] = m
	return nil
}

func (x fakeTx) DeleteMultiplier(_ context.Context, id uuid.UUID, _ int64, _ time.Time) error {
	delete(x.t.multipliers, id)
	return nil
}

func (x fakeTx) InsertToken(_ context.Context, k service.Token, hash []byte) error {
	x.t.tokens[k.ID], x.t.hashes[k.ID] = k, hash
	return nil
}

func (x fakeTx) Token(_ context.Context, id uuid.UUID) (service.Token, error) {
	return get(x.t.tokens, id, "token")
}

func (x fakeTx) Tokens(_ context.Context, p service.Page) (service.List[service.Token], error) {
	return page(x.t.tokens, p, all)
}

func (x fakeTx) RevokeToken(_ context.Context, id uuid.UUID, at time.Time) error {
	k := x.t.tokens[id]
	k.RevokedAt = &at
	x.t.tokens[id] = k
	return nil
}

func (x fakeTx) InsertAudit(_ context.Context, e service.AuditEvent) error {
	x.t.events[e.ID] = e
	return nil
}

func (x fakeTx) Audit(_ context.Context, p service.Page) (service.List[service.AuditEvent], error) {
	return page(x.t.events, p, all)
}

func (x fakeTx) Remembered(_ context.Context, token uuid.UUID, operation, key string) (service.Memory, error) {
	m, ok := x.t.memories[fmt.Sprint(token, operation, "\x00", key)]
	if !ok {
		return m, missing("key")
	}
	return m, nil
}

func (x fakeTx) Remember(_ context.Context, token uuid.UUID, operation, key string, m service.Memory) error {
	x.t.memories[fmt.Sprint(token, operation, "\x00", key)] = m
	return nil
}

var errDatabase = errors.New("connection to host db.internal refused for user spanwright")
