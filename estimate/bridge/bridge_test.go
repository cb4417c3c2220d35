package bridge_test

import (
	"context"
	"encoding/json"
	"math"
	"os"
	"strings"
	"testing"

	"spanwright/estimate/bridge"
	"spanwright/estimate/document"
	"spanwright/estimate/engine"
	"spanwright/estimate/job"
	"spanwright/estimate/money"
	"spanwright/estimate/ratebook"
	"spanwright/estimate/schedule"
	"spanwright/estimate/sheet"
	"spanwright/estimate/spread"
)

// quick is the smallest sampling that a job may have.
var quick = job.Sampling{Seed: 7, Replicates: 32, Trials: 64}

// demo reads one of the demo's schedules.
func demo(t *testing.T, name string, table string) schedule.Schedule {
	t.Helper()
	data, err := os.ReadFile("../../testdata/" + name + ".csv")
	if err != nil {
		t.Fatal(err)
	}
	book, err := sheet.Open(data, name+".csv", "text/csv", sheet.DefaultLimits())
	if err != nil {
		t.Fatal(err)
	}
	s, err := schedule.Read(context.Background(), book, schedule.Options{MaxMembers: 1000, JobTable: []byte("Key,Value\nProject,Brackwater loading quay\nScheme,one\n" + table)})
	if err != nil {
		t.Fatal(err)
	}
	return s
}

// side freezes and runs a job.
func side(t *testing.T, s schedule.Schedule, book ratebook.Book, edited []ratebook.Multiplier, sampling job.Sampling) bridge.Side {
	t.Helper()
	j, err := job.Freeze(s, job.Source{Name: "demo"}, book, edited, sampling)
	if err != nil {
		t.Fatal(err)
	}
	j.EngineVersion, j.Data = document.EngineVersion, engine.Data()
	return ran(t, j)
}

func ran(t *testing.T, j job.Job) bridge.Side {
	t.Helper()
	d, err := engine.Run(context.Background(), j, nil)
	if err != nil {
		t.Fatal(err)
	}
	return bridge.Side{Job: j, Document: d}
}

func build(t *testing.T, from, to bridge.Side) bridge.Bridge {
	t.Helper()
	v := engine.NewValuer()
	b, err := bridge.Build(context.Background(), from, to, func(ctx context.Context, j job.Job) (bridge.Value, error) {
		x, err := v.Value(ctx, j)
		return bridge.Value(x), err
	})
	if err != nil {
		t.Fatal(err)
	}
	return b
}

func share(t *testing.T, b bridge.Bridge, c bridge.Cause) bridge.Share {
	t.Helper()
	for _, s := range b.Shares {
		if s.Cause == c {
			return s
		}
	}
	t.Fatalf("the bridge has no share of %s", c)
	return bridge.Share{}
}

// zeroBut tells whether every cause but those named has exactly nothing.
func zeroBut(t *testing.T, b bridge.Bridge, but ...bridge.Cause) {
	t.Helper()
	for _, s := range b.Shares {
		named := false
		for _, c := range but {
			named = named || c == s.Cause
		}
		if !named && s.Amount.Sign() != 0 {
			t.Errorf("%s: got %s, want nothing", s.Cause, s.Amount)
		}
		if named && s.Amount.Sign() == 0 {
			t.Errorf("%s: got nothing", s.Cause)
		}
	}
}

// addsUp tests that the shares add up to the change, and groups with contingency to
// each share, to the minor unit.
func addsUp(t *testing.T, b bridge.Bridge) {
	t.Helper()
	sum := money.Zero
	for _, s := range b.Shares {
		sum = sum.Add(s.Amount)
		parts := s.Contingency
		for _, g := range s.Groups {
			parts = parts.Add(g.Amount)
		}
		if !parts.Equal(s.Amount) {
			t.Errorf("%s: the groups and the contingency add up to %s, the share is %s", s.Cause, parts, s.Amount)
		}
	}
	if !sum.Equal(b.Change) || !b.Change.Equal(b.To.Total.Sub(b.From.Total)) {
		t.Errorf("the shares add up to %s, the change is %s", sum, b.Change)
	}
}

func TestFromAnEstimateToItselfNothingMoves(t *testing.T) {
	s := side(t, demo(t, "brackwater", ""), ratebook.UnitRate(), nil, quick)
	b := build(t, s, s)
	zeroBut(t, b)
	addsUp(t, b)
	if b.Runs != 1 {
		t.Errorf("%d jobs were valued for no difference, want 1", b.Runs)
	}
}

