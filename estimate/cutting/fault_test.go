package cutting

import (
	"context"
	"errors"
	"strings"
	"testing"
	"time"

	"github.com/google/go-cmp/cmp"
)

// All faults come at once, each with its place.
func TestFaults(t *testing.T) {
	p := Problem{
		Pieces: []Piece{{"B7", 16_0000, 2}, {"", 0, -1}, {"B7", -5, 0}, {"C", 2_0000, MaxPieces + 1}, {"D", MaxLength + 1, 1}},
		Stock:  []Stock{{Length: 12_1000}, {Length: 15_1000, Available: -1, Cost: -1}, {Length: 9}},
		Kerf:   -1, Objective: "mass",
	}
	_, err := Optimise(context.Background(), p, Limits{})
	var got Faults
	if !errors.As(err, &got) {
		t.Fatalf("%v is not Faults", err)
	}
	want := []string{
		"/pieces/0/length", "/pieces/1/mark", "/pieces/1/length", "/pieces/1/count", "/pieces/2/mark", "/pieces/2/length", "/pieces/2/count",
		"/pieces/3/count", "/pieces/4/length", "/stock/1/cost", "/stock/1/available", "/stock/2/length", "/kerf", "/objective",
	}
	var places []string
	for _, f := range got {
		places = append(places, f.Pointer)
	}
	if diff := cmp.Diff(want, places); diff != "" {
		t.Errorf("places (-want +got):\n%s", diff)
	}
	first := `/pieces/0/length: piece "B7" is longer than every stock length: found 16000 mm; accepted: up to the longest stock length, 15100 mm`
	if line, _, _ := strings.Cut(err.Error(), "\n"); line != first {
		t.Errorf("first fault\n%s, want\n%s", line, first)
	}
	if _, err := FirstFit(context.Background(), p); !errors.As(err, &got) {
		t.Errorf("first fit: %v is not Faults", err)
	}
}

// Single refusals, and the largest that is accepted.
func TestRefusals(t *testing.T) {
	one := []Piece{{"A", 2_0000, 1}}
	stock := []Stock{{Length: 6_0000}}
	for _, x := range []struct {
		name string
		p    Problem
		want string // part of the error, "" for none
	}{
		{"nothing", Problem{}, "/pieces: number of rows out of range"},
		{"no stock", Problem{Pieces: one}, "/stock: number of stock lengths out of range"},
		{"too many stock lengths", Problem{Pieces: one, Stock: make([]Stock, MaxStock+1)}, "found 21 stock lengths; accepted: 1 to 20"},
		{"too many rows", Problem{Pieces: make([]Piece, MaxPieceRows+1), Stock: stock}, "found 1001 rows; accepted: 1 to 1000 rows"},
		{"too many pieces", Problem{Pieces: []Piece{{"A", 1000, MaxPieces}, {"B", 1000, 1}}, Stock: stock}, "100001 pieces in all"},
		{"most pieces", Problem{Pieces: []Piece{{"A", 1000, MaxPieces}}, Stock: stock}, ""},
		{"kerf", Problem{Pieces: one, Stock: stock, Kerf: MaxKerf + 1}, "/kerf"},
		{"largest kerf", Problem{Pieces: one, Stock: stock, Kerf: MaxKerf}, ""},
		{"least cost without", Problem{Pieces: one, Stock: stock, Objective: LeastCost}, "/stock/0/cost: cost of a bar out of range: found 0"},
		{"as long as the bar", Problem{Pieces: []Piece{{"A", 6_0000, 3}}, Stock: stock, Kerf: 50}, ""},
		{"0.1 mm longer", Problem{Pieces: []Piece{{"A", 6_0001, 3}}, Stock: stock}, `"A" is longer than every stock length: found 6000.1 mm`},
		{"too few bars by length", Problem{Pieces: []Piece{{"A", 2_0000, 7}}, Stock: []Stock{{Length: 6_0000, Available: 2}}}, `not enough bars available for "A"`},
		{"too few bars by count", Problem{Pieces: []Piece{{"A", 3_5000, 3}, {"B", 1000, 1}}, Stock: []Stock{{Length: 6_0000, Available: 2}}}, "at most 2 such pieces"},
		{"too few long bars", Problem{Pieces: []Piece{{"A", 7_0000, 3}}, Stock: []Stock{{Length: 6_0000}, {Length: 8_0000, Available: 2}}}, `not enough bars available for "A"`},
		// 3.5 + 2.6 m fill each bar to its end.
		{"just enough", Problem{Pieces: []Piece{{"A", 3_5000, 2}, {"B", 2_6000, 2}}, Stock: []Stock{{Length: 6_1000, Available: 2}}}, ""},
		// Enough by length and count, but no bar with a piece of 4 m holds one of 2.5 m.
		{"no way to cut", Problem{Pieces: []Piece{{"A", 4_0000, 3}, {"B", 2_5000, 2}}, Stock: []Stock{{Length: 6_0000, Available: 3}}}, "/stock: not enough bars available"},
	} {
		_, err := Optimise(context.Background(), x.p, Limits{})
		if x.want == "" && err != nil || x.want != "" && (err == nil || !strings.Contains(err.Error(), x.want)) {
			t.Errorf("%s: %v, want %q", x.name, err, x.want)
		}
	}
}

// A cancelled context ends both methods: before the start at once, during the
// search within a second.
func TestCancel(t *testing.T) {
	done, cancel := context.WithCancel(context.Background())
	cancel()
	if _, err := FirstFit(done, example()); !errors.Is(err, context.Canceled) {
		t.Errorf("first fit: %v, want cancelled", err)
	}
	if _, err := Optimise(done, example(), Limits{}); !errors.Is(err, context.Canceled) {
		t.Errorf("optimise: %v, want cancelled", err)
	}
	soon, stop := context.WithTimeout(context.Background(), 30*time.Millisecond)
	defer stop()
	start := time.Now()
	_, err := Optimise(soon, large(150), Limits{Steps: 1 << 40, Nodes: 1 << 30, HintRange: 200})
	if took := time.Since(start); !errors.Is(err, context.DeadlineExceeded) || took > time.Second {
		t.Errorf("%v after %v, want the deadline exceeded within a second", err, took)
	}
}
