package bridge

import (
	"context"
	"fmt"

	"spanwright/estimate/document"
	"spanwright/estimate/job"
	"spanwright/estimate/money"
)

// Cause is one reason why an estimate changes.
type Cause string

// The causes: those that share the change in one game, then those outside it.
const (
	Scope       Cause = "scope"        // rows, quantities, lengths, loads, arrangements, treatment of the steel
	Section     Cause = "section"      // families, sections and grades of rows in both
	Rate        Cause = "rate"         // likely prices
	Multiplier  Cause = "multiplier"   // multipliers in force
	Escalation  Cause = "escalation"   // indices, spend dates, base-date or outturn money
	Exchange    Cause = "exchange"     // rates of exchange
	Allowance   Cause = "allowance"    // connections, bolts, waste, growth, norms, limits
	DesignBasis Cause = "design basis" // basis, factor, and the limits that rows took by default
	BaseDate    Cause = "base date"    // dates of the money of job and book
	RiskPolicy  Cause = "risk policy"  // confidence, spreads, correlation, systemic factor, discrete risks
	Engine      Cause = "engine"       // version of the engine, catalogue, grades
	Sampling    Cause = "sampling"     // seed, replicates, trials
)

// Causes returns every cause, in the order in which they are shown.
func Causes() []Cause {
	return []Cause{Scope, Section, Rate, Multiplier, Escalation, Exchange, Allowance, DesignBasis, BaseDate, RiskPolicy, Engine, Sampling}
}

// players are the causes that share the change.
func players() []Cause { return Causes()[:10] }

// Value is what one job is worth.
type Value struct {
	Base       money.Decimal
	Total      money.Decimal            // base and contingency: the cost at the job's confidence
	Groups     map[string]money.Decimal // base by member group
	Replicates []float64                // the same percentile of each replicate, for standard errors
}

// Valuer values a job on the engine at hand, whatever engine it was frozen for.
type Valuer func(ctx context.Context, j job.Job) (Value, error)

// Side is one of the two estimates.
type Side struct {
	Job      job.Job
	Document document.Document
}

// End is one of the two fixed ends.
type End struct {
	Project       string          `json:"project"`
	Scheme        string          `json:"scheme"`
	Source        string          `json:"source"`
	JobSHA256     string          `json:"job_sha256"`
	EngineVersion int             `json:"engine_version"`
	BaseDate      string          `json:"base_date"`
	Confidence    document.Number `json:"confidence"`
	Base          money.Decimal   `json:"base"`
	Contingency   money.Decimal   `json:"contingency"`
	Total         money.Decimal   `json:"total" doc:"base and contingency"`
}

// Share is what one cause makes of the change.
type Share struct {
	Cause       Cause           `json:"cause"`
	Amount      money.Decimal   `json:"amount"`
	SE          document.Number `json:"standard_error" doc:"of the sampling; 0 for causes that moved nothing"`
	Groups      []GroupShare    `json:"groups" doc:"of the base, by member group"`
	Contingency money.Decimal   `json:"contingency" doc:"amount less the groups"`
	Moved       []string        `json:"moved" doc:"what differs, in words"`
	Sentence    string          `json:"sentence"`
}

// GroupShare is the part of a share that falls on the base of one group.
type GroupShare struct {
	Group  string        `json:"group"`
	Amount money.Decimal `json:"amount"`
}

// Bridge is the change from one estimate to another.
type Bridge struct {
	From     End           `json:"from"`
	To       End           `json:"to"`
	Currency string        `json:"currency"`
	Change   money.Decimal `json:"change" doc:"to.total minus from.total, the sum of all shares"`
	Shares   []Share       `json:"shares" doc:"every cause, in a fixed order"`
	Groups   []GroupShare  `json:"groups" doc:"change of the base by member group, over all causes"`
	Runs     int           `json:"runs" doc:"jobs that were valued"`
	Method   string        `json:"method"`
	Notes    []string      `json:"notes"`
}

// Build explains the change. The two estimates must be in one currency. The bridge
// back has the same shares with the other sign, to the minor unit.
func Build(ctx context.Context, from, to Side, value Valuer) (Bridge, error) {
	if a, b := from.Job.Settings.Currency, to.Job.Settings.Currency; a != b {
		return Bridge{}, fmt.Errorf("bridge: found estimates in %s and %s; accepted: two estimates in one currency", a, b)
	}
	currency, err := from.Job.Money()
	if err != nil {
		return Bridge{}, fmt.Errorf("bridge: %w", err)
	}
	g := &game{a: from, b: to, value: value, currency: currency}
	back := later(from, to)
	if back {
		g.a, g.b = to, from
	}
	if err := g.play(ctx); err != nil {
		return Bridge{}, err
	}
	out := Bridge{
		From: endOf(from), To: endOf(to), Currency: currency.Code, Shares: g.shares(back), Runs: len(g.values),
		Method: "Shapley shares of base and contingency over every coalition of the causes that differ, on one engine and one seed; engine and sampling outside the game; rounded by largest remainder",
		Notes:  notes(),
	}
	out.Change = out.To.Total.Sub(out.From.Total)
	out.Groups = sumGroups(out.Shares)
	for i := range out.Shares {
		describe(&out.Shares[i], from, to, currency)
	}
	return out, nil
}

func endOf(s Side) End {
	t := s.Document.Totals
	return End{Project: s.Document.Job.Project, Scheme: s.Document.Job.Scheme, Source: s.Document.Job.Source, JobSHA256: s.Document.Job.JobSHA256,
		EngineVersion: s.Document.EngineVersion, BaseDate: s.Document.Job.BaseDate, Confidence: t.Confidence,
		Base: t.Base, Contingency: t.Contingency, Total: t.AtConfidence}
}

func notes() []string {
	return []string{
		"A spread whose likely value is the same in both estimates counts as risk policy, one whose likely value moved as rate, multiplier or allowance.",
		"Rows are matched by mark; a row in one of the two alone is scope.",
		document.Caution,
	}
}

// later gives two sides one order whatever the direction asked, so that there and
// back are computed from the same numbers.
func later(a, b Side) bool {
	x, y := a.Document.Job, b.Document.Job
	if x.JobSHA256 != y.JobSHA256 {
		return x.JobSHA256 > y.JobSHA256
	}
	if a.Document.EngineVersion != b.Document.EngineVersion {
		return a.Document.EngineVersion > b.Document.EngineVersion
	}
	return a.Document.Totals.AtConfidence.Cmp(b.Document.Totals.AtConfidence) > 0
}