// Another schedule, another price of steel, another multiplier and another
// confidence: four causes share the change, the others have exactly nothing, and the
// way back has the other sign.
func TestThereAndBackSumToZeroByCause(t *testing.T) {
	a := side(t, demo(t, "brackwater", ""), ratebook.UnitRate(), nil, quick)
	book := ratebook.UnitRate()
	for i := range book.Rates {
		if book.Rates[i].Category == ratebook.Material {
			book.Rates[i].Spread = book.Rates[i].Spread.Scale(1.125)
		}
	}
	tides := ratebook.Multiplier{Name: "site difficulty", Scope: ratebook.ProjectScope, Categories: []string{ratebook.Erection}, Spread: spread.NewPERT(1, 1.2, 1.6), Reason: "tidal work", Author: "test", Version: 1}
	z := side(t, demo(t, "brackwater-end-tower", "Confidence,0.85\n"), book, []ratebook.Multiplier{tides}, quick)
	there, back := build(t, a, z), build(t, z, a)
	addsUp(t, there)
	addsUp(t, back)
	zeroBut(t, there, bridge.Scope, bridge.Rate, bridge.Multiplier, bridge.RiskPolicy)
	for i, s := range there.Shares {
		if !s.Amount.Equal(back.Shares[i].Amount.Neg()) {
			t.Errorf("%s: %s there, %s back", s.Cause, s.Amount, back.Shares[i].Amount)
		}
	}
	if there.Runs != 16 {
		t.Errorf("%d jobs were valued, want every coalition of four causes", there.Runs)
	}
	for _, s := range there.Shares {
		if !strings.HasSuffix(s.Sentence, ".") || s.Amount.Sign() != 0 && !strings.Contains(s.Sentence, "EUR") {
			t.Errorf("%s: the sentence is %q", s.Cause, s.Sentence)
		}
	}
	for _, c := range []bridge.Cause{bridge.Scope, bridge.Rate} {
		if len(share(t, there, c).Moved) == 0 {
			t.Errorf("%s names nothing that moved", c)
		}
	}
}

// A cause that moves alone has the whole change; how much follows from the inputs:
// the base moves by what the likely price moves its lines.
func TestOneCauseAlone(t *testing.T) {
	s := demo(t, "brackwater", "")
	a := side(t, s, ratebook.UnitRate(), nil, quick)
	wide := ratebook.UnitRate()
	for i := range wide.Rates {
		if x := &wide.Rates[i].Spread; x.Distribution == spread.PERT && x.Bounds != spread.BoundsPercentiles {
			x.High += 0.5 * (x.High - x.Likely)
		}
	}
	other := quick
	other.Seed = 99
	for name, c := range map[string]struct {
		to    bridge.Side
		cause bridge.Cause
	}{
		"spreads alone":       {side(t, s, wide, nil, quick), bridge.RiskPolicy},
		"confidence alone":    {side(t, demo(t, "brackwater", "Confidence,0.9\n"), ratebook.UnitRate(), nil, quick), bridge.RiskPolicy},
		"the seed alone":      {side(t, s, ratebook.UnitRate(), nil, other), bridge.Sampling},
		"quantities alone":    {side(t, scaled(s), ratebook.UnitRate(), nil, quick), bridge.Scope},
		"the allowance alone": {side(t, s, lighter(ratebook.UnitRate()), nil, quick), bridge.Allowance},
		"another factor":      {side(t, demo(t, "brackwater", "Factor,2.5\n"), ratebook.UnitRate(), nil, quick), bridge.DesignBasis},
	} {
		b := build(t, a, c.to)
		t.Run(name, func(t *testing.T) {
			addsUp(t, b)
			zeroBut(t, b, c.cause)
			if got := share(t, b, c.cause).Amount; !got.Equal(b.Change) {
				t.Errorf("%s has %s of a change of %s", c.cause, got, b.Change)
			}
		})
	}
}

func scaled(s schedule.Schedule) schedule.Schedule {
	out := s
	out.Members = append([]schedule.Member{}, s.Members...)
	out.Members[0].Quantity *= 2
	return out
}

func lighter(b ratebook.Book) ratebook.Book {
	f := b.Connections["simple beams"]
	f.Spread = spread.NewTriangular(0.03, 0.04, 0.06)
	b.Connections["simple beams"] = f
	return b
}

