package bridge

import (
	"cmp"
	"fmt"
	"maps"
	"slices"
	"strings"

	"spanwright/estimate/document"
	"spanwright/estimate/job"
	"spanwright/estimate/money"
	"spanwright/estimate/ratebook"
	"spanwright/estimate/schedule"
	"spanwright/estimate/spread"
)

// most is the number of differences that a sentence names.
const most = 6

// describe writes what moved and the sentence of a share.
func describe(s *Share, from, to Side, c money.Currency) {
	s.Moved = differences(s.Cause, from, to)
	switch {
	case s.Amount.Sign() > 0:
		s.Sentence = fmt.Sprintf("%s raises the cost by %s %s", title(s.Cause), s.Amount, c.Code)
	case s.Amount.Sign() < 0:
		s.Sentence = fmt.Sprintf("%s lowers the cost by %s %s", title(s.Cause), s.Amount.Neg(), c.Code)
	case len(s.Moved) == 0:
		s.Sentence = title(s.Cause) + ": nothing differs"
	default:
		s.Sentence = title(s.Cause) + " moves nothing"
	}
	if len(s.Groups) > 0 {
		largest := slices.MaxFunc(s.Groups, func(a, b GroupShare) int { return abs(a.Amount).Cmp(abs(b.Amount)) })
		s.Sentence += fmt.Sprintf(", most of it in %s (%s)", largest.Group, largest.Amount)
	}
	s.Sentence += shown(s.Moved) + "."
}

// shown are the first differences of a sentence, and how many there are beside them.
func shown(moved []string) string {
	if len(moved) == 0 {
		return ""
	}
	list := moved
	if len(list) > most {
		list = append(slices.Clone(list[:most]), fmt.Sprintf("and %d more", len(moved)-most))
	}
	return ": " + strings.Join(list, "; ")
}

func abs(d money.Decimal) money.Decimal {
	if d.Sign() < 0 {
		return d.Neg()
	}
	return d
}

func title(c Cause) string { return strings.ToUpper(string(c[:1])) + string(c[1:]) }

// differences names what differs in the inputs of a cause, from the documents and
// jobs alone.
func differences(c Cause, from, to Side) []string {
	a, b := from.Job, to.Job
	out := []string{}
	say := func(what string, x, y any) {
		if fmt.Sprint(x) != fmt.Sprint(y) {
			out = append(out, fmt.Sprintf("%s %v → %v", what, x, y))
		}
	}
	switch c {
	case Scope:
		out = rows(a, b)
		say("coating", a.Settings.Coating, b.Settings.Coating)
		say("execution class", a.Settings.ExecutionClass, b.Settings.ExecutionClass)
		say("purchase", a.Settings.Purchase, b.Settings.Purchase)
		say("stock lengths", a.Settings.StockLengths, b.Settings.StockLengths)
		say("haul distance, km,", a.Settings.HaulDistance/1000, b.Settings.HaulDistance/1000)
		say("owner's costs", a.Settings.OwnerCosts, b.Settings.OwnerCosts)
	case Section:
		return sections(a, b)
	case Rate:
		return prices(a, b)
	case Multiplier:
		say("site conditions", a.Settings.SiteConditions, b.Settings.SiteConditions)
		return append(out, entries(c, from.Document, to.Document)...)
	case Allowance, Exchange:
		return entries(c, from.Document, to.Document)
	case Escalation:
		say("money", a.Settings.Money, b.Settings.Money)
		say("spend date", a.Settings.SpendDate, b.Settings.SpendDate)
		out = append(out, changes("months of spending, ", months(a.Book.SpendMonths), months(b.Book.SpendMonths))...)
		return append(out, indices(a.Book.Indices, b.Book.Indices)...)
	case DesignBasis:
		say("basis", a.Settings.DesignBasis, b.Settings.DesignBasis)
		if a.Settings.DesignBasis == b.Settings.DesignBasis {
			say("factor", a.Settings.Factor, b.Settings.Factor)
		}
		say("deflection limit", a.Settings.DeflectionLimit, b.Settings.DeflectionLimit)
	case BaseDate:
		say("base date", a.Settings.BaseDate, b.Settings.BaseDate)
		say("base date of the rate book", a.Book.BaseDate, b.Book.BaseDate)
	case RiskPolicy:
		say("confidence", a.Settings.Confidence, b.Settings.Confidence)
		say("estimate class", a.Settings.EstimateClass, b.Settings.EstimateClass)
		return append(out, beliefs(from, to)...)
	case Engine:
		say("engine version", from.Document.EngineVersion, to.Document.EngineVersion)
		say("catalogue", short(from.Document.Job.CatalogueSHA256), short(to.Document.Job.CatalogueSHA256))
		say("grades", short(from.Document.Job.GradesSHA256), short(to.Document.Job.GradesSHA256))
	case Sampling:
		say("seed", a.Sampling.Seed, b.Sampling.Seed)
		say("trials", a.Sampling.Replicates*a.Sampling.Trials, b.Sampling.Replicates*b.Sampling.Trials)
	}
	return out
}

