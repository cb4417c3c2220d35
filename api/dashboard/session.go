package dashboard

import (
	"errors"
	"net/http"
	"strings"
	"time"

	"github.com/google/uuid"

	"spanwright/api/service"
)

const (
	sessionCookie = "spanwright_session"
	signInPath    = "/sign-in"
	signInLimit   = 8 << 10 // bytes of the form
)

// signInPage is the form that takes a token.
type signInPage struct {
	frame
	Refused bool
	Project string // id of the project to go on to, or empty
}

// signedIn serves a page to who has a session; others are sent to sign in. The
// address of a project goes along as its id, never as a URL.
func (d *dashboard) signedIn(h func(http.ResponseWriter, *http.Request, service.Actor) error) http.Handler {
	return http.HandlerFunc(func(w http.ResponseWriter, r *http.Request) {
		a, err := d.actor(w, r)
		if err == nil {
			err = h(w, r, a)
		}
		switch {
		case unauthenticated(err):
			to := signInPath
			if id, err := uuid.Parse(r.PathValue("id")); err == nil && strings.HasPrefix(r.URL.Path, "/projects/") {
				to += "?project=" + id.String()
			}
			http.Redirect(w, r, to, http.StatusSeeOther)
		case err != nil:
			d.fail(w, r, a, err)
		}
	})
}

func (d *dashboard) actor(w http.ResponseWriter, r *http.Request) (service.Actor, error) {
	c, err := r.Cookie(sessionCookie)
	if err != nil {
		return service.Actor{}, &service.Error{Kind: service.Unauthenticated, Message: "no session"}
	}
	return d.service.Session(r.Context(), c.Value, w.Header().Get(requestIDHeader))
}

func unauthenticated(err error) bool {
	var e *service.Error
	return errors.As(err, &e) && e.Kind == service.Unauthenticated
}

func (d *dashboard) signInPage(w http.ResponseWriter, r *http.Request) error {
	return d.showSignIn(w, http.StatusOK, signInPage{Project: localProject(r.URL.Query().Get("project"))})
}

func (d *dashboard) showSignIn(w http.ResponseWriter, status int, p signInPage) error {
	p.frame = d.frame("Sign in", service.Actor{})
	return d.render(w, status, "sign-in", p)
}

// localProject returns the id in its own spelling where text is one, else
// nothing: the only part of a request that decides where a sign-in leads.
func localProject(text string) string {
	id, err := uuid.Parse(text)
	if err != nil {
		return ""
	}
	return id.String()
}

// signIn takes the token of the form. A wrong one gets the form again; what is
// wrong with it is not said, and it is not shown back.
func (d *dashboard) signIn(w http.ResponseWriter, r *http.Request) error {
	r.Body = http.MaxBytesReader(w, r.Body, signInLimit)
	if err := r.ParseForm(); err != nil {
		return errAddress
	}
	project := localProject(r.PostForm.Get("project"))
	secret, ends, err := d.service.SignIn(r.Context(), strings.TrimSpace(r.PostForm.Get("token")), w.Header().Get(requestIDHeader))
	if unauthenticated(err) {
		w.Header().Set("WWW-Authenticate", `Bearer realm="spanwright"`)
		return d.showSignIn(w, http.StatusUnauthorized, signInPage{Refused: true, Project: project})
	}
	if err != nil {
		return err
	}
	http.SetCookie(w, d.cookie(secret, ends, 0))
	to := "/"
	if project != "" {
		to = "/projects/" + project
	}
	http.Redirect(w, r, to, http.StatusSeeOther)
	return nil
}

// cookie is Lax and not Strict, so that a link in a message to a project finds
// the reader signed in; nothing changes by GET, and posts are checked for origin.
func (d *dashboard) cookie(secret string, ends time.Time, maxAge int) *http.Cookie {
	return &http.Cookie{Name: sessionCookie, Value: secret, Path: "/", Expires: ends, MaxAge: maxAge,
		HttpOnly: true, Secure: d.secure, SameSite: http.SameSiteLaxMode}
}

// signOut ends the session on the server and takes the cookie back, the latter
// also where the former fails.
func (d *dashboard) signOut(w http.ResponseWriter, r *http.Request) error {
	c, err := r.Cookie(sessionCookie)
	if err == nil {
		http.SetCookie(w, d.cookie("", time.Time{}, -1))
		if err := d.service.SignOut(r.Context(), c.Value, w.Header().Get(requestIDHeader)); err != nil {
			return err
		}
	}
	http.Redirect(w, r, signInPath, http.StatusSeeOther)
	return nil
}
