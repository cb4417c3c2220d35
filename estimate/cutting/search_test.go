package cutting

import (
	"context"
	"errors"
	"fmt"
	"math/big"
	"math/rand/v2"
	"reflect"
	"testing"
	"time"

	"pgregory.net/rapid"
)

// large returns an instance of n lengths that a search cannot finish.
func large(n int) Problem {
	r := rand.New(rand.NewPCG(7, uint64(n)))
	p := Problem{Stock: []Stock{{Length: 6_0000}, {Length: 12_1000}, {Length: 15_1000}}, Kerf: 30}
	for i := range n {
		p.Pieces = append(p.Pieces, Piece{fmt.Sprintf("L%d", i), 3000 + r.Int64N(11_0000), 1 + r.IntN(60)})
	}
	return p
}

// tiny returns an instance small enough for brute force; bars may be few.
func tiny(r *rand.Rand) Problem {
	p := Problem{Kerf: r.Int64N(3), Objective: []Objective{LeastLength, FewestBars, LeastCost}[r.IntN(3)]}
	for range 1 + r.IntN(3) {
		p.Stock = append(p.Stock, Stock{Length: 30 + r.Int64N(40), Cost: 1 + r.Int64N(20), Available: max(0, r.IntN(8)-3)})
	}
	for i := range 1 + r.IntN(4) {
		p.Pieces = append(p.Pieces, Piece{fmt.Sprint("T", i), 10 + r.Int64N(p.longest()-9), 1 + r.IntN(3)})
	}
	return p
}

// brute returns the least objective by trying every way to fill every bar, -1
// where there is none.
func brute(p Problem) int64 {
	const none = int64(1) << 40
	memo := map[string]int64{}
	var solve func(need, left []int) int64
	var fill func(need, left []int, i int, room int64) int64
	fill = func(need, left []int, i int, room int64) int64 {
		if i == len(need) {
			return solve(need, left)
		}
		best := none
		for n := 0; n <= need[i] && int64(n)*(p.Pieces[i].Length+p.Kerf) <= room; n++ {
			need[i] -= n
			best = min(best, fill(need, left, i+1, room-int64(n)*(p.Pieces[i].Length+p.Kerf)))
			need[i] += n
		}
		return best
	}
	solve = func(need, left []int) int64 {
		first := 0
		for first < len(need) && need[first] == 0 {
			first++
		}
		if first == len(need) {
			return 0
		}
		k := fmt.Sprint(need, left)
		if v, seen := memo[k]; seen {
			return v
		}
		best := none
		for s, x := range p.Stock {
			room := x.Length - p.Pieces[first].Length // the first piece goes into this bar
			if room < 0 || x.Available > 0 && left[s] == 0 {
				continue
			}
			left[s]--
			need[first]--
			if v := fill(need, left, 0, room); v < none {
				best = min(best, v+p.price(x))
			}
			need[first]++
			left[s]++
		}
		memo[k] = best
		return best
	}
	var need, left []int
	for _, x := range p.Pieces {
		need = append(need, x.Count)
	}
	for _, s := range p.Stock {
		left = append(left, s.Available)
	}
	if v := solve(need, left); v < none {
		return v
	}
	return -1
}

// Against brute force: the plan is valid, bound ≤ optimum ≤ value, what is called
// proven is the optimum, and what has no plan is refused.
func TestBruteForce(t *testing.T) {
	r := rand.New(rand.NewPCG(1, 2))
	const n = 2000
	optimal, refused := 0, 0
	for i := range n {
		p := tiny(r)
		want := brute(p)
		plan, err := Optimise(context.Background(), p, Limits{})
		if want < 0 {
			if !errors.As(err, new(Faults)) {
				t.Errorf("instance %d has no plan, got %v\n%+v", i, err, p)
			}
			refused++
			continue
		}
		if err != nil {
			t.Errorf("instance %d: %v, want %d\n%+v", i, err, want, p)
			continue
		}
		if err := Check(plan, p); err != nil {
			t.Errorf("instance %d: %v", i, err)
		}
		if plan.Bound > want || plan.Value < want || plan.Proven && plan.Value != want {
			t.Errorf("instance %d: value %d, bound %d, proven %t, want %d\n%+v", i, plan.Value, plan.Bound, plan.Proven, want, p)
		}
		if plan.Value == want {
			optimal++
		} else if plan.Value-want > dearest(p) {
			t.Errorf("instance %d: value %d, want %d, dearest bar %d", i, plan.Value, want, dearest(p))
		}
		first, err := FirstFit(context.Background(), p)
		if err == nil && (Check(first, p) != nil || first.Bound > want || first.Value < plan.Value) {
			t.Errorf("instance %d: first fit has %d, bound %d; optimised %d, optimum %d", i, first.Value, first.Bound, plan.Value, want)
		}
	}
	t.Logf("%d of %d with a plan are optimal, %d have none", optimal, n-refused, refused)
	if optimal*100 < (n-refused)*99 || refused == 0 {
		t.Errorf("%d of %d are optimal, want 99 of 100; %d refused, want some", optimal, n-refused, refused)
	}
}

