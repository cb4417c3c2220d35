package calculator

import (
	"context"
	"errors"
	"fmt"
	"maps"
	"slices"
	"strconv"
	"strings"

	"spanwright/estimate/pricing"
	"spanwright/estimate/ranges"
	"spanwright/estimate/spread"
)

// checkGroups refuses correlations out of range and groups that have none.
func (r RangeRequest) checkGroups(f *Faults) {
	groups := slices.Sorted(maps.Keys(r.Correlation))
	if !f.few("/correlation", len(groups), MaxRangeLines, "groups") {
		return
	}
	for _, g := range groups {
		if rho := r.Correlation[g]; !(0 <= rho && rho < 1) {
			f.add("/correlation/"+escaped(g), number(rho), "out of range", "a rank correlation ρ, at least 0 and below 1; a matrix holds others")
		}
	}
	for i, l := range r.Lines[:min(len(r.Lines), MaxRangeLines)] {
		if _, ok := r.Correlation[l.Group]; l.Group != "" && !ok {
			remedy := "a group of correlation, or none"
			if len(groups) > 0 {
				remedy = strings.Join(groups[:min(len(groups), 10)], ", ") + ", or none"
			}
			f.add(item("/lines", i)+"/group", quoted(l.Group), "a group without a correlation", remedy)
		}
	}
}

// escaped is a key as a part of a JSON pointer (RFC 6901).
func escaped(key string) string { return strings.NewReplacer("~", "~0", "/", "~1").Replace(key) }

// checkMatrix refuses a matrix over the limit, and ids that are no lines.
func (r RangeRequest) checkMatrix(f *Faults) {
	if r.Matrix == nil || !f.few("/matrix/ids", len(r.Matrix.IDs), MaxRangeMatrix, "ids") {
		return
	}
	for i, id := range r.Matrix.IDs {
		if !slices.ContainsFunc(r.Lines, func(l RangeLine) bool { return l.ID == id }) {
			f.add(item("/matrix/ids", i), quoted(id), "no line has this id", "the id of a line")
		}
	}
}

// tryMatrix adds what is wrong with the matrix alone, so that it is told together
// with the faults of other fields.
func (r RangeRequest) tryMatrix(ctx context.Context, f *Faults) error {
	if r.Matrix == nil || len(r.Matrix.IDs) > MaxRangeMatrix {
		return nil
	}
	var m pricing.Model
	for i, id := range slices.Compact(slices.Sorted(slices.Values(r.Matrix.IDs))) {
		m.Inputs = append(m.Inputs, pricing.Input{ID: id, Spread: spread.NewUniform(0, 1)})
		m.Terms = append(m.Terms, pricing.Term{Category: "total", Coefficient: 1, Factors: []pricing.Factor{{Input: i}}})
	}
	s := ranges.Settings{Trials: ranges.MinTrials, Matrix: &ranges.Matrix{IDs: r.Matrix.IDs, Rho: r.Matrix.Rho}}
	_, err := ranges.Simulate(ctx, m, s, nil)
	var more Faults
	if err == nil || !errors.As(r.fromRanges(err), &more) {
		return ctx.Err()
	}
	for _, x := range more {
		if strings.HasPrefix(x.Pointer, "/matrix") && !slices.ContainsFunc(*f, func(y Fault) bool { return y.Pointer == x.Pointer }) {
			*f = append(*f, x)
		}
	}
	return nil
}

// fromRanges turns errors of the simulation into faults; that of the context is
// returned as it is.
func (r RangeRequest) fromRanges(err error) error {
	if errors.Is(err, context.Canceled) || errors.Is(err, context.DeadlineExceeded) {
		return err
	}
	var f Faults
	for _, e := range flat(err) {
		var x *ranges.Error
		if !errors.As(e, &x) {
			f.add("", "lines that no sample of this size stands for", e.Error(), "spreads whose high is not so many times their low")
			continue
		}
		f.add(r.pointer(x.Field), x.Found, "not accepted: "+x.Field, x.Accepted)
	}
	return f.err()
}

// flat lists errors that are joined.
func flat(err error) []error {
	var joined interface{ Unwrap() []error }
	if !errors.As(err, &joined) {
		return []error{err}
	}
	var out []error
	for _, e := range joined.Unwrap() {
		out = append(out, flat(e)...)
	}
	return out
}

// pointer places a field of the simulation in the request.
func (r RangeRequest) pointer(field string) string {
	var i int
	if n, _ := fmt.Sscanf(field, "matrix.ids[%d]", &i); n == 1 {
		return item("/matrix/ids", i)
	}
	rest, ok := strings.CutPrefix(field, "matrix.rho")
	if !ok {
		if strings.HasPrefix(field, "matrix") {
			return "/matrix"
		}
		return ""
	}
	at := "/matrix/rho"
	for _, id := range names(rest) {
		at = item(at, slices.Index(r.Matrix.IDs, id))
	}
	if strings.HasSuffix(rest, "with itself") {
		at += at[strings.LastIndexByte(at, '/'):]
	}
	return at
}

// names are the quoted texts of a field.
func names(text string) []string {
	var out []string
	for {
		at := strings.IndexByte(text, '"')
		if at < 0 {
			return out
		}
		quoted, err := strconv.QuotedPrefix(text[at:])
		if err != nil {
			return out
		}
		id, _ := strconv.Unquote(quoted) // a quoted prefix can be read
		out, text = append(out, id), text[at+len(quoted):]
	}
}
