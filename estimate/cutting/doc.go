// Package cutting makes the cutting plan of bars: which pieces come out of which
// stock length.
//
//	Problem → Faults, or a task: equal lengths merged, kerf taken into the widths
//	task → first fit → a plan, with the bounds of its lengths and counts
//	task → relaxation by column generation (simplex ↔ knapsack) → values of pieces
//	values, as whole numbers over one denominator → exact bound
//	relaxation → whole bars, the rest fixed bar by bar → the best plan found
//	plan → marks handed out, lengths added up, hint
//
// A bar of length S holds n pieces when the sum of their lengths + (n − 1) kerf
// is at most S: widths are length + kerf, capacities S + kerf.
//
// Nothing here depends on a clock: work is limited by counted steps, so that the
// same problem gives the same plan on every machine.
package cutting
