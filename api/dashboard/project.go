package dashboard

import (
	"context"
	"net/http"
	"net/url"

	"github.com/google/uuid"

	"spanwright/api/service"
)

const (
	projectsPerPage = 25
	mostSchemes     = 200 // of one project that a page shows
)

// projectsPage is the list of projects.
type projectsPage struct {
	frame
	Projects []projectRow
	Later    bool   // not the first page
	Next     string // URL of the next page, or empty
}

// projectRow is a project with the newest estimate of its schemes.
type projectRow struct {
	Name, URL, Currency string
	Schemes             int
	Scheme              string // of the estimate
	Estimate            *estimateRow
}

// projects serves the list of projects, a page at a time.
func (d *dashboard) projects(w http.ResponseWriter, r *http.Request, a service.Actor) error {
	cursor := r.URL.Query().Get("cursor")
	list, err := d.service.Projects(r.Context(), a, service.Page{Limit: projectsPerPage, Cursor: cursor})
	if err != nil {
		return err
	}
	p := projectsPage{frame: d.frame("Projects", a), Later: cursor != ""}
	if list.Next != "" {
		p.Next = "/?" + url.Values{"cursor": {list.Next}}.Encode()
	}
	for _, project := range list.Items {
		schemes, err := d.schemes(r.Context(), a, project.ID)
		if err != nil {
			return err
		}
		row := projectRow{Name: project.Name, URL: projectURL(project.ID), Currency: project.Currency, Schemes: len(schemes)}
		if s := newest(schemes); s != nil && s.head != nil {
			row.Scheme, row.Estimate = s.Name, newEstimateRow(*s.head)
		}
		p.Projects = append(p.Projects, row)
	}
	return d.render(w, http.StatusOK, "projects", p)
}

func projectURL(id uuid.UUID) string { return "/projects/" + id.String() }

// scheme is a scheme with the head of its newest estimate, where there is one.
type scheme struct {
	service.Scheme
	head *service.Estimate
}

// schemes reads a project's schemes, newest first, at most mostSchemes.
func (d *dashboard) schemes(ctx context.Context, a service.Actor, project uuid.UUID) ([]scheme, error) {
	list, err := d.service.Schemes(ctx, a, project, service.Page{Limit: mostSchemes})
	if err != nil {
		return nil, err
	}
	var out []scheme
	for _, s := range list.Items {
		head, err := d.service.NewestEstimate(ctx, a, s.ID)
		switch {
		case isNotFound(err):
			out = append(out, scheme{Scheme: s})
		case err != nil:
			return nil, err
		default:
			out = append(out, scheme{Scheme: s, head: &head})
		}
	}
	return out, nil
}

func isNotFound(err error) bool { return err != nil && faultOf(err) == errNoPage }

// newest returns the scheme with the newest estimate, else the first, else nil.
// Estimates of the same instant are told apart by their ids, which grow in time.
func newest(schemes []scheme) *scheme {
	var best *scheme
	for i := range schemes {
		s := &schemes[i]
		if best == nil || s.head != nil && (best.head == nil || later(*s.head, *best.head)) {
			best = s
		}
	}
	return best
}

func later(a, b service.Estimate) bool {
	if c := a.CreatedAt.Compare(b.CreatedAt); c != 0 {
		return c > 0
	}
	return a.ID.String() > b.ID.String()
}

// projectPage is one project: its schemes side by side and one of them in full.
type projectPage struct {
	frame
	Name, Currency, BaseDate string
	Schemes                  []schemeRow
	Selected                 string // name of the scheme shown; empty without schemes
	Made                     moment
	By                       string
	View                     *estimateView // nil where the scheme has no estimate
}

// schemeRow is one scheme in the comparison.
type schemeRow struct {
	Name, URL string
	Selected  bool
	Estimate  *estimateRow
}

// project serves a project's page. The query names the scheme (by default the
// one with the newest estimate) and the page of its members.
func (d *dashboard) project(w http.ResponseWriter, r *http.Request, a service.Actor) error {
	id, err := uuid.Parse(r.PathValue("id"))
	if err != nil {
		return errNoPage
	}
	project, err := d.service.Project(r.Context(), a, id)
	if err != nil {
		return err
	}
	schemes, err := d.schemes(r.Context(), a, id)
	if err != nil {
		return err
	}
	selected, err := choose(schemes, r.URL.Query().Get("scheme"))
	if err != nil {
		return err
	}
	p := projectPage{frame: d.frame(project.Name, a), Name: project.Name, Currency: project.Currency, BaseDate: project.BaseDate}
	for i := range schemes {
		s := &schemes[i]
		row := schemeRow{Name: s.Name, URL: projectURL(id) + "?scheme=" + s.ID.String(), Selected: s == selected}
		if s.head != nil {
			row.Estimate = newEstimateRow(*s.head)
		}
		p.Schemes = append(p.Schemes, row)
	}
	if selected != nil {
		p.Selected = selected.Name
		if selected.head != nil {
			p.Made, p.By = momentOf(selected.head.CreatedAt), selected.head.CreatedBy
			if p.View, err = d.estimateView(r, a, id, *selected); err != nil {
				return err
			}
		}
	}
	return d.render(w, http.StatusOK, "project", p)
}

// choose returns the scheme that the query names, or the newest. A scheme of
// another project is not found.
func choose(schemes []scheme, query string) (*scheme, error) {
	if query == "" {
		return newest(schemes), nil
	}
	id, err := uuid.Parse(query)
	if err != nil {
		return nil, errNoPage
	}
	for i := range schemes {
		if schemes[i].ID == id {
			return &schemes[i], nil
		}
	}
	return nil, errNoPage
}
