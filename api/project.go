package api

import (
	"context"
	"net/http"

	"spanwright/api/service"
)

const tagProjects = "Projects and schemes"

type newProject struct {
	Keyed
	Body service.NewProject
}

type projectChange struct {
	ByID
	Conditional
	Body service.NewProject
}

func (a *api) projects() {
	register(a, operation(http.MethodGet, "/v1/projects", "list-projects", tagProjects, "List projects, newest first"),
		func(ctx context.Context, r *request, in *Paged) (*listOutput[service.Project], error) {
			l, err := a.service.Projects(ctx, r.Actor, in.page())
			return listed(r, *in, l, err)
		})
	register(a, operation(http.MethodPost, "/v1/projects", "create-project", tagProjects, "Create a project", writing(http.StatusConflict)...),
		func(ctx context.Context, r *request, in *newProject) (*made[service.Project], error) {
			p, err := a.service.CreateProject(ctx, r.Actor, in.Body, r.attempt(in.Keyed, r.Body))
			return &made[service.Project]{Location: "/v1/projects/" + p.ID.String(), ETag: etag(p.Version), Body: p}, err
		})
	register(a, operation(http.MethodGet, "/v1/projects/{id}", "get-project", tagProjects, "Read a project"),
		func(ctx context.Context, r *request, in *ByID) (*versioned[service.Project], error) {
			p, err := a.service.Project(ctx, r.Actor, in.ID)
			return &versioned[service.Project]{ETag: etag(p.Version), Body: p}, err
		})
	register(a, operation(http.MethodPut, "/v1/projects/{id}", "update-project", tagProjects, "Replace a project's fields", conditional(http.StatusConflict)...),
		func(ctx context.Context, r *request, in *projectChange) (*versioned[service.Project], error) {
			version, err := r.version(func() (int64, error) {
				p, err := a.service.Project(ctx, r.Actor, in.ID)
				return p.Version, err
			})
			if err != nil {
				return nil, err
			}
			p, err := a.service.UpdateProject(ctx, r.Actor, in.ID, version, in.Body)
			return &versioned[service.Project]{ETag: etag(p.Version), Body: p}, err
		})
}

// NewScheme asks for a scheme of a project.
type NewScheme struct {
	Name string `json:"name" minLength:"1" maxLength:"200"`
}

type newScheme struct {
	ByID
	Keyed
	Body NewScheme
}

func (a *api) schemes() {
	register(a, operation(http.MethodGet, "/v1/projects/{id}/schemes", "list-schemes", tagProjects, "List the schemes of a project, newest first"),
		func(ctx context.Context, r *request, in *listInput) (*listOutput[service.Scheme], error) {
			l, err := a.service.Schemes(ctx, r.Actor, in.ID, in.page())
			return listed(r, in.Paged, l, err)
		})
	register(a, operation(http.MethodPost, "/v1/projects/{id}/schemes", "create-scheme", tagProjects, "Create a scheme of a project", writing(http.StatusConflict)...),
		func(ctx context.Context, r *request, in *newScheme) (*made[service.Scheme], error) {
			s, err := a.service.CreateScheme(ctx, r.Actor, in.ID, in.Body.Name, r.attempt(in.Keyed, r.Body))
			return &made[service.Scheme]{Location: "/v1/schemes/" + s.ID.String(), Body: s}, err
		})
	register(a, operation(http.MethodGet, "/v1/schemes/{id}", "get-scheme", tagProjects, "Read a scheme"),
		func(ctx context.Context, r *request, in *ByID) (*plain[service.Scheme], error) {
			s, err := a.service.Scheme(ctx, r.Actor, in.ID)
			return &plain[service.Scheme]{Body: s}, err
		})
}
