package api

import (
	"context"
	"net/http"

	"spanwright/api/service"
	"spanwright/estimate/ratebook"
)

const tagRates = "Rate books and multipliers"

type newRateBook struct {
	Keyed
	Body ratebook.Book
}

type rateBookChange struct {
	ByID
	Conditional
	Body ratebook.Book
}

type rateBookVersion struct {
	ByID
	Number int `path:"number" minimum:"1" maximum:"1000000" doc:"number of the content, from 1"`
}

func (a *api) rateBooks() {
	register(a, operation(http.MethodGet, "/v1/rate-books", "list-rate-books", tagRates, "List rate books, newest first"),
		func(ctx context.Context, r *request, in *Paged) (*listOutput[service.RateBook], error) {
			l, err := a.service.RateBooks(ctx, r.Actor, in.page())
			return listed(r, *in, l, err)
		})
	register(a, operation(http.MethodPost, "/v1/rate-books", "create-rate-book", tagRates, "Create a rate book", writing(http.StatusConflict)...),
		func(ctx context.Context, r *request, in *newRateBook) (*made[service.RateBook], error) {
			b, err := a.service.CreateRateBook(ctx, r.Actor, in.Body, r.attempt(in.Keyed, r.Body))
			return &made[service.RateBook]{Location: "/v1/rate-books/" + b.ID.String(), ETag: etag(b.Version), Body: b}, err
		})
	register(a, described(operation(http.MethodGet, "/v1/rate-books/starting", "get-starting-rate-book", tagRates, "Read the starting book"),
		"The book named ratio as an organisation begins with it; estimates that name no book take the organisation's own edition of it. Its figures are invented and say so."),
		func(context.Context, *request, *struct{}) (*plain[ratebook.Book], error) {
			return &plain[ratebook.Book]{Body: ratebook.Ratio()}, nil
		})
	register(a, operation(http.MethodGet, "/v1/rate-books/{id}", "get-rate-book", tagRates, "Read the newest version of a rate book"),
		func(ctx context.Context, r *request, in *ByID) (*versioned[service.RateBook], error) {
			b, err := a.service.RateBook(ctx, r.Actor, in.ID)
			return &versioned[service.RateBook]{ETag: etag(b.Version), Body: b}, err
		})
	register(a, described(operation(http.MethodPut, "/v1/rate-books/{id}", "update-rate-book", tagRates, "Store new content as the next version", conditional(http.StatusConflict)...),
		"Estimates made with older versions keep them."),
		a.updateRateBook)
	register(a, operation(http.MethodGet, "/v1/rate-books/{id}/versions/{number}", "get-rate-book-version", tagRates, "Read one version of a rate book"),
		func(ctx context.Context, r *request, in *rateBookVersion) (*plain[service.RateBook], error) {
			b, err := a.service.RateBookVersion(ctx, r.Actor, in.ID, in.Number)
			return &plain[service.RateBook]{Body: b}, err
		})
}

func (a *api) updateRateBook(ctx context.Context, r *request, in *rateBookChange) (*versioned[service.RateBook], error) {
	version, err := r.version(func() (int64, error) {
		b, err := a.service.RateBook(ctx, r.Actor, in.ID)
		return b.Version, err
	})
	if err != nil {
		return nil, err
	}
	b, err := a.service.UpdateRateBook(ctx, r.Actor, in.ID, version, in.Body)
	return &versioned[service.RateBook]{ETag: etag(b.Version), Body: b}, err
}
