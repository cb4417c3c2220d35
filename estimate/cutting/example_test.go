package cutting_test

import (
	"context"
	"fmt"

	"spanwright/estimate/cutting"
)

// The chords of a gallery over the loading quay, an invented structure.
func ExampleOptimise() {
	p := cutting.Problem{
		Pieces: []cutting.Piece{{Mark: "C1", Length: 6_0500, Count: 24}, {Mark: "D1", Length: 2_9000, Count: 12}},
		Stock:  []cutting.Stock{{Length: 12_1000}, {Length: 15_1000}},
		Kerf:   50,
	}
	plan, err := cutting.Optimise(context.Background(), p, cutting.Limits{HintRange: 200})
	if err != nil {
		fmt.Println(err)
		return
	}
	for _, x := range plan.Patterns {
		fmt.Printf("%d bars of %d: %v, offcut %d\n", x.Bars, x.Length, x.Cuts, x.Offcut)
	}
	fmt.Printf("yield %.1f %%, proven %t\n", 100*plan.Yield, plan.Proven)
	// Output:
	// 12 bars of 151000: [{C1 60500 2} {D1 29000 1}], offcut 850
	// yield 99.3 %, proven true
}
