package trace

// StandardOf is for the test that compares it with the catalogue.
var StandardOf = standardOf
