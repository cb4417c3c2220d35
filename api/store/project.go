package store

import (
	"context"

	"github.com/google/uuid"
	"github.com/jackc/pgx/v5"

	"spanwright/api/service"
)

const selectProject = `
select id, name, currency, coalesce(to_char(base_date, 'YYYY-MM-DD'), ''), display_units, version, created_at, updated_at
from project where true`

func scanProject(row pgx.CollectableRow) (service.Project, error) {
	var p service.Project
	err := row.Scan(&p.ID, &p.Name, &p.Currency, &p.BaseDate, &p.DisplayUnits, &p.Version, &p.CreatedAt, &p.UpdatedAt)
	return p, err
}

// InsertProject stores a new project: Conflict when its name is taken.
func (t tenant) InsertProject(ctx context.Context, p service.Project) error {
	return t.write(ctx, "project", `
insert into project (organisation_id, id, name, currency, base_date, display_units, version, created_at, updated_at)
values ($1, $2, $3, $4, nullif($5::text, '')::date, $6, $7, $8, $9)`,
		t.organisation, p.ID, p.Name, p.Currency, p.BaseDate, p.DisplayUnits, p.Version, p.CreatedAt, p.UpdatedAt)
}

// Project reads one project: NotFound.
func (t tenant) Project(ctx context.Context, id uuid.UUID) (service.Project, error) {
	return one(ctx, t, "project", scanProject, selectProject+" and id = $1", id)
}

// ProjectByName reads the project of exactly this name: NotFound.
func (t tenant) ProjectByName(ctx context.Context, name string) (service.Project, error) {
	return one(ctx, t, "project", scanProject, selectProject+" and name = $1", name)
}

// Projects lists projects, newest first: Invalid for a bad page.
func (t tenant) Projects(ctx context.Context, p service.Page) (service.List[service.Project], error) {
	return listing[service.Project]{noun: "project", sql: selectProject, order: [2]string{"created_at", "id"}, scan: scanProject,
		at: func(p service.Project) position { return position{p.CreatedAt, p.ID} }}.read(ctx, t, p)
}

// UpdateProject writes p over the version before p.Version: NotFound, Stale,
// Conflict when its name is taken.
func (t tenant) UpdateProject(ctx context.Context, p service.Project) error {
	return t.replace(ctx, "project", "select id from project where id = $1", p.ID, `
update project set name = $3, currency = $4, base_date = nullif($5::text, '')::date, display_units = $6, version = $2, updated_at = $7
where id = $1 and version = $2::bigint - 1`,
		p.ID, p.Version, p.Name, p.Currency, p.BaseDate, p.DisplayUnits, p.UpdatedAt)
}