// The bound of a certificate, made again by tables over all lengths in rationals.
func TestCertificate(t *testing.T) {
	r := rand.New(rand.NewPCG(8, 9))
	for i := range 20 {
		p := trade(r)
		for j := range p.Pieces { // whole centimetres keep the tables short
			p.Pieces[j].Length = p.Pieces[j].Length / 100 * 100
		}
		p.Kerf = 0
		if i%4 == 0 {
			p.Stock[0].Available = 3
			p.Stock = append(p.Stock, Stock{Length: 18_0000})
		}
		plan, err := Optimise(context.Background(), p, Limits{Nodes: 1})
		if err != nil {
			t.Fatal(err)
		}
		got, err := p.Bound(*plan.Certificate)
		if err != nil {
			t.Fatal(err)
		}
		if want := tableBound(p, *plan.Certificate); got.Cmp(want) != 0 {
			t.Errorf("instance %d: bound %s, by tables %s", i, got.FloatString(9), want.FloatString(9))
		}
		if up := new(big.Rat).SetInt64(plan.Bound); got.Cmp(up) > 0 {
			t.Errorf("instance %d: bound %d is below the certificate's %s", i, plan.Bound, got.FloatString(9))
		}
	}
}

// tableBound is Problem.Bound by dynamic programming, in centimetres, kerf 0.
func tableBound(p Problem, c Certificate) *big.Rat {
	table := make([]int64, p.longest()/100+1)
	sum := new(big.Rat)
	count := map[int64]int64{}
	for _, x := range p.Pieces {
		count[x.Length] += int64(x.Count)
	}
	for _, v := range c.Values {
		for range count[v.Length] {
			for l := int64(len(table)) - 1; l >= v.Length/100; l-- {
				table[l] = max(table[l], table[l-v.Length/100]+v.Numerator)
			}
		}
		sum.Add(sum, new(big.Rat).Mul(big.NewRat(v.Numerator, c.Denominator), new(big.Rat).SetInt64(count[v.Length])))
	}
	scale := big.NewRat(1, 1)
	for _, s := range p.Stock {
		z := max(table[s.Length/100], p.price(s)*c.Denominator)
		if f := big.NewRat(p.price(s)*c.Denominator, z); s.Available == 0 && f.Cmp(scale) < 0 {
			scale = f
		}
	}
	sum.Mul(sum, scale)
	for _, s := range p.Stock {
		over := new(big.Rat).Mul(big.NewRat(table[s.Length/100], c.Denominator), scale)
		over.Sub(over, new(big.Rat).SetInt64(p.price(s)))
		if s.Available > 0 && over.Sign() > 0 {
			sum.Sub(sum, over.Mul(over, new(big.Rat).SetInt64(int64(s.Available))))
		}
	}
	return sum
}

// A certificate of something else is refused or, whatever its values, proves no
// more than is true.
func TestForeignCertificate(t *testing.T) {
	p := example()
	for _, c := range []Certificate{{}, {1, []PieceValue{{1, 1}}}, {0, []PieceValue{{6_0500, 1}}}, {1, []PieceValue{{6_0500, -1}}}, {1, []PieceValue{{6_0500, 1 << 62}}}} {
		if b, err := p.Bound(c); err == nil {
			t.Errorf("%v proves %v, want an error", c, b)
		}
	}
	b, err := p.Bound(Certificate{1, []PieceValue{{6_0500, 1 << 40}}})
	if err != nil || b.Cmp(big.NewRat(181_2000, 1)) > 0 {
		t.Errorf("exaggerated values prove %v, %v, want at most 1812000", b, err)
	}
}

