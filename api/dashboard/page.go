package dashboard

import (
	"bytes"
	"context"
	"embed"
	"errors"
	"fmt"
	"html/template"
	"net/http"
	"strconv"

	"spanwright/api/service"
)

//go:embed templates/*.html
var templateFiles embed.FS

// pages are the parsed templates by the name of their file.
type pages map[string]*template.Template

// pageNames are the pages; each fills the blocks of frame.html.
var pageNames = []string{"error", "project", "projects", "sign-in"}

func parsePages() (pages, error) {
	p := pages{}
	for _, name := range pageNames {
		t, err := template.ParseFS(templateFiles, "templates/frame.html", "templates/part-*.html", "templates/"+name+".html")
		if err != nil {
			return nil, fmt.Errorf("dashboard: parsing the page %s: %w", name, err)
		}
		p[name] = t
	}
	return p, nil
}

// frame is what every page has around its content.
type frame struct {
	Title    string
	Style    string // URL
	Icon     string // URL
	SignedIn bool
	Reader   string // name of the token that signed in
	Role     string
}

func (d *dashboard) frame(title string, a service.Actor) frame {
	return frame{Title: title, Style: d.assets.style, Icon: d.assets.icon,
		SignedIn: a.Role != "", Reader: a.Name, Role: string(a.Role)}
}

// render writes a page. It fills a buffer first, so that a template that fails
// has not yet answered.
func (d *dashboard) render(w http.ResponseWriter, status int, name string, data any) error {
	var b bytes.Buffer
	if err := d.pages[name].ExecuteTemplate(&b, "frame", data); err != nil {
		return fmt.Errorf("rendering the page %s: %w", name, err)
	}
	w.Header().Set("Content-Type", "text/html; charset=utf-8")
	w.Header().Set("Content-Length", strconv.Itoa(b.Len()))
	w.WriteHeader(status)
	_, _ = w.Write(b.Bytes()) // the client went away: nobody is left to tell
	return nil
}

// errorPage is the page of an error: what the reader can do, and no detail.
type errorPage struct {
	frame
	Message   string
	RequestID string
}

// fault is an error that the web layer itself makes.
type fault struct {
	status         int
	title, message string
}

func (f *fault) Error() string { return f.title }

var (
	errNoPage      = &fault{http.StatusNotFound, "Nothing here", "There is no such page, or your organisation has no such project, scheme or estimate."}
	errCrossOrigin = &fault{http.StatusForbidden, "Refused", "The form was sent from another site. Open the page here and try again."}
	errAddress     = &fault{http.StatusBadRequest, "The address is not right", "Part of the address cannot be read. Start again from the list of projects."}
	errForbidden   = &fault{http.StatusForbidden, "Not allowed", "The role of your token may not see this. Ask an administrator for another token."}
	errBusy        = &fault{http.StatusServiceUnavailable, "Busy", "The server has too much to do just now. Try again in a moment."}
	errInternal    = &fault{http.StatusInternalServerError, "Something went wrong", "The page could not be made. If it happens again, give the request id to whoever runs this server."}
)

// faultOf turns an error into what the reader is told; unknown ones are internal.
func faultOf(err error) *fault {
	var f *fault
	if errors.As(err, &f) {
		return f
	}
	var e *service.Error
	if !errors.As(err, &e) {
		return errInternal
	}
	switch e.Kind {
	case service.NotFound:
		return errNoPage
	case service.Forbidden:
		return errForbidden
	case service.Invalid, service.Malformed:
		return errAddress
	case service.Busy:
		return errBusy
	default:
		return errInternal
	}
}

// fail answers with the page of an error and logs what the reader is not told.
func (d *dashboard) fail(w http.ResponseWriter, r *http.Request, a service.Actor, err error) {
	f, id := faultOf(err), w.Header().Get(requestIDHeader)
	switch {
	case errors.Is(err, context.Canceled):
		d.log.InfoContext(r.Context(), "the reader went away", "request_id", id, "path", r.URL.Path)
	case f.status >= http.StatusInternalServerError:
		d.log.ErrorContext(r.Context(), "page failed", "request_id", id, "method", r.Method, "path", r.URL.Path, "error", err)
	}
	if f == errBusy {
		w.Header().Set("Retry-After", "5")
	}
	err = d.render(w, f.status, "error", errorPage{frame: d.frame(f.title, a), Message: f.message, RequestID: id})
	if err != nil {
		d.log.ErrorContext(r.Context(), "page failed", "request_id", id, "error", err)
		http.Error(w, errInternal.title, http.StatusInternalServerError)
	}
}

// open serves a page that needs no session.
func (d *dashboard) open(h func(http.ResponseWriter, *http.Request) error) http.Handler {
	return http.HandlerFunc(func(w http.ResponseWriter, r *http.Request) {
		if err := h(w, r); err != nil {
			d.fail(w, r, service.Actor{}, err)
		}
	})
}
