package service

import (
	"context"
	"fmt"
	"slices"
	"strconv"
	"strings"
	"time"

	"github.com/google/uuid"

	"spanwright/api/auth"
	"spanwright/estimate/calibration"
)

// The decisions on a calibration.
const (
	Accept  = "accept"
	Decline = "decline"
)

// NewDecision decides on a calibration.
type NewDecision struct {
	Decision string `json:"decision" enum:"accept,decline"`
	Changes  []int  `json:"changes,omitempty" maxItems:"1000" doc:"positions in proposal.changes, from 0, of those accepted; every recommended one that the rate book can hold when absent"`
	Reason   string `json:"reason" minLength:"1" maxLength:"2000"`
}

// CalibrationDecision is what an acceptance did.
type CalibrationDecision struct {
	Applied []AppliedChange `json:"applied"`
	Left    []LeftChange    `json:"left" doc:"recommended changes that were not made"`
}

// AppliedChange is one change that was made to the rate book.
type AppliedChange struct {
	Change int    `json:"change" doc:"position in proposal.changes, from 0"`
	Field  string `json:"field" doc:"JSON pointer into the rate book"`
	Before string `json:"before" doc:"empty where there was nothing"`
	After  string `json:"after"`
}

// LeftChange is a recommended change that was not made.
type LeftChange struct {
	Change int    `json:"change" doc:"position in proposal.changes, from 0"`
	Reason string `json:"reason"`
}

// DecideCalibration accepts or declines a proposed calibration, once. Acceptance
// makes the next version of the rate book with the changes named; earlier versions
// and estimates stay as they are: NotFound, Conflict (decided already, or the rate
// book has a newer version than the one that was fitted), Invalid (a change that the
// book cannot hold, or two that hold the same effect).
func (s *Service) DecideCalibration(ctx context.Context, a Actor, id uuid.UUID, n NewDecision, key Idempotency) (Calibration, error) {
	if err := s.allow(a, auth.DecideCalibrations); err != nil {
		return Calibration{}, err
	}
	if err := n.check(); err != nil {
		return Calibration{}, err
	}
	c, err := once(ctx, s, a, "decide calibration "+id.String(), key, id,
		func(tx Tx, id uuid.UUID) (Calibration, error) { return tx.Calibration(ctx, id) },
		func(tx Tx) (Calibration, error) { return s.decide(ctx, tx, a, id, n) })
	if isKind(err, Stale) { // nobody has sent an If-Match
		err = &Error{Kind: Conflict, Message: "another request decided, or changed the rate book, at the same time; read the calibration again", Err: err}
	}
	return c, err
}

func (n NewDecision) check() error {
	switch {
	case n.Decision != Accept && n.Decision != Decline:
		return invalid("/decision", n.Decision, "unknown decision", Accept+" or "+Decline)
	case n.Decision == Decline && len(n.Changes) > 0:
		return invalid("/changes", strconv.Itoa(len(n.Changes))+" changes", "given with a decision that makes none", "leave them out, or accept")
	}
	return checkText("/reason", n.Reason, 2000)
}

func (s *Service) decide(ctx context.Context, tx Tx, a Actor, id uuid.UUID, n NewDecision) (Calibration, error) {
	before, err := tx.Calibration(ctx, id)
	if err != nil {
		return before, err
	}
	if before.State != Proposed {
		return before, &Error{Kind: Conflict, Message: fmt.Sprintf("the calibration was %s by %s on %s and is decided once; fit again for another decision",
			before.State, before.DecidedBy, before.DecidedAt.Format(time.DateOnly))}
	}
	now := s.now()
	after := before
	after.State, after.Reason, after.Version = Declined, n.Reason, before.Version+1
	after.DecidedAt, after.DecidedBy, after.Decider = &now, a.Name, a.Token
	if n.Decision == Accept {
		after.State = Accepted
		if err := s.applyCalibration(ctx, tx, a, &after, n.Changes); err != nil {
			return before, err
		}
	}
	if err := tx.DecideCalibration(ctx, after); err != nil {
		return before, err
	}
	return after, s.audit(ctx, tx, a, n.Decision, "calibration", id, before.head(), after.head())
}

