package takeoff

import (
	"context"
	"errors"
	"math"
	"strconv"
	"strings"
	"testing"

	"github.com/google/go-cmp/cmp"

	"spanwright/estimate/cutting"
	"spanwright/estimate/ratebook"
	"spanwright/estimate/schedule"
)

func stocked(way string, lengths ...float64) Settings {
	s := limited()
	s.Stock, s.Kerf, s.Purchase = lengths, 0.005, way
	return s
}

func purchase(t *testing.T, pieces []Piece, s Settings) []SectionPlan {
	t.Helper()
	plans, err := Purchase(context.Background(), pieces, s)
	if err != nil {
		t.Fatal(err)
	}
	return plans
}

// By hand: two pieces of 6.050 m and a cut of 5 mm do not fit 12.1 m; 24 pieces take 12
// bars of 15.1 m, 181.2 m, with a yield of 145.2 / 181.2 = 80.1 %. Half the cut off
// each piece makes two fit 12.1 m: 12 bars of 12.1 m save 36 m.
func TestPurchaseByHand(t *testing.T) {
	pieces := []Piece{beam("B1", 24, 6.05)}
	s := stocked(schedule.PurchaseLeastStock, 12.1, 15.1)
	s.Plans = purchase(t, pieces, s)
	if len(s.Plans) != 1 {
		t.Fatalf("%d plans, want 1", len(s.Plans))
	}
	p := s.Plans[0]
	if p.Designation != "IPE 300" || p.Grade != "S275" || p.Plan.StockLength != 1_812_000 || !p.Plan.Proven || math.Abs(p.Plan.Yield-0.801) > 0.0005 {
		t.Errorf("plan of %s %s: %d tenths of a mm, yield %g, proven %v", p.Designation, p.Grade, p.Plan.StockLength, p.Plan.Yield, p.Plan.Proven)
	}
	if p.Plan.Hint == nil || p.Plan.Hint.Text != "2.5 mm less on B1 would save 36 m" {
		t.Errorf("hint %+v", p.Plan.Hint)
	}
	if !near(p.Purchased, 181.2*42.2) || !near(p.Net, 145.2*42.2) {
		t.Errorf("purchased %g kg, net %g kg; want 7646.64, 6127.44", p.Purchased, p.Net)
	}
	it := count(t, pieces, allowances(), s)[0]
	q, _ := it.Quantity(ratebook.PurchasedTonnes)
	if q.Value.String() != "9.564" || !strings.Contains(q.Formula, "cutting plan") { // 7.64664 · 1.06 · 1.18 = 9.56442
		t.Errorf("purchased %s t, %q; want 9.564", q.Value, q.Formula)
	}
	for _, f := range q.Factors {
		if f.ID == "ws" || f.ID == "b" {
			t.Errorf("purchase by a plan has the allowance %s", f.ID)
		}
	}
}

// Over all items the measured purchase is the stock of the plans, and of what has no
// plan the net mass with its waste.
func TestPurchaseSumsToThePlans(t *testing.T) {
	for _, way := range []string{schedule.PurchaseFirstFit, schedule.PurchaseLeastStock} {
		pieces := randomPieces(t, 11, 60)
		s := stocked(way, 6, 12, 15)
		s.Plans = purchase(t, pieces, s)
		want, got, bars := 0.0, 0.0, 0.0
		for _, p := range s.Plans {
			want += p.Purchased / 1000
			bars += p.Net / 1000
			if p.Purchased < p.Net-1e-6 {
				t.Errorf("%s: %g kg bought for %g kg", p.Designation, p.Purchased, p.Net)
			}
		}
		a := allowances()
		for _, p := range pieces {
			if _, ok := s.plan(p); !ok {
				want += p.Net() / 1000 * a.Waste[p.Waste].Value()
			}
		}
		for _, it := range count(t, pieces, a, s) {
			q, _ := it.Quantity(ratebook.PurchasedTonnes)
			got += q.Measured
			for _, f := range q.Factors {
				if strings.HasPrefix(f.ID, "w") {
					got += q.Measured * (f.Value() - 1)
				}
			}
		}
		if !near(got, want) || bars == 0 {
			t.Errorf("%s: items buy %.12g t, plans and waste %.12g t", way, got, want)
		}
	}
}

func TestWhatHasNoPlan(t *testing.T) {
	flat, welded, row := beam("F1", 1, 6), beam("W1", 1, 6), beam("R1", 1, 6)
	flat.Waste, welded.Weld, row.Member.Treatment = ratebook.WastePlate, 0.8, schedule.ByMass
	for _, p := range []Piece{flat, welded, row} {
		if got := purchase(t, []Piece{p}, stocked(schedule.PurchaseFirstFit, 12)); len(got) != 0 {
			t.Errorf("%s: plans %+v", p.Member.Mark, got)
		}
	}
	if got := purchase(t, []Piece{beam("B1", 1, 6)}, stocked(schedule.PurchaseWaste, 12)); got != nil {
		t.Errorf("by waste: plans %+v", got)
	}
	if _, err := Purchase(context.Background(), []Piece{beam("B1", 1, 6)}, stocked(schedule.PurchaseFirstFit)); err == nil || !strings.Contains(err.Error(), "stock lengths") {
		t.Errorf("no stock: %v", err)
	}
}