// The same problem gives the same plan, byte for byte, also when the limits cut
// the search short; the rows' order changes no objective.
func TestSamePlan(t *testing.T) {
	r := rand.New(rand.NewPCG(3, 3))
	for range 4 {
		p := trade(r)
		first, err := Optimise(context.Background(), p, Limits{Steps: 500_000, HintRange: 50})
		if err != nil {
			t.Fatal(err)
		}
		again, err := Optimise(context.Background(), p, Limits{Steps: 500_000, HintRange: 50})
		if err != nil || !reflect.DeepEqual(first, again) {
			t.Fatalf("two runs differ: %v\n%+v\n%+v", err, first, again)
		}
		r.Shuffle(len(p.Pieces), func(i, j int) { p.Pieces[i], p.Pieces[j] = p.Pieces[j], p.Pieces[i] })
		shuffled, err := Optimise(context.Background(), p, Limits{Steps: 500_000})
		if err != nil || shuffled.Value != first.Value || shuffled.Bound != first.Bound {
			t.Errorf("shuffled: %v, value %d, bound %d, want %d, %d", err, shuffled.Value, shuffled.Bound, first.Value, first.Bound)
		}
	}
}

// At the limits of size a valid plan comes in a few seconds.
func TestLargest(t *testing.T) {
	for _, n := range []int{200, MaxPieceRows} {
		p := large(n)
		start := time.Now()
		plan, err := Optimise(context.Background(), p, Limits{})
		if err != nil {
			t.Fatal(err)
		}
		if err := Check(plan, p); err != nil {
			t.Error(err)
		}
		t.Logf("%d rows, %d pieces: gap %.3f %% in %v", n, plan.Pieces, 100*float64(plan.Gap)/float64(plan.Value), time.Since(start))
	}
}

// Whatever the problem, there is no panic; a plan is valid, an error is Faults.
// Half of the problems have only plausible numbers.
func TestAnyProblem(t *testing.T) {
	plans := 0
	rapid.Check(t, func(t *rapid.T) {
		length, stock, count, kerf := rapid.Int64Range(10, 9000), rapid.Int64Range(9000, 200_000), rapid.IntRange(1, 300), rapid.Int64Range(0, 60)
		if rapid.Bool().Draw(t, "wild") {
			length, stock = rapid.OneOf(length, rapid.Int64()), rapid.OneOf(stock, rapid.Int64())
			count, kerf = rapid.OneOf(count, rapid.Int()), rapid.OneOf(kerf, rapid.Int64())
		}
		p := Problem{Kerf: kerf.Draw(t, "kerf"), Objective: rapid.SampledFrom([]Objective{"", LeastLength, FewestBars, LeastCost, "x"}).Draw(t, "objective")}
		for i := range rapid.IntRange(0, 12).Draw(t, "pieces") {
			p.Pieces = append(p.Pieces, Piece{fmt.Sprint(i), length.Draw(t, "length"), count.Draw(t, "count")})
		}
		for range rapid.IntRange(0, 4).Draw(t, "stocks") {
			p.Stock = append(p.Stock, Stock{stock.Draw(t, "stock"), stock.Draw(t, "cost"), rapid.OneOf(rapid.Just(0), count).Draw(t, "available")})
		}
		for _, run := range []func() (Plan, error){
			func() (Plan, error) { return FirstFit(context.Background(), p) },
			func() (Plan, error) {
				return Optimise(context.Background(), p, Limits{Steps: 200_000, Nodes: 20, HintRange: 20})
			},
		} {
			plan, err := run()
			if err != nil {
				if !errors.As(err, new(Faults)) {
					t.Fatalf("%v is not Faults", err)
				}
			} else if err := Check(plan, p); err != nil {
				t.Fatal(err)
			} else {
				plans++
			}
		}
	})
	if plans == 0 {
		t.Error("no problem had a plan")
	}
}

// FuzzOptimise reads a problem of at most 12 rows from bytes.
func FuzzOptimise(f *testing.F) {
	f.Add([]byte{1, 50, 3, 1, 2, 200, 20, 3, 100, 9, 40, 5})
	f.Fuzz(func(t *testing.T, b []byte) {
		if len(b) < 5 || len(b) > 29 {
			return
		}
		p := Problem{Kerf: int64(b[0]), Objective: []Objective{LeastLength, FewestBars, LeastCost}[b[1]%3]}
		for i := 0; i < int(b[2]%3)+1; i++ {
			p.Stock = append(p.Stock, Stock{int64(b[3])*7 + int64(i)*int64(b[4]), int64(b[4]) + 1, int(b[2]) % 5 * i})
		}
		for i := 5; i+1 < len(b); i += 2 {
			p.Pieces = append(p.Pieces, Piece{fmt.Sprint(i), int64(b[i]) + 10, int(b[i+1])})
		}
		plan, err := Optimise(context.Background(), p, Limits{Steps: 100_000, Nodes: 10})
		if err == nil {
			err = Check(plan, p)
			if err != nil {
				t.Fatal(err)
			}
		}
	})
}
