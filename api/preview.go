package api

import (
	"context"
	"net/http"

	"github.com/danielgtaylor/huma/v2"

	"spanwright/api/service"
)

type newPreview struct {
	ByID
	Body service.NewPreview
}

// computed describes an operation that computes and stores nothing.
func computed(path, id, tag, summary, description string, errs ...int) huma.Operation {
	o := described(operation(http.MethodPost, path, id, tag, summary, append(errs, http.StatusTooManyRequests)...), description+" Nothing is stored.")
	o.DefaultStatus = http.StatusOK
	return o
}

func (a *api) previews() {
	register(a, computed("/v1/estimates/{id}/preview", "preview-estimate", tagEstimates, "Try multipliers on an estimate",
		"Prices the stored quantities exactly under changed or new multipliers, and gives the range from stored draws with its standard errors: before, after and the change. "+
			"The first preview of an estimate sizes its members and takes as long as that does; those that follow are quick. "+
			"409 where the estimate was made by another version of the engine or with other data: make a new estimate of the scheme first.", http.StatusConflict),
		func(ctx context.Context, r *request, in *newPreview) (*plain[service.Preview], error) {
			p, err := a.service.Preview(ctx, r.Actor, in.ID, in.Body)
			return &plain[service.Preview]{Body: p}, err
		})
}
