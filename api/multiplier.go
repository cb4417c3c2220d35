package api

import (
	"context"
	"net/http"

	"github.com/google/uuid"

	"spanwright/api/service"
	"spanwright/estimate/ratebook"
	"spanwright/estimate/spread"
)

// MultiplierValue is a multiplier as it is posted: ratebook.Multiplier, whose
// author and version the service sets itself.
type MultiplierValue struct {
	Name       string         `json:"name" minLength:"1" maxLength:"200" doc:"multipliers of one name override each other by scope; those of different names multiply"`
	Scope      ratebook.Scope `json:"scope" enum:"member,group,family,scheme,project"`
	Subject    string         `json:"subject,omitempty" doc:"the mark, group or family that the scope names"`
	Categories []string       `json:"categories" minItems:"1" nullable:"false"`
	Spread     spread.Spread  `json:"spread"`
	Group      string         `json:"group,omitempty" doc:"correlation group"`
	Reason     string         `json:"reason" minLength:"1"`
	Author     string         `json:"author,omitempty" readOnly:"true" doc:"who set it; ignored when sent"`
	Version    int64          `json:"version,omitempty" readOnly:"true" doc:"ignored when sent"`
}

// NewMultiplier asks for a multiplier.
type NewMultiplier struct {
	Scheme *uuid.UUID      `json:"scheme_id,omitempty" doc:"only this scheme; the whole project when absent"`
	Value  MultiplierValue `json:"multiplier"`
}

// MultiplierChange replaces the value of a multiplier.
type MultiplierChange struct {
	Value MultiplierValue `json:"multiplier"`
}

type newMultiplier struct {
	ByID
	Keyed
	Body NewMultiplier
}

type multiplierChange struct {
	ByID
	Conditional
	Body MultiplierChange
}

type multiplierDeletion struct {
	ByID
	Conditional
}

func (a *api) multipliers() {
	register(a, operation(http.MethodGet, "/v1/projects/{id}/multipliers", "list-multipliers", tagRates, "List the multipliers of a project and its schemes"),
		func(ctx context.Context, r *request, in *listInput) (*listOutput[service.Multiplier], error) {
			l, err := a.service.Multipliers(ctx, r.Actor, in.ID, in.page())
			return listed(r, in.Paged, l, err)
		})
	register(a, described(operation(http.MethodPost, "/v1/projects/{id}/multipliers", "create-multiplier", tagRates, "Create a multiplier", writing(http.StatusConflict)...),
		"The next estimate takes it; earlier ones stay as they are."),
		func(ctx context.Context, r *request, in *newMultiplier) (*made[service.Multiplier], error) {
			m, err := a.service.CreateMultiplier(ctx, r.Actor,
				service.NewMultiplier{Project: in.ID, Scheme: in.Body.Scheme, Value: ratebook.Multiplier(in.Body.Value)}, r.attempt(in.Keyed, r.Body))
			return &made[service.Multiplier]{Location: "/v1/multipliers/" + m.ID.String(), ETag: etag(m.Version), Body: m}, err
		})
	register(a, operation(http.MethodGet, "/v1/multipliers/{id}", "get-multiplier", tagRates, "Read a multiplier"),
		func(ctx context.Context, r *request, in *ByID) (*versioned[service.Multiplier], error) {
			m, err := a.service.Multiplier(ctx, r.Actor, in.ID)
			return &versioned[service.Multiplier]{ETag: etag(m.Version), Body: m}, err
		})
	register(a, operation(http.MethodPut, "/v1/multipliers/{id}", "update-multiplier", tagRates, "Replace a multiplier's value", conditional(http.StatusConflict)...),
		func(ctx context.Context, r *request, in *multiplierChange) (*versioned[service.Multiplier], error) {
			version, err := a.multiplierVersion(ctx, r, in.ID)
			if err != nil {
				return nil, err
			}
			m, err := a.service.UpdateMultiplier(ctx, r.Actor, in.ID, version, ratebook.Multiplier(in.Body.Value))
			return &versioned[service.Multiplier]{ETag: etag(m.Version), Body: m}, err
		})
	register(a, operation(http.MethodDelete, "/v1/multipliers/{id}", "delete-multiplier", tagRates, "Take a multiplier out of force", conditional()...),
		func(ctx context.Context, r *request, in *multiplierDeletion) (*struct{}, error) {
			version, err := a.multiplierVersion(ctx, r, in.ID)
			if err != nil {
				return nil, err
			}
			return nil, a.service.DeleteMultiplier(ctx, r.Actor, in.ID, version)
		})
}

func (a *api) multiplierVersion(ctx context.Context, r *request, id uuid.UUID) (int64, error) {
	return r.version(func() (int64, error) {
		m, err := a.service.Multiplier(ctx, r.Actor, id)
		return m.Version, err
	})
}
