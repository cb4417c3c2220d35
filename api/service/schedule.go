package service

import (
	"bytes"
	"context"
	"crypto/sha256"
	"encoding/hex"
	"errors"
	"maps"
	"path"
	"slices"
	"strconv"
	"strings"

	"github.com/google/uuid"

	"spanwright/api/auth"
	"spanwright/estimate/assumption"
	"spanwright/estimate/schedule"
	"spanwright/estimate/sheet"
)

// readPosting reads a schedule from what was posted, with every fault at once.
func (s *Service) readPosting(ctx context.Context, p Posting, classes []string, project, scheme string) (schedule.Schedule, error) {
	o := schedule.Options{MaxMembers: s.limits.Members, Project: project, Scheme: scheme, JobTable: p.JobTable,
		DefinitionTable: p.DefinitionTable, RiskTable: p.RiskTable, ConnectionClasses: classes}
	if int64(len(p.Data)) > s.limits.Sheet.Bytes {
		return schedule.Schedule{}, &Error{Kind: TooLarge, Message: "the schedule is larger than the limit"}
	}
	if len(p.Data) > largePosting {
		release, err := s.place(ctx)
		if err != nil {
			return schedule.Schedule{}, err
		}
		defer release()
	}
	if strings.HasPrefix(p.ContentType, "application/json") {
		sch, err := schedule.ReadJSON(ctx, p.Data, o)
		return sch, s.checkGroups(sch, fromJSON(fromReading(err)))
	}
	cells, err := sheet.Open(p.Data, p.Name, p.ContentType, s.limits.Sheet)
	if err != nil {
		return schedule.Schedule{}, fromReading(err)
	}
	sch, err := schedule.Read(ctx, cells, o)
	return sch, s.checkGroups(sch, fromReading(err))
}

// classesOf are the connection classes of every rate book of the organisation: a
// schedule may be priced with any of them.
func classesOf(ctx context.Context, tx Tx) ([]string, error) {
	books, err := tx.RateBooks(ctx, Page{Limit: 200})
	if err != nil {
		return nil, err
	}
	known := map[string]bool{}
	for _, b := range books.Items {
		for _, c := range b.Content.ConnectionClasses() {
			known[c] = true
		}
	}
	return slices.Sorted(maps.Keys(known)), nil
}

// checkGroups refuses a schedule of more groups than the limit, because a
// document grows with them; err goes first.
func (s *Service) checkGroups(sch schedule.Schedule, err error) error {
	if n := len(sch.Echo.Groups); err == nil && n > s.limits.Groups {
		return &Error{Kind: Invalid, Message: "the schedule has too many groups", Faults: []Fault{{Header: "Group", Found: strconv.Itoa(n) + " groups",
			Problem: "more than can be priced apart", Remedy: "at most " + strconv.Itoa(s.limits.Groups) + " groups"}}}
	}
	return err
}

// fromReading classifies what reading a spreadsheet reports.
func fromReading(err error) error {
	var open *sheet.OpenError
	var faults sheet.Faults
	switch {
	case err == nil, errors.Is(err, context.Canceled), errors.Is(err, context.DeadlineExceeded):
		return err
	case errors.As(err, &faults):
		return &Error{Kind: Invalid, Message: "the schedule has faults; nothing was stored", Faults: fromSheet(faults)}
	case errors.As(err, &open):
		kinds := map[sheet.OpenKind]Kind{sheet.SizeLimit: TooLarge, sheet.Unsupported: Unsupported, sheet.Malformed: Invalid}
		return &Error{Kind: kinds[open.Kind], Message: open.Problem, Faults: []Fault{{Found: "the body", Problem: open.Problem, Remedy: open.Remedy}}}
	}
	return err
}

// fromJSON classifies what is left: text that is not a schedule in JSON.
func fromJSON(err error) error {
	var known *Error
	if err == nil || errors.As(err, &known) || errors.Is(err, context.Canceled) || errors.Is(err, context.DeadlineExceeded) {
		return err
	}
	return &Error{Kind: Malformed, Message: err.Error(), Faults: []Fault{{Found: "the body", Problem: err.Error(),
		Remedy: `{"rows": [{"Mark": "B1", …}], "job": {"Currency": "EUR", …}} with the heads of the columns as keys`}}, Err: err}
}

// PostSchedule reads a schedule and stores it as the next revision of a scheme:
// NotFound, Invalid with every fault, Malformed, Unsupported, TooLarge.
func (s *Service) PostSchedule(ctx context.Context, a Actor, scheme uuid.UUID, p Posting, key Idempotency) (Revision, error) {
	if err := s.allow(a, auth.PostSchedules); err != nil {
		return Revision{}, err
	}
	var project Project
	var classes []string
	sc, err := read(ctx, s, a, auth.PostSchedules, func(tx Tx) (Scheme, error) {
		sc, err := tx.Scheme(ctx, scheme)
		if err != nil {
			return sc, err
		}
		if project, err = tx.Project(ctx, sc.Project); err != nil {
			return sc, err
		}
		classes, err = classesOf(ctx, tx)
		return sc, err
	})
	if err != nil {
		return Revision{}, err
	}
	sch, err := s.readPosting(ctx, p, classes, project.Name, sc.Name)
	if err != nil {
		return Revision{}, err
	}
	if err := sameCurrency(project, sch); err != nil {
		return Revision{}, err
	}
	r, err := s.revision(a, sc.ID, p, sch)
	if err != nil {
		return Revision{}, err
	}
	return once(ctx, s, a, "post schedule "+scheme.String(), key, r.ID,
		func(tx Tx, id uuid.UUID) (Revision, error) { return tx.Revision(ctx, id) },
		func(tx Tx) (Revision, error) { return s.insertRevision(ctx, tx, a, r) })
}

