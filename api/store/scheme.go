package store

import (
	"context"

	"github.com/google/uuid"
	"github.com/jackc/pgx/v5"

	"spanwright/api/service"
)

const selectScheme = "select id, project_id, name, version, created_at, updated_at from scheme where "

func scanScheme(row pgx.CollectableRow) (service.Scheme, error) {
	var s service.Scheme
	err := row.Scan(&s.ID, &s.Project, &s.Name, &s.Version, &s.CreatedAt, &s.UpdatedAt)
	return s, err
}

// InsertScheme stores a new scheme: NotFound for its project, Conflict when the
// project has one of this name.
func (t tenant) InsertScheme(ctx context.Context, s service.Scheme) error {
	return t.write(ctx, "scheme", `
insert into scheme (organisation_id, id, project_id, name, version, created_at, updated_at)
values ($1, $2, $3, $4, $5, $6, $7)`,
		t.organisation, s.ID, s.Project, s.Name, s.Version, s.CreatedAt, s.UpdatedAt)
}

// Scheme reads one scheme: NotFound.
func (t tenant) Scheme(ctx context.Context, id uuid.UUID) (service.Scheme, error) {
	return one(ctx, t, "scheme", scanScheme, selectScheme+"id = $1", id)
}

// SchemeByName reads the scheme of exactly this name in a project: NotFound.
func (t tenant) SchemeByName(ctx context.Context, project uuid.UUID, name string) (service.Scheme, error) {
	return one(ctx, t, "scheme", scanScheme, selectScheme+"project_id = $1 and name = $2", project, name)
}

// Schemes lists the schemes of a project, newest first: Invalid for a bad page.
func (t tenant) Schemes(ctx context.Context, project uuid.UUID, p service.Page) (service.List[service.Scheme], error) {
	return listing[service.Scheme]{noun: "scheme", sql: selectScheme + "project_id = $1", order: [2]string{"created_at", "id"}, scan: scanScheme,
		at: func(s service.Scheme) position { return position{s.CreatedAt, s.ID} }}.read(ctx, t, p, project)
}
