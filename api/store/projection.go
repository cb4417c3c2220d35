package store

import (
	"context"
	"errors"
	"fmt"

	"github.com/google/uuid"
	"github.com/jackc/pgx/v5"

	"spanwright/api/service"
)

// RebuildProjection writes the query columns of every estimate of every
// organisation anew from its document, through head (parse, then [service.Head]),
// in one transaction, and returns how many estimates there are. Documents and what
// they belong to are not touched.
func (a *Admin) RebuildProjection(ctx context.Context, head func(document []byte) (service.Estimate, error)) (int, error) {
	n := 0
	err := a.asOwner(ctx, func(db pgx.Tx) error {
		var organisation, id uuid.UUID
		for {
			var document []byte
			err := db.QueryRow(ctx, `
select organisation_id, id, document from estimate where (organisation_id, id) > ($1, $2) order by organisation_id, id limit 1`,
				organisation, id).Scan(&organisation, &id, &document)
			if errors.Is(err, pgx.ErrNoRows) {
				return nil
			}
			if err != nil {
				return failure(err, "estimate")
			}
			e, err := head(document)
			if err != nil {
				return fmt.Errorf("store: estimate %s: %w", id, err)
			}
			_, err = db.Exec(ctx, `
update estimate set (`+projectionColumns+`) = ($1, $2, $3, $4, $5, $6, $7, $8, $9, $10, $11, $12, $13, $14, $15)
where organisation_id = $16 and id = $17`, append(projection(e), organisation, id)...)
			if err != nil {
				return failure(err, "estimate "+id.String())
			}
			n++
		}
	})
	return n, err
}