// beliefs names the risks, spreads and correlations that differ.
func beliefs(from, to Side) []string {
	a, b := from.Job, to.Job
	out := append(risks(a.Risks, b.Risks), widened(from.Document, to.Document)...)
	for _, g := range slices.Sorted(maps.Keys(correlations(nil, a.Book.Correlation, b.Book.Correlation))) {
		if x, y := a.Book.Correlation[g], b.Book.Correlation[g]; x != y {
			out = append(out, fmt.Sprintf("correlation of %s %v → %v", g, x, y))
		}
	}
	return out
}

func short(hash string) string { return hash[:min(8, len(hash))] }

// rows names the rows that came, went or changed.
func rows(a, b job.Job) []string {
	at := map[string]int{}
	for i, m := range a.Members {
		at[m.Mark] = i
	}
	var out, added []string
	seen := map[string]bool{}
	for _, m := range b.Members {
		seen[m.Mark] = true
		i, ok := at[m.Mark]
		if !ok {
			added = append(added, m.Mark)
			continue
		}
		old := a.Members[i]
		for _, d := range []struct {
			what string
			x, y any
		}{{"quantity", old.Quantity, m.Quantity}, {"length", old.Length, m.Length}, {"arrangement", old.Arrangement, m.Arrangement}} {
			if fmt.Sprint(d.x) != fmt.Sprint(d.y) {
				out = append(out, fmt.Sprintf("%s %s %v → %v", m.Mark, d.what, d.x, d.y))
			}
		}
		if fmt.Sprint(old.Loads, old.Axial) != fmt.Sprint(m.Loads, m.Axial) {
			out = append(out, m.Mark+" other loads")
		}
	}
	var gone []string
	for _, m := range a.Members {
		if !seen[m.Mark] {
			gone = append(gone, m.Mark)
		}
	}
	for _, l := range []struct {
		word  string
		marks []string
	}{{"gone", gone}, {"added", added}} {
		if len(l.marks) > 0 {
			out = append([]string{fmt.Sprintf("rows %s: %d (%s)", l.word, len(l.marks), strings.Join(l.marks[:min(most, len(l.marks))], ", "))}, out...)
		}
	}
	return append([]string{}, out...)
}

// sections names the rows that ask for another section, family or grade. What a
// sizing chose anew because of other causes is theirs.
func sections(a, b job.Job) []string {
	at := map[string]string{}
	asked := func(m schedule.Member) string {
		if m.Treatment == schedule.ByMass {
			return ""
		}
		return strings.TrimSpace(strings.Join([]string{cmp.Or(m.Section, m.Family), m.Grade}, " "))
	}
	for _, m := range a.Members {
		at[m.Mark] = asked(m)
	}
	out := []string{}
	for _, m := range b.Members {
		if old, y := at[m.Mark], asked(m); old != "" && y != "" && old != y {
			out = append(out, fmt.Sprintf("%s %s → %s", m.Mark, old, y))
		}
	}
	return out
}

// risks names the discrete risks that came, went or changed.
func risks(a, b []schedule.Risk) []string {
	words := func(list []schedule.Risk) map[string]string {
		out := map[string]string{}
		for _, k := range list {
			out[k.Name] = fmt.Sprintf("%.3g %% of %.6g", 100*k.Probability, k.Impact.Base())
		}
		return out
	}
	return changes("risk ", words(a), words(b))
}

