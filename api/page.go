package api

import (
	"fmt"
	"net/url"

	"spanwright/api/service"
)

// Paged asks for part of a list.
type Paged struct {
	Limit  int    `query:"limit" minimum:"1" maximum:"200" default:"50" doc:"how many at most"`
	Cursor string `query:"cursor" maxLength:"500" doc:"“next” of the page before"`
}

func (p Paged) page() service.Page { return service.Page{Limit: p.Limit, Cursor: p.Cursor} }

// listInput is Paged below a resource.
type listInput struct {
	ByID
	Paged
}

// listOutput is one page, newest first.
type listOutput[T any] struct {
	Link string `header:"Link" doc:"the next page, rel=\"next\" (RFC 8288); absent on the last"`
	Body service.List[T]
}

// listed turns a page into an answer with the link to the next.
func listed[T any](r *request, in Paged, l service.List[T], err error) (*listOutput[T], error) {
	if err != nil {
		return nil, err
	}
	out := &listOutput[T]{Body: l}
	if l.Next != "" {
		out.Link = fmt.Sprintf("<%s?limit=%d&cursor=%s>; rel=\"next\"", r.Path, in.Limit, url.QueryEscape(l.Next))
	}
	return out, nil
}

// made answers a resource just created.
type made[T any] struct {
	Location string `header:"Location" doc:"address of what was made"`
	ETag     string `header:"ETag" doc:"version, for If-Match, where the resource can be changed"`
	Body     T
}

// versioned answers a resource that can be changed.
type versioned[T any] struct {
	ETag string `header:"ETag" doc:"version, for If-Match"`
	Body T
}

// plain answers a resource that is never edited.
type plain[T any] struct{ Body T }

// Conditional documents the header; request.version reads it.
type Conditional struct {
	IfMatch string `header:"If-Match" doc:"the ETag that was read, several, or * for any; obligatory" example:"\"3\""`
}