// Reading is what a schedule says, before anything is sized, priced or stored.
type Reading struct {
	Settings  schedule.Settings  `json:"settings"`
	Echo      schedule.Echo      `json:"echo" doc:"load of each member and tonnes of each group, as read"`
	Defaults  []assumption.Entry `json:"defaults" doc:"what was taken because it was left blank"`
	Omissions []string           `json:"omissions" doc:"kinds that one would expect and that are absent"`
}

// Template writes an empty schedule as a workbook.
func (s *Service) Template(ctx context.Context, a Actor) ([]byte, error) {
	if err := s.allow(a, auth.UseCalculators); err != nil {
		return nil, err
	}
	return s.Export(ctx, schedule.Template)
}

// CheckSchedule reads a schedule and stores nothing: errors as those of
// PostSchedule.
func (s *Service) CheckSchedule(ctx context.Context, a Actor, p Posting) (Reading, error) {
	classes, err := read(ctx, s, a, auth.PostSchedules, func(tx Tx) ([]string, error) { return classesOf(ctx, tx) })
	if err != nil {
		return Reading{}, err
	}
	sch, err := s.readPosting(ctx, p, classes, "", "")
	if err != nil {
		return Reading{}, err
	}
	return Reading{Settings: sch.Settings, Echo: sch.Echo, Defaults: orEmpty(sch.Defaults), Omissions: orEmpty(sch.Omissions)}, nil
}

// orEmpty makes a list print as [] and not as null.
func orEmpty[T any](l []T) []T {
	if l == nil {
		return []T{}
	}
	return l
}

func (s *Service) revision(a Actor, scheme uuid.UUID, p Posting, sch schedule.Schedule) (Revision, error) {
	id, err := s.newID()
	if err != nil {
		return Revision{}, err
	}
	return Revision{ID: id, Scheme: scheme, SourceName: p.SourceName(), SourceSHA256: p.SHA256(), Members: len(sch.Members),
		CreatedAt: s.now(), CreatedBy: a.Name, Author: a.Token, Source: p.Data, JobTable: p.JobTable,
		DefinitionTable: p.DefinitionTable, RiskTable: p.RiskTable}, nil
}

func (s *Service) insertRevision(ctx context.Context, tx Tx, a Actor, r Revision) (Revision, error) {
	r, err := tx.InsertRevision(ctx, r)
	if err != nil {
		return r, err
	}
	return r, s.audit(ctx, tx, a, "post", "schedule", r.ID, nil, r)
}

// SHA256 is the hash of the posted bytes, in hexadecimal; tables posted beside them
// are part of it, each under its name where it is not the job's.
func (p Posting) SHA256() string {
	h := sha256.New()
	h.Write(p.Data)
	h.Write(p.JobTable)
	for _, t := range []struct {
		name string
		data []byte
	}{{"\x00definition\x00", p.DefinitionTable}, {"\x00risks\x00", p.RiskTable}} {
		if len(t.data) > 0 {
			h.Write([]byte(t.name))
			h.Write(t.data)
		}
	}
	return hex.EncodeToString(h.Sum(nil))
}

// SourceName is the posted file's own name, without folders and control
// characters.
func (p Posting) SourceName() string {
	name := path.Base(strings.ReplaceAll(strings.ToValidUTF8(p.Name, ""), "\\", "/"))
	name = strings.Map(func(r rune) rune {
		if r < 0x20 || r == 0x7f {
			return -1
		}
		return r
	}, name)
	if r := []rune(name); len(r) > nameLength {
		name = string(r[:nameLength])
	}
	if name == "" || name == "." || name == "/" {
		return "schedule"
	}
	return name
}

// posting turns a stored revision back into what was posted.
func (r Revision) posting() Posting {
	p := Posting{Name: r.SourceName, Data: r.Source, JobTable: r.JobTable, DefinitionTable: r.DefinitionTable, RiskTable: r.RiskTable}
	if b := bytes.TrimLeft(r.Source, " \t\r\n"); len(b) > 0 && b[0] == '{' {
		p.ContentType = "application/json"
	}
	return p
}

// Revision reads one schedule revision, its source included: NotFound.
func (s *Service) Revision(ctx context.Context, a Actor, id uuid.UUID) (Revision, error) {
	return read(ctx, s, a, auth.ReadProjects, func(tx Tx) (Revision, error) { return tx.Revision(ctx, id) })
}

// Revisions lists the schedule revisions of a scheme: NotFound.
func (s *Service) Revisions(ctx context.Context, a Actor, scheme uuid.UUID, p Page) (List[Revision], error) {
	return list(ctx, s, a, auth.ReadProjects, func(tx Tx) (List[Revision], error) {
		if _, err := tx.Scheme(ctx, scheme); err != nil {
			return List[Revision]{}, err
		}
		return tx.Revisions(ctx, scheme, p)
	})
}
