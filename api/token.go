package api

import (
	"context"
	"net/http"

	"spanwright/api/service"
)

const tagAccess = "Access and audit"

// IssuedToken is a token just made, with its text.
type IssuedToken struct {
	Token  service.Token `json:"token"`
	Secret string        `json:"secret" doc:"what the bearer sends; shown this once and not kept"`
}

type newToken struct {
	Keyed
	Body service.NewToken
}

type issued struct {
	Body IssuedToken
}

func (a *api) tokens() {
	register(a, operation(http.MethodGet, "/v1/tokens", "list-tokens", tagAccess, "List tokens, without their secrets", http.StatusForbidden),
		func(ctx context.Context, r *request, in *Paged) (*listOutput[service.Token], error) {
			l, err := a.service.Tokens(ctx, r.Actor, in.page())
			return listed(r, *in, l, err)
		})
	register(a, described(operation(http.MethodPost, "/v1/tokens", "create-token", tagAccess, "Create a token", writing()...),
		"The answer holds the token's text, once. It is not kept, so a repeated request cannot be answered with it: an Idempotency-Key is refused."),
		func(ctx context.Context, r *request, in *newToken) (*issued, error) {
			if in.IdempotencyKey != "" {
				return nil, newProblem(http.StatusUnprocessableEntity, "a token cannot be made under an Idempotency-Key",
					service.Fault{Found: shorten(in.IdempotencyKey), Problem: "the header Idempotency-Key: a token's secret is shown once and cannot be answered again",
						Remedy: "no key; list the tokens and revoke one whose answer was lost"})
			}
			t, secret, err := a.service.CreateToken(ctx, r.Actor, in.Body)
			return &issued{Body: IssuedToken{Token: t, Secret: secret}}, err
		})
	register(a, operation(http.MethodDelete, "/v1/tokens/{id}", "revoke-token", tagAccess, "Revoke a token and end its sessions", writing()...),
		func(ctx context.Context, r *request, in *ByID) (*plain[service.Token], error) {
			t, err := a.service.RevokeToken(ctx, r.Actor, in.ID)
			return &plain[service.Token]{Body: t}, err
		})
}
