// Package bridge explains the whole change between two estimates, cause by cause,
// with nothing left over.
//
//	two frozen jobs with their documents → causes whose inputs differ
//	every coalition of causes → a mixed job → its value, on one engine and one seed
//	values → Shapley shares, by member group and in contingency
//	stored totals − recomputed ones → engine; own seeds − the common one → sampling
//	shares rounded by largest remainder → they add up to the change to the minor unit
//
// The value of a job is its base and contingency. The shares are those of Shapley
// (A value for n-person games, 1953): a cause's mean contribution over all orders
// in which the causes may come, so that none depends on the order. Both stored
// totals are fixed ends. What differs in engine, data or sampling is outside the
// game.
package bridge
