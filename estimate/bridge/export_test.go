package bridge

// Shapley is the share of one player, for tests.
var Shapley = shapley
