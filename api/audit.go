package api

import (
	"context"
	"net/http"

	"spanwright/api/service"
)

func (a *api) auditEvents() {
	register(a, operation(http.MethodGet, "/v1/audit-events", "list-audit-events", tagAccess, "List audit events, newest first", http.StatusForbidden),
		func(ctx context.Context, r *request, in *Paged) (*listOutput[service.AuditEvent], error) {
			l, err := a.service.Audit(ctx, r.Actor, in.page())
			return listed(r, *in, l, err)
		})
}