// prices names the rates of the two books that differ: their likely values, and the
// terms on which they hold.
func prices(a, b job.Job) []string {
	words := func(book ratebook.Book) map[string]string {
		out := map[string]string{}
		for _, r := range book.PricedRates() {
			id := strings.TrimSpace(r.ID + " " + string(r.Scope) + " " + r.Subject)
			terms := ""
			for _, x := range r.Breaks {
				terms += fmt.Sprintf(", × %s from %s", x.Factor, x.From)
			}
			if r.MinimumOrder.Sign() > 0 {
				terms += fmt.Sprintf(", least order %s", r.MinimumOrder)
			}
			if r.MinimumCharge.Sign() > 0 {
				terms += fmt.Sprintf(", least charge %s", r.MinimumCharge)
			}
			out[id] = fmt.Sprintf("%g %s%s", r.Spread.Base(), r.Currency, terms)
		}
		return out
	}
	var out []string
	if a.Book.Kind != b.Book.Kind {
		return []string{fmt.Sprintf("rate book %s (%s) → %s (%s), with its norms, classes and allowances", a.Book.Name, a.Book.Kind, b.Book.Name, b.Book.Kind)}
	}
	if !a.Book.ReferencePrice.Equal(b.Book.ReferencePrice) {
		out = append(out, fmt.Sprintf("reference price %s → %s", a.Book.ReferencePrice, b.Book.ReferencePrice))
	}
	return append(out, changes("rate ", words(a.Book), words(b.Book))...)
}

// months are the months of spending by category, as words.
func months(m map[string]int) map[string]string {
	out := map[string]string{}
	for c, n := range m {
		out[c] = fmt.Sprint(n)
	}
	return out
}

// indices names the indices that differ.
func indices(a, b []ratebook.Index) []string {
	words := func(list []ratebook.Index) map[string]string {
		out := map[string]string{}
		for _, x := range list {
			if n := len(x.Values); n > 0 {
				out[x.Name] = fmt.Sprintf("%s at %s", x.Values[n-1].Value, x.Values[n-1].Date)
			}
			if x.Growth != nil {
				out[x.Name] += fmt.Sprintf(", then %.3g %% a year", 100*x.Growth.Spread.Base())
			}
		}
		return out
	}
	return changes("index ", words(a), words(b))
}

// widened names the register entries whose likely value stands and whose spread
// moved.
func widened(a, b document.Document) []string {
	old := map[string]spread.Spread{}
	for _, e := range a.Assumptions {
		if e.Spread != nil {
			old[e.ID] = *e.Spread
		}
	}
	out := []string{}
	for _, e := range b.Assumptions {
		x, ok := old[e.ID]
		if ok && e.Spread != nil && x != *e.Spread && x.Base() == e.Spread.Base() && !strings.HasPrefix(e.ID, "risk/") && !strings.HasPrefix(e.ID, "systemic/") {
			out = append(out, fmt.Sprintf("%s %g to %g → %g to %g", e.ID, x.Low, x.High, e.Spread.Low, e.Spread.High))
		}
	}
	return out
}

// changes names what came, went or changed between two lists of words by name.
func changes(lead string, x, y map[string]string) []string {
	all := maps.Clone(x)
	maps.Copy(all, y)
	out := []string{}
	for _, n := range slices.Sorted(maps.Keys(all)) {
		p, inA := x[n]
		q, inB := y[n]
		switch {
		case !inA:
			out = append(out, fmt.Sprintf("%s%s new (%s)", lead, n, q))
		case !inB:
			out = append(out, lead+n+" no longer in force")
		case p != q:
			out = append(out, fmt.Sprintf("%s%s %s → %s", lead, n, p, q))
		}
	}
	return out
}

// leading are the first segments of the register ids of a cause.
var leading = map[Cause][]string{
	Multiplier: {"multiplier/"}, Allowance: {"allowance/", "norm/"}, Exchange: {"exchange/"},
}

// entries names the register entries of a cause that differ.
func entries(c Cause, a, b document.Document) []string {
	value := func(d document.Document) map[string]string {
		out := map[string]string{}
		for _, e := range d.Assumptions {
			if slices.ContainsFunc(leading[c], func(p string) bool { return strings.HasPrefix(e.ID, p) }) {
				out[e.ID] = e.Value
				if e.Spread != nil {
					out[e.ID] = fmt.Sprint(e.Spread.Base())
				}
			}
		}
		return out
	}
	return changes("", value(a), value(b))
}
