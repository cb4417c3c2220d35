package store_test

import (
	"context"
	"crypto/sha256"
	"encoding/hex"
	"errors"
	"strings"
	"testing"
	"time"

	"github.com/google/go-cmp/cmp"
	"github.com/google/uuid"

	"spanwright/api/auth"
	"spanwright/api/pgtest"
	"spanwright/api/service"
	"spanwright/api/store"
	"spanwright/estimate/money"
	"spanwright/estimate/ratebook"
	"spanwright/estimate/spread"
)

// fixture is one organisation with one record of each kind, stored through the
// methods under test.
type fixture struct {
	t            *testing.T
	db           *pgtest.Database
	s            *store.Store
	organisation uuid.UUID
	token        service.Token
	secret       auth.Secret
	project      service.Project
	scheme       service.Scheme
	revision     service.Revision
	book         service.RateBook
	multiplier   service.Multiplier
	estimate     service.Estimate
	job, doc     []byte
	outturn      service.Outturn
	calibration  service.Calibration
}

func newFixture(t *testing.T) fixture {
	t.Helper()
	db := pgtest.New(t)
	return populate(t, db, mustOpen(t, db.ServiceURL, store.Options{MaxConnections: 24, LockTimeout: 30 * time.Second}))
}

// populate makes another organisation in the same database; names are the same in
// each, so that a unique key over all organisations would show.
func populate(t *testing.T, db *pgtest.Database, s *store.Store) fixture {
	t.Helper()
	f := fixture{t: t, db: db, s: s, organisation: newOrganisation(t, db), secret: auth.NewToken()}
	f.token = service.Token{ID: newID(), PublicID: f.secret.PublicID, Name: "quay job", Role: auth.Estimator, CreatedAt: at(0), Version: 1}
	f.project = service.Project{ID: newID(), Name: "Loading quay", Currency: "EUR", BaseDate: "2026-06-01", DisplayUnits: "SI", Version: 1, CreatedAt: at(1), UpdatedAt: at(1)}
	f.scheme = service.Scheme{ID: newID(), Project: f.project.ID, Name: "Inner support", Version: 1, CreatedAt: at(2), UpdatedAt: at(2)}
	f.revision = f.newRevision()
	f.book = newBook(f.t, "ratio")
	f.multiplier = f.newMultiplier("tide", &f.scheme.ID)
	f.job, f.doc = []byte(`{"job": 1}`), []byte("{\"document\": 1}\n")
	f.do(func(tx service.Tx) error {
		ctx := t.Context()
		_, err := tx.InsertRevision(ctx, f.revision)
		if kind(err) != service.NotFound {
			t.Errorf("revision of no scheme: %v", err)
		}
		err = errors.Join(tx.InsertToken(ctx, f.token, f.secret.SHA256), tx.InsertProject(ctx, f.project), tx.InsertScheme(ctx, f.scheme))
		if err != nil {
			return err
		}
		revision, err := tx.InsertRevision(ctx, f.revision)
		if err != nil {
			return err
		}
		f.revision.Number = 1
		f.same(revision, f.revision)
		f.estimate = f.newEstimate()
		return errors.Join(tx.InsertRateBook(ctx, f.book, canonical(t, f.book.Content), f.token.ID), tx.InsertMultiplier(ctx, f.multiplier),
			tx.InsertEstimate(ctx, f.estimate, f.job, f.doc))
	})
	f.outturn, f.calibration = f.newOutturn("Pan house footbridge"), f.newCalibration()
	f.do(func(tx service.Tx) error {
		return errors.Join(tx.InsertOutturns(t.Context(), []service.Outturn{f.outturn}), tx.InsertCalibration(t.Context(), f.calibration))
	})
	f.outturn.Content, f.calibration.Content, f.calibration.EvidenceRaw = nil, nil, nil // of records to be stored alone
	return f
}

func newID() uuid.UUID { return uuid.Must(uuid.NewV7()) }

// at is a time in microseconds, as PostgreSQL keeps it.
func at(seconds int) time.Time {
	return time.Date(2026, 6, 1, 23, 59, 0, 123_456_000, time.UTC).Add(time.Duration(seconds) * time.Second)
}

func hexSum(data []byte) string {
	sum := sha256.Sum256(data)
	return hex.EncodeToString(sum[:])
}

func canonical(t *testing.T, b ratebook.Book) []byte {
	t.Helper()
	data, _, err := b.Canonical()
	if err != nil {
		t.Fatal(err)
	}
	return data
}

func (f fixture) newRevision() service.Revision {
	source := []byte("Mark;Length\x00\xff")
	return service.Revision{ID: newID(), Scheme: f.scheme.ID, SourceName: "quay.csv", SourceSHA256: hexSum(source), Members: 12,
		CreatedAt: at(3), CreatedBy: f.token.Name, Author: f.token.ID, Source: source, JobTable: []byte("Grade;S355"),
		DefinitionTable: []byte("Item;State"), RiskTable: []byte("Risk;Low")}
}

