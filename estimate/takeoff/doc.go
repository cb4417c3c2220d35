// Package takeoff turns sized members into quantities.
//
//	members with their chosen sections → Piece (net mass, surface, dimensions)
//	pieces of one section and grade → Purchase: cutting plans, where asked for
//	pieces alike in group, family, treatment, connections and overrides → Item
//	counted joints and concrete → items of their own
//	item × driver → Quantity = measured · factors: net → delivered (sizing bias,
//	    connections, bolts, growth) → purchased (delivered less bolts, with waste
//	    or by the plan); metres, pieces, m², m³; by norms hours, loads, days, weeks
//	growth acts on all of these but what is as drawn: net mass, metres, pieces, m³
//	    of concrete, permit loads
//	floats become decimals here, once, to the places of the driver
//	pieces × envelopes → Breaches; pieces by group → Loads
package takeoff