// applyCalibration makes the next version of the rate book and notes it in c.
func (s *Service) applyCalibration(ctx context.Context, tx Tx, a Actor, c *Calibration, wanted []int) error {
	before, err := tx.RateBook(ctx, c.RateBook)
	if err != nil {
		return err
	}
	if before.Number != c.RateBookNumber {
		return &Error{Kind: Conflict, Message: fmt.Sprintf("the calibration was fitted for version %d of the rate book %s, which has version %d by now; fit again",
			c.RateBookNumber, before.Name, before.Number)}
	}
	m := newAmendment(before.Content, *c, a.Name)
	if err := m.amend(c.Proposal.Changes, wanted); err != nil {
		return err
	}
	m.book.Note = appendNote(m.book.Note, fmt.Sprintf("Version %d: calibration %s from %d jobs, accepted by %s.", before.Number+1, c.ID, c.Jobs, a.Name))
	content, sum, err := checkedBook(m.book)
	if err != nil {
		return err
	}
	after := RateBook{ID: before.ID, Name: before.Name, Version: before.Version + 1, Number: before.Number + 1, SHA256: sum, Content: m.book,
		CreatedAt: before.CreatedAt, UpdatedAt: s.now()}
	if err := tx.UpdateRateBook(ctx, after, content, a.Token); err != nil {
		return err
	}
	c.MadeNumber, c.Decision = after.Number, &m.decision
	return s.audit(ctx, tx, a, "update", "rate book", after.ID, before, after)
}

func appendNote(note, sentence string) string {
	if note == "" {
		return sentence
	}
	return note + "\n" + sentence
}

// amend makes the changes wanted, or every recommended one that the book can hold.
func (m *amendment) amend(changes []calibration.Change, wanted []int) error {
	chosen, err := m.choose(changes, wanted)
	if err != nil {
		return err
	}
	if len(chosen) == 0 {
		out := &Error{Kind: Invalid, Message: "no recommended change can be made; name the changes, or decline"}
		for _, l := range m.decision.Left {
			out.Faults = append(out.Faults, Fault{Pointer: "/changes", Found: strconv.Itoa(l.Change), Problem: l.Reason, Remedy: "other changes, or the decision " + Decline})
		}
		if len(out.Faults) == 0 {
			out.Faults = []Fault{{Pointer: "/changes", Found: "nothing", Problem: "no change is recommended", Remedy: "the positions of changes to make all the same, or the decision " + Decline}}
		}
		return out
	}
	for _, i := range chosen {
		m.apply(i, changes[i])
	}
	return nil
}

// choose returns the positions of the changes to make, rising. Those that are named
// must all be possible; of those recommended, the others are noted with the reason.
func (m *amendment) choose(changes []calibration.Change, wanted []int) ([]int, error) {
	if len(wanted) > 0 {
		return m.named(changes, wanted)
	}
	var chosen []int
	for i, c := range changes {
		if !c.Recommended {
			continue
		}
		if why := m.unfit(c); why != "" {
			m.decision.Left = append(m.decision.Left, LeftChange{i, why})
			continue
		}
		chosen = append(chosen, i)
	}
	return m.withoutOverlaps(changes, chosen), nil
}

// withoutOverlaps takes out what a chosen multiplier holds already: it is of the
// whole cost, and so of more than hours or masses say.
func (m *amendment) withoutOverlaps(changes []calibration.Change, chosen []int) []int {
	var kept []int
	for _, i := range chosen {
		at := slices.IndexFunc(chosen, func(j int) bool {
			return changes[j].Target == calibration.TargetMultiplier && overlap(changes[i], changes[j])
		})
		if at < 0 || changes[i].Target == calibration.TargetMultiplier {
			kept = append(kept, i)
			continue
		}
		j := chosen[at]
		m.decision.Left = append(m.decision.Left, LeftChange{i, fmt.Sprintf("change %d, the multiplier of %s, holds the same effect", j, changes[j].Name)})
	}
	return kept
}

// named checks the changes that a request names.
func (m *amendment) named(changes []calibration.Change, wanted []int) ([]int, error) {
	out := &Error{Kind: Invalid, Message: "changes cannot be made as they are named; nothing was stored"}
	fault := func(at int, found, problem, remedy string) {
		out.Faults = append(out.Faults, Fault{Pointer: "/changes/" + strconv.Itoa(at), Found: found, Problem: problem, Remedy: remedy})
	}
	for at, i := range wanted {
		found := strconv.Itoa(i)
		if !(0 <= i && i < len(changes)) {
			fault(at, found, "no change has this position", fmt.Sprintf("a position from 0 to %d", len(changes)-1))
			continue
		}
		if first := slices.Index(wanted, i); first < at {
			fault(at, found, "named twice", "each change once")
			continue
		}
		if why := m.unfit(changes[i]); why != "" {
			fault(at, found, why, "leave it out")
		}
		for _, j := range wanted[:at] {
			if 0 <= j && j < len(changes) && overlap(changes[i], changes[j]) {
				fault(at, found, fmt.Sprintf("holds the same effect as change %d", j), "one or the other")
			}
		}
	}
	if len(out.Faults) > 0 {
		return nil, out
	}
	return slices.Sorted(slices.Values(wanted)), nil
}

// checkText refuses a text that is empty or too long.
func checkText(pointer, text string, most int) error {
	switch n := len([]rune(text)); {
	case strings.TrimSpace(text) == "":
		return invalid(pointer, text, "empty", "a text")
	case n > most:
		return invalid(pointer, strconv.Itoa(n)+" characters", "too long", fmt.Sprintf("at most %d", most))
	}
	return nil
}