// A catalogue that was mended moves the stored total of a job that is otherwise the
// same: the change is wholly the engine's.
func TestAnotherCatalogueIsWhollyTheEngine(t *testing.T) {
	a := side(t, demo(t, "brackwater", ""), ratebook.UnitRate(), nil, quick)
	old := a
	old.Job.Data.Catalogue = "0000000000000000"
	data, err := json.Marshal(a.Document)
	if err != nil {
		t.Fatal(err)
	}
	if old.Document, err = document.Parse(data); err != nil {
		t.Fatal(err)
	}
	old.Document.Job.CatalogueSHA256 = old.Job.Data.Catalogue
	old.Document.Totals.AtConfidence = old.Document.Totals.AtConfidence.Sub(money.FromInt(1234))
	b := build(t, old, a)
	addsUp(t, b)
	zeroBut(t, b, bridge.Engine)
	if got := share(t, b, bridge.Engine); got.Amount.Float64() != 1234 || !strings.Contains(got.Sentence, "catalogue") {
		t.Errorf("the engine has %s: %s", got.Amount, got.Sentence)
	}
}

// Shapley's shares of a game with three players, by hand: v(1)=1, v(12)=4, v(13)=3,
// v(123)=7, all others 0. Player 1: (1·2 + 4 + 3 + 7·2)/6 = 23/6; player 2: (0 + 3 +
// 0 + 4·2)/6 = 11/6; player 3: (0 + 2 + 0 + 3·2)/6 = 8/6.
func TestSharesOfAGameByHand(t *testing.T) {
	v := map[int]float64{1: 1, 3: 4, 5: 3, 7: 7}
	for k, want := range []float64{23.0 / 6, 11.0 / 6, 8.0 / 6} {
		if got := bridge.Shapley(3, k, func(s int) float64 { return v[s] }); math.Abs(got-want) > 1e-12 {
			t.Errorf("player %d: got %g, want %g", k+1, got, want)
		}
	}
}

func TestEstimatesInTwoCurrenciesHaveNoBridge(t *testing.T) {
	a := side(t, demo(t, "brackwater", ""), ratebook.UnitRate(), nil, quick)
	b := a
	b.Job.Settings.Currency = "USD"
	_, err := bridge.Build(context.Background(), a, b, nil)
	if err == nil || !strings.Contains(err.Error(), "EUR and USD") {
		t.Errorf("got %v, want an error that names both currencies", err)
	}
}

// From one starting book to the other every rate, norm and class changes at once: one
// cause, and the bridge adds up. The schedule is read with the classes of each.
func TestBetweenTheTwoStartingBooks(t *testing.T) {
	ratio := side(t, demo(t, "brackwater", ""), ratebook.Ratio(), nil, quick)
	s := demo(t, "brackwater", "")
	unit := ratebook.UnitRate()
	for i := range s.Members { // as the book's own classes would have it
		if m := &s.Members[i]; m.Kind == "grating" && m.Defaults["connection_class"] != "" {
			m.ConnectionClass = "platforms"
		}
	}
	b := build(t, ratio, side(t, s, unit, nil, quick))
	addsUp(t, b)
	if got := share(t, b, bridge.Rate); got.Amount.Sign() == 0 || !strings.Contains(got.Sentence, "unit-rate") {
		t.Errorf("the rates have %s: %s", got.Amount, got.Sentence)
	}
	if got := share(t, b, bridge.Allowance); got.Amount.Sign() != 0 {
		t.Errorf("the allowances have %s of a change that came with the book", got.Amount)
	}
}

// A sentence names what moved: price breaks, widened spreads, the money.
func TestSentencesNameWhatMoved(t *testing.T) {
	s := demo(t, "brackwater", "")
	a := side(t, s, ratebook.UnitRate(), nil, quick)
	breaks, wide := ratebook.UnitRate(), ratebook.UnitRate()
	breaks.Rates[0].Breaks[1].Factor = breaks.Rates[0].Breaks[0].Factor
	breaks.Rates[0].Breaks = breaks.Rates[0].Breaks[:1]
	f := wide.Norms.LiftDays
	f.Spread.High *= 2
	wide.Norms.LiftDays = f
	for name, c := range map[string]struct {
		to    bridge.Side
		cause bridge.Cause
		want  string
	}{
		"price break": {side(t, s, breaks, nil, quick), bridge.Rate, "steel sections"},
		"spread":      {side(t, s, wide, nil, quick), bridge.RiskPolicy, "norm/crane days per lift"},
		"money":       {side(t, demo(t, "brackwater", "Money,outturn\nSpend date,2027-06-01\n"), ratebook.UnitRate(), nil, quick), bridge.Escalation, "outturn"},
	} {
		b := build(t, a, c.to)
		addsUp(t, b)
		zeroBut(t, b, c.cause)
		if got := share(t, b, c.cause).Sentence; !strings.Contains(got, c.want) {
			t.Errorf("%s: the sentence %q does not name %s", name, got, c.want)
		}
	}
}