// A set of tubes among tubes is bought as sections are: each row has its own waste.
func TestRowsOfSeveralWastes(t *testing.T) {
	tube := beam("B2", 10, 6)
	tube.Waste = ratebook.WasteTube
	it := count(t, []Piece{beam("B1", 10, 6), tube}, allowances(), limited())[0]
	q, _ := it.Quantity(ratebook.PurchasedTonnes)
	if q.Value.String() != "6.841" || !cmp.Equal(q.Fixed, []string{"ws", "wt"}) { // 2.532 · (1.07 + 1.09) · 1.06 · 1.18 = 6.84078
		t.Errorf("purchased %s t by %v, want 6.841 by both wastes", q.Value, q.Fixed)
	}
}

// 30 m out of bars of 12 m: 3 parts of 10 m.
func TestLongPiecesAreSplitFirst(t *testing.T) {
	plans := purchase(t, []Piece{beam("B1", 2, 30)}, stocked(schedule.PurchaseFirstFit, 6, 12))
	if diff := cmp.Diff([]string{"B1: each piece of 30 m is cut as 2 site splices into 3 pieces of 10 m"}, plans[0].Split); diff != "" {
		t.Errorf("split (-want +got):\n%s", diff)
	}
	if plans[0].Plan.Pieces != 6 || plans[0].Plan.StockLength != 6*120_000 {
		t.Errorf("%d pieces out of %d tenths of a mm, want 6 out of 72 m", plans[0].Plan.Pieces, plans[0].Plan.StockLength)
	}
}

// 13 m fit a vehicle of 13.6 m but no bar of 12 m: 2 pieces of 6.5 m; 26 m go in 2 parts.
func TestPiecesLongerThanStockAreJoinedInTheShop(t *testing.T) {
	plans := purchase(t, []Piece{beam("B1", 2, 13), beam("B2", 1, 26)}, stocked(schedule.PurchaseFirstFit, 6, 12))
	if diff := cmp.Diff([]string{
		"B1: each piece of 13 m is cut as 1 shop butt joint into 2 pieces of 6.5 m",
		"B2: each piece of 26 m is cut as 1 site splice into 2 pieces of 13 m, each of them as 1 shop butt joint into 2 pieces of 6.5 m",
	}, plans[0].Split); diff != "" {
		t.Errorf("split (-want +got):\n%s", diff)
	}
	if p := plans[0]; p.ShopJoints != 4 || p.Plan.Pieces != 8 || p.Plan.StockLength != 8*120_000 || !near(p.Plan.Yield, 6.5/12) {
		t.Errorf("%d joints, %d pieces out of %d tenths of a mm, yield %g; want 4, 8 out of 96 m, 0.542", p.ShopJoints, p.Plan.Pieces, p.Plan.StockLength, p.Plan.Yield)
	}
}

func TestGradesAreCutApart(t *testing.T) {
	other := beam("B2", 1, 6)
	other.Grade = "S355"
	if plans := purchase(t, []Piece{beam("B1", 1, 5.9), other}, stocked(schedule.PurchaseFirstFit, 12)); len(plans) != 2 {
		t.Errorf("%d plans, want one for each grade", len(plans))
	}
}

func TestManyRowsOfOneLength(t *testing.T) {
	var pieces []Piece
	for i := range cutting.MaxPieceRows + 50 {
		pieces = append(pieces, beam("B"+strconv.Itoa(i), 2, 4))
	}
	plans := purchase(t, pieces, stocked(schedule.PurchaseFirstFit, 12.1))
	if n := plans[0].Plan.Pieces; n != int64(2*len(pieces)) {
		t.Errorf("%d pieces in the plan, want %d", n, 2*len(pieces))
	}
}

func TestPurchaseIsCancelledAndNamesTheSection(t *testing.T) {
	ctx, cancel := context.WithCancel(context.Background())
	cancel()
	if _, err := Purchase(ctx, []Piece{beam("B1", 1, 6)}, stocked(schedule.PurchaseLeastStock, 12)); !errors.Is(err, context.Canceled) {
		t.Errorf("cancelled: %v", err)
	}
	if _, err := Purchase(context.Background(), []Piece{beam("B1", 200_000, 6)}, stocked(schedule.PurchaseFirstFit, 12)); err == nil || !strings.Contains(err.Error(), "IPE 300 S275") {
		t.Errorf("too many pieces: %v", err)
	}
}
