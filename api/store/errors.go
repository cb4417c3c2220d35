package store

import (
	"errors"
	"fmt"
	"strings"

	"github.com/jackc/pgx/v5"
	"github.com/jackc/pgx/v5/pgconn"

	"spanwright/api/service"
)

// SQLSTATE codes: PostgreSQL 15 documentation, appendix A.
const (
	foreignKeyViolation   = "23503"
	uniqueViolation       = "23505"
	checkViolation        = "23514"
	insufficientPrivilege = "42501"
	serializationFailure  = "40001"
	deadlockDetected      = "40P01"
	lockNotAvailable      = "55P03"
	dataException         = "22" // a class
)

// taken says what a unique key forbids, by the name of its constraint or index.
// Keys that only a repeated id can violate are not listed.
var taken = map[string]string{
	"project_organisation_id_name_key":                       "a project of this name exists already",
	"scheme_organisation_id_project_id_name_key":             "the project has a scheme of this name already",
	"schedule_revision_organisation_id_scheme_id_number_key": "the scheme has a schedule revision of this number already",
	"rate_book_organisation_id_name_key":                     "a rate book of this name exists already",
	"rate_book_version_pkey":                                 "the rate book has a version of this number already",
	"multiplier_in_force":                                    "a multiplier of this name, scope and subject is in force already: change that one",
	"outturn_in_force":                                       "a job of this posting has an outturn in force already: withdraw that one first",
	"token_organisation_id_public_id_key":                    "a token of this public id exists already",
	"idempotency_pkey":                                       "a simultaneous request has used this Idempotency-Key",
}

// missing is what a foreign key did not find, by the name of its constraint. One
// that points into another organisation finds nothing either.
var missing = map[string]string{
	"calibration_organisation_id_created_by_fkey":                    "token",
	"calibration_organisation_id_decided_by_fkey":                    "token",
	"calibration_organisation_id_rate_book_id_made_number_fkey":      "rate book version",
	"calibration_organisation_id_rate_book_id_rate_book_number_fkey": "rate book version",
	"estimate_organisation_id_created_by_fkey":                       "token",
	"estimate_organisation_id_rate_book_id_rate_book_number_fkey":    "rate book version",
	"estimate_organisation_id_scheme_id_fkey":                        "scheme",
	"estimate_organisation_id_scheme_id_schedule_revision_id_fkey":   "schedule revision of this scheme",
	"idempotency_organisation_id_token_id_fkey":                      "token",
	"multiplier_organisation_id_project_id_fkey":                     "project",
	"multiplier_organisation_id_project_id_scheme_id_fkey":           "scheme of this project",
	"outturn_organisation_id_created_by_fkey":                        "token",
	"rate_book_version_organisation_id_created_by_fkey":              "token",
	"rate_book_version_organisation_id_rate_book_id_fkey":            "rate book",
	"schedule_revision_organisation_id_created_by_fkey":              "token",
	"schedule_revision_organisation_id_scheme_id_fkey":               "scheme",
	"scheme_organisation_id_project_id_fkey":                         "project",
	"session_organisation_id_token_id_fkey":                          "token",
	"token_organisation_id_created_by_fkey":                          "token",
}

// failure turns an error of the database into one of the service; noun is what the
// statement was about. What has no kind of its own is wrapped.
func failure(err error, noun string) error {
	var pgErr *pgconn.PgError
	switch {
	case err == nil:
		return nil
	case errors.Is(err, pgx.ErrNoRows):
		return &service.Error{Kind: service.NotFound, Message: "no such " + noun}
	case errors.As(err, &pgErr):
		if kind, message := classify(pgErr, noun); kind != service.Internal {
			return &service.Error{Kind: kind, Message: message, Err: err}
		}
	}
	return fmt.Errorf("store: %s: %w", noun, err)
}

func classify(e *pgconn.PgError, noun string) (service.Kind, string) {
	switch {
	case e.Code == uniqueViolation:
		if message, ok := taken[e.ConstraintName]; ok {
			return service.Conflict, message
		}
		return service.Conflict, "this " + noun + " exists already"
	case e.Code == foreignKeyViolation:
		if target, ok := missing[e.ConstraintName]; ok {
			return service.NotFound, "no such " + target
		}
		return service.NotFound, "no such organisation"
	case e.Code == insufficientPrivilege && strings.Contains(e.Message, "row-level security"):
		return service.Forbidden, "the " + noun + " would belong to another organisation"
	case e.Code == checkViolation:
		return service.Invalid, "the " + noun + " has a value outside of what can be stored"
	case strings.HasPrefix(e.Code, dataException):
		return service.Invalid, "the " + noun + " has a text, date or number that cannot be stored"
	case e.Code == serializationFailure, e.Code == deadlockDetected, e.Code == lockNotAvailable:
		return service.Busy, "the " + noun + " is being changed by somebody else; try again in a moment"
	}
	return service.Internal, ""
}