func newBook(t *testing.T, name string) service.RateBook {
	t.Helper()
	b := service.RateBook{ID: newID(), Name: name, Version: 1, Number: 1, Content: ratebook.Ratio(), CreatedAt: at(4), UpdatedAt: at(4)}
	b.Content.Name = name
	b.SHA256 = hexSum(canonical(t, b.Content))
	return b
}

func (f fixture) newMultiplier(name string, scheme *uuid.UUID) service.Multiplier {
	scope := ratebook.ProjectScope
	if scheme != nil {
		scope = ratebook.SchemeScope
	}
	return service.Multiplier{ID: newID(), Project: f.project.ID, Scheme: scheme, Version: 1, CreatedAt: at(5), UpdatedAt: at(5),
		Value: ratebook.Multiplier{Name: name, Scope: scope, Categories: []string{ratebook.Erection, ratebook.Shipping},
			Spread: spread.NewTriangular(0.1, 1.0000000000000002, 1e-7+3), Group: "labour", Reason: "tidal work", Author: f.token.Name}}
}

func (f fixture) newEstimate() service.Estimate {
	d := func(text string) money.Decimal {
		v, err := money.Parse(text)
		if err != nil {
			f.t.Fatal(err)
		}
		return v
	}
	return service.Estimate{ID: newID(), Scheme: f.scheme.ID, Revision: f.revision.ID, RateBook: f.book.ID, RateBookNumber: 1,
		JobSHA256: hexSum([]byte("job")), DocumentSHA256: hexSum([]byte("document")), EngineVersion: 1, Currency: "EUR",
		Base: d("123456789012345678901234.50"), P10: d("90000"), P50: d("105000.10"), P80: d("120000.00"), P90: d("130000.99"), Mean: d("106000.01"),
		Confidence: 0.8000000000000002, Contingency: d("-0.01"), Net: d("0.000"), Delivered: d("12.345678"), Purchased: d("13.000"),
		Members: 12, Unsafe: 3, CreatedAt: at(6), CreatedBy: f.token.Name, Author: f.token.ID}
}

// do runs fn in the organisation's transaction and wants no error.
func (f fixture) do(fn func(service.Tx) error) {
	f.t.Helper()
	if err := f.s.InTenant(f.t.Context(), f.organisation, fn); err != nil {
		f.t.Fatal(err)
	}
}

// refused runs fn in a transaction of its own and wants an error of this kind whose
// message has the words given.
func (f fixture) refused(name string, want service.Kind, words string, fn func(context.Context, service.Tx) error) {
	f.t.Helper()
	err := f.s.InTenant(f.t.Context(), f.organisation, func(tx service.Tx) error { return fn(f.t.Context(), tx) })
	var e *service.Error
	if !errors.As(err, &e) || e.Kind != want || !strings.Contains(e.Message, words) {
		f.t.Errorf("%s: %v, want kind %d with %q", name, err, want, words)
		return
	}
	noSQL(f.t, name, e)
}

// noSQL looks for what a caller must not read, and in the cause, which is for the
// log, for statements and URLs.
func noSQL(t *testing.T, name string, e *service.Error) {
	t.Helper()
	for _, word := range []string{"_", "SQL", "constraint", "violat", "ERROR", "relation", "$1"} {
		if strings.Contains(e.Message, word) {
			t.Errorf("%s: message %q holds %q", name, e.Message, word)
		}
	}
	for _, word := range []string{"insert into", "select ", "where ", "postgres://", "organisation_id = "} {
		if strings.Contains(e.Error(), word) {
			t.Errorf("%s: error %q holds %q", name, e.Error(), word)
		}
	}
}

// exact compares amounts with their places: 0.00 is answered as 0.00.
var exact = cmp.Comparer(func(a, b money.Decimal) bool { return a.String() == b.String() })

// same wants two records to be the same to the microsecond, the place and the byte.
func (f fixture) same(got, want any) {
	f.t.Helper()
	if diff := cmp.Diff(want, got, exact); diff != "" {
		f.t.Errorf("%T (-want +got):\n%s", want, diff)
	}
}

// got is a record that was read without error.
func got[T any](f fixture) func(T, error) T {
	return func(v T, err error) T {
		f.t.Helper()
		if err != nil {
			f.t.Error(err)
		}
		return v
	}
}

// kind is the kind of a service's error; 255 when it is something else.
func kind(err error) service.Kind {
	var e *service.Error
	if errors.As(err, &e) {
		return e.Kind
	}
	return 255
}
